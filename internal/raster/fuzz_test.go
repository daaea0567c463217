package raster

import (
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"
	"testing"
	"time"
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
		{"made.asc", []byte(arcASCII(true))},
		{"made.dem", content(writeUSGSDEM(t))},
		{"N50W003.hgt.zip", zipped(t, "N50W003.hgt", flat)},
	}
}

// useAll opens a file and, where it is fit, reads corner pixels and builds the
// projector: all that is done with a file before its first path.
func useAll(t testing.TB, library *GDAL, path string) {
	d, err := library.Open(path)
	if err != nil {
		return
	}
	defer d.Close()
	info := d.Info()
	if info.Width < 2 || info.Height < 2 || info.Width > MaxSide || info.Height > MaxSide || !(info.Grid.PixelX > 0) || !(info.Grid.PixelY > 0) {
		t.Errorf("got %+v, want sizes that were checked", info)
	}
	height := make([]float32, 1)
	for _, at := range [][2]int{{0, 0}, {info.Width - 1, info.Height - 1}} {
		if err := d.Read(at[0], at[1], 1, 1, height); err == nil && (height[0] < LowestHeight || height[0] > HighestHeight) {
			t.Errorf("got height %g, want a void or a height on earth", height[0])
		}
	}
	if p, err := library.NewProjector(info.CRS); err == nil {
		x, y := []float64{info.Grid.Left}, []float64{info.Grid.Top}
		_ = p.Unproject(x, y)
		p.Close()
	}
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

// mutated changes, cuts, repeats or zeroes some of the bytes, more often near
// the start, where the formats keep what they declare.
func mutated(r *rand.Rand, content []byte) []byte {
	out := append([]byte(nil), content...)
	for range 1 + r.IntN(6) {
		if len(out) == 0 {
			break
		}
		at := r.IntN(len(out))
		if r.IntN(2) == 0 {
			at = r.IntN(min(len(out), 1024))
		}
		switch r.IntN(6) {
		case 0, 1:
			out[at] = byte(r.IntN(256))
		case 2:
			out[at] ^= 1 << r.IntN(8)
		case 3:
			out = out[:at]
		case 4:
			clear(out[at:min(len(out), at+r.IntN(16))])
		case 5:
			for i := at; i < min(len(out), at+4); i++ {
				out[i] = 0xff
			}
		}
	}
	return out
}

// Broken files of every format are refused or read, and never take long.
func TestMutatedFiles(t *testing.T) {
	const (
		rounds = 60
		limit  = time.Second // generous: a whole file takes milliseconds, one of 65,535 bands 0.1 s
	)
	library := NewGDAL()
	folders := t.TempDir()
	r := rand.New(rand.NewPCG(1, 2026))
	for _, s := range seeds(t) {
		for round := range rounds {
			// A folder each: GDAL remembers what a zip of one name holds.
			folder := filepath.Join(folders, s.name, strconv.Itoa(round))
			must(t, os.MkdirAll(folder, 0o755))
			path := put(t, folder, s.name, mutated(r, s.content))
			took := limit + 1
			for try := 0; try < 3 && took > limit; try++ { // others may use the machine
				start := time.Now()
				useAll(t, library, path)
				took = time.Since(start)
			}
			if took > limit {
				t.Errorf("%s, round %d: took %v, want at most %v", s.name, round, took, limit)
			}
			must(t, os.RemoveAll(folder))
		}
	}
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
		useAll(t, library, put(t, t.TempDir(), name, content))
	})
}
