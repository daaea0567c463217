package raster

import (
	"math"
	"path/filepath"
	"testing"

	"ridgehop/internal/sharedtest"
)

// The numbers are the table of the shared folder's README, which was made with
// GDAL's own programs: extents are outer pixel edges, void shares in percent.
func TestRealFiles(t *testing.T) {
	dir := filepath.Join(sharedtest.Dir(t), "elevation")
	cases := []struct {
		file                     string
		width, height            int
		dataType                 string
		epsg                     int
		left, bottom, right, top float64
		step                     float64 // of the last digit that the table prints
		nodata                   float64
		voidShare                float64
		point                    bool
		lowest, highest          float64
	}{
		{"N51W001.hgt.zip", 1201, 1201, "Int16", 4326, -1.00042, 50.9996, 0.000416667, 52.0004, 1e-4, -32768, 0.002, true, -30, 296},
		{"N56W005.hgt", 1201, 1201, "Int16", 4326, -5.00042, 55.9996, -3.99958, 57.0004, 1e-4, -32768, 0, true, -4, 1312},
		{"N56W006.hgt", 1201, 1201, "Int16", 4326, -6.00042, 55.9996, -4.99958, 57.0004, 1e-4, -32768, 0, true, -3, 1336},
		{"alexandria_dsm_2m.tif", 283, 259, "Float32", 26918, 321498, 4297500, 322064, 4298018, 1, -9999, 0, false, 7, 39.1},
		{"alexandria_dtm_2m.tif", 283, 259, "Float32", 26918, 321498, 4297500, 322064, 4298018, 1, -9999, 0.377, false, 6.9, 22.1},
		{"glo30_losangeles_egm2008.tif", 361, 361, "Float32", 4326, -118.05, 33.9499, -117.95, 34.0501, 2e-4, math.NaN(), 0, true, 41.1, 421.8},
		{"london_barbican_dsm_1m_bng.tif", 651, 601, "Float64", 27700, 531999, 181359, 532650, 181960, 1, -9999, 0, false, -0.8, 146},
		{"london_barbican_dtm_1m_bng.tif", 651, 601, "Float32", 27700, 531999, 181359, 532650, 181960, 1, -3.40282e38, 0, false, 9, 25},
		{"srtm1_bigtujunga_utm11n_30m.tif", 1197, 643, "Int16", 32611, 376314, 3788628, 412224, 3807918, 1, 32767, 0, false, 315, 2295},
		{"srtm3_N46E008.tif", 1201, 1201, "Int16", 4326, 7.99958, 45.9996, 9.00042, 47.0004, 1e-4, -32767, 7.192, true, 187, 4173},
		{"srtm3_S36E149.tif", 1201, 1201, "Int16", 4326, 149, -36.0004, 150, -34.9996, 5e-4, -32767, 0, true, 7, 1604},
	}
	for _, c := range cases {
		t.Run(c.file, func(t *testing.T) {
			d := open(t, filepath.Join(dir, c.file))
			info := d.Info()
			if info.Width != c.width || info.Height != c.height || info.DataType != c.dataType || info.CRS.EPSG != c.epsg || info.PixelIsPoint != c.point {
				t.Errorf("got %+v, want %+v", info, c)
			}
			g := info.Grid
			right, bottom := g.Left+float64(info.Width)*g.PixelX, g.Top-float64(info.Height)*g.PixelY
			for i, edge := range [4][2]float64{{g.Left, c.left}, {bottom, c.bottom}, {right, c.right}, {g.Top, c.top}} {
				if !(math.Abs(edge[0]-edge[1]) <= c.step) {
					t.Errorf("edge %d: got %g, want %g", i, edge[0], edge[1])
				}
			}
			switch {
			case math.IsNaN(c.nodata) != math.IsNaN(info.NoData), !info.HasNoData:
				t.Errorf("nodata: got %g, want %g", info.NoData, c.nodata)
			case math.Abs(info.NoData-c.nodata) > 1e-5*math.Abs(c.nodata):
				t.Errorf("nodata: got %g, want %g", info.NoData, c.nodata)
			}
			lowest, highest, voids := math.Inf(1), math.Inf(-1), 0
			for _, h := range whole(t, d) {
				if h != h {
					voids++
					continue
				}
				lowest, highest = min(lowest, float64(h)), max(highest, float64(h))
			}
			if !(math.Abs(lowest-c.lowest) <= 0.051 && math.Abs(highest-c.highest) <= 0.051) {
				t.Errorf("heights: got %.2f to %.2f, want %.1f to %.1f", lowest, highest, c.lowest, c.highest)
			}
			if share := 100 * float64(voids) / float64(c.width*c.height); !(math.Abs(share-c.voidShare) <= 0.00051) {
				t.Errorf("voids: got %.4f %%, want %.3f", share, c.voidShare)
			}
		})
	}
}
