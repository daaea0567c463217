package raster

import (
	"archive/zip"
	"encoding/binary"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/lukeroth/gdal"
)

// tiff is a GeoTIFF to be written. plainTIFF fills it; a test changes what it
// is about.
type tiff struct {
	width, height, bands int
	kind                 gdal.DataType
	transform            [6]float64 // GDAL's order; all 0 writes none
	wkt                  string
	values               []float64 // of the first band, row by row; nil writes 100, 101, ...
	nodata               *float64
	scale, offset        float64 // written where not 0
	unit                 string
	point                bool // pixel-is-point
	options              []string
	filled               [4]int // the window that values fill: x, y, width, height; all 0 is the whole
	mask                 bool   // with a mask of its own, beside the values
}

// plainTIFF is 6 x 4 pixels of 10 m in UTM zone 30N, heights 100 to 123 m.
func plainTIFF(t testing.TB) tiff {
	return tiff{
		width: 6, height: 4, bands: 1, kind: gdal.Int16,
		transform: [6]float64{500000, 10, 0, 5600000, 0, -10},
		wkt:       epsgWKT(t, 32630),
	}
}

// write writes the file into a folder of the test's own.
func (f tiff) write(t testing.TB) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), "made.tif")
	driver, err := gdal.GetDriverByName("GTiff")
	if err != nil {
		t.Fatal(err)
	}
	out := driver.Create(path, f.width, f.height, f.bands, f.kind, f.options)
	if out.IsNull() {
		t.Fatalf("GDAL would not create %+v", f)
	}
	defer out.Close()
	band := out.RasterBand(1)
	must(t, out.SetProjection(f.wkt))
	if f.transform != [6]float64{} {
		must(t, out.SetGeoTransform(f.transform))
	}
	if f.nodata != nil {
		must(t, band.SetNoDataValue(*f.nodata))
	}
	if f.scale != 0 {
		must(t, band.SetScale(f.scale))
	}
	if f.offset != 0 {
		must(t, band.SetOffset(f.offset))
	}
	if f.unit != "" {
		must(t, band.SetUnitType(f.unit))
	}
	if f.point {
		must(t, out.SetMetadataItem("AREA_OR_POINT", "Point", ""))
	}
	if f.mask {
		gdal.CPLSetConfigOption("GDAL_TIFF_INTERNAL_MASK", "YES")
		defer gdal.CPLSetConfigOption("GDAL_TIFF_INTERNAL_MASK", "")
		const perDataset = 2
		must(t, out.CreateMaskBand(perDataset))
	}
	if f.values == nil {
		f.values = counting(f.width*f.height, 100)
	}
	x, y, width, height := 0, 0, f.width, f.height
	if f.filled != [4]int{} {
		x, y, width, height = f.filled[0], f.filled[1], f.filled[2], f.filled[3]
	}
	must(t, band.IO(gdal.Write, x, y, width, height, f.values, width, height, 0, 0))
	return path
}

// counting is n numbers from first on.
func counting(n int, first float64) []float64 {
	values := make([]float64, n)
	for i := range values {
		values[i] = first + float64(i)
	}
	return values
}

func must(t testing.TB, err error) {
	t.Helper()
	if err != nil {
		t.Fatal(err)
	}
}

// epsgWKT is the definition of a coordinate reference system by its EPSG code.
func epsgWKT(t testing.TB, code int) string {
	t.Helper()
	sr := gdal.CreateSpatialReference("")
	defer sr.Destroy()
	must(t, sr.FromEPSG(code))
	wkt, err := sr.ToWKT()
	must(t, err)
	return wkt
}

// writeFile writes bytes under a name into a folder of the test's own.
func writeFile(t testing.TB, name string, content []byte) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), name)
	must(t, os.WriteFile(path, content, 0o644))
	return path
}

// hgtSide is the side of a 3" SRTM tile: rows and columns of the whole degree
// with both its edges.
const hgtSide = 1201

// hgtBytes is a 3" SRTM tile: big-endian 16-bit rows from the north.
func hgtBytes(height func(column, row int) int16) []byte {
	out := make([]byte, 0, 2*hgtSide*hgtSide)
	for row := range hgtSide {
		for column := range hgtSide {
			out = binary.BigEndian.AppendUint16(out, uint16(height(column, row)))
		}
	}
	return out
}

// slope is a tile whose heights tell the column and the row.
func slope(column, row int) int16 { return int16(column%100 + 100*(row%80)) }

func zipped(t testing.TB, name string, content []byte) []byte {
	t.Helper()
	var out strings.Builder
	w := zip.NewWriter(&out)
	f, err := w.Create(name)
	must(t, err)
	_, err = f.Write(content)
	must(t, err)
	must(t, w.Close())
	return []byte(out.String())
}

// esriWGS84 and esriUTM30 are .prj files as ESRI's programs write them,
// without codes.
const (
	esriWGS84 = `GEOGCS["GCS_WGS_1984",DATUM["D_WGS_1984",SPHEROID["WGS_1984",6378137.0,298.257223563]],PRIMEM["Greenwich",0.0],UNIT["Degree",0.0174532925199433]]`
	esriUTM30 = `PROJCS["WGS_1984_UTM_Zone_30N",` + esriWGS84 + `,PROJECTION["Transverse_Mercator"],PARAMETER["False_Easting",500000.0],PARAMETER["False_Northing",0.0],` +
		`PARAMETER["Central_Meridian",-3.0],PARAMETER["Scale_Factor",0.9996],PARAMETER["Latitude_Of_Origin",0.0],UNIT["Meter",1.0]]`
)

// arcASCII is a grid of 4 x 3 cells of 10 units whose lower left corner lies
// at 500000, 5600000, or of a hundredth of a degree at -3, 50.
func arcASCII(geographic bool) string {
	head := "ncols 4\nnrows 3\nxllcorner 500000\nyllcorner 5600000\ncellsize 10\n"
	if geographic {
		head = "ncols 4\nnrows 3\nxllcorner -3\nyllcorner 50\ncellsize 0.01\n"
	}
	return head + "NODATA_value -9999\n100.5 101 102 103\n104 -9999 106 107\n108 109 110 111.25\n"
}

// writeArcASCII writes the grid and, where prj is not empty, the .prj beside
// it.
func writeArcASCII(t testing.TB, grid, prj string) string {
	t.Helper()
	path := writeFile(t, "made.asc", []byte(grid))
	if prj != "" {
		must(t, os.WriteFile(strings.TrimSuffix(path, ".asc")+".prj", []byte(prj), 0o644))
	}
	return path
}

// writeUSGSDEM lets GDAL write a USGS DEM of 8 x 6 pixels of 30 m in UTM zone
// 17N on NAD83, heights from 200 m on.
func writeUSGSDEM(t testing.TB) string {
	t.Helper()
	memory, err := gdal.GetDriverByName("MEM")
	must(t, err)
	driver, err := gdal.GetDriverByName("USGSDEM")
	must(t, err)
	source := memory.Create("", 8, 6, 1, gdal.Int16, nil)
	defer source.Close()
	must(t, source.SetGeoTransform([6]float64{499995 - 15, 30, 0, 4999995 + 15, 0, -30}))
	must(t, source.SetProjection(epsgWKT(t, 26917)))
	must(t, source.RasterBand(1).IO(gdal.Write, 0, 0, 8, 6, counting(48, 200), 8, 6, 0, 0))
	path := filepath.Join(t.TempDir(), "made.dem")
	driver.CreateCopy(path, source, 0, nil, nil, nil).Close()
	return path
}

// open opens a file that is fit, and closes it with the test.
func open(t testing.TB, path string) *Dataset {
	t.Helper()
	d, err := NewGDAL().Open(path)
	if err != nil {
		t.Fatalf("got %v, want the file open", err)
	}
	t.Cleanup(d.Close)
	return d
}

// whole reads all heights.
func whole(t testing.TB, d *Dataset) []float32 {
	t.Helper()
	info := d.Info()
	heights := make([]float32, info.Width*info.Height)
	must(t, d.Read(0, 0, info.Width, info.Height, heights))
	return heights
}

// alike compares heights, NaN being like NaN.
func alike(got, want []float32, tolerance float64) string {
	if len(got) != len(want) {
		return fmt.Sprintf("got %d heights, want %d", len(got), len(want))
	}
	for i := range got {
		a, b := float64(got[i]), float64(want[i])
		if math.IsNaN(a) != math.IsNaN(b) || math.Abs(a-b) > tolerance {
			return fmt.Sprintf("height %d: got %g, want %g", i, a, b)
		}
	}
	return ""
}
