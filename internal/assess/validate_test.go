package assess

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"ridgehop/profile"
)

// Each case spoils the fit request and names what is found, pointer and sentence.
type invalidCase struct {
	name  string
	spoil func(*Request)
	want  []FieldError
}

func runInvalid(t *testing.T, fit func() Request, cases []invalidCase) {
	t.Helper()
	terrain := land(profile.KindUnstated, flat)
	judged(t, terrain, fit())
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			r := fit()
			c.spoil(&r)
			if diff := cmp.Diff(c.want, refused(t, terrain, r)); diff != "" {
				t.Errorf("(-want +got):\n%s", diff)
			}
		})
	}
}

func one(pointer, detail string) []FieldError { return []FieldError{{pointer, detail}} }

func TestInvalidEnds(t *testing.T) {
	nan := math.NaN()
	runInvalid(t, tenKM, []invalidCase{
		{"longitude too large", func(r *Request) { r.A.Lon = 180.5 }, one("/a/lon", "is 180.5; it must be -180 to 180 degrees east")},
		{"longitude not a number", func(r *Request) { r.B.Lon = nan }, one("/b/lon", "is NaN; it must be -180 to 180 degrees east")},
		{"latitude too small", func(r *Request) { r.B.Lat = -91 }, one("/b/lat", "is -91; it must be -90 to 90 degrees north")},
		{"latitude endless", func(r *Request) { r.A.Lat = math.Inf(1) }, one("/a/lat", "is +Inf; it must be -90 to 90 degrees north")},
		{"no place for a", func(r *Request) { r.A.Placed = false }, one("/a/lon", "is missing: give lon and lat, or bring a profile")},
		{"no place at all", func(r *Request) { r.A.Placed, r.B.Placed = false, false }, []FieldError{
			{"/a/lon", "is missing: give lon and lat, or bring a profile"},
			{"/b/lon", "is missing: give lon and lat, or bring a profile"},
		}},
		{"the same place", func(r *Request) { r.B.Lon, r.B.Lat = r.A.Lon, r.A.Lat }, one("/b", "lies 0.00 m from end a: the ends are the same place")},
		// 0.000005 degrees of latitude are 0.56 m.
		{"half a metre apart", func(r *Request) { r.B.Lon, r.B.Lat = r.A.Lon, r.A.Lat+0.000005 }, one("/b", "lies 0.56 m from end a: the ends are the same place")},
		{"too far apart", func(r *Request) { r.A.Lon, r.A.Lat, r.B.Lon, r.B.Lat = 0, 0, 10, 0 }, one("/b", "lies 1113.2 km from end a; paths up to 300 km are judged")},
		{"negative height", func(r *Request) { r.A.AntennaHeightM = -1 }, one("/a/antenna_height_m", "is -1; it must be 0 to 1000 m above ground")},
		{"height above roof", func(r *Request) { r.B.AntennaHeightM, r.B.HeightAbove = 1001, AboveRoof }, one("/b/antenna_height_m", "is 1001; it must be 0 to 1000 m above roof")},
		{"height above sea", func(r *Request) { r.B.AntennaHeightM, r.B.HeightAbove = 10001, AboveSeaLevel }, one("/b/antenna_height_m", "is 10001; it must be -500 to 10000 m above sea level")},
		{"height not a number", func(r *Request) { r.A.AntennaHeightM = nan }, one("/a/antenna_height_m", "is NaN; it must be 0 to 1000 m above ground")},
		{"height above something else", func(r *Request) { r.A.HeightAbove = "moon" }, one("/a/height_above", `is "moon"; it must be ground, roof or sea_level`)},
		{"name too long", func(r *Request) { r.A.Name = strings.Repeat("ü", 101) }, one("/a/name", "has 101 characters; at most 100 are kept")},
		{"name with a line break", func(r *Request) { r.B.Name = "a\nb" }, one("/b/name", "holds control characters; plain text is kept")},
		{"name with delete", func(r *Request) { r.B.Name = "a\x7f" }, one("/b/name", "holds control characters; plain text is kept")},
		{"name that is not UTF-8", func(r *Request) { r.B.Name = "a\xff" }, one("/b/name", "holds control characters; plain text is kept")},
		{"name with a non-character", func(r *Request) { r.B.Name = "a\uffff" }, one("/b/name", "holds control characters; plain text is kept")},
	})
}

func TestInvalidRadioAndCriteria(t *testing.T) {
	nan := math.NaN()
	runInvalid(t, tenKM, []invalidCase{
		{"frequency too low", func(r *Request) { r.FrequencyGHz = 0.05 }, one("/frequency_ghz", "is 0.05; it must be 0.1 to 100 GHz")},
		{"frequency too high", func(r *Request) { r.FrequencyGHz = 18700 }, one("/frequency_ghz", "is 18700; it must be 0.1 to 100 GHz")},
		{"frequency not a number", func(r *Request) { r.FrequencyGHz = nan }, one("/frequency_ghz", "is NaN; it must be 0.1 to 100 GHz")},
		{"polarisation", func(r *Request) { r.Polarisation = "circular" }, one("/polarisation", `is "circular"; it must be vertical, horizontal or slant`)},
		{"criteria set", func(r *Request) { r.CriteriaSet = "p530_polar" }, one("/criteria_set", `is "p530_polar"; it must be p530_temperate, p530_tropical or f1_60`)},
		{"nine criteria", func(r *Request) { r.Criteria = slices.Repeat([]Criterion{{1, 1}}, 9) }, one("/criteria", "lists 9; at most 8 are judged")},
		{"k too small", func(r *Request) { r.Criteria = []Criterion{{1, 1}, {0.04, 1}} }, one("/criteria/1/k", "is 0.04; it must be 0.05 to 100")},
		{"k too large", func(r *Request) { r.Criteria = []Criterion{{101, 1}} }, one("/criteria/0/k", "is 101; it must be 0.05 to 100")},
		{"k not a number", func(r *Request) { r.Criteria = []Criterion{{nan, 1}} }, one("/criteria/0/k", "is NaN; it must be 0.05 to 100")},
		{"fraction negative", func(r *Request) { r.Criteria = []Criterion{{1, -0.1}} }, one("/criteria/0/f1_fraction", "is -0.1; it must be 0 to 3")},
		{"fraction not a number", func(r *Request) { r.Criteria = []Criterion{{1, nan}} }, one("/criteria/0/f1_fraction", "is NaN; it must be 0 to 3")},
		{"spacing negative", func(r *Request) { r.SpacingM = -30 }, one("/spacing_m", "is -30; it must be 0.01 to 300000 m")},
		{"spacing not a number", func(r *Request) { r.SpacingM = nan }, one("/spacing_m", "is NaN; it must be 0.01 to 300000 m")},
		{"cover negative", func(r *Request) { r.CoverHeightM = -1 }, one("/cover_height_m", "is -1; it must be 0 to 200 m")},
		{"cover not a number", func(r *Request) { r.CoverHeightM = nan }, one("/cover_height_m", "is NaN; it must be 0 to 200 m")},
		{"several at once", func(r *Request) { r.A.Lon, r.FrequencyGHz, r.CoverHeightM = 200, 0, 300 }, []FieldError{
			{"/a/lon", "is 200; it must be -180 to 180 degrees east"},
			{"/frequency_ghz", "is 0; it must be 0.1 to 100 GHz"},
			{"/cover_height_m", "is 300; it must be 0 to 200 m"},
		}},
	})
}

func TestInvalidProfiles(t *testing.T) {
	nan := math.NaN()
	fit := func() Request {
		return brought(Point{0, 100, 0}, Point{4000, 90, 5}, Point{10000, 100, 0})
	}
	runInvalid(t, fit, []invalidCase{
		{"no point", func(r *Request) { r.Profile = []Point{} }, []FieldError{
			{"/a/lon", "is missing: give lon and lat, or bring a profile"},
			{"/b/lon", "is missing: give lon and lat, or bring a profile"},
			{"/profile", "has 0 points; 2 to 20000 are taken"},
		}},
		{"one point", func(r *Request) { r.Profile = r.Profile[:1] }, one("/profile", "has 1 points; 2 to 20000 are taken")},
		{"21,000 points", func(r *Request) { r.Profile = slices.Repeat(r.Profile, 7000) }, one("/profile", "has 21000 points; 2 to 20000 are taken")},
		{"a alone has a place", func(r *Request) { r.A.Placed = true }, one("/a/lon", "one end has a place and the other has none: give both or neither")},
		{"b alone has a place", func(r *Request) { r.B.Placed = true }, one("/a/lon", "one end has a place and the other has none: give both or neither")},
		{"rasters as well", func(r *Request) { r.Rasters = []string{"n51.tif"} }, one("/rasters", "names rasters beside a profile: bring one or the other")},
		{"late start", func(r *Request) { r.Profile[0].DistanceM = 10 }, one("/profile/0/distance_m", "is 10; the first point is end A, at 0")},
		{"start not a number", func(r *Request) { r.Profile[0].DistanceM = nan }, []FieldError{
			{"/profile/0/distance_m", "is NaN; the first point is end A, at 0"},
			{"/profile/1/distance_m", "is 4000; it must be more than the point before, NaN"},
		}},
		{"the same distance twice", func(r *Request) { r.Profile[1].DistanceM = 0 }, one("/profile/1/distance_m", "is 0; it must be more than the point before, 0")},
		{"backwards", func(r *Request) { r.Profile[2].DistanceM = 3000 }, one("/profile/2/distance_m", "is 3000; it must be more than the point before, 4000")},
		{"distance not a number", func(r *Request) { r.Profile[2].DistanceM = nan }, []FieldError{
			{"/profile/2/distance_m", "is NaN; it must be more than the point before, 4000"},
			{"/profile/2/distance_m", "is NaN; it must be 1 to 300000 m, the path length"},
		}},
		{"ground too low", func(r *Request) { r.Profile[1].GroundM = -501 }, one("/profile/1/ground_m", "is -501; it must be -500 to 9000 m above sea level")},
		{"ground not a number", func(r *Request) { r.Profile[0].GroundM = nan }, one("/profile/0/ground_m", "is NaN; it must be -500 to 9000 m above sea level")},
		{"cover negative", func(r *Request) { r.Profile[1].CoverM = -1 }, one("/profile/1/cover_m", "is -1; it must be 0 to 200 m")},
		{"cover not a number", func(r *Request) { r.Profile[1].CoverM = nan }, one("/profile/1/cover_m", "is NaN; it must be 0 to 200 m")},
		{"path too short", func(r *Request) { r.Profile = []Point{{0, 0, 0}, {0.5, 0, 0}} }, one("/profile/1/distance_m", "is 0.5; it must be 1 to 300000 m, the path length")},
		{"path too long", func(r *Request) { r.Profile[2].DistanceM = 301e3 }, one("/profile/2/distance_m", "is 301000; it must be 1 to 300000 m, the path length")},
		{"21,000 samples", func(r *Request) { r.SpacingM = 10000 / 20999.5 }, one("/spacing_m", "makes more than 20000 samples of this profile; a larger one fits")},
	})
}

// A bad column makes no list of thousands.
func TestInvalidProfileStopsEarly(t *testing.T) {
	points := make([]Point, 5000)
	for i := range points {
		points[i] = Point{DistanceM: float64(i), GroundM: 1e6, CoverM: 1e6}
	}
	fields := refused(t, land(profile.KindGround, flat), brought(points...))
	if len(fields) < 10 || len(fields) > 13 {
		t.Errorf("got %d findings, want about ten", len(fields))
	}
}

// What is on the very limits is taken.
func TestLimitsAreTaken(t *testing.T) {
	terrain := land(profile.KindUnstated, flat)
	for _, change := range []func(*Request){
		func(r *Request) { r.FrequencyGHz = 0.1 },
		func(r *Request) { r.FrequencyGHz = 100 },
		func(r *Request) { r.A.AntennaHeightM = 0 },
		func(r *Request) { r.A.AntennaHeightM = 1000 },
		func(r *Request) { r.A.AntennaHeightM, r.A.HeightAbove = 10000, AboveSeaLevel },
		func(r *Request) { r.A.Name = strings.Repeat("ü", 100) },
		func(r *Request) { r.CoverHeightM = 200 },
		func(r *Request) { r.Criteria = slices.Repeat([]Criterion{{0.05, 0}, {100, 3}}, 4) },
		func(r *Request) { r.A.Lon, r.B.Lon, r.A.Lat, r.B.Lat = 180, -180, 0, 0.1 },
		func(r *Request) { r.A.Lat, r.B.Lat = 90, 89.9 },
	} {
		r := tenKM()
		change(&r)
		judged(t, terrain, r)
	}
}

func TestInvalidErrorText(t *testing.T) {
	err := error(&InvalidError{Fields: []FieldError{{"/a/lon", "is 200"}, {"/b", "lies afar"}}})
	if got, want := fmt.Sprint(err), "/a/lon is 200; /b lies afar"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}
