package terrain

import (
	"encoding/csv"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"github.com/paulmach/orb"

	"ridgehop/internal/geodesy"
	"ridgehop/internal/raster"
	"ridgehop/internal/sharedtest"
	"ridgehop/profile"
)

// Surveyed pillars of the Ordnance Survey trig archive against SRTM, each read
// as the first sample of a two-metre path that starts at the pillar. The three
// figures are those of the shared folder's README: what a right bilinear reader
// gets, to 0.1 m. A slip of half a pixel moves them by metres.
func TestSurveyedPillars(t *testing.T) {
	shared := sharedtest.Dir(t)
	f, err := os.Open(filepath.Join(shared, "truth", "os_trig_pillars_shared.csv"))
	must(t, err)
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	must(t, err)
	terrain := loaded(t, filepath.Join(shared, "elevation"))
	for tile, want := range map[string]struct {
		file string
		rmse float64
	}{
		"N51W001": {"N51W001.hgt.zip", 4.2},
		"N56W005": {"N56W005.hgt", 14.6},
		"N56W006": {"N56W006.hgt", 16.0},
	} {
		t.Run(tile, func(t *testing.T) {
			sum, n := 0.0, 0
			for _, row := range rows[1:] { // tile, name, station, lat, lon, easting, northing, height
				if row[0] != tile {
					continue
				}
				lat, lon, height := number(t, row[3]), number(t, row[4]), number(t, row[7])
				off := spot(t, terrain, orb.Point{lon, lat}, want.file) - height
				sum, n = sum+off*off, n+1
			}
			rmse := math.Sqrt(sum / float64(n))
			t.Logf("%d pillars: %.3f m", n, rmse)
			if !(math.Abs(rmse-want.rmse) <= 0.05) {
				t.Errorf("RMSE: got %.3f m, want %.1f", rmse, want.rmse)
			}
		})
	}
}

func number(t testing.TB, text string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(text, 64)
	must(t, err)
	return v
}

// Points anywhere in real rasters, voids and all, against pixels read through
// internal/raster and the bilinear formula: of SRTM with real voids, of SRTM in
// the southern hemisphere, and of a clip of Copernicus GLO-30, whose pixels are
// points though its file counts like an area.
func TestRealRastersPointByPoint(t *testing.T) {
	folder := filepath.Join(sharedtest.Dir(t), "elevation")
	terrain := loaded(t, folder)
	for file, voids := range map[string]bool{"srtm3_N46E008.tif": true, "srtm3_S36E149.tif": false, "glo30_losangeles_egm2008.tif": false} {
		t.Run(file, func(t *testing.T) {
			path := filepath.Join(folder, file)
			d, err := raster.NewGDAL().Open(path)
			must(t, err)
			info := d.Info()
			d.Close()
			g := grid{columns: info.Width, rows: info.Height, left: info.Grid.Left, top: info.Grid.Top, pixel: info.Grid.PixelX, height: wholeFile(t, path)}
			r := rand.New(rand.NewPCG(46, 8))
			void := 0
			for range 3000 {
				column, row := 1+r.Float64()*float64(g.columns-2), 1+r.Float64()*float64(g.rows-2)
				place := orb.Point{g.left + column*g.pixel, g.top - row*g.pixel}
				got, want := spot(t, terrain, place, file), g.bilinear(place.Lon(), place.Lat())
				if !near(got, want, 1e-3) { // of heights in single precision, on slopes of 50 m a pixel
					t.Fatalf("at %v: got %g, want %g", place, got, want)
				}
				if math.IsNaN(got) {
					void++
				}
			}
			// Of N46E008 7.2 % of the pixels are void, and of the points some
			// more: each void pixel takes the points around it along.
			if share := float64(void) / 3000; voids && !(share > 0.072 && share < 0.11) || !voids && void != 0 {
				t.Errorf("got %d voids of 3000", void)
			}
		})
	}
}

// The vertical error that the sample catalogue states for SRTM, 3.8 m, is about
// right: its 90 % interval around a height holds for 85 to 95 % of the surveyed
// pillars of the lowland tile, once both count from one datum.
func TestStatedErrorHoldsAtPillars(t *testing.T) {
	shared := sharedtest.Dir(t)
	const errorM, normal90 = 3.8, 1.6449 // the normal distribution's 95th percentile
	terrain := stated(t, shared, "datum: odn\ndatums: {egm96: {grid: geoid/egm96_15.gtx}, odn: {grid: geoid/uk_os_OSGM15_GB.tif}}\nsources:\n"+
		"  - {name: srtm, kind: surface, datum: egm96, vertical_error_m: 3.8, correlation_length_m: 500, attribution: NASA, licence: none, files: [elevation/N51W001.hgt.zip]}\n")
	f, err := os.Open(filepath.Join(shared, "truth", "os_trig_pillars_shared.csv"))
	must(t, err)
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	must(t, err)
	held, n, sum := 0, 0, 0.0
	for _, row := range rows[1:] {
		if row[0] != "N51W001" {
			continue
		}
		a := orb.Point{number(t, row[4]), number(t, row[3])}
		p := sampled(t, terrain, pathOf(t, a, geodesy.Direct(a, 0, 2)), profile.Sampling{SpacingM: 1})
		if p.VerticalDatum != "odn" || len(p.DatumDoubts) > 0 || p.Sources[0].ErrorM != errorM {
			t.Fatalf("got heights above %q, doubts %v, error %g", p.VerticalDatum, p.DatumDoubts, p.Sources[0].ErrorM)
		}
		off := p.GroundM[0] - number(t, row[7])
		if math.Abs(off) <= normal90*p.Sources[0].ErrorM {
			held++
		}
		n, sum = n+1, sum+off
	}
	share := float64(held) / float64(n)
	t.Logf("%d of %d pillars, %.1f %%; mean difference %.2f m", held, n, 100*share, sum/float64(n))
	if share < 0.85 || share > 0.95 {
		t.Errorf("got %.1f %%, want 85 to 95", 100*share)
	}
}
