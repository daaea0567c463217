package screening

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"ridgehop/internal/screening/intake"
)

// found is one result of each kind.
func found() []*Result {
	nan := math.NaN()
	hostile := intake.Candidate{ID: `=HYPERLINK("x")`, Name: "Mill, \"Old\" ünder", Lon: 7.25, Lat: -0.5, AntennaHeightM: 6.5, HeightAbove: intake.Roof}
	return []*Result{
		{Line: 2, Candidate: hostile, Status: Judged, SitesInRange: 4, Choices: []Choice{
			{SiteID: "-2+3", Verdict: Clear, Confidence: 0.9996, MarginF1: 0.4567, LengthM: 1234.567, AzimuthDeg: 359.999, TiltDeg: -0.004, SiteAzimuthDeg: 180, Reasons: []string{"criterion_met"}},
			{SiteID: "s2", Verdict: Marginal, Confidence: 0.2, MarginF1: -0.0001, LengthM: 2000, AzimuthDeg: 12.344, TiltDeg: 1.5, SiteAzimuthDeg: 192.3, MastM: 2.301, Reasons: []string{"clearance_short", "radio_will_decide"}},
			{SiteID: "s3", Verdict: Unknown, Confidence: nan, MarginF1: nan, LengthM: 3000, TiltDeg: nan, MastM: nan, Reasons: []string{ReasonOutside}, Detail: "outside"},
		}},
		{Line: 3, Status: Invalid, Problem: &intake.RowProblem{Line: 3, ID: "bad", Field: "lat", Detail: "is 95"}},
		{Line: 4, Candidate: intake.Candidate{ID: "far", Lon: 1, Lat: 2, HeightAbove: intake.Ground}, Status: NoSiteInRange},
	}
}

func written(t *testing.T, format intake.Format, results []*Result, already int, sum *Summary) string {
	t.Helper()
	var out bytes.Buffer
	w, err := NewWriter(&out, format, already)
	if err != nil {
		t.Fatal(err)
	}
	for _, r := range results {
		if err := w.Put(r); err != nil {
			t.Fatal(err)
		}
	}
	if sum != nil {
		if err := w.Close(*sum); err != nil {
			t.Fatal(err)
		}
	}
	return out.String()
}

func TestCSVHoldsWhatWasFound(t *testing.T) {
	text := written(t, intake.CSV, found(), 0, &Summary{})
	rows, err := csv.NewReader(strings.NewReader(text)).ReadAll() // it wants as many fields in each
	if err != nil || len(rows) != 4 {
		t.Fatalf("got %d rows, %v: %s", len(rows), err, text)
	}
	if strings.Count(text, "\r\n") != 4 || strings.Contains(text, "\n=") || strings.Contains(text, ",=") {
		t.Errorf("got line ends or formulas: %q", text)
	}
	cell := func(row int, name string) string {
		for i, column := range rows[0] {
			if column == name {
				return rows[row][i]
			}
		}
		t.Errorf("no column %s", name)
		return ""
	}
	for _, c := range []struct {
		row        int
		name, want string
	}{
		{1, "id", `'=HYPERLINK("x")`}, {1, "site_id", "'-2+3"}, {1, "confidence", "0.999"}, {1, "margin_f1", "0.456"},
		{1, "length_m", "1234.6"}, {1, "azimuth_deg", "0"}, {1, "tilt_deg", "0"}, {1, "mast_m", "0"},
		{1, "second_mast_m", "2.31"}, {1, "second_margin_f1", "-0.001"}, {1, "second_reasons", "clearance_short radio_will_decide"},
		{1, "third_mast_m", ""}, {1, "third_verdict", "unknown"}, {1, "third_detail", "outside"},
		{2, "id", "bad"}, {2, "lon", ""}, {2, "status", "invalid"}, {2, "problem", "lat is 95"}, {2, "verdict", ""},
		{3, "lat", "2"}, {3, "status", "no_site_in_range"}, {3, "sites_in_range", "0"},
	} {
		if got := cell(c.row, c.name); got != c.want {
			t.Errorf("row %d, %s: got %q, want %q", c.row, c.name, got, c.want)
		}
	}
}

// Results read back as the candidates that they are about.
func TestResultsReadBackAsCandidates(t *testing.T) {
	for _, format := range []intake.Format{intake.CSV, intake.NDJSON, intake.GeoJSON} {
		text := written(t, format, found(), 0, &Summary{Rows: 3})
		var got []intake.Candidate
		for row, err := range intake.Candidates(strings.NewReader(text), format, intake.Options{}) {
			if err != nil {
				t.Fatalf("%s: %v: %s", format, err, text)
			}
			if row.Problem == nil {
				got = append(got, row.Candidate)
			}
		}
		if diff := cmp.Diff(got, []intake.Candidate{found()[0].Candidate, found()[2].Candidate}); diff != "" {
			t.Errorf("%s: %s", format, diff)
		}
	}
}

func TestJSONFormatsEndWithTheSummary(t *testing.T) {
	sum := Summary{Rows: 3, Judged: 1, SiteProblems: []SiteProblem{{ID: "s", Detail: "d"}}}
	lines := strings.Split(strings.TrimSuffix(written(t, intake.NDJSON, found(), 0, &sum), "\n"), "\n")
	var last struct{ Summary *Summary }
	if err := json.Unmarshal([]byte(lines[len(lines)-1]), &last); err != nil || len(lines) != 4 || last.Summary == nil {
		t.Fatalf("got %d lines, %v, %s", len(lines), err, lines[len(lines)-1])
	}
	if diff := cmp.Diff(*last.Summary, sum); diff != "" {
		t.Error(diff)
	}
	for _, results := range [][]*Result{found(), nil} {
		var collection struct {
			Type     string
			Features []struct {
				Geometry   *struct{ Coordinates []float64 }
				Properties map[string]any
			}
			Summary Summary
		}
		if err := json.Unmarshal([]byte(written(t, intake.GeoJSON, results, 0, &sum)), &collection); err != nil {
			t.Fatal(err)
		}
		if len(collection.Features) != len(results) || collection.Summary.Rows != 3 {
			t.Errorf("got %d features and %+v", len(collection.Features), collection.Summary)
		}
		if len(results) == 0 {
			continue
		}
		first, second := collection.Features[0], collection.Features[1]
		if first.Properties["verdict"] != "clear" || first.Properties["mast_m"] != 0.0 || first.Geometry.Coordinates[0] != 7.25 || second.Geometry != nil {
			t.Errorf("got %+v and %+v", first, second)
		}
	}
}

// A list that is gone on with has the bytes of one written at once.
func TestWriterGoesOn(t *testing.T) {
	for _, format := range []intake.Format{intake.CSV, intake.NDJSON, intake.GeoJSON} {
		want := written(t, format, found(), 0, &Summary{Rows: 3})
		for n := range found() {
			got := written(t, format, found()[:n], 0, nil) + written(t, format, found()[n:], n, &Summary{Rows: 3})
			if got != want {
				t.Errorf("%s behind %d: got %s, want %s", format, n, got, want)
			}
		}
	}
}
