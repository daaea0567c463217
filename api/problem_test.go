package api

import (
	"encoding/json"
	"errors"
	"fmt"
	"net/http"
	"net/http/httptest"
	"strings"
	"testing"

	"ridgehop/internal/assess"
	"ridgehop/internal/store"
)

func problemIn(t *testing.T, got *httptest.ResponseRecorder) Problem {
	t.Helper()
	if kind := got.Header().Get("Content-Type"); kind != "application/problem+json" {
		t.Errorf("content type: got %q, want application/problem+json", kind)
	}
	var p Problem
	if err := json.Unmarshal(got.Body.Bytes(), &p); err != nil {
		t.Fatalf("%v: %s", err, got.Body)
	}
	if int(p.Status) != got.Code || p.RequestId == nil || *p.RequestId == "" || p.Title == "" || p.Detail == "" {
		t.Errorf("problem document is incomplete: %s", got.Body)
	}
	return p
}

func TestBadRequests(t *testing.T) {
	h := service(t, nil)
	link := func(change string) string { return strings.Replace(goodLink, `"frequency_ghz":18.7`, change, 1) }
	cases := []struct {
		name, body string
		status     int
		pointer    string
		detail     string // part of the field's or the problem's detail
	}{
		{"empty body", " ", 400, "", "The body is empty"},
		{"not JSON", "{\n  \"a\": nonsense}", 400, "", "Line 2, character"},
		{"NaN is not JSON", link(`"frequency_ghz":NaN`), 400, "", "Line 2"},
		{"two documents", goodLink + goodLink, 400, "", "more follows"},
		{"a list", "[]", 422, "", "must be an object"},
		{"text for a number", link(`"frequency_ghz":"18.7"`), 422, "/frequency_ghz", "must be a number, without quotes or unit"},
		{"MHz as GHz", link(`"frequency_ghz":18700`), 422, "/frequency_ghz", "18700 MHz would be 18.7"},
		{"too low", link(`"frequency_ghz":0.05`), 422, "/frequency_ghz", "it must be 0.1 to 100"},
		{"wrong unit in the name", link(`"frequency_mhz":18700`), 422, "/frequency_mhz", "is not a field here; frequency_ghz is"},
		{"slip of the pen", link(`"frequency_ghz":18.7,"polarization":"vertical"`), 422, "/polarization", "polarisation is"},
		{"unknown field", link(`"frequency_ghz":18.7,"colour":1`), 422, "/colour", "is not a field here; there are a, b,"},
		{"unknown field of an end", strings.Replace(goodLink, `"lon":-20.5`, `"lon":-20.5,"altitude":3`, 1), 422, "/a/altitude", "is not a field here"},
		{"latitude", strings.Replace(goodLink, `"lat":-30.5`, `"lat":-95`, 1), 422, "/a/lat", "is -95; it must be -90 to 90"},
		{"no frequency", link(`"polarisation":"vertical"`), 422, "/frequency_ghz", "is missing"},
		{"unknown polarisation", link(`"frequency_ghz":1,"polarisation":"V"`), 422, "/polarisation", "vertical, horizontal, slant"},
		{"unknown criteria set", link(`"frequency_ghz":1,"criteria_set":"x"`), 422, "/criteria_set", "p530_temperate"},
		{"too many criteria", link(`"frequency_ghz":1,"criteria":[` + strings.Repeat(`{"k":1,"f1_fraction":1},`, 8) + `{"k":1,"f1_fraction":1}]`), 422, "/criteria", "1 to 8"},
		{"equal ends", strings.Replace(strings.Replace(goodLink, "-20.4", "-20.5", 1), "-30.4", "-30.5", 1), 422, "/b", "the same place"},
		{"antenna below ground", strings.Replace(goodLink, `"antenna_height_m":15`, `"antenna_height_m":-1`, 1), 422, "/a/antenna_height_m", "it must be 0 to 1000 m above ground"},
		{"below ground by sea level", strings.Replace(goodLink, `"antenna_height_m":15`, `"antenna_height_m":5,"height_above":"sea_level"`, 1), 422, "/a/antenna_height_m", "below the ground there"},
		{"too far", strings.Replace(goodLink, `"lon":-20.4`, `"lon":-10.4`, 1), 422, "/b", "paths up to 300 km"},
		{"no place and no profile", `{"a":{"antenna_height_m":1},"b":{"antenna_height_m":1},"frequency_ghz":1}`, 422, "/a/lon", "is missing"},
		{"profile that goes back", link(`"frequency_ghz":1,"profile":[{"distance_m":0,"ground_m":1},{"distance_m":5,"ground_m":1},{"distance_m":4,"ground_m":1}]`), 422, "/profile/2/distance_m", "more than the point before"},
		{"trees that shoot up", link(`"frequency_ghz":1,"cover_growth_m_per_year":6`), 422, "/cover_growth_m_per_year", "is 6; it must be 0 to 5"},
		{"growth for ever", link(`"frequency_ghz":1,"cover_growth_years":51`), 422, "/cover_growth_years", "is 51; it must be 0 to 50"},
		{"a guess for a profile", link(`"frequency_ghz":1,"profile_error_m":101`), 422, "/profile_error_m", "is 101; it must be 0 to 100"},
		{"control characters", strings.Replace(goodLink, "North", `No\u0007rth`, 1), 422, "/a/name", "control characters"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			got := ask(h, http.MethodPost, "/v1/assessments", c.body)
			if got.Code != c.status {
				t.Fatalf("status: got %d, want %d: %s", got.Code, c.status, got.Body)
			}
			p := problemIn(t, got)
			text, found := p.Detail, c.status == 400
			if p.Errors != nil {
				for _, f := range *p.Errors {
					if f.Pointer == c.pointer {
						text, found = f.Detail, true
					}
				}
			}
			if !found || !strings.Contains(text, c.detail) {
				t.Errorf("got %s, want %q at %q", got.Body, c.detail, c.pointer)
			}
		})
	}
}

func TestProblemsOutsideTheBody(t *testing.T) {
	h := service(t, nil)
	if got := ask(h, http.MethodGet, "/nowhere", ""); got.Code != 404 || problemIn(t, got).Type != "/docs#problem-not-found" {
		t.Errorf("unknown address: got %d %s", got.Code, got.Body)
	}
	if got := ask(h, http.MethodDelete, "/v1/assessments", ""); got.Code != 405 || got.Header().Get("Allow") == "" {
		t.Errorf("wrong method: got %d, Allow %q", got.Code, got.Header().Get("Allow"))
	}
	for _, path := range []string{"/v1/assessments/as_aaaaaaaaaaaaaaaaaaaaaaaaaa", "/v1/assessments/none", "/v1/assessments/none/profile.svg"} {
		if got := ask(h, http.MethodGet, path, ""); got.Code != 404 {
			t.Errorf("%s: got %d, want 404", path, got.Code)
		} else {
			problemIn(t, got)
		}
	}
	if got := ask(h, http.MethodPost, "/v1/assessments", goodLink, "Content-Type", "text/csv"); got.Code != 415 || !strings.Contains(got.Body.String(), "text/csv") {
		t.Errorf("wrong media type: got %d %s", got.Code, got.Body)
	}
	if got := ask(h, http.MethodPost, "/v1/assessments", strings.Repeat(" ", maxBodyBytes+1)); got.Code != 413 {
		t.Errorf("too large: got %d, want 413", got.Code)
	} else {
		problemIn(t, got)
	}
	endless := httptest.NewRequest(http.MethodPost, "/v1/assessments", slowBody{})
	endless.ContentLength = -1
	endless.Header.Set("Content-Type", "application/json")
	w := httptest.NewRecorder()
	h.ServeHTTP(w, endless)
	if w.Code != 413 {
		t.Errorf("endless body: got %d, want 413", w.Code)
	}
}

// Whatever fails inside, the caller learns what it is allowed to and the
// service stays up.
func TestFailuresInside(t *testing.T) {
	cases := []struct {
		name     string
		change   func(*Dependencies)
		status   int
		kind     string
		contains string
	}{
		{"raster", func(d *Dependencies) {
			d.Assessor = assess.NewService(hills{err: &assess.UnreadableError{Raster: "N01E001.hgt", Err: errors.New("cut short")}})
		}, 503, "raster-unreadable", "N01E001.hgt"},
		{"storage", func(d *Dependencies) { d.Keeper = &memory{err: fmt.Errorf("%w: disk full", store.ErrUnavailable)} }, 503, "storage-unavailable", "disk full"},
		{"anything else", func(d *Dependencies) { d.Assessor = failing{err: errSecret} }, 500, "internal", "log"},
		{"a panic", func(d *Dependencies) { d.Assessor = panicking{} }, 500, "internal", "log"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			h := service(t, c.change)
			got := ask(h, http.MethodPost, "/v1/assessments", goodLink)
			p := problemIn(t, got)
			if got.Code != c.status || p.Type != "/docs#problem-"+c.kind || !strings.Contains(p.Detail, c.contains) {
				t.Errorf("got %d %s", got.Code, got.Body)
			}
			if strings.Contains(got.Body.String(), "secret") || strings.Contains(got.Body.String(), "goroutine") {
				t.Errorf("internals are shown: %s", got.Body)
			}
			if alive := ask(h, http.MethodGet, "/livez", ""); alive.Code != http.StatusOK {
				t.Errorf("afterwards livez: got %d", alive.Code)
			}
		})
	}
}

func TestProblemKindsAreAllDescribed(t *testing.T) {
	page := ask(service(t, nil), http.MethodGet, "/docs", "").Body.String()
	for _, k := range problemKinds() {
		if !strings.Contains(page, `id="problem-`+k.name+`"`) || k.meaning == "" {
			t.Errorf("%s is not described", k.name)
		}
	}
}
