package api

import (
	"bytes"
	"encoding/json"
	"net/http"
	"testing"

	"github.com/getkin/kin-openapi/openapi3"
	"pgregory.net/rapid"

	"ridgehop/internal/assess"
)

// conforms holds a JSON answer against a schema of the contract, which for
// answers allows null and needs the 2020-12 validator.
func conforms(t rapid.TB, contract *Contract, schema string, body []byte) {
	t.Helper()
	var value any
	if err := json.Unmarshal(body, &value); err != nil {
		t.Fatalf("%v: %s", err, body)
	}
	if err := contract.schema(schema).VisitJSON(value, openapi3.EnableJSONSchema2020()); err != nil {
		t.Fatalf("the answer is not a %s: %v", schema, err)
	}
}

func TestAnswersConformToTheContract(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	for name, terrain := range map[string]hills{"known": {}, "void": {void: true}} {
		t.Run(name, func(t *testing.T) {
			h := service(t, func(d *Dependencies) { d.Assessor = assess.NewService(terrain) })
			made := ask(h, http.MethodPost, "/v1/assessments", goodLink)
			conforms(t, contract, "Assessment", made.Body.Bytes())
			full := ask(h, http.MethodGet, made.Header().Get("Location")+"?include=samples", "")
			conforms(t, contract, "Assessment", full.Body.Bytes())
		})
	}
	h := service(t, func(d *Dependencies) {
		d.Lister = listed{{Name: "bad.tif", Problem: "x"}, {Name: "good.hgt", Kind: "unstated"}}
	})
	conforms(t, contract, "RasterList", ask(h, http.MethodGet, "/v1/rasters", "").Body.Bytes())
	conforms(t, contract, "Health", ask(h, http.MethodGet, "/readyz", "").Body.Bytes())
	conforms(t, contract, "Problem", ask(h, http.MethodPost, "/v1/assessments", "{}").Body.Bytes())
}

// Whatever a caller sends, the answer is a document of the contract and never
// a failure of the server; what the contract allows is answered.
func TestAnyRequestIsAnswered(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	h := service(t, nil)
	rapid.Check(t, func(t *rapid.T) {
		body, err := json.Marshal(anyRequest(t))
		if err != nil {
			t.Fatal(err)
		}
		got := ask(h, http.MethodPost, "/v1/assessments", string(body))
		switch {
		case got.Code == http.StatusCreated:
			conforms(t, contract, "Assessment", got.Body.Bytes())
		case got.Code >= 400 && got.Code < 500:
			conforms(t, contract, "Problem", got.Body.Bytes())
		default:
			t.Fatalf("%s: got %d %s", body, got.Code, got.Body)
		}
	})
}

// anyRequest draws requests of which some are right and some are wrong in one
// or several ways.
func anyRequest(t *rapid.T) map[string]any {
	number := rapid.OneOf(
		rapid.Float64Range(-200, 200).AsAny(), rapid.Float64Range(-1e9, 1e9).AsAny(), rapid.Just[any](nil), rapid.Just[any]("7"), rapid.Just[any](true),
	)
	around := func(label string, low, high float64) any {
		if rapid.IntRange(0, 9).Draw(t, label+" wild") == 0 {
			return number.Draw(t, label)
		}
		return rapid.Float64Range(low, high).Draw(t, label)
	}
	end := func(label string) map[string]any {
		return map[string]any{
			"name": rapid.String().Draw(t, label+" name"), "lon": around(label+" lon", -20.6, -20.4), "lat": around(label+" lat", -30.6, -30.4),
			"antenna_height_m": around(label+" height", 0, 100),
			"height_above":     rapid.SampledFrom([]any{"ground", "roof", "sea_level", "moon", 3}).Draw(t, label+" above"),
		}
	}
	return map[string]any{
		"a": end("a"), "b": end("b"), "frequency_ghz": around("frequency", 0.1, 100),
		"polarisation":            rapid.SampledFrom([]string{"vertical", "horizontal", "slant", ""}).Draw(t, "polarisation"),
		"criteria":                []any{map[string]any{"k": around("k", 0.1, 10), "f1_fraction": around("fraction", 0, 2)}},
		"cover_height_m":          around("cover", 0, 60),
		"cover_growth_m_per_year": around("growth", 0, 1), "cover_growth_years": around("years", 0, 30), "profile_error_m": around("error", 0, 5),
	}
}

func FuzzDecodeAssessmentRequest(f *testing.F) {
	f.Add([]byte(goodLink))
	f.Add([]byte(`{"a":{"lon":1e999}}`))
	f.Add([]byte(`{"profile":[{"distance_m":0}],"criteria":[]}`))
	f.Add([]byte(`[null]`))
	contract, err := NewContract()
	if err != nil {
		f.Fatal(err)
	}
	f.Fuzz(func(t *testing.T, body []byte) {
		request, err := contract.DecodeAssessmentRequest(body)
		if err != nil {
			if p := problemOf(err); p.Status != 400 && p.Status != 422 {
				t.Errorf("got status %d for %q", p.Status, body)
			}
			return
		}
		again, err := json.Marshal(request)
		if err != nil {
			t.Fatal(err)
		}
		back, err := contract.DecodeAssessmentRequest(again)
		if err != nil {
			t.Fatalf("what was read cannot be read again: %v", err)
		}
		if twice, _ := json.Marshal(back); !bytes.Equal(twice, again) {
			t.Errorf("got %s, want %s", twice, again)
		}
	})
}

// The page explains each field: in its own words, or by the document that it
// leads to.
func TestEveryFieldIsExplained(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	for _, s := range contract.view().Schemas {
		if s.Description == "" {
			t.Errorf("%s has no description", s.Name)
		}
		for _, f := range s.Fields {
			if f.Description == "" && f.Ref == "" {
				t.Errorf("%s.%s has no description", s.Name, f.Name)
			}
		}
	}
}
