package raster

import (
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
)

func TestRecognised(t *testing.T) {
	cases := []struct {
		name string
		want bool
	}{
		{"N51W001.hgt", true},
		{"folder.d/N51W001.HGT", true},
		{"N51W001.SRTMGL1.hgt.zip", true},
		{"dtm.tif", true},
		{"dtm.TIFF", true},
		{"quad.dem", true},
		{"grid.asc", true},
		{"scene.vrt", false},
		{"grid.asc.gz", false},
		{"N51W001.zip", false},
		{"dtm.tif.aux.xml", false},
		{"tif", false},
		{"", false},
	}
	for _, c := range cases {
		if got := Recognised(c.name); got != c.want {
			t.Errorf("%q: got %t, want %t", c.name, got, c.want)
		}
	}
}

func TestBeside(t *testing.T) {
	lower, upper := writeArcASCII(t, arcASCII(true), esriWGS84), writeFile(t, "GRID.ASC", nil)
	must(t, os.WriteFile(strings.TrimSuffix(upper, ".ASC")+".PRJ", nil, 0o644))
	for path, want := range map[string]string{
		lower:                           strings.TrimSuffix(lower, ".asc") + ".prj",
		upper:                           strings.TrimSuffix(upper, ".ASC") + ".PRJ",
		writeFile(t, "a.asc", nil):      "",
		writeFile(t, "a.tif", nil):      "",
		filepath.Join("nowhere.d", "a"): "",
	} {
		if got := Beside(path); got != want {
			t.Errorf("%s: got %q, want %q", path, got, want)
		}
	}
}

// without compares what a raster declares but for its long definition.
var without = cmp.Options{cmpopts.IgnoreFields(CRS{}, "WKT"), cmpopts.EquateApprox(0, 1e-9), cmpopts.EquateNaNs()}

func TestOpenTellsWhatTheFileDeclares(t *testing.T) {
	tile := hgtBytes(slope)
	wgs84 := CRS{Name: "WGS 84", EPSG: 4326, Geographic: true, WGS84: true}
	// An SRTM tile's pixels are points: the outer ones lie on the whole degree,
	// so its edge lies half a pixel further out.
	tileInfo := Info{
		Driver: "SRTMHGT", Width: hgtSide, Height: hgtSide, BlockWidth: hgtSide, BlockHeight: 1, DataType: "Int16",
		NoData: -32768, HasNoData: true, Scale: 1, PixelIsPoint: true,
		Grid: Grid{Left: -3 - 0.5/1200, Top: 51 + 0.5/1200, PixelX: 1.0 / 1200, PixelY: 1.0 / 1200}, CRS: wgs84,
	}
	cases := []struct {
		name string
		path string
		want Info
	}{
		{"SRTM", writeFile(t, "N50W003.hgt", tile), tileInfo},
		{"SRTM in a zip", writeFile(t, "N50W003.hgt.zip", zipped(t, "N50W003.hgt", tile)), tileInfo},
		{"SRTM in a zip with the producer's long name", writeFile(t, "N50W003.SRTMGL3.hgt.zip", zipped(t, "N50W003.hgt", tile)), tileInfo},
		{"Arc ASCII in degrees", writeArcASCII(t, arcASCII(true), esriWGS84), Info{
			Driver: "AAIGrid", Width: 4, Height: 3, BlockWidth: 4, BlockHeight: 1, DataType: "Float32",
			NoData: -9999, HasNoData: true, Scale: 1,
			Grid: Grid{Left: -3, Top: 50.03, PixelX: 0.01, PixelY: 0.01}, CRS: CRS{Name: "WGS 84", Geographic: true},
		}},
		{"Arc ASCII in metres", writeArcASCII(t, arcASCII(false), esriUTM30), Info{
			Driver: "AAIGrid", Width: 4, Height: 3, BlockWidth: 4, BlockHeight: 1, DataType: "Float32",
			NoData: -9999, HasNoData: true, Scale: 1,
			Grid: Grid{Left: 500000, Top: 5600030, PixelX: 10, PixelY: 10}, CRS: CRS{Name: "WGS 84 / UTM zone 30N", MetresPerUnit: 1},
		}},
		{"Arc ASCII with a coded .prj", writeArcASCII(t, arcASCII(true), epsgWKT(t, 4326)), Info{
			Driver: "AAIGrid", Width: 4, Height: 3, BlockWidth: 4, BlockHeight: 1, DataType: "Float32",
			NoData: -9999, HasNoData: true, Scale: 1,
			Grid: Grid{Left: -3, Top: 50.03, PixelX: 0.01, PixelY: 0.01}, CRS: wgs84,
		}},
		{"GeoTIFF", plainTIFF(t).write(t), Info{
			Driver: "GTiff", Width: 6, Height: 4, BlockWidth: 6, BlockHeight: 4, DataType: "Int16", Scale: 1,
			Grid: Grid{Left: 500000, Top: 5600000, PixelX: 10, PixelY: 10},
			CRS:  CRS{Name: "WGS 84 / UTM zone 30N", EPSG: 32630, MetresPerUnit: 1},
		}},
		// GDAL's writer turns the 6 rows into 7, the last of them void.
		{"USGS DEM", writeUSGSDEM(t), Info{
			Driver: "USGSDEM", Width: 8, Height: 7, BlockWidth: 8, BlockHeight: 7, DataType: "Int16",
			NoData: -32767, HasNoData: true, Scale: 1, PixelIsPoint: true,
			Grid: Grid{Left: 499980, Top: 5000025, PixelX: 30, PixelY: 30}, CRS: CRS{Name: "unnamed", MetresPerUnit: 1},
		}},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			if diff := cmp.Diff(open(t, c.path).Info(), c.want, without); diff != "" {
				t.Errorf("got -, want +\n%s", diff)
			}
		})
	}
}

func TestReadGivesTheFilesHeights(t *testing.T) {
	nan := float32(math.NaN())
	tile := hgtBytes(func(column, row int) int16 {
		if column == 1 && row == 0 {
			return -32768
		}
		return slope(column, row)
	})
	corner := []float32{0, nan, 100, 101} // 2 x 2 pixels from the north-west
	plain := []float32{100, 101, 106, 107}
	cases := []struct {
		name string
		path string
		want []float32
	}{
		{"SRTM", writeFile(t, "N50W003.hgt", tile), corner},
		{"SRTM in a zip", writeFile(t, "N50W003.hgt.zip", zipped(t, "N50W003.hgt", tile)), corner},
		{"Arc ASCII", writeArcASCII(t, arcASCII(true), esriWGS84), []float32{100.5, 101, 104, nan}},
		{"GeoTIFF", plainTIFF(t).write(t), plain},
		{"USGS DEM", writeUSGSDEM(t), []float32{200, 201, 208, 209}},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			got := make([]float32, 4)
			if err := open(t, c.path).Read(0, 0, 2, 2, got); err != nil {
				t.Fatal(err)
			}
			if diff := alike(got, c.want, 0); diff != "" {
				t.Error(diff)
			}
		})
	}
}

// A grid whose first decimal point stands far behind is still no grid of
// whole numbers.
func TestArcASCIIWithLateDecimals(t *testing.T) {
	grid := "ncols 200\nnrows 900\nxllcorner -3\nyllcorner 50\ncellsize 0.001\nNODATA_value -9999\n" +
		strings.Repeat(strings.Repeat("12 ", 200)+"\n", 899) + strings.Repeat("0.75 ", 200) + "\n"
	got := make([]float32, 1)
	if err := open(t, writeArcASCII(t, grid, esriWGS84)).Read(199, 899, 1, 1, got); err != nil {
		t.Fatal(err)
	}
	if got[0] != 0.75 {
		t.Errorf("got %g, want 0.75", got[0])
	}
}

func TestLayoutsOfGeoTIFF(t *testing.T) {
	cases := []struct {
		name    string
		options []string
		block   [2]int
	}{
		{"one strip", nil, [2]int{40, 30}},
		{"strips of a row", []string{"BLOCKYSIZE=1"}, [2]int{40, 1}},
		{"tiles", []string{"TILED=YES", "BLOCKXSIZE=16", "BLOCKYSIZE=32"}, [2]int{16, 32}},
		{"deflated", []string{"COMPRESS=DEFLATE", "PREDICTOR=2", "BLOCKYSIZE=7"}, [2]int{40, 7}},
		{"LZW tiles", []string{"COMPRESS=LZW", "TILED=YES", "BLOCKXSIZE=16", "BLOCKYSIZE=16"}, [2]int{16, 16}},
		{"BigTIFF", []string{"BIGTIFF=YES"}, [2]int{40, 30}},
		{"big-endian", []string{"ENDIANNESS=BIG"}, [2]int{40, 30}},
	}
	want := make([]float32, 40*30)
	for i := range want {
		want[i] = 100 + float32(i)
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			f := plainTIFF(t)
			f.width, f.height, f.options = 40, 30, c.options
			d := open(t, f.write(t))
			if got := [2]int{d.Info().BlockWidth, d.Info().BlockHeight}; got != c.block {
				t.Errorf("block: got %v, want %v", got, c.block)
			}
			if diff := alike(whole(t, d), want, 0); diff != "" {
				t.Error(diff)
			}
		})
	}
}

// What lies beside a file never changes how it is read: no folder is listed,
// no statistics or overrides are looked for, none are written.
func TestSidecarsAreNotRead(t *testing.T) {
	path := plainTIFF(t).write(t)
	must(t, os.WriteFile(path+".aux.xml", []byte(`<PAMDataset><SRS>EPSG:4326</SRS><PAMRasterBand band="1"><NoDataValue>100</NoDataValue></PAMRasterBand></PAMDataset>`), 0o644))
	must(t, os.WriteFile(strings.TrimSuffix(path, ".tif")+".tfw", []byte("1\n0\n0\n-1\n7\n7\n"), 0o644))
	d := open(t, path)
	if info := d.Info(); info.HasNoData || info.CRS.EPSG != 32630 || info.Grid.Left != 500000 {
		t.Errorf("got %+v, want what the file itself says", info)
	}
	whole(t, d)
	d.Close()
	files, err := os.ReadDir(filepath.Dir(path))
	if err != nil {
		t.Fatal(err)
	}
	if len(files) != 3 {
		t.Errorf("got %d files in the folder, want 3", len(files))
	}
}

func TestLibraryVersion(t *testing.T) {
	if got := NewGDAL().Version(); !strings.Contains(got, ".") {
		t.Errorf("got %q, want a release number", got)
	}
}
