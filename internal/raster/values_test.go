package raster

import (
	"errors"
	"math"
	"testing"

	"github.com/lukeroth/gdal"
)

// The nodata values are the producers' own: SRTM -32768 or -32767, USGS and
// Esri -9999 or -3.4e38, TopoToolbox 32767, Copernicus NaN or none.
func TestVoids(t *testing.T) {
	nan, nan32 := math.NaN(), float32(math.NaN())
	declared := func(v float64) *float64 { return &v }
	cases := []struct {
		name   string
		kind   gdal.DataType
		nodata *float64
		stored []float64
		want   []float32
	}{
		{"declared -9999", gdal.Int16, declared(-9999), []float64{-9999, 12}, []float32{nan32, 12}},
		{"declared 0", gdal.Int16, declared(0), []float64{0, 12}, []float32{nan32, 12}},
		{"declared inside the range of heights", gdal.Int16, declared(12), []float64{0, 12}, []float32{0, nan32}},
		{"declared -32768", gdal.Int16, declared(-32768), []float64{-32768, 12}, []float32{nan32, 12}},
		{"declared 32767", gdal.Int16, declared(32767), []float64{32767, 12}, []float32{nan32, 12}},
		{"declared 65535 of UInt16", gdal.UInt16, declared(65535), []float64{65535, 12}, []float32{nan32, 12}},
		{"declared least Int32", gdal.Int32, declared(math.MinInt32), []float64{math.MinInt32, 12}, []float32{nan32, 12}},
		{"declared least Float32", gdal.Float32, declared(-math.MaxFloat32), []float64{-math.MaxFloat32, 12.5}, []float32{nan32, 12.5}},
		{"declared least Float64", gdal.Float64, declared(-math.MaxFloat64), []float64{-math.MaxFloat64, 12.5}, []float32{nan32, 12.5}},
		{"declared NaN", gdal.Float32, declared(nan), []float64{nan, 12.5}, []float32{nan32, 12.5}},
		{"NaN though another is declared", gdal.Float32, declared(-9999), []float64{nan, -9999, 12.5}, []float32{nan32, nan32, 12.5}},
		{"NaN undeclared", gdal.Float64, nil, []float64{nan, 12.5}, []float32{nan32, 12.5}},
		{"infinite", gdal.Float32, nil, []float64{math.Inf(1), math.Inf(-1), 12.5}, []float32{nan32, nan32, 12.5}},
		{"-9999 undeclared", gdal.Int16, nil, []float64{-9999, 12}, []float32{nan32, 12}},
		{"-32768 undeclared", gdal.Int16, nil, []float64{-32768, 12}, []float32{nan32, 12}},
		{"32767 undeclared", gdal.Int16, nil, []float64{32767, 12}, []float32{nan32, 12}},
		{"-32767 beside a declared -9999", gdal.Int16, declared(-9999), []float64{-32767, -9999, 12}, []float32{nan32, nan32, 12}},
		{"none: 0 is a height", gdal.Int16, nil, []float64{0, -5}, []float32{0, -5}},
		{"the bounds themselves are heights", gdal.Int16, nil, []float64{LowestHeight, HighestHeight, LowestHeight - 1, HighestHeight + 1}, []float32{-500, 9000, nan32, nan32}},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			f := plainTIFF(t)
			f.kind, f.nodata = c.kind, c.nodata
			f.values = counting(f.width*f.height, 1)
			copy(f.values, c.stored)
			got := whole(t, open(t, f.write(t)))[:len(c.stored)]
			if diff := alike(got, c.want, 0); diff != "" {
				t.Error(diff)
			}
		})
	}
}

func TestScaleOffsetAndUnit(t *testing.T) {
	nodata := -9999.0
	cases := []struct {
		name          string
		scale, offset float64
		unit          string
		want          [3]float64 // of the stored 1000, 2001 and -9999
		tolerance     float64    // single precision at that size
	}{
		{"plain", 0, 0, "", [3]float64{1000, 2001, math.NaN()}, 0},
		{"metres", 0, 0, "m", [3]float64{1000, 2001, math.NaN()}, 0},
		{"metre", 0, 0, "metre", [3]float64{1000, 2001, math.NaN()}, 0},
		{"decimetres", 0.1, 0, "", [3]float64{100, 200.1, math.NaN()}, 1e-4},
		{"an offset", 0, -300, "", [3]float64{700, 1701, math.NaN()}, 0},
		{"scale and offset", 0.5, 20, "m", [3]float64{520, 1020.5, math.NaN()}, 1e-4},
		// The international foot is 0.3048 m and the US survey foot
		// 1200/3937 m, by definition (NIST SP 811, appendix B.6).
		{"feet", 0, 0, "ft", [3]float64{304.8, 609.9048, math.NaN()}, 1e-4},
		{"US survey feet", 0, 0, "us-ft", [3]float64{1000 * 1200.0 / 3937, 2001 * 1200.0 / 3937, math.NaN()}, 1e-4},
		{"tenths of feet above 100 feet", 0.1, 100, "feet", [3]float64{200 * 0.3048, 300.1 * 0.3048, math.NaN()}, 1e-4},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			f := plainTIFF(t)
			f.nodata, f.scale, f.offset, f.unit = &nodata, c.scale, c.offset, c.unit
			f.values = append([]float64{1000, 2001, nodata}, counting(21, 1)...)
			got := whole(t, open(t, f.write(t)))[:3]
			if diff := alike(got, []float32{float32(c.want[0]), float32(c.want[1]), float32(math.NaN())}, c.tolerance); diff != "" {
				t.Error(diff)
			}
		})
	}
}

func TestUnknownUnit(t *testing.T) {
	f := plainTIFF(t)
	f.unit = "fathom"
	_, err := NewGDAL().Open(f.write(t))
	if !errors.Is(err, ErrUnit) {
		t.Errorf("got %v, want ErrUnit", err)
	}
}

// Heights of no stated unit over places in feet may be in feet: they are
// refused instead of taken for metres.
func TestUnstatedUnitOverFeet(t *testing.T) {
	f := plainTIFF(t)
	f.wkt = epsgWKT(t, 2229) // NAD83 / California zone 5 (ftUS)
	if _, err := NewGDAL().Open(f.write(t)); !errors.Is(err, ErrUnit) {
		t.Errorf("unstated: got %v, want ErrUnit", err)
	}
	for unit, want := range map[string]float64{"m": 100, "us-ft": 100 * 1200.0 / 3937} {
		f.unit = unit
		if got := whole(t, open(t, f.write(t)))[0]; math.Abs(float64(got)-want) > 1e-4 {
			t.Errorf("%s: got %g, want %g", unit, got, want)
		}
	}
}

// A sparse file leaves blocks out that nothing was written to. They are void,
// whether a nodata value is declared or not; a written 0 is a height.
func TestBlocksThatASparseFileLeavesOut(t *testing.T) {
	nodata := -9999.0
	for name, declared := range map[string]*float64{"declared nodata": &nodata, "no nodata": nil} {
		t.Run(name, func(t *testing.T) {
			f := plainTIFF(t)
			f.width, f.height, f.nodata = 48, 40, declared
			f.options = []string{"SPARSE_OK=TRUE", "TILED=YES", "BLOCKXSIZE=16", "BLOCKYSIZE=16"}
			f.filled = [4]int{16, 16, 16, 16} // the block in the middle
			f.values = make([]float64, 16*16)
			for i := range f.values {
				f.values[i] = float64(i % 2) // zeros among them
			}
			got := whole(t, open(t, f.write(t)))
			for i, h := range got {
				column, row := i%48, i/48
				inside := column >= 16 && column < 32 && row >= 16 && row < 32
				if inside != (h == h) || inside && h != float32(column%2) {
					t.Fatalf("column %d, row %d: got %g, want a height inside alone (%t)", column, row, h, inside)
				}
			}
			window := make([]float32, 4*3)
			must(t, open(t, f.write(t)).Read(14, 15, 4, 3, window))
			nan := float32(math.NaN())
			if diff := alike(window, []float32{nan, nan, nan, nan, nan, nan, 0, 1, nan, nan, 0, 1}, 0); diff != "" {
				t.Errorf("a window over the corner: %s", diff)
			}
		})
	}
}

func TestTypes(t *testing.T) {
	for name, kind := range map[string]gdal.DataType{
		"Int16": gdal.Int16, "UInt16": gdal.UInt16, "Int32": gdal.Int32, "UInt32": gdal.UInt32, "Float32": gdal.Float32, "Float64": gdal.Float64,
	} {
		t.Run(name, func(t *testing.T) {
			f := plainTIFF(t)
			f.kind = kind
			d := open(t, f.write(t))
			if got := d.Info().DataType; got != name {
				t.Errorf("type: got %q, want %q", got, name)
			}
			if got := whole(t, d)[5]; got != 105 {
				t.Errorf("height: got %g, want 105", got)
			}
		})
	}
}

// Half a pixel moves every height. The same tie point names the corner of the
// first pixel where pixels are areas and its centre where they are points
// (GeoTIFF 1.1, requirement 7 on GTRasterTypeGeoKey).
func TestPixelIsPointOrArea(t *testing.T) {
	cases := []struct {
		name      string
		point     bool
		left, top float64
	}{
		{"area", false, 10, 50},
		{"point", true, 9.75, 50.25},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			file := rawTIFF{width: 4, height: 4, rowsPerStrip: 4, point: c.point}
			info := open(t, writeFile(t, "made.tif", file.bytes())).Info()
			if info.PixelIsPoint != c.point || info.Grid.Left != c.left || info.Grid.Top != c.top {
				t.Errorf("got point %t, left %g, top %g, want %t, %g, %g", info.PixelIsPoint, info.Grid.Left, info.Grid.Top, c.point, c.left, c.top)
			}
		})
	}
}

// A file that GDAL wrote as points keeps the place of its pixels.
func TestPixelIsPointAsGDALWritesIt(t *testing.T) {
	f := plainTIFF(t)
	f.point = true
	info := open(t, f.write(t)).Info()
	if !info.PixelIsPoint || info.Grid.Left != 500000 || info.Grid.Top != 5600000 {
		t.Errorf("got point %t, left %f, top %f, want true, 500000, 5600000", info.PixelIsPoint, info.Grid.Left, info.Grid.Top)
	}
}

func TestWindows(t *testing.T) {
	d := open(t, plainTIFF(t).write(t)) // 6 x 4 pixels
	t.Run("inside", func(t *testing.T) {
		got := make([]float32, 6)
		must(t, d.Read(4, 1, 2, 3, got))
		if diff := alike(got, []float32{110, 111, 116, 117, 122, 123}, 0); diff != "" {
			t.Error(diff)
		}
	})
	cases := []struct {
		name                string
		x, y, width, height int
		length              int
	}{
		{"left of it", -1, 0, 2, 1, 2},
		{"above it", 0, -1, 1, 2, 2},
		{"beyond the right", 5, 0, 2, 1, 2},
		{"beyond the bottom", 0, 3, 1, 2, 2},
		{"wholly outside", 100, 100, 1, 1, 1},
		{"no width", 0, 0, 0, 1, 0},
		{"no height", 0, 0, 1, 0, 0},
		{"negative sides", 2, 2, -1, -1, 1},
		{"too few heights", 0, 0, 2, 2, 3},
		{"too many heights", 0, 0, 2, 2, 5},
		{"no heights", 0, 0, 1, 1, 0},
		{"a column past counting", math.MaxInt, 0, 1, 1, 1},
		{"a row past counting", 0, math.MaxInt, 1, 1, 1},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			if err := d.Read(c.x, c.y, c.width, c.height, make([]float32, c.length)); !errors.Is(err, ErrUnreadable) {
				t.Errorf("got %v, want ErrUnreadable", err)
			}
		})
	}
}

func TestCloseTwice(t *testing.T) {
	d := open(t, plainTIFF(t).write(t))
	d.Close()
	d.Close()
}
