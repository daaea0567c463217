package api

import (
	"context"
	"fmt"
	"io"
	"log/slog"
	"net/http"
	"net/http/httptest"
	"strings"
	"sync"
	"testing"

	"github.com/google/go-cmp/cmp"

	"ridgehop/internal/screening/sites"
)

const rows = "id,name,lon,lat,antenna_height_m,azimuth_deg,width_deg,colour\n" +
	"a,\"Mill, east\",1,2,30,0,90,red\nb,=1+1,1,95,30,,,\na,,1,2,30,90,90,\nc,=1+1,1,2,30,,,\n"

func TestSitesAreImported(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	h := service(t, nil)
	got := ask(h, http.MethodPost, "/v1/sites/import.csv", rows, "Content-Type", "text/csv; charset=utf-8")
	conforms(t, contract, "SiteImport", got.Body.Bytes())
	want := SiteImport{
		Created:  2,
		Problems: []RowNote{{Line: 3, Id: new("b"), Field: new("lat"), Detail: "is 95; it must be -90 to 90 degrees north; longitude and latitude may be swapped"}},
		Warnings: []RowNote{{Line: 1, Detail: "names columns that are not read: colour"}},
	}
	if diff := cmp.Diff(decoded[SiteImport](t, got.Body.Bytes()), want); diff != "" || got.Code != http.StatusOK {
		t.Errorf("got %d: %s", got.Code, diff)
	}
	const one = `{"type":"FeatureCollection","features":[{"type":"Feature","geometry":{"type":"Point","coordinates":[1,2]},"properties":{"id":"c","name":"=1+1","height":%d}}]}`
	for _, c := range []struct {
		query  string
		height int
		want   SiteImport
	}{
		{"", 31, SiteImport{Problems: []RowNote{{Line: 1, Id: new("c"), Field: new("id"), Detail: "is taken by a site that is there already; with existing=replace this one takes its place"}}, Warnings: []RowNote{}}},
		{"?existing=replace", 30, SiteImport{Unchanged: 1, Problems: []RowNote{}, Warnings: []RowNote{}}},
		{"?existing=replace", 31, SiteImport{Replaced: 1, Problems: []RowNote{}, Warnings: []RowNote{}}},
	} {
		got := ask(h, http.MethodPost, "/v1/sites/import.geojson"+c.query, fmt.Sprintf(one, c.height), "Content-Type", "application/geo+json")
		conforms(t, contract, "SiteImport", got.Body.Bytes())
		if diff := cmp.Diff(decoded[SiteImport](t, got.Body.Bytes()), c.want); diff != "" {
			t.Errorf("%s: %s", c.query, diff)
		}
	}
}

// What was exported is imported into another service as it was.
func TestSitesAreExported(t *testing.T) {
	from := service(t, nil)
	ask(from, http.MethodPost, "/v1/sites/import.csv", rows, "Content-Type", "text/csv")
	ask(from, http.MethodPost, "/v1/sites", mill)
	withoutTimes := func(h http.Handler) []Site {
		list := decoded[SiteList](t, ask(h, http.MethodGet, "/v1/sites", "").Body.Bytes()).Sites
		for i := range list {
			list[i].CreatedAt, list[i].ChangedAt = list[0].CreatedAt, list[0].CreatedAt
		}
		return list
	}
	for ending, kind := range map[string]string{"csv": "text/csv", "geojson": "application/geo+json"} {
		out := ask(from, http.MethodGet, "/v1/sites/export."+ending, "")
		if given := out.Header().Get("Content-Type"); out.Code != http.StatusOK || !strings.HasPrefix(given, kind) {
			t.Errorf("%s: got %d %q", ending, out.Code, given)
		}
		if got := out.Header().Get("Content-Disposition"); got != `attachment; filename="sites.`+ending+`"` {
			t.Errorf("%s: got disposition %q", ending, got)
		}
		if ending == "csv" && (strings.Contains(out.Body.String(), ",=1+1") || !strings.Contains(out.Body.String(), ",'=1+1,")) {
			t.Errorf("a formula is written as one: %s", out.Body)
		}
		to := service(t, nil)
		in := ask(to, http.MethodPost, "/v1/sites/import."+ending, out.Body.String(), "Content-Type", kind)
		if report := decoded[SiteImport](t, in.Body.Bytes()); report.Created != 3 || len(report.Problems)+len(report.Warnings) != 0 {
			t.Errorf("%s: got %s", ending, in.Body)
		}
		got, want := withoutTimes(to), withoutTimes(from)
		for i := range got {
			got[i].CreatedAt, got[i].ChangedAt = want[0].CreatedAt, want[0].CreatedAt
		}
		if diff := cmp.Diff(got, want); diff != "" {
			t.Errorf("%s: %s", ending, diff)
		}
	}
	empty := ask(service(t, nil), http.MethodGet, "/v1/sites/export.geojson", "")
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	conforms(t, contract, "SiteCollection", empty.Body.Bytes())
}

func TestListsThatAreRefused(t *testing.T) {
	h := service(t, nil)
	const header = "id,lon,lat,height\n"
	for name, c := range map[string]struct {
		path, kind, body string
		status           int
		problem, detail  string
	}{
		"JSON as CSV":       {"import.csv", "application/json", "{}", 415, "unsupported-media-type", "send the body as text/csv"},
		"CSV as GeoJSON":    {"import.geojson", "text/csv", header, 415, "unsupported-media-type", "send the body as application/geo+json"},
		"no type":           {"import.csv", "", header, 415, "unsupported-media-type", "text/csv"},
		"empty":             {"import.csv", "text/csv", "", 422, "unreadable-list", "the list is empty"},
		"no columns":        {"import.csv", "text/csv", "a,b\n1,2\n", 422, "unreadable-list", "lacks the columns id"},
		"UTF-16":            {"import.csv", "text/csv", "\xff\xfei\x00", 422, "unreadable-list", "UTF-16"},
		"cut off":           {"import.geojson", "application/geo+json", `{"type":"FeatureCollection","features":[`, 422, "unreadable-list", "cut off"},
		"not JSON":          {"import.geojson", "application/geo+json", `id,lon`, 422, "unreadable-list", "belongs"},
		"empty GeoJSON":     {"import.geojson", "application/geo+json", ``, 422, "unreadable-list", "cut off"},
		"unknown existing":  {"import.csv?existing=keep", "text/csv", header, 400, "bad-request", "refuse or replace"},
		"too many rows":     {"import.csv", "text/csv", header + strings.Repeat("a,1,1,1\n", sites.MaxImportRows+1), 422, "unreadable-list", "more than 200000 rows"},
		"too large":         {"import.csv", "text/csv", strings.Repeat(" ", maxListBytes+1), 413, "too-large", "16777216 bytes"},
		"too large GeoJSON": {"import.geojson", "application/geo+json", strings.Repeat(" ", maxListBytes+1), 413, "too-large", "16777216 bytes"},
	} {
		t.Run(name, func(t *testing.T) {
			got := ask(h, http.MethodPost, "/v1/sites/"+c.path, c.body, "Content-Type", c.kind)
			p := problemIn(t, got)
			if got.Code != c.status || p.Type != "/docs#problem-"+c.problem || !strings.Contains(p.Detail, c.detail) {
				t.Errorf("got %d %s, want %d %s %q", got.Code, got.Body, c.status, c.problem, c.detail)
			}
		})
	}
	packed := ask(h, http.MethodPost, "/v1/sites/import.csv", header, "Content-Type", "text/csv", "Content-Encoding", "gzip")
	if packed.Code != 415 {
		t.Errorf("packed: got %d, want 415", packed.Code)
	}
	for name, body := range map[string]struct {
		io.Reader
		status int
	}{"endless": {slowBody{}, 413}, "broken off": {io.MultiReader(strings.NewReader(header), brokenBody{}), 400}} {
		r := httptest.NewRequest(http.MethodPost, "/v1/sites/import.csv", body.Reader)
		r.ContentLength = -1
		r.Header.Set("Content-Type", "text/csv")
		w := httptest.NewRecorder()
		h.ServeHTTP(w, r)
		if problemIn(t, w); w.Code != body.status {
			t.Errorf("%s: got %d %s, want %d", name, w.Code, w.Body, body.status)
		}
	}
}

// brokenBody is a caller who hangs up.
type brokenBody struct{}

func (brokenBody) Read([]byte) (int, error) { return 0, io.ErrUnexpectedEOF }

// A list may be larger than any other body.
func TestAListLargerThanOtherBodies(t *testing.T) {
	h := service(t, nil)
	body := "id,lon,lat,height\n" + "a,1,1,1\n" + strings.Repeat(" \n", maxBodyBytes/2+1)
	if got := ask(h, http.MethodPost, "/v1/sites/import.csv", body, "Content-Type", "text/csv"); got.Code != http.StatusOK || decoded[SiteImport](t, got.Body.Bytes()).Created != 1 {
		t.Errorf("got %d %s", got.Code, got.Body)
	}
	if got := ask(h, http.MethodPost, "/v1/sites", body); got.Code != http.StatusRequestEntityTooLarge {
		t.Errorf("as a site: got %d, want 413", got.Code)
	}
}

// While as many lists as there may be are read, the next one's body waits.
func TestListsWaitForTheirTurn(t *testing.T) {
	h := service(t, nil)
	ctx, cancel := context.WithCancel(t.Context())
	var wg sync.WaitGroup
	var ends []*io.PipeWriter
	post := func(ctx context.Context, body io.Reader) *httptest.ResponseRecorder {
		r := httptest.NewRequestWithContext(ctx, http.MethodPost, "/v1/sites/import.csv", body)
		r.Header.Set("Content-Type", "text/csv")
		w := httptest.NewRecorder()
		h.ServeHTTP(w, r)
		return w
	}
	for i := range importsAtOnce {
		body, end := io.Pipe()
		ends = append(ends, end)
		wg.Go(func() {
			if got := post(t.Context(), body); got.Code != http.StatusOK {
				t.Errorf("list %d: got %d %s", i, got.Code, got.Body)
			}
		})
		_, _ = io.WriteString(end, "id,lon,lat,height\n") // returns once it is being read
	}
	cancel()
	if got := post(ctx, slowBody{}); got.Code != 503 || problemIn(t, got).Type != "/docs#problem-timed-out" {
		t.Errorf("one more: got %d %s, want it given up", got.Code, got.Body)
	}
	for _, end := range ends {
		_ = end.Close()
	}
	wg.Wait()
	if got := post(t.Context(), strings.NewReader("id,lon,lat,height\n")); got.Code != http.StatusOK {
		t.Errorf("afterwards: got %d %s", got.Code, got.Body)
	}
}

func TestManyProblemsAreCounted(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	var list strings.Builder
	list.WriteString("id,lon,lat,height\n")
	for i := range maxRowNotes + 7 {
		fmt.Fprintf(&list, "s%d,1,1,x\n", i)
	}
	list.WriteString("good,1,1,1\n")
	got := ask(service(t, nil), http.MethodPost, "/v1/sites/import.csv", list.String(), "Content-Type", "text/csv")
	conforms(t, contract, "SiteImport", got.Body.Bytes())
	report := decoded[SiteImport](t, got.Body.Bytes())
	if report.Created != 1 || len(report.Problems) != maxRowNotes || orZero(report.MoreProblems) != 7 || report.MoreWarnings != nil {
		t.Errorf("got %d created, %d problems and %d more", report.Created, len(report.Problems), orZero(report.MoreProblems))
	}
}

// A list that breaks off on the way must not look like a whole one.
func TestABrokenExportDoesNotLookWhole(t *testing.T) {
	shelf := &siteShelf{kept: map[string][]byte{}}
	var log strings.Builder
	h := service(t, func(d *Dependencies) {
		d.Sites, d.Log = sites.NewRegister(shelf), slog.New(slog.NewTextHandler(&log, nil))
	})
	var list strings.Builder
	list.WriteString("id,lon,lat,height\n")
	for i := range 1200 {
		fmt.Fprintf(&list, "s%04d,1,1,1\n", i)
	}
	ask(h, http.MethodPost, "/v1/sites/import.csv", list.String(), "Content-Type", "text/csv")
	shelf.broken = "s0499" // the last of the first five hundred
	server := httptest.NewServer(h)
	defer server.Close()
	for _, ending := range []string{"csv", "geojson"} {
		response, err := http.Get(server.URL + "/v1/sites/export." + ending)
		if err != nil {
			t.Fatal(err)
		}
		body, err := io.ReadAll(response.Body)
		_ = response.Body.Close()
		if err == nil || len(body) == 0 || strings.Contains(string(body), "secret") {
			t.Errorf("%s: got %d bytes and %v, want some and an error", ending, len(body), err)
		}
	}
	server.Close()
	if !strings.Contains(log.String(), "export broken off") {
		t.Errorf("the log does not say so: %s", &log)
	}
}
