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

	"ridgehop/internal/raster"
	"ridgehop/internal/sharedtest"
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
