package terrain

import (
	"archive/zip"
	"encoding/binary"
	"io"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"github.com/paulmach/orb"

	"ridgehop/internal/geodesy"
	"ridgehop/profile"
)

// Real rasters that Debian's packages hold, for machines without the shared
// data folder.
var (
	// Jacksboro fault in Tennessee at 3", USGS, public domain, of the package
	// python-matplotlib-data; its folder has moved between releases.
	jacksboroFiles = []string{
		"/usr/share/matplotlib/mpl-data/sample_data/jacksboro_fault_dem.npz",
		"/usr/share/matplotlib/sample_data/jacksboro_fault_dem.npz",
	}
	// Geoid undulations of EGM96 at 15', NGA, of the package proj-data.
	egm96Files = []string{"/usr/share/proj/egm96_15.gtx"}
)

// firstOf is the first of the files that is there; without any the test is
// skipped.
func firstOf(t *testing.T, files []string, pkg string) string {
	t.Helper()
	for _, file := range files {
		if _, err := os.Stat(file); err == nil {
			return file
		}
	}
	t.Skipf("%s is absent: Debian's package %s holds it", filepath.Base(files[0]), pkg)
	return ""
}

// readNPY reads one array of a NumPy archive, little-endian 16-bit integers or
// doubles: format 1.0 of numpy.lib.format, a header as Python text and the
// values row by row.
func readNPY(t *testing.T, archive *zip.Reader, name string) (values []float64, shape []int) {
	t.Helper()
	f, err := archive.Open(name + ".npy")
	must(t, err)
	defer f.Close()
	raw, err := io.ReadAll(f)
	must(t, err)
	if len(raw) < 10 || string(raw[:8]) != "\x93NUMPY\x01\x00" {
		t.Fatalf("%s: got no NumPy array of format 1.0", name)
	}
	end := 10 + int(binary.LittleEndian.Uint16(raw[8:]))
	head, data := string(raw[10:end]), raw[end:]
	_, list, _ := strings.Cut(head, "'shape': (")
	list, _, _ = strings.Cut(list, ")")
	for _, side := range strings.FieldsFunc(list, func(r rune) bool { return r == ',' || r == ' ' }) {
		n, err := strconv.Atoi(side)
		must(t, err)
		shape = append(shape, n)
	}
	switch {
	case strings.Contains(head, "'descr': '<i2', 'fortran_order': False"):
		for ; len(data) >= 2; data = data[2:] {
			values = append(values, float64(int16(binary.LittleEndian.Uint16(data))))
		}
	case strings.Contains(head, "'descr': '<f8', 'fortran_order': False"):
		for ; len(data) >= 8; data = data[8:] {
			values = append(values, math.Float64frombits(binary.LittleEndian.Uint64(data)))
		}
	default:
		t.Fatalf("%s: got header %s, want 16-bit integers or doubles by rows", name, head)
	}
	return values, shape
}

// jacksboro reads the sample of terrain. Its bounds are outer pixel edges, and
// its "ymin" is the northern one.
func jacksboro(t *testing.T) grid {
	archive, err := zip.OpenReader(firstOf(t, jacksboroFiles, "python-matplotlib-data"))
	must(t, err)
	defer archive.Close()
	one := func(name string) float64 {
		values, _ := readNPY(t, &archive.Reader, name)
		return values[0]
	}
	heights, shape := readNPY(t, &archive.Reader, "elevation")
	g := grid{columns: shape[1], rows: shape[0], left: one("xmin"), top: max(one("ymin"), one("ymax")), pixel: one("dx")}
	g.height = func(column, row int) float64 { return heights[row*g.columns+column] }
	if g.columns != 403 || g.rows != 344 || math.Abs(g.left+float64(g.columns)*g.pixel-one("xmax")) > 1e-9 {
		t.Fatalf("got %d x %d pixels from %g, want 403 x 344 to %g", g.columns, g.rows, g.left, one("xmax"))
	}
	return g
}

// The same terrain as a grid of its own and as part of an SRTM tile, whose
// pixels lie on the same places, gives the same heights, and they are the
// bilinear ones.
func TestRealTerrain(t *testing.T) {
	g := jacksboro(t)
	folder := t.TempDir()
	g.write(t, folder, "jacksboro.asc")
	i0, j0 := int(math.Round((g.left+85)*1200+0.5)), int(math.Round((37-g.top)*1200+0.5))
	writeHGT(t, folder, "N36W085.hgt", hgtSide, func(column, row int) float64 {
		if column < i0 || row < j0 || column >= i0+g.columns || row >= j0+g.rows {
			return math.NaN()
		}
		return g.height(column-i0, row-j0)
	})
	terrain := loaded(t, folder)
	r := rand.New(rand.NewPCG(36, 84))
	at := func() orb.Point { // half a pixel and more inside the edge
		return orb.Point{g.left + g.pixel*(1+r.Float64()*float64(g.columns-2)), g.top - g.pixel*(1+r.Float64()*float64(g.rows-2))}
	}
	for range 40 {
		path := pathOf(t, at(), at())
		own := sampled(t, terrain, path, profile.Sampling{Rasters: []string{"jacksboro.asc"}, SpacingM: 60})
		tile := sampled(t, terrain, path, profile.Sampling{Rasters: []string{"N36W085.hgt"}, SpacingM: 60})
		checkSources(t, own)
		for i, got := range own.GroundM {
			place := placeOf(path, own.DistanceM[i])
			if want := g.bilinear(place.Lon(), place.Lat()); !near(got, want, 0.005) { // 4 mm of ground on slopes of 1 in 1
				t.Fatalf("from %v to %v, sample %d: got %g, want %g", path.A, path.B, i, got, want)
			}
			if !near(tile.GroundM[i], got, 1e-6) {
				t.Fatalf("from %v to %v, sample %d: got %g of the tile, want %g", path.A, path.B, i, tile.GroundM[i], got)
			}
		}
	}
	if got := spot(t, terrain, orb.Point{-84.9, 36.1}, "N36W085.hgt"); !math.IsNaN(got) {
		t.Errorf("beside it: got %g, want a void", got)
	}
}

// Published undulations of EGM96 (NGA, README.TXT of the EGM96 distribution and
// its OUTINTPT.DAT), which its authors interpolated by splines: bilinear
// reading of the 15' grid comes within 0.06 m. The fifth lies beside the
// meridian where the grid begins and ends again.
func TestPublishedUndulations(t *testing.T) {
	f, err := os.Open(firstOf(t, egm96Files, "proj-data"))
	must(t, err)
	defer f.Close()
	geoid, err := geodesy.ReadGTX(f)
	must(t, err)
	// A node every quarter of a degree, pole to pole; a raster's pixels lie around them.
	const columns, rows, step = 1440, 721, 0.25
	g := grid{columns: columns, rows: rows, left: -180 - step/2, top: 90 + step/2, pixel: step}
	g.height = func(column, row int) float64 {
		n, ok := geoid.UndulationM(-180+float64(column)*step, 90-float64(row)*step)
		if !ok {
			t.Fatalf("got no undulation at node %d, %d", column, row)
		}
		return n
	}
	terrain := loadedGrids(t, map[string]grid{"egm96.asc": g})
	cases := []struct {
		lat, lon  float64
		want      float64
		tolerance float64
	}{
		{38.6281550, 269.7791550, -31.628, 0.06},
		{-14.6212170, 305.0211140, -2.969, 0.06},
		{46.8743190, 102.4487290, -43.575, 0.06},
		{-23.6174460, 133.8747120, 15.871, 0.06},
		{38.6254730, 359.9995000, 50.066, 0.06},
		{-0.4667440, 0.0023000, 17.329, 0.06},
		// Nodes of the grid itself, as printed to the millimetre.
		{38, 270, -30.262, 0.001},
		{-84.75, 180.5, -40.254, 0.001},
		{0, 0, 17.162, 0.001},
	}
	worst := 0.0
	for _, c := range cases {
		for _, lon := range []float64{c.lon, math.Remainder(c.lon, 360)} {
			got := spot(t, terrain, orb.Point{lon, c.lat})
			if !(math.Abs(got-c.want) <= c.tolerance) {
				t.Errorf("at latitude %g, longitude %g: got %.4f m, want %.3f +- %g", c.lat, lon, got, c.want, c.tolerance)
			}
			worst = max(worst, math.Abs(got-c.want))
		}
	}
	t.Logf("%.3f m off at most", worst)
}
