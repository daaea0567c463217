package api

import (
	"context"
	"encoding/json"
	"net/http"
	"net/http/httptest"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"ridgehop/internal/assess"
	"ridgehop/internal/store"
	"ridgehop/internal/telemetry"
	"ridgehop/profile"
)

func TestAnAssessmentCanBeMadeReadAndDrawn(t *testing.T) {
	h := service(t, nil)
	made := ask(h, http.MethodPost, "/v1/assessments", goodLink)
	if made.Code != http.StatusCreated {
		t.Fatalf("status: got %d, want 201: %s", made.Code, made.Body)
	}
	var got Assessment
	if err := json.Unmarshal(made.Body.Bytes(), &got); err != nil {
		t.Fatal(err)
	}
	if want := "/v1/assessments/" + got.Id; made.Header().Get("Location") != want || got.Links.Self != want {
		t.Errorf("location and self link: got %q and %q, want %q", made.Header().Get("Location"), got.Links.Self, want)
	}
	read := ask(h, http.MethodGet, got.Links.Self, "")
	if diff := cmp.Diff(read.Body.String(), made.Body.String()); diff != "" {
		t.Errorf("read is not what was made: %s", diff)
	}
	if again := ask(h, http.MethodPost, "/v1/assessments", goodLink); again.Body.String() != made.Body.String() || again.Code != http.StatusCreated {
		t.Errorf("the same question: got %d %s", again.Code, again.Body)
	}
	picture := ask(h, http.MethodGet, got.Links.Svg, "")
	if picture.Code != http.StatusOK || picture.Header().Get("Content-Type") != "image/svg+xml" {
		t.Errorf("drawing: got %d %q", picture.Code, picture.Header().Get("Content-Type"))
	}
	if !strings.Contains(picture.Body.String(), "North") {
		t.Error("the drawing does not name end A")
	}
	if csp := picture.Header().Get("Content-Security-Policy"); !strings.Contains(csp, "default-src 'none'") || !strings.Contains(csp, "sandbox") {
		t.Errorf("content security policy: got %q", csp)
	}
}

func TestSamplesAreAddedOnRequest(t *testing.T) {
	h := service(t, nil)
	var plain, full Assessment
	made := ask(h, http.MethodPost, "/v1/assessments", goodLink)
	if err := json.Unmarshal(made.Body.Bytes(), &plain); err != nil {
		t.Fatal(err)
	}
	read := ask(h, http.MethodGet, plain.Links.Self+"?include=samples", "")
	if err := json.Unmarshal(read.Body.Bytes(), &full); err != nil {
		t.Fatal(err)
	}
	if plain.Samples != nil || full.Samples == nil {
		t.Fatalf("samples: got %v without and %v with include", plain.Samples, full.Samples)
	}
	for name, n := range map[string]int{
		"distance_m": len(full.Samples.DistanceM), "ground_m": len(full.Samples.GroundM), "cover_m": len(full.Samples.CoverM),
		"bulge_m": len(full.Samples.BulgeM), "line_m": len(full.Samples.LineM), "f1_m": len(full.Samples.F1M),
	} {
		if n != int(full.Terrain.Samples) {
			t.Errorf("%s: got %d entries, want %d", name, n, full.Terrain.Samples)
		}
	}
	full.Samples = nil
	if diff := cmp.Diff(full, plain); diff != "" {
		t.Errorf("include=samples changes the rest: %s", diff)
	}
	if wrong := ask(h, http.MethodGet, plain.Links.Self+"?include=all", ""); wrong.Code != http.StatusBadRequest {
		t.Errorf("include=all: got %d, want 400", wrong.Code)
	}
}

func TestETagsAnswerNotModified(t *testing.T) {
	h := service(t, nil)
	made := ask(h, http.MethodPost, "/v1/assessments", goodLink)
	self := made.Header().Get("Location")
	tags := map[string]bool{}
	for _, path := range []string{self, self + "?include=samples", self + "/profile.svg"} {
		first := ask(h, http.MethodGet, path, "")
		tag := first.Header().Get("ETag")
		if tag == "" || tags[tag] {
			t.Errorf("%s: ETag %q is missing or shared with another representation", path, tag)
		}
		tags[tag] = true
		for _, known := range []string{tag, "W/" + tag, `"other", ` + tag, "*"} {
			if again := ask(h, http.MethodGet, path, "", "If-None-Match", known); again.Code != http.StatusNotModified || again.Body.Len() != 0 {
				t.Errorf("%s with %s: got %d and %d bytes, want 304 and none", path, known, again.Code, again.Body.Len())
			}
		}
		if again := ask(h, http.MethodGet, path, "", "If-None-Match", `"other"`); again.Code != http.StatusOK {
			t.Errorf("%s with another tag: got %d, want 200", path, again.Code)
		}
	}
}

func TestRasterListShowsTheUnusable(t *testing.T) {
	h := service(t, func(d *Dependencies) {
		d.Lister = listed{{Name: "bad.tif", Problem: "cannot be read: the file is empty (0 bytes)"}, {Name: "good.hgt", Kind: profile.KindUnstated, Version: "1", EPSG: 4326, HasNoData: true, NoData: -32768}}
	})
	var got RasterList
	if err := json.Unmarshal(ask(h, http.MethodGet, "/v1/rasters", "").Body.Bytes(), &got); err != nil {
		t.Fatal(err)
	}
	if len(got.Rasters) != 2 || got.Rasters[0].Usable || *got.Rasters[0].Problem == "" || !got.Rasters[1].Usable || *got.Rasters[1].Nodata != -32768 {
		t.Errorf("got %+v", got.Rasters)
	}
}

func TestHealth(t *testing.T) {
	health := telemetry.NewHealth(telemetry.Check{Name: "store", Run: func(context.Context) (string, error) { return "", store.ErrUnavailable }})
	h := service(t, func(d *Dependencies) { d.Health = health })
	if got := ask(h, http.MethodGet, "/livez", ""); got.Code != http.StatusOK {
		t.Errorf("livez: got %d, want 200", got.Code)
	}
	if got := ask(h, http.MethodGet, "/readyz", ""); got.Code != http.StatusServiceUnavailable || !strings.Contains(got.Body.String(), store.ErrUnavailable.Error()) {
		t.Errorf("readyz: got %d %s", got.Code, got.Body)
	}
	well := telemetry.NewHealth()
	h = service(t, func(d *Dependencies) { d.Health = well })
	if got := ask(h, http.MethodGet, "/readyz", ""); got.Code != http.StatusOK {
		t.Errorf("readyz: got %d, want 200", got.Code)
	}
	well.Drain()
	if got := ask(h, http.MethodGet, "/readyz", ""); got.Code != http.StatusServiceUnavailable {
		t.Errorf("readyz while shutting down: got %d, want 503", got.Code)
	}
}

func TestPagesNeedNoNetwork(t *testing.T) {
	h := service(t, nil)
	page := ask(h, http.MethodGet, "/docs", "").Body.String()
	for _, banned := range []string{"<script", "http-equiv", "src=", "url(", "@import", "https://"} {
		if strings.Contains(page, banned) {
			t.Errorf("the page holds %q", banned)
		}
	}
	for _, wanted := range []string{"/v1/assessments", "frequency_ghz", "schema-Clearance", "problem-invalid-request", "profile.svg", "code-line_cut"} {
		if !strings.Contains(page, wanted) {
			t.Errorf("the page lacks %q", wanted)
		}
	}
	if got := ask(h, http.MethodGet, "/openapi.yaml", "").Body.String(); got != string(contractYAML) {
		t.Error("/openapi.yaml is not the contract")
	}
	if got := ask(h, http.MethodGet, "/", ""); got.Header().Get("Location") != "/docs" {
		t.Errorf("/: got %q, want a redirect to /docs", got.Header().Get("Location"))
	}
	if got := ask(h, http.MethodGet, "/metrics", ""); !strings.Contains(got.Body.String(), "ridgehop_http_request_duration_seconds") {
		t.Error("/metrics lacks the request durations")
	}
}

func TestOverloadIsRefusedBeforeTheBodyIsRead(t *testing.T) {
	entered, leave := make(chan struct{}), make(chan struct{})
	h := service(t, func(d *Dependencies) { d.Assessor = waiting{entered: entered, leave: leave}; d.MostAtOnce = 1 })
	done := make(chan *httptest.ResponseRecorder)
	go func() { done <- ask(h, http.MethodPost, "/v1/assessments", goodLink) }()
	<-entered
	refused := ask(h, http.MethodPost, "/v1/assessments", goodLink)
	if refused.Code != http.StatusServiceUnavailable || refused.Header().Get("Retry-After") != "1" {
		t.Errorf("second request: got %d, Retry-After %q", refused.Code, refused.Header().Get("Retry-After"))
	}
	if got := ask(h, http.MethodGet, "/livez", ""); got.Code != http.StatusOK {
		t.Errorf("livez under load: got %d, want 200", got.Code)
	}
	close(leave)
	<-done
}

// waiting holds its request until it is told to leave.
type waiting struct {
	fresh
	entered, leave chan struct{}
}

func (w waiting) Assess(context.Context, assess.Request) (*assess.Assessment, error) {
	w.entered <- struct{}{}
	<-w.leave
	return nil, store.ErrNotFound
}
