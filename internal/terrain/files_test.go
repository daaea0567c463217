package terrain

import (
	"bytes"
	"context"
	"encoding/binary"
	"log/slog"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"github.com/paulmach/orb"

	"ridgehop/internal/geodesy"
	"ridgehop/internal/raster"
	"ridgehop/profile"
)

// definition is a coordinate reference system as a .prj holds it: the files of
// testdata/systems are what GDAL writes for the EPSG code that names them.
func definition(t testing.TB, system string) []byte {
	t.Helper()
	wkt, err := os.ReadFile(filepath.Join("testdata", "systems", system+".prj"))
	must(t, err)
	return wkt
}

// grid is a raster to be written as an Arc ASCII file. The centre of column i,
// row j lies at left + (i+0.5)*pixel, top - (j+0.5)*pixel; height gives it its
// height, NaN a void.
type grid struct {
	columns, rows int
	left, top     float64
	pixel         float64
	system        string // a file of testdata/systems; empty is 4326, WGS 84 degrees
	height        func(column, row int) float64
}

// write writes the grid and its .prj into the folder.
func (g grid) write(t testing.TB, folder, name string) {
	t.Helper()
	number := func(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }
	var out bytes.Buffer
	for _, line := range [][2]string{
		{"ncols", strconv.Itoa(g.columns)}, {"nrows", strconv.Itoa(g.rows)},
		{"xllcorner", number(g.left)}, {"yllcorner", number(g.top - float64(g.rows)*g.pixel)},
		{"cellsize", number(g.pixel)}, {"NODATA_value", "-9999"},
	} {
		out.WriteString(line[0] + " " + line[1] + "\n")
	}
	for row := range g.rows {
		for column := range g.columns {
			h := g.height(column, row)
			if math.IsNaN(h) {
				h = -9999
			}
			out.WriteString(strconv.FormatFloat(h, 'f', -1, 32))
			out.WriteByte(' ')
		}
		out.WriteByte('\n')
	}
	path := filepath.Join(folder, name)
	must(t, os.MkdirAll(filepath.Dir(path), 0o755))
	must(t, os.WriteFile(path, out.Bytes(), 0o644))
	system := g.system
	if system == "" {
		system = "4326"
	}
	must(t, os.WriteFile(strings.TrimSuffix(path, ".asc")+".prj", definition(t, system), 0o644))
}

// cut is the part of the grid from a column and row on.
func (g grid) cut(column, row, columns, rows int) grid {
	part := g
	part.columns, part.rows = columns, rows
	part.left += float64(column) * g.pixel
	part.top -= float64(row) * g.pixel
	part.height = func(i, j int) float64 { return g.height(column+i, row+j) }
	return part
}

// bilinear is a second opinion on the height at x, y: the plain textbook
// formula between the four pixel centres around, NaN where one of them is
// void. The point must lie within the outermost centres.
func (g grid) bilinear(x, y float64) float64 {
	u, v := (x-g.left)/g.pixel-0.5, (g.top-y)/g.pixel-0.5
	i, j := min(int(math.Floor(u)), g.columns-2), min(int(math.Floor(v)), g.rows-2)
	fx, fy := u-float64(i), v-float64(j)
	return g.height(i, j)*(1-fx)*(1-fy) + g.height(i+1, j)*fx*(1-fy) + g.height(i, j+1)*(1-fx)*fy + g.height(i+1, j+1)*fx*fy
}

// constant is the same height everywhere.
func constant(h float64) func(int, int) float64 { return func(int, int) float64 { return h } }

// rough gives every pixel a height of its own, 0 to 255.75 m, by hashing its
// place (the finaliser of splitmix64).
func rough(column, row int) float64 {
	x := uint64(uint32(column))<<32 | uint64(uint32(row))
	x += 0x9e3779b97f4a7c15
	x = (x ^ x>>30) * 0xbf58476d1ce4e5b9
	x = (x ^ x>>27) * 0x94d049bb133111eb
	return float64((x^x>>31)%1024) / 4
}

// hgtSide is the side of a 3" SRTM tile.
const hgtSide = 1201

// writeHGT writes an SRTM tile, such as N50W003.hgt. Column 0, row 0 is its
// north-western corner; the outer rows and columns lie on whole degrees.
func writeHGT(t testing.TB, folder, name string, side int, height func(column, row int) float64) {
	t.Helper()
	out := make([]byte, 0, 2*side*side)
	for row := range side {
		for column := range side {
			h := height(column, row)
			if math.IsNaN(h) {
				h = -32768
			}
			out = binary.BigEndian.AppendUint16(out, uint16(int16(math.Round(h))))
		}
	}
	must(t, os.MkdirAll(folder, 0o755))
	must(t, os.WriteFile(filepath.Join(folder, name), out, 0o644))
}

// loaded loads folders and closes them with the test.
func loaded(t testing.TB, folders ...string) *Terrain {
	t.Helper()
	return loadedWith(t, Options{}, folders...)
}

func loadedWith(t testing.TB, options Options, folders ...string) *Terrain {
	t.Helper()
	terrain, err := Load(context.Background(), raster.NewGDAL(), folders, options, slog.New(slog.DiscardHandler))
	must(t, err)
	t.Cleanup(terrain.Close)
	return terrain
}

// loadedGrids loads grids that it writes first, by their names.
func loadedGrids(t testing.TB, grids map[string]grid) *Terrain {
	t.Helper()
	folder := t.TempDir()
	for name, g := range grids {
		g.write(t, folder, name)
	}
	terrain := loaded(t, folder)
	for _, r := range listed(t, terrain) {
		if r.Problem != "" {
			t.Fatalf("%s: %s", r.Name, r.Problem)
		}
	}
	return terrain
}

func listed(t testing.TB, terrain *Terrain) []profile.Raster {
	t.Helper()
	rasters, err := terrain.Rasters(context.Background())
	must(t, err)
	return rasters
}

// pathOf is the path between two places.
func pathOf(t testing.TB, a, b orb.Point) profile.Path {
	t.Helper()
	line, err := geodesy.NewLine(a, b)
	must(t, err)
	return profile.Path{A: a, B: b, Located: true, LengthM: line.LengthM(), AzimuthADeg: line.AzimuthADeg(), AzimuthBDeg: line.AzimuthBDeg()}
}

// sampled samples without failing.
func sampled(t testing.TB, terrain *Terrain, path profile.Path, how profile.Sampling) *profile.Profile {
	t.Helper()
	into := &profile.Profile{}
	if err := terrain.Sample(context.Background(), path, how, into); err != nil {
		t.Fatalf("from %v to %v: got %v, want a profile", path.A, path.B, err)
	}
	return into
}

// spot is the height at one place: the first sample of a path that starts
// there and goes two metres east.
func spot(t testing.TB, terrain *Terrain, p orb.Point, rasters ...string) float64 {
	t.Helper()
	path := profile.Path{A: p, B: geodesy.Direct(p, 90, 2), Located: true, LengthM: 2, AzimuthADeg: 90}
	return sampled(t, terrain, path, profile.Sampling{SpacingM: 1, Rasters: rasters}).GroundM[0]
}

// placeOf is where a sample lies, by the geodesic itself.
func placeOf(path profile.Path, distanceM float64) orb.Point {
	return geodesy.LineFrom(path.A, path.AzimuthADeg, path.LengthM).At(distanceM)
}

// near reports whether two heights agree, a void being like a void.
func near(got, want, tolerance float64) bool {
	return math.IsNaN(got) && math.IsNaN(want) || math.Abs(got-want) <= tolerance
}

func must(t testing.TB, err error) {
	t.Helper()
	if err != nil {
		t.Fatal(err)
	}
}
