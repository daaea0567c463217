package geodesy

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"sync"
	"testing"

	"ridgehop/internal/sharedtest"
)

// egm96Debian is the 15' grid of EGM96 (NGA) in Debian's package proj-data.
const egm96Debian = "/usr/share/proj/egm96_15.gtx"

func openGeoid(t testing.TB, file string) *Geoid {
	t.Helper()
	f, err := os.Open(file)
	if os.IsNotExist(err) {
		t.Skipf("%s is absent: real undulations were not compared", filepath.Base(file))
	}
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	g, err := ReadGTX(f)
	if err != nil {
		t.Fatal(err)
	}
	return g
}

func sharedEGM96(t testing.TB) *Geoid {
	return openGeoid(t, filepath.Join(sharedtest.Dir(t), "geoid", "egm96_15.gtx"))
}

// The check program of EGM96 interpolates by splines, hence 0.06 m.
func TestSharedUndulations(t *testing.T) {
	g := sharedEGM96(t)
	runChecks(t, "egm96_undulation.json", func(t *testing.T, in map[string]float64) map[string]float64 {
		got, ok := g.UndulationM(in["lon"], in["lat"])
		if !ok {
			t.Errorf("%v: got no value, want one", in)
		}
		return map[string]float64{"n_m": got}
	})
	f, err := os.Open(filepath.Join(sharedtest.Dir(t), "truth", "egm96_nga_check.csv"))
	if err != nil {
		t.Skip("the shared data folder holds no egm96_nga_check.csv: its check values were not compared")
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil || len(rows) < 2 {
		t.Fatalf("got %d rows (%v), want some", len(rows), err)
	}
	for _, row := range rows[1:] {
		var number [3]float64
		for i := range number {
			if number[i], err = strconv.ParseFloat(row[i], 64); err != nil {
				t.Fatal(err)
			}
		}
		checkUndulation(t, g, number[1], number[0], number[2], 0.06)
	}
}

// The same without the shared folder. Source: NGA, README.TXT and OUTINTPT.DAT
// of the EGM96 distribution; and three nodes of the grid.
func TestDebianUndulations(t *testing.T) {
	g := openGeoid(t, egm96Debian)
	for _, c := range []struct{ lat, lon, want, tolerance float64 }{
		{38.6281550, 269.7791550, -31.628, 0.06},
		{-14.6212170, 305.0211140, -2.969, 0.06},
		{46.8743190, 102.4487290, -43.575, 0.06},
		{-23.6174460, 133.8747120, 15.871, 0.06},
		{38.6254730, 359.9995000, 50.066, 0.06},
		{-0.4667440, 0.0023000, 17.329, 0.06},
		{38, 270, -30.262, 0.001},
		{-84.75, 180.5, -40.254, 0.001},
		{0, 0, 17.162, 0.001},
	} {
		for _, turns := range []float64{-2, -1, 0, 1} {
			checkUndulation(t, g, c.lon+360*turns, c.lat, c.want, c.tolerance)
		}
	}
}

// 464 nodes of the real grid lie between -89.5 m and -88 m, one of them within
// 2 mm of -88.8888, which other readers of the file take for a missing value.
func TestEGM96HasNoVoids(t *testing.T) {
	g := sharedEGM96(t)
	lowest, near, nearest := math.Inf(1), 0, math.Inf(1)
	var at [2]float64
	for row := range g.rows {
		for column := range g.columns {
			lon, lat := -180+0.25*float64(column), -90+0.25*float64(row)
			n, ok := g.UndulationM(lon, lat)
			if !ok {
				t.Fatalf("longitude %g, latitude %g: got no value, want one", lon, lat)
			}
			lowest = min(lowest, n)
			if n > -89.5 && n < -88 {
				near++
			}
			if off := math.Abs(n + 88.8888); off < nearest {
				nearest, at = off, [2]float64{lon, lat}
			}
		}
	}
	if near != 464 || !(nearest < 0.002) || math.Abs(lowest+106.991) > 0.001 {
		t.Errorf("got %d nodes near -88.8888, the nearest %g off, the lowest %g; want 464, 0.002 at most, -106.991", near, nearest, lowest)
	}
	checkUndulation(t, g, at[0], at[1], -88.8888, 0.002)
	for _, off := range [][2]float64{{0.1, 0}, {-0.1, 0.1}, {0.001, -0.001}, {0.2, 0.2}} {
		checkUndulation(t, g, at[0]+off[0], at[1]+off[1], -88.8888, 1)
	}
}

// Across the antimeridian the geoid goes on, and at the poles, where all
// longitudes are one place, there is one value.
func TestEGM96SeamAndPoles(t *testing.T) {
	g := sharedEGM96(t)
	if w, s, e, n := g.Bound(); w != -180 || s != -90 || e != 180 || n != 90 {
		t.Errorf("bound: got %g %g %g %g, want -180 -90 180 90", w, s, e, n)
	}
	for lat := -89.9; lat < 90; lat += 0.37 {
		last, _ := g.UndulationM(179.75, lat)
		first, _ := g.UndulationM(-180, lat)
		checkUndulation(t, g, 179.875, lat, (last+first)/2, 1e-9)
		checkUndulation(t, g, -180.125, lat, (last+first)/2, 1e-9)
		checkUndulation(t, g, 180, lat, first, 0)
		checkUndulation(t, g, 180-1e-12, lat, first, 1e-6)
	}
	for lon := -180.0; lon <= 360; lon += 7.3 {
		checkUndulation(t, g, lon, 90, 13.606, 0.001) // of EGM96 at the poles, as the grid has them
		checkUndulation(t, g, lon, -90, -29.534, 0.001)
		checkNoUndulation(t, g, lon, 90.0001)
	}
}

func TestGeoidServesManyAtOnce(t *testing.T) {
	g := newGeoid(t, planeGrid(0, 0, 1, 50, 50))
	var group sync.WaitGroup
	for k := range 4 {
		group.Go(func() {
			for i := range 2000 {
				lon, lat := float64((i*7+k)%49)+0.5, float64(i%49)
				checkUndulation(t, g, lon, lat, 2+0.5*lon-0.25*lat, 1e-4)
			}
		})
	}
	group.Wait()
}

func BenchmarkUndulation(b *testing.B) {
	g := newGeoid(b, planeGrid(-180, -90, 1, 360, 181))
	b.ReportAllocs()
	for i := 0; b.Loop(); i++ {
		g.UndulationM(float64(i%720)-360.3, float64(i%180)-89.7)
	}
}
