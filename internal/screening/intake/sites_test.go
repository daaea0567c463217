package intake

import (
	"errors"
	"fmt"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

func TestReadSites(t *testing.T) {
	text := `id,name,lon,lat,antenna_height_m,height_above,frequency_ghz,polarization,range_km,azimuth,beamwidth_deg,tilt_deg,antenna,radio
s1,Hill,13.25,52.5,30,,5.8,Vertical,7.5,0,90,-2,panel-90,ap-5
s2,Silo,13.5,52.25,4,roof,,,,,,,,
s1,,13.250,52.5,30.0,ground,,,,360,120,,panel-120,
s1,Hill,13.25,52.5,30,ground,5.8,vertical,7.5,180,90,-2,panel-90,ap-5
s2,Silo,13.5,52.25,4,roof,60,slant,2,45,,,,
`
	want := []Site{
		{ID: "s1", Name: "Hill", Lon: 13.25, Lat: 52.5, AntennaHeightM: 30, HeightAbove: Ground, FrequencyGHz: 5.8, Polarisation: Vertical, RangeM: 7500,
			Sectors: []Sector{
				{AzimuthDeg: 0, WidthDeg: 90, TiltDeg: -2, Antenna: "panel-90", Radio: "ap-5"},
				{AzimuthDeg: 0, WidthDeg: 120, Antenna: "panel-120"},
				{AzimuthDeg: 180, WidthDeg: 90, TiltDeg: -2, Antenna: "panel-90", Radio: "ap-5"},
			}},
		{ID: "s2", Name: "Silo", Lon: 13.5, Lat: 52.25, AntennaHeightM: 4, HeightAbove: Roof, FrequencyGHz: 60, Polarisation: Slant, RangeM: 2000,
			Sectors: []Sector{{WidthDeg: 360}, {AzimuthDeg: 45, WidthDeg: 360}}},
	}
	got, err := ReadSites(strings.NewReader(text), CSV, Options{})
	if err != nil {
		t.Fatalf("got error %v, want none", err)
	}
	if diff := cmp.Diff(SiteList{Sites: want}, got); diff != "" {
		t.Errorf("sites (-want +got):\n%s", diff)
	}
}

// What the rows of one id disagree about, and what one row gets wrong.
func TestSiteProblems(t *testing.T) {
	cases := []struct{ name, row, field, detail string }{
		{"place", "s1,Hill,13.26,52.5,30,,5.8,vertical,,0,90,0", "lon", "is 13.26, but line 2 of the same id has 13.25; they must agree"},
		{"latitude", "s1,Hill,13.25,52.6,30,,5.8,vertical,,0,90,0", "lat", "is 52.6, but line 2 of the same id has 52.5; they must agree"},
		{"height", "s1,Hill,13.25,52.5,31,,5.8,vertical,,0,90,0", "antenna_height_m", "is 31, but line 2 of the same id has 30; they must agree"},
		{"above", "s1,Hill,13.25,52.5,30,roof,5.8,vertical,,0,90,0", "height_above", "is roof, but line 2 of the same id has ground; they must agree"},
		{"name", "s1,Mill,13.25,52.5,30,,5.8,vertical,,0,90,0", "name", "is Mill, but line 2 of the same id has Hill; they must agree"},
		{"frequency", "s1,Hill,13.25,52.5,30,,6,vertical,,0,90,0", "frequency_ghz", "is 6, but line 2 of the same id has 5.8; they must agree"},
		{"polarisation", "s1,Hill,13.25,52.5,30,,5.8,slant,,0,90,0", "polarisation", "is slant, but line 2 of the same id has vertical; they must agree"},
		{"range", "s1,Hill,13.25,52.5,30,,5.8,vertical,70,0,90,0", "range_m", "is 70, but line 2 of the same id has 5000; they must agree"},
		{"no height", "s1,,13,52,,,,,,,,", "antenna_height_m", "is missing"},
		{"frequency too low", "s1,,13,52,1,,0.05,,,,,", "frequency_ghz", "is 0.05; it must be 0.1 to 100 GHz"},
		{"frequency too high", "s1,,13,52,1,,101,,,,,", "frequency_ghz", "is 101; it must be 0 to 100 GHz"},
		{"no polarisation", "s1,,13,52,1,,,circular,,,,", "polarisation", "is circular; it must be vertical, horizontal or slant"},
		{"too far", "s1,,13,52,1,,,,300001,,,", "range_m", "is 300001; it must be 0 to 300000 m"},
		{"azimuth", "s1,,13,52,1,,,,,-1,,", "azimuth_deg", "is -1; it must be 0 to 360 degrees from true north"},
		{"no width", "s1,,13,52,1,,,,,0,0,", "width_deg", "is 0; it must be more than 0, up to 360 degrees, which is all round"},
		{"tilt", "s1,,13,52,1,,,,,0,90,-91", "tilt_deg", "is -91; it must be -90 to 90 degrees, up positive"},
	}
	head := "id,name,lon,lat,height,height_above,frequency_ghz,polarisation,range_m,azimuth_deg,width_deg,tilt_deg\n" +
		"s1,Hill,13.25,52.5,30,,5.8,vertical,5000,0,90,0\n"
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			got, err := ReadSites(strings.NewReader(head+c.row+"\ns3,,1,2,3,,,,,,,\n"), CSV, Options{})
			if err != nil {
				t.Fatalf("got error %v, want none", err)
			}
			want := []RowProblem{{Line: 3, ID: "s1", Field: c.field, Detail: c.detail}}
			if diff := cmp.Diff(want, got.Problems); diff != "" {
				t.Errorf("problems (-want +got):\n%s", diff)
			}
			if len(got.Sites) != 2 || len(got.Sites[0].Sectors) != 1 {
				t.Errorf("got %+v, want s1 with one sector, and s3", got.Sites)
			}
		})
	}
}

func TestSiteColumnsMissing(t *testing.T) {
	_, err := ReadSites(strings.NewReader("id,lon,lat\n"), CSV, Options{})
	want := "line 1 lacks the columns antenna_height_m (or height_m, height); it names id, lon, lat"
	if message(err) != want {
		t.Errorf("got %v, want %s", err, want)
	}
}

func TestSiteRangeTwice(t *testing.T) {
	got, err := ReadSites(strings.NewReader("id,lon,lat,height,range_m,range_km\na,1,2,3,4000,4\nb,1,2,3,,4\n"), CSV, Options{})
	want := []RowProblem{{Line: 2, ID: "a", Field: "range_m", Detail: "stands beside range_km; give one of them"}}
	if diff := cmp.Diff(want, got.Problems); diff != "" || err != nil {
		t.Errorf("error %v, problems (-want +got):\n%s", err, diff)
	}
	if len(got.Sites) != 1 || got.Sites[0].RangeM != 4000 {
		t.Errorf("got %+v, want b with 4000 m", got.Sites)
	}
}

// A sector listed twice is kept once; and there is an end to them.
func TestSiteSectors(t *testing.T) {
	var text strings.Builder
	text.WriteString("id,lon,lat,height,azimuth\na,1,2,3,0\na,1,2,3,0\n")
	for i := range MaxSectors {
		fmt.Fprintf(&text, "a,1,2,3,%d\n", i+1)
	}
	got, err := ReadSites(strings.NewReader(text.String()), CSV, Options{})
	if err != nil {
		t.Fatalf("got error %v, want none", err)
	}
	warned := []Warning{{Line: 3, ID: "a", Detail: "repeats a sector of this site; it is kept once"}}
	if diff := cmp.Diff(warned, got.Warnings); diff != "" {
		t.Errorf("warnings (-want +got):\n%s", diff)
	}
	problem := []RowProblem{{Line: 3 + MaxSectors, ID: "a", Field: "id", Detail: "has 64 sectors already, the limit"}}
	if diff := cmp.Diff(problem, got.Problems); diff != "" {
		t.Errorf("problems (-want +got):\n%s", diff)
	}
	if n := len(got.Sites[0].Sectors); n != MaxSectors {
		t.Errorf("got %d sectors, want %d", n, MaxSectors)
	}
}

// The sites before an error are returned with it.
func TestSitesBeforeAnError(t *testing.T) {
	got, err := ReadSites(strings.NewReader("id,lon,lat,height\na,1,2,3\nb,1,2,3\n"), CSV, Options{MaxRows: 1})
	if many := new(TooManyRowsError); !errors.As(err, &many) || len(got.Sites) != 1 {
		t.Errorf("got %d sites, %v; want 1 and the limit", len(got.Sites), err)
	}
}

func TestSitesFromJSON(t *testing.T) {
	want := []Site{{ID: "s", Lon: 13.25, Lat: 52.5, AntennaHeightM: 30, HeightAbove: Ground, RangeM: 5000,
		Sectors: []Sector{{AzimuthDeg: 10, WidthDeg: 90}, {AzimuthDeg: 190, WidthDeg: 90}}}}
	lines := `{"id":"s","lon":13.25,"lat":52.5,"height":30,"range_km":5,"azimuth":10,"width_deg":90}` + "\n" +
		`{"id":"s","lon":13.25,"lat":52.5,"height":30,"azimuth":190,"width_deg":90}`
	feature := `{"geometry":{"type":"Point","coordinates":[13.25,52.5]},"properties":{"id":"s","height":30,"range_km":5,"azimuth":%s,"width_deg":90}}`
	for format, text := range map[Format]string{NDJSON: lines, GeoJSON: collection(fmt.Sprintf(feature, "10"), fmt.Sprintf(feature, "190"))} {
		got, err := ReadSites(strings.NewReader(text), format, Options{})
		if diff := cmp.Diff(SiteList{Sites: want}, got); diff != "" || err != nil {
			t.Errorf("%s: error %v, sites (-want +got):\n%s", format, err, diff)
		}
	}
}
