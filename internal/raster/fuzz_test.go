package raster

import (
	"errors"
	"os"
	"path/filepath"
	"testing"
)

// seed is a small valid file of one format under a name that suits it.
type seed struct {
	name    string
	content []byte
}

// seeds has a file of every format, small enough to be changed everywhere.
// The smallest SRTM tile that there is has 2.9 MB, so it comes zipped.
func seeds(t testing.TB) []seed {
	content := func(path string) []byte {
		raw, err := os.ReadFile(path)
		must(t, err)
		return raw
	}
	deflated := plainTIFF(t)
	deflated.width, deflated.height = 64, 64
	deflated.options = []string{"TILED=YES", "BLOCKXSIZE=16", "BLOCKYSIZE=16", "COMPRESS=DEFLATE", "PREDICTOR=2"}
	nodata := -9999.0
	deflated.nodata, deflated.scale, deflated.unit = &nodata, 0.1, "ft"
	flat := hgtBytes(func(int, int) int16 { return 7 })
	return []seed{
		{"made.tif", content(plainTIFF(t).write(t))},
		{"tiled.tif", content(deflated.write(t))},
		{"raw.tif", rawTIFF{width: 4, height: 4, rowsPerStrip: 4}.bytes()},
		// One strip near the most that is read: a wrong size soon makes it too large.
		{"packed.tif", rawTIFF{width: 2048, height: 2048, rowsPerStrip: 2048, deflated: true}.bytes()},
		{"made.asc", []byte(arcASCII(true))},
		{"made.dem", content(writeUSGSDEM(t))},
		{"N50W003.hgt.zip", zipped(t, "N50W003.hgt", flat)},
	}
}

// useAll opens a file and, where it is fit, reads corner pixels and builds the
// projector: all that is done with a file before its first path. The error is
// what was refused.
func useAll(t testing.TB, library *GDAL, path string) (refused error) {
	d, err := library.Open(path)
	if err != nil {
		return err
	}
	defer d.Close()
	info := d.Info()
	if info.Width < 2 || info.Height < 2 || info.Width > MaxSide || info.Height > MaxSide || !(info.Grid.PixelX > 0) || !(info.Grid.PixelY > 0) {
		t.Errorf("got %+v, want sizes that were checked", info)
	}
	height := make([]float32, 1)
	for _, at := range [][2]int{{0, 0}, {info.Width - 1, info.Height - 1}} {
		err := d.Read(at[0], at[1], 1, 1, height)
		if err == nil && (height[0] < LowestHeight || height[0] > HighestHeight) {
			t.Errorf("got height %g, want a void or a height on earth", height[0])
		}
		refused = errors.Join(refused, err)
	}
	p, err := library.NewProjector(info.CRS)
	if err != nil {
		return errors.Join(refused, err)
	}
	defer p.Close()
	x, y := []float64{info.Grid.Left}, []float64{info.Grid.Top}
	return errors.Join(refused, p.Unproject(x, y))
}

// put writes content under the name, with a .prj for the grid that needs one.
func put(t testing.TB, folder, name string, content []byte) string {
	path := filepath.Join(folder, name)
	must(t, os.WriteFile(path, content, 0o644))
	if filepath.Ext(name) == ".asc" {
		must(t, os.WriteFile(filepath.Join(folder, "made.prj"), []byte(esriWGS84), 0o644))
	}
	return path
}

// FuzzOpen needs -fuzzminimizetime=1x: shrinking what the fuzzer finds through
// GDAL takes it minutes.
func FuzzOpen(f *testing.F) {
	names := seeds(f)
	for i, s := range names {
		f.Add(uint8(i), s.content)
	}
	library := NewGDAL()
	f.Fuzz(func(t *testing.T, which uint8, content []byte) {
		name := names[int(which)%len(names)].name
		_ = useAll(t, library, put(t, t.TempDir(), name, content)) // a refusal is right for most
	})
}
