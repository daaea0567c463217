package raster

import (
	"errors"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"

	"github.com/lukeroth/gdal"
)

// Dataset is one open raster. It is used by one goroutine at a time.
type Dataset struct {
	path string
	raw  gdal.Dataset
	info Info
	rows int // of a text grid, from the top: those whose place in the file GDAL knows

	remote *remote // nil for a plain file
}

// Open opens the file and checks what it declares: size, block, type,
// georeference, coordinate reference system. No pixel is read. The error says
// what is wrong and what would be right, and wraps one of the package's
// sentinels.
func (*GDAL) Open(path string) (*Dataset, error) {
	driver, err := driverFor(path)
	if err != nil {
		return nil, err
	}
	if err := plainFile(path); err != nil {
		return nil, err
	}
	if strings.EqualFold(filepath.Ext(path), ".zip") {
		if err := soundZip(path); err != nil {
			return nil, err
		}
	}
	d := &Dataset{path: path}
	if err := d.open(driver); err != nil {
		d.Close()
		return nil, err
	}
	return d, nil
}

// open opens the file with the one driver and checks what it declares.
func (d *Dataset) open(driver string) error {
	err := guarded(d.path, func() error {
		raw, openErr := gdal.OpenEx(d.path, gdal.OFReadOnly|gdal.OFRaster|gdal.OFVerbose_Error, []string{driver}, nil, nil)
		d.raw = raw
		return openErr
	})
	if err != nil {
		return fmt.Errorf("%w: %w", ErrUnreadable, err)
	}
	d.info, err = inspect(d.raw, driver)
	return err
}

// plainFile keeps GDAL's virtual file systems and sub-dataset names out: only
// the name of a regular file on disk goes further.
func plainFile(path string) error {
	if strings.HasPrefix(path, "/vsi") || strings.ContainsAny(path, "<>\x00") {
		return fmt.Errorf("%w: not a plain file name", ErrUnreadable)
	}
	stat, err := os.Stat(path)
	var where *os.PathError
	switch {
	case errors.As(err, &where):
		return fmt.Errorf("%w: %w", ErrUnreadable, where.Err)
	case err != nil:
		return fmt.Errorf("%w: %w", ErrUnreadable, err)
	case !stat.Mode().IsRegular():
		return fmt.Errorf("%w: not a regular file", ErrUnreadable)
	case stat.Size() == 0:
		return fmt.Errorf("%w: the file is empty (0 bytes)", ErrUnreadable)
	}
	return nil
}

// Info returns what the raster declares about itself.
func (d *Dataset) Info() Info { return d.info }

// Close frees the handle. The Dataset must not be used afterwards.
func (d *Dataset) Close() {
	if !d.raw.IsNull() {
		d.raw.Close()
		d.raw = gdal.Dataset{}
	}
}

// Read fills heights, row by row, with the window of width x height pixels
// whose first pixel is column x, row y. Heights are metres with scale and
// offset applied; NaN marks a void: the declared nodata value, NaN, or a value
// that cannot be a height on earth. The window must lie inside the raster and
// len(heights) must be width*height.
func (d *Dataset) Read(x, y, width, height int, heights []float32) error {
	inside := x >= 0 && y >= 0 && width > 0 && height > 0 && x+width <= d.info.Width && y+height <= d.info.Height
	if !inside || len(heights) != width*height {
		return fmt.Errorf("%w: window %d,%d %dx%d of a %dx%d raster", ErrUnreadable, x, y, width, height, d.info.Width, d.info.Height)
	}
	if d.remote == nil {
		return d.fill(x, y, width, height, heights)
	}
	return d.remote.reading(func() error { return d.fill(x, y, width, height, heights) })
}

// fill reads a window that lies inside.
func (d *Dataset) fill(x, y, width, height int, heights []float32) error {
	err := guarded(d.path, func() error {
		if err := d.reach(y); err != nil {
			return err
		}
		return d.raw.RasterBand(1).IO(gdal.Read, x, y, width, height, heights, width, height, 0, 0)
	})
	if err != nil {
		return fmt.Errorf("%w: %w", ErrUnreadable, err)
	}
	d.info.voidAndScale(heights)
	if d.info.Driver == "GTiff" && !d.info.HasNoData {
		d.voidAbsent(x, y, width, height, heights)
	}
	return nil
}

// voidAbsent makes those blocks of a window void that a sparse GeoTIFF leaves
// out. GDAL reads them as nodata where the file declares it, and as 0 where it
// does not.
func (d *Dataset) voidAbsent(x, y, width, height int, heights []float32) {
	band := d.raw.RasterBand(1)
	bw, bh := d.info.BlockWidth, d.info.BlockHeight
	for by := y / bh; by*bh < y+height; by++ {
		for bx := x / bw; bx*bw < x+width; bx++ {
			if band.MetadataItem(fmt.Sprintf("BLOCK_OFFSET_%d_%d", bx, by), "TIFF") != "" {
				continue
			}
			for row := max(by*bh, y); row < min((by+1)*bh, y+height); row++ {
				for column := max(bx*bw, x); column < min((bx+1)*bw, x+width); column++ {
					heights[(row-y)*width+column-x] = float32(math.NaN())
				}
			}
		}
	}
}

// reach reads a pixel of every row of a text grid above row y, in order, once.
// Asked for a row out of order, GDAL looks for the rows above it by itself, and
// where the file ends too early that work doubles with every row that it lacks:
// a grid cut short by 40 rows would never be done with.
func (d *Dataset) reach(y int) error {
	if d.info.Driver != textGrid {
		return nil
	}
	one := make([]float32, 1)
	for ; d.rows < y; d.rows++ {
		if err := d.raw.RasterBand(1).IO(gdal.Read, 0, d.rows, 1, 1, one, 1, 1, 0, 0); err != nil {
			return err
		}
	}
	return nil
}

func (info *Info) voidAndScale(heights []float32) {
	void := float32(math.NaN())
	nodata := void
	if info.HasNoData {
		nodata = float32(info.NoData)
	}
	scale, offset := float32(info.Scale), float32(info.Offset)
	for i, stored := range heights {
		h := stored*scale + offset
		if stored == nodata || !(h >= LowestHeight && h <= HighestHeight) {
			h = void
		}
		heights[i] = h
	}
}
