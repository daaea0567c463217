package raster

import (
	"encoding/csv"
	"errors"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"sync"
	"testing"

	"ridgehop/internal/sharedtest"
)

// crs describes an EPSG code as a file that names it does.
func crs(t testing.TB, code int) CRS {
	t.Helper()
	described, err := describeCRS(epsgWKT(t, code))
	must(t, err)
	return described
}

func projector(t testing.TB, c CRS) *Projector {
	t.Helper()
	p, err := NewGDAL().NewProjector(c)
	must(t, err)
	t.Cleanup(p.Close)
	return p
}

func dms(degrees, minutes, seconds float64) float64 { return degrees + minutes/60 + seconds/3600 }

// The tolerance is half of the last printed digit, and a tenth of it for the
// rounding of the printed angles. GN 7-2 is IOGP's (EPSG) Geomatics Guidance
// Note 7, part 2; its datums here are WGS 84 or ETRS89, which the EPSG data
// set holds equal to within a metre and changes by nothing (EPSG:1149).
func TestProjectPublishedPoints(t *testing.T) {
	cases := []struct {
		name      string
		code      int
		lon, lat  float64
		x, y      float64
		tolerance float64
	}{
		{"UTM zone 38N (GeographicLib, GeoConvert manual)", 32638, 44.4, 33.3, 444140.54, 3684706.36, 0.006},
		{"UPS North (GN 7-2, polar stereographic A)", 5041, 44, 73, 3320416.75, 632668.43, 0.006},
		{"Australian Antarctic (GN 7-2, polar stereographic B)", 3032, 120, -75, 7255380.79, 7053389.56, 0.006},
		{"LAEA Europe on ETRS89 (GN 7-2)", 3035, 5, 50, 3962799.45, 2999718.85, 0.006},
		{"Pseudo-Mercator (GN 7-2)", 3857, -dms(100, 20, 0), dms(24, 22, 54.433), -11169055.58, 2800000.00, 0.03},
		{"ETRS89 longitudes and latitudes (EPSG:1149)", 4258, -5.25, 56.5, -5.25, 56.5, 1e-9},
		{"NAD83 longitudes and latitudes (EPSG:1188)", 4269, -118.25, 34.5, -118.25, 34.5, 1e-9},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			p := projector(t, crs(t, c.code))
			x, y := []float64{c.lon}, []float64{c.lat}
			must(t, p.Project(x, y))
			if !(math.Abs(x[0]-c.x) <= c.tolerance && math.Abs(y[0]-c.y) <= c.tolerance) {
				t.Errorf("forward: got %.4f, %.4f, want %.4f, %.4f +- %g", x[0], y[0], c.x, c.y, c.tolerance)
			}
			x, y = []float64{c.x}, []float64{c.y}
			must(t, p.Unproject(x, y))
			degrees := max(1e-9, c.tolerance/50e3) // a degree of longitude is more than 50 km at all of them but 73 north and 75 south, where it is more than 28 km
			if !(math.Abs(x[0]-c.lon) <= 2*degrees && math.Abs(y[0]-c.lat) <= degrees) {
				t.Errorf("backward: got %.9f, %.9f, want %.9f, %.9f", x[0], y[0], c.lon, c.lat)
			}
		})
	}
}

// The points are Ordnance Survey's for testing OSTN15 (developer pack,
// OSTN15_TestInput_ETRStoOSGB: TP01, TP10, TP20). Without that grid PROJ takes
// the seven-parameter change, good to a few metres.
func TestProjectToBritishNationalGrid(t *testing.T) {
	const tolerance = 5.0
	cases := []struct {
		name              string
		lon, lat          float64
		easting, northing float64
	}{
		{"TP01", -6.29977752014, 49.92226393730, 91492.146, 11318.804},
		{"TP10", -4.3085247696, 51.858908964, 241124.584, 220332.641},
		{"TP20", -1.66379168242, 53.8002151963, 422242.186, 433818.701},
	}
	p := projector(t, crs(t, 27700))
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			x, y := []float64{c.lon}, []float64{c.lat}
			must(t, p.Project(x, y))
			off := math.Hypot(x[0]-c.easting, y[0]-c.northing)
			t.Logf("%.2f m off", off)
			if !(off <= tolerance) {
				t.Errorf("forward: got %.3f, %.3f, want %.3f, %.3f +- %g m", x[0], y[0], c.easting, c.northing, tolerance)
			}
			x, y = []float64{c.easting}, []float64{c.northing}
			must(t, p.Unproject(x, y))
			if off := metresApart(x[0], y[0], c.lon, c.lat); !(off <= tolerance) {
				t.Errorf("backward: got %.8f, %.8f, want %.8f, %.8f +- %g m", x[0], y[0], c.lon, c.lat, tolerance)
			}
		})
	}
}

// metresApart is the distance of two near points, on a sphere: far finer than
// the metres it is held against.
func metresApart(lon1, lat1, lon2, lat2 float64) float64 {
	const degree = 111_195.0
	return degree * math.Hypot((lon1-lon2)*math.Cos(lat1*math.Pi/180), lat1-lat2)
}

// All the surveyed pillars of the shared folder have both coordinates (OS
// trig archive, ETRS89 and National Grid by OSTN15).
func TestProjectSurveyedPillars(t *testing.T) {
	path := filepath.Join(sharedtest.Dir(t), "truth", "os_trig_pillars_shared.csv")
	f, err := os.Open(path)
	must(t, err)
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	must(t, err)
	var x, y, easting, northing []float64
	for _, row := range rows[1:] { // tile, name, station, lat, lon, easting, northing, ...
		var v [4]float64
		for i := range v {
			v[i], err = strconv.ParseFloat(row[3+i], 64)
			must(t, err)
		}
		y, x = append(y, v[0]), append(x, v[1])
		easting, northing = append(easting, v[2]), append(northing, v[3])
	}
	if len(x) != 364 {
		t.Fatalf("got %d pillars, want 364", len(x))
	}
	must(t, projector(t, crs(t, 27700)).Project(x, y))
	worst, sum := 0.0, 0.0
	for i := range x {
		off := math.Hypot(x[i]-easting[i], y[i]-northing[i])
		worst, sum = max(worst, off), sum+off
	}
	t.Logf("364 pillars: %.2f m off on average, %.2f m at most", sum/364, worst)
	if !(worst <= 5) {
		t.Errorf("got %.2f m off at most, want at most 5", worst)
	}
}

// Forth and back is where one started. 2 mm: PROJ's seven-parameter change is
// undone to 1 mm only, and so is its equal-area projection.
func TestProjectAndBack(t *testing.T) {
	for _, code := range []int{4258, 4269, 25830, 26918, 27700, 3035, 32601, 32660, 32733, 3857, 2193, 3338} {
		c := crs(t, code)
		p := projector(t, c)
		area := map[int][4]float64{ // longitudes and latitudes where the system is meant for
			25830: {-6, 0, 36, 60}, 26918: {-78, -72, 28, 50}, 27700: {-8, 2, 50, 60}, 3035: {-10, 30, 35, 70},
			32601: {-179.9, -174, 0, 80}, 32660: {174, 179.9, 0, 80}, 32733: {12, 18, -80, 0}, 2193: {166, 178, -47, -34},
			3338: {-172, -130, 52, 71}, 4269: {-170, -50, 15, 80}, 4258: {-10, 30, 35, 70}, 3857: {-179, 179, -80, 80},
		}[code]
		var lon, lat []float64
		for i := range 5 {
			for j := range 5 {
				lon = append(lon, area[0]+float64(i)/4*(area[1]-area[0]))
				lat = append(lat, area[2]+float64(j)/4*(area[3]-area[2]))
			}
		}
		x, y := append([]float64(nil), lon...), append([]float64(nil), lat...)
		must(t, p.Project(x, y))
		must(t, p.Unproject(x, y))
		for i := range x {
			if off := metresApart(x[i], y[i], lon[i], lat[i]); !(off <= 2e-3) {
				t.Errorf("EPSG:%d at %g, %g: got %g m off, want at most 0.002", code, lon[i], lat[i], off)
			}
		}
	}
}

// A datum shift is meant for an area (EPSG:1314 for 8.82 W to 1.92 E). A path
// that leaves it must not jump: beyond, PROJ left alone takes no shift at all,
// which lies 130 m beside it.
func TestProjectDoesNotJumpAtTheEdgeOfAnArea(t *testing.T) {
	p := projector(t, crs(t, 27700))
	var x, y []float64
	const step = 0.001 // degrees, 67.8 m on the 52.5th parallel
	for i := range 100 {
		x, y = append(x, 1.88+step*float64(i)), append(y, 52.5)
	}
	must(t, p.Project(x, y))
	for i := 1; i < len(x); i++ {
		if apart := math.Hypot(x[i]-x[i-1], y[i]-y[i-1]); math.Abs(apart-67.8) > 0.2 {
			t.Errorf("at %.3f east: got %.2f m a step, want 67.8", 1.88+step*float64(i), apart)
		}
	}
}

// A datum that nobody has tied to WGS 84 is still read, as if it were the same.
func TestProjectFromAnUntiedDatum(t *testing.T) {
	described, err := describeCRS(`GEOGCS["mine",DATUM["unknown",SPHEROID["GRS 1980",6378137,298.257222101]],PRIMEM["Greenwich",0],UNIT["degree",0.0174532925199433]]`)
	must(t, err)
	x, y := []float64{-3}, []float64{50}
	must(t, projector(t, described).Project(x, y))
	if off := metresApart(x[0], y[0], -3, 50); !(off <= 0.01) {
		t.Errorf("got %.9f, %.9f, want -3, 50", x[0], y[0])
	}
}

// A vertical half never shifts heights nor moves the place.
func TestProjectorOfACompoundSystem(t *testing.T) {
	// OSGB36 / British National Grid + ODN height, 7405; WGS 84 + EGM96, 9707.
	for compound, flat := range map[int]int{7405: 27700, 9707: 4326} {
		c := crs(t, compound)
		if c.EPSG != flat {
			t.Errorf("EPSG:%d: got %d for its horizontal half, want %d", compound, c.EPSG, flat)
		}
		x, y := []float64{-4}, []float64{56}
		must(t, projector(t, c).Project(x, y))
		wantX, wantY := []float64{-4}, []float64{56}
		must(t, projector(t, crs(t, flat)).Project(wantX, wantY))
		if x[0] != wantX[0] || y[0] != wantY[0] {
			t.Errorf("EPSG:%d: got %f, %f, want %f, %f", compound, x[0], y[0], wantX[0], wantY[0])
		}
	}
}

func TestDescribeCRS(t *testing.T) {
	cases := []struct {
		code int
		want CRS
	}{
		{4326, CRS{Name: "WGS 84", EPSG: 4326, Geographic: true, WGS84: true}},
		{4258, CRS{Name: "ETRS89", EPSG: 4258, Geographic: true}},
		{27700, CRS{Name: "OSGB36 / British National Grid", EPSG: 27700, MetresPerUnit: 1}},
		// NAD83 / California zone 5 in US survey feet.
		{2229, CRS{Name: "NAD83 / California zone 5 (ftUS)", EPSG: 2229, MetresPerUnit: 1200.0 / 3937}},
	}
	for _, c := range cases {
		got := crs(t, c.code)
		got.WKT = ""
		if math.Abs(got.MetresPerUnit-c.want.MetresPerUnit) < 1e-12 {
			got.MetresPerUnit = c.want.MetresPerUnit
		}
		if got != c.want {
			t.Errorf("EPSG:%d: got %+v, want %+v", c.code, got, c.want)
		}
	}
	inUnit := func(unit string) string {
		return `GEOGCS["mine",DATUM["unknown",SPHEROID["GRS 1980",6378137,298.257222101]],PRIMEM["Greenwich",0],` + unit + `]`
	}
	for name, wkt := range map[string]string{
		"none": "", "nonsense": "nonsense", "geocentric": epsgWKT(t, 4978),
		"longitudes in grads":  inUnit(`UNIT["grad",0.01570796326794897]`),
		"longitudes in metres": inUnit(`UNIT["metre",1]`),
		"longitudes in metres under a projection": `PROJCS["mine",` + inUnit(`UNIT["metre",1]`) +
			`,PROJECTION["Mercator_1SP"],PARAMETER["scale_factor",1],UNIT["metre",1]]`,
	} {
		if _, err := describeCRS(wkt); !errors.Is(err, ErrCRS) {
			t.Errorf("%s: got %v, want ErrCRS", name, err)
		}
	}
}

func TestProjectorRefuses(t *testing.T) {
	t.Run("a definition that cannot be read", func(t *testing.T) {
		if _, err := NewGDAL().NewProjector(CRS{Name: "mine", WKT: "nonsense"}); !errors.Is(err, ErrCRS) {
			t.Errorf("got %v, want ErrCRS", err)
		}
	})
	t.Run("a system that PROJ ties to nothing", func(t *testing.T) {
		_, err := NewGDAL().NewProjector(crs(t, 2303)) // Qornoq 1927 / Greenland zone 4 west
		if want := "Qornoq 1927 / Greenland zone 4 west: Cannot find coordinate operations"; !errors.Is(err, ErrCRS) || !strings.Contains(err.Error(), want) {
			t.Errorf("got %v, want ErrCRS with %q", err, want)
		}
	})
	p := projector(t, crs(t, 32630)) // UTM zone 30N, about 3 degrees west
	cases := []struct {
		name string
		x, y []float64
	}{
		{"no points", nil, nil},
		{"x and y of different number", []float64{1, 2}, []float64{1}},
		{"a point that the system cannot hold", []float64{87}, []float64{0}},
		{"no number", []float64{math.NaN()}, []float64{0}},
		{"one bad point among good ones", []float64{1, 2, 3}, []float64{1, 91, 3}},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			if err := p.Project(c.x, c.y); !errors.Is(err, ErrCRS) || !strings.Contains(err.Error(), "WGS 84 / UTM zone 30N: ") {
				t.Errorf("got %v for %v %v, want ErrCRS that names the system", err, c.x, c.y)
			}
		})
	}
	t.Run("and works on", func(t *testing.T) {
		x, y := []float64{-3}, []float64{0}
		if err := p.Project(x, y); err != nil || math.Hypot(x[0]-500000, y[0]) > 1e-6 {
			t.Errorf("got %v, %v, %v, want 500000, 0", x, y, err)
		}
	})
}

// One projector and one dataset a goroutine, many goroutines, all at once.
func TestAtOnce(t *testing.T) {
	library := NewGDAL()
	path := plainTIFF(t).write(t)
	utm := crs(t, 32638)
	var wg sync.WaitGroup
	for range 8 {
		wg.Go(func() {
			for range 20 {
				d, err := library.Open(path)
				if err != nil {
					t.Error(err)
					return
				}
				heights := make([]float32, 24)
				if err := d.Read(0, 0, 6, 4, heights); err != nil || heights[23] != 123 {
					t.Errorf("got %v, %v, want 123", heights[23], err)
				}
				d.Close()
			}
			p, err := library.NewProjector(utm)
			if err != nil {
				t.Error(err)
				return
			}
			defer p.Close()
			x, y := []float64{44.4}, []float64{33.3}
			if err := p.Project(x, y); err != nil || math.Abs(x[0]-444140.54) > 0.01 {
				t.Errorf("got %v, %v, want 444140.54", x[0], err)
			}
			// Failures at the same time keep their own words.
			if _, err := library.Open(path + ".missing.tif"); !errors.Is(err, ErrUnreadable) {
				t.Errorf("got %v, want ErrUnreadable", err)
			}
		})
	}
	wg.Wait()
}
