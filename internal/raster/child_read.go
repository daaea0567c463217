package raster

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"
)

const (
	// childBlocks is how many blocks of a file are read: the first, the last
	// and some between.
	childBlocks = 8
	// childText bounds how much of a text grid is read, in bytes: its rows can
	// be found only by reading all above them, and a sound file must not fail
	// for being large.
	childText = 64 << 20
)

// childCheck does with a file what is done before its first path, and reads
// some of it.
func (library *GDAL) childCheck(path string) childReply {
	info, err := library.tryOut(path)
	if err != nil {
		return childReply{Problem: withoutFolder(err.Error(), path)}
	}
	return childReply{OK: true, Summary: ChildSummary{
		Driver: info.Driver, Width: info.Width, Height: info.Height,
		BlockWidth: info.BlockWidth, BlockHeight: info.BlockHeight,
		DataType: info.DataType, CRS: info.CRS.Name, EPSG: info.CRS.EPSG,
	}}
}

// tryOut opens a file, reads some blocks and makes its projector.
func (library *GDAL) tryOut(path string) (Info, error) {
	d, err := library.Open(path)
	if err != nil {
		return Info{}, err
	}
	defer d.Close()
	info := d.Info()
	if err := d.readSome(childRows(path, info)); err != nil {
		return info, err
	}
	if info.CRS.WGS84 {
		return info, nil
	}
	projector, err := library.NewProjector(info.CRS)
	if err != nil {
		return info, err
	}
	defer projector.Close()
	x := []float64{info.Grid.Left + info.Grid.PixelX*float64(info.Width)/2}
	y := []float64{info.Grid.Top - info.Grid.PixelY*float64(info.Height)/2}
	return info, projector.Unproject(x, y)
}

// childRows is how many rows from the top are to be read of.
func childRows(path string, info Info) int {
	if info.Driver != textGrid {
		return info.Height
	}
	stat, err := os.Stat(path)
	if err != nil || stat.Size() <= childText {
		return info.Height
	}
	return max(1, int(float64(info.Height)*childText/float64(stat.Size())))
}

// readSome reads childBlocks blocks, spread evenly over the first rows rows
// from the top down.
func (d *Dataset) readSome(rows int) error {
	info := &d.info
	across := (info.Width + info.BlockWidth - 1) / info.BlockWidth
	down := (rows + info.BlockHeight - 1) / info.BlockHeight
	blocks := across * down
	count := min(blocks, childBlocks)
	var heights []float32
	for i := range count {
		index := i * (blocks - 1) / max(count-1, 1)
		x, y := index%across*info.BlockWidth, index/across*info.BlockHeight
		width, height := min(info.BlockWidth, info.Width-x), min(info.BlockHeight, info.Height-y)
		if cap(heights) < width*height {
			heights = make([]float32, width*height)
		}
		if err := d.Read(x, y, width, height, heights[:width*height]); err != nil {
			return fmt.Errorf("%w (at column %d, row %d)", err, x, y)
		}
	}
	return nil
}

// withoutFolder takes the file's folder out of a text, which may name files
// beside it.
func withoutFolder(text, path string) string {
	folder := filepath.Dir(path)
	if folder == "." || folder == string(filepath.Separator) {
		return text
	}
	return strings.ReplaceAll(text, folder+string(filepath.Separator), "")
}
