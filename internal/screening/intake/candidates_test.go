package intake

import (
	"errors"
	"io"
	"math"
	"strings"
	"testing"
	"testing/iotest"

	"github.com/google/go-cmp/cmp"
	"github.com/paulmach/orb"
)

func TestCandidateDefaults(t *testing.T) {
	text := "id,lon,lat,height,height_above\na,1,2,,\nb,1,3,7,\nc,1,4,,ground\nd,1,5,450,sea_level\ne,1,6,1,sky\nf,1,7,12000,sea level\n"
	rows, err := read(t, text, CSV, Options{AntennaHeightM: 2, HeightAbove: Roof})
	if err != nil {
		t.Fatalf("got error %v, want none", err)
	}
	want := []Row{
		{Line: 2, Candidate: Candidate{ID: "a", Lon: 1, Lat: 2, AntennaHeightM: 2, HeightAbove: Roof}},
		{Line: 3, Candidate: Candidate{ID: "b", Lon: 1, Lat: 3, AntennaHeightM: 7, HeightAbove: Roof}},
		{Line: 4, Candidate: Candidate{ID: "c", Lon: 1, Lat: 4, AntennaHeightM: 2, HeightAbove: Ground}},
		{Line: 5, Candidate: Candidate{ID: "d", Lon: 1, Lat: 5, AntennaHeightM: 450, HeightAbove: SeaLevel}},
		{Line: 6, Problem: &RowProblem{Line: 6, ID: "e", Field: "height_above", Detail: "is sky; it must be ground, roof or sea_level"}},
		{Line: 7, Problem: &RowProblem{Line: 7, ID: "f", Field: "antenna_height_m", Detail: "is 12000; it must be -500 to 10000 m above sea level"}},
	}
	if diff := cmp.Diff(want, rows); diff != "" {
		t.Errorf("rows (-want +got):\n%s", diff)
	}
}

func TestOptionsRefused(t *testing.T) {
	cases := []struct {
		name   string
		format Format
		how    Options
		want   string
	}{
		{"height", CSV, Options{AntennaHeightM: -1}, "antenna_height_m for rows without is -1; it must be 0 to 1000 m above ground"},
		{"not a number", CSV, Options{AntennaHeightM: math.NaN(), HeightAbove: Roof}, "antenna_height_m for rows without is NaN; it must be 0 to 1000 m above roof"},
		{"above", CSV, Options{HeightAbove: "sky"}, `height_above for rows without is "sky"; it must be ground, roof or sea_level`},
		{"format", "xls", Options{}, `format is "xls"; it must be csv, geojson or ndjson`},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			if _, err := read(t, "id,lon,lat\n", c.format, c.how); message(err) != c.want {
				t.Errorf("candidates: got %v, want %s", err, c.want)
			}
			if _, err := ReadSites(strings.NewReader("id,lon,lat\n"), c.format, c.how); message(err) != c.want {
				t.Errorf("sites: got %v, want %s", err, c.want)
			}
		})
	}
}

// A default that does not suit what the row says is not taken on trust.
func TestCandidateDefaultHeightUnsuited(t *testing.T) {
	rows, err := read(t, "id,lon,lat,height_above\na,1,2,roof\n", CSV, Options{AntennaHeightM: 1500, HeightAbove: SeaLevel})
	want := []RowProblem{{Line: 2, ID: "a", Field: "antenna_height_m", Detail: "is missing, and the 1500 m for rows without is not 0 to 1000 m above roof"}}
	if diff := cmp.Diff(want, problems(rows)); diff != "" || err != nil {
		t.Errorf("error %v, problems (-want +got):\n%s", err, diff)
	}
}

// The limit counts rows that could not be read, not blank ones, and what comes
// after it stays unread.
func TestTooManyRows(t *testing.T) {
	cases := []struct {
		format Format
		text   string
		line   int
	}{
		{CSV, "id,lon,lat\na,1,2\n\nb,1\nc,3,4\n", 5},
		{NDJSON, `{"id":"a","lon":1,"lat":2}` + "\n\n{\n" + `{"id":"c","lon":3,"lat":4}` + "\n", 4},
		{GeoJSON, `{"features":[` + point("a", 1, 2) + `,{},` + point("c", 3, 4) + `,`, 3},
	}
	for _, c := range cases {
		t.Run(string(c.format), func(t *testing.T) {
			r := io.MultiReader(strings.NewReader(c.text), iotest.ErrReader(errors.New("read on")))
			rows, err := collect(t, Candidates(r, c.format, Options{MaxRows: 2}))
			want := &TooManyRowsError{Limit: 2, Line: c.line}
			if many := new(TooManyRowsError); !errors.As(err, &many) || *many != *want {
				t.Errorf("got %v, want %+v", err, want)
			}
			if len(rows) != 2 || !strings.Contains(want.Error(), "more than 2 rows") {
				t.Errorf("got %d rows, want 2", len(rows))
			}
		})
	}
}

func TestReaderFails(t *testing.T) {
	cases := []struct {
		format Format
		text   string
		rows   int
	}{
		{CSV, "id,lon,lat\na,1,2\nb,3", 1},
		{CSV, "id,lon,lat\na,1,2\n\"b", 1},
		{CSV, "id,lo", 0},
		{CSV, "\"id\",\"lo", 0},
		{NDJSON, `{"id":"a","lon":1,"lat":2}` + "\n{", 1},
		{GeoJSON, `{"features":[` + point("a", 1, 2), 1},
		{GeoJSON, `{"features":[` + point("a", 1, 2) + `]}`, 1},
	}
	broke := errors.New("the line broke")
	for _, c := range cases {
		rows, err := collect(t, Candidates(io.MultiReader(strings.NewReader(c.text), iotest.ErrReader(broke)), c.format, Options{}))
		if !errors.Is(err, broke) || len(rows) != c.rows || len(problems(rows)) > 0 {
			t.Errorf("%q: got %d rows, %v; want %d and the reader's error", c.text, len(rows), err, c.rows)
		}
	}
}

func TestSamePlaceIsAWarning(t *testing.T) {
	rows, err := read(t, "id,lon,lat\na,180,2\nb,-180,2.0\nc,180,2.1\nd,0,0\ne,-0,0\n", CSV, Options{})
	if err != nil || len(ids(rows)) != 5 {
		t.Fatalf("got %v, %v; want 5 candidates", ids(rows), err)
	}
	want := []Warning{
		{Line: 3, ID: "b", Field: "lon", Detail: "and lat are the place of line 2 as well"},
		{Line: 6, ID: "e", Field: "lon", Detail: "and lat are the place of line 5 as well"},
	}
	if diff := cmp.Diff(want, warnings(rows)); diff != "" {
		t.Errorf("warnings (-want +got):\n%s", diff)
	}
}

// An id is taken by a candidate, not by a row that could not be read.
func TestBadRowTakesNoID(t *testing.T) {
	rows, err := read(t, "id,lon,lat\na,1,\na,1,2\na,3,4\n", CSV, Options{})
	want := []RowProblem{
		{Line: 2, ID: "a", Field: "lat", Detail: "is missing"},
		{Line: 4, ID: "a", Field: "id", Detail: "is that of line 3 already; every candidate needs its own"},
	}
	if diff := cmp.Diff(want, problems(rows)); diff != "" || err != nil {
		t.Errorf("error %v, problems (-want +got):\n%s", err, diff)
	}
}

func TestStopsWhenAsked(t *testing.T) {
	for row, err := range Candidates(strings.NewReader("id,lon,lat\na,1,2\nb,3,4\n"), CSV, Options{}) {
		if err != nil || row.Candidate.ID != "a" {
			t.Fatalf("got %+v, %v; want a", row, err)
		}
		break
	}
}

// A raster about Berlin, in round numbers.
func inside(p orb.Point) bool { return p[0] >= 13 && p[0] <= 14 && p[1] >= 52 && p[1] <= 53 }

func TestSwapped(t *testing.T) {
	everywhere := func(orb.Point) bool { return true }
	cases := []struct {
		name   string
		p      orb.Point
		inside func(orb.Point) bool
		want   bool
	}{
		{"as it should be", orb.Point{13.4, 52.5}, inside, false},
		{"swapped", orb.Point{52.5, 13.4}, inside, true},
		{"elsewhere either way", orb.Point{2, 48}, inside, false},
		{"both inside", orb.Point{10, 20}, everywhere, false},
		{"no valid exchange", orb.Point{139, 35}, func(p orb.Point) bool { return p[0] == 35 }, false},
		{"not a number", orb.Point{math.NaN(), 13.4}, func(p orb.Point) bool { return p[0] == 13.4 }, false},
		{"nothing known", orb.Point{52.5, 13.4}, nil, false},
	}
	for _, c := range cases {
		want := c.p
		if c.want {
			want = orb.Point{c.p[1], c.p[0]}
		}
		got, swapped := Swapped(c.p, c.inside)
		if swapped != c.want || !c.want && c.name != "not a number" && got != want || c.want && got != want {
			t.Errorf("%s: got %v %v, want %v %v", c.name, got, swapped, want, c.want)
		}
	}
}

func TestSwappedRowIsWarnedAbout(t *testing.T) {
	text := "id,lon,lat,height\na,13.4,52.5,1\nb,52.5,13.4,1\n"
	detail := "longitude and latitude look swapped: longitude 52.5, latitude 13.4 lies outside every raster and longitude 13.4, latitude 52.5 does not"
	want := []Warning{{Line: 3, ID: "b", Detail: detail}}
	rows, err := read(t, text, CSV, Options{Inside: inside})
	if diff := cmp.Diff(want, warnings(rows)); diff != "" || err != nil {
		t.Errorf("error %v, warnings (-want +got):\n%s", err, diff)
	}
	if got := rows[1].Candidate; got.Lon != 52.5 || got.Lat != 13.4 {
		t.Errorf("got %+v, want it as given", got)
	}
	sites, err := ReadSites(strings.NewReader(text), CSV, Options{Inside: inside})
	if diff := cmp.Diff(want, sites.Warnings); diff != "" || err != nil {
		t.Errorf("sites: error %v, warnings (-want +got):\n%s", err, diff)
	}
}
