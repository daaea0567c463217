package api

import (
	"bytes"
	"context"
	"errors"
	"log/slog"
	"net/http"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/paulmach/orb"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

func TestRasterListSaysWhatTheCatalogueSays(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	h := service(t, func(d *Dependencies) {
		d.Lister = listed{
			{
				Name: "town/dtm.tif", Source: "town", Kind: profile.KindGround, Version: "1", Priority: 20, VerticalDatum: "evrf2007",
				ErrorM: 0.25, CorrelationM: 100, Attribution: "Town survey", Licence: "Free", Bound: orb.Bound{Min: orb.Point{7, 46}, Max: orb.Point{8, 47}},
				PixelM: 0.5, Width: 3000, Height: 2000, CRS: "a grid", EPSG: 2056, Format: "GTiff", DataType: "Float32",
			},
			{Name: "roofs.geojson", Source: "roofs", Kind: profile.KindBuildings, Version: "2", ErrorM: 1, CorrelationM: 20, ErrorAssumed: true, Format: "GeoJSON"},
			{Name: "bad.tif", Source: "town", Problem: "the file is empty"},
		}
	})
	body := ask(h, http.MethodGet, "/v1/rasters", "").Body
	conforms(t, contract, "RasterList", body.Bytes())
	got := decoded[RasterList](t, body.Bytes()).Rasters
	kinds := []RasterKind{"ground", "buildings"}
	want := []Raster{
		{
			Name: "town/dtm.tif", Usable: true, Source: new("town"), Kind: &kinds[0], Version: new("1"), Priority: new(int32(20)),
			VerticalDatum: new("evrf2007"), VerticalErrorM: new(0.25), CorrelationLengthM: new(100.0), ErrorAssumed: new(false),
			Attribution: new("Town survey"), Licence: new("Free"), ExtentDeg: &[]float64{7, 46, 8, 47}, PixelM: new(0.5),
			Width: new(int32(3000)), Height: new(int32(2000)), Crs: new("a grid"), Epsg: new(int32(2056)), Format: new("GTiff"),
			DataType: new("Float32"), PixelIsPoint: new(false),
		},
		{
			Name: "roofs.geojson", Usable: true, Source: new("roofs"), Kind: &kinds[1], Version: new("2"), Priority: new(int32(0)),
			VerticalErrorM: new(1.0), CorrelationLengthM: new(20.0), ErrorAssumed: new(true), Attribution: new(""), Licence: new(""),
			ExtentDeg: &[]float64{0, 0, 0, 0}, Format: new("GeoJSON"),
		},
		{Name: "bad.tif", Problem: new("the file is empty"), Source: new("town")},
	}
	for i := range got {
		got[i].Modified = nil
	}
	if diff := cmp.Diff(got, want); diff != "" {
		t.Error(diff)
	}
}

func TestReload(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	for name, c := range map[string]struct {
		changes assess.RasterChanges
		want    string
	}{
		"something": {
			assess.RasterChanges{Added: []string{"a.tif", "b.tif"}, Changed: []string{"c.tif"}},
			`{"added":["a.tif","b.tif"],"removed":[],"changed":["c.tif"],"usable":7}` + "\n",
		},
		"nothing": {assess.RasterChanges{}, `{"added":[],"removed":[],"changed":[],"usable":7}` + "\n"},
	} {
		t.Run(name, func(t *testing.T) {
			h := service(t, func(d *Dependencies) { d.Elevation = height{changes: c.changes} })
			got := ask(h, http.MethodPost, "/v1/rasters/reload", "")
			conforms(t, contract, "RasterChanges", got.Body.Bytes())
			if got.Code != http.StatusOK || got.Body.String() != c.want {
				t.Errorf("got %d %s, want %s", got.Code, got.Body, c.want)
			}
		})
	}
}

func TestReloadProblems(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	bad := errors.New("the rasters in use stay: sources.yaml line 3: kind is \"earth\"; it must be ground or surface")
	// A server of rasters that is too slow is no fault of this request's time.
	slow := errors.Join(errors.New("world: it did not answer"), context.DeadlineExceeded)
	var log bytes.Buffer
	for _, c := range []error{bad, slow} {
		h := service(t, func(d *Dependencies) { d.Elevation, d.Log = height{err: c}, slog.New(slog.NewTextHandler(&log, nil)) })
		got := ask(h, http.MethodPost, "/v1/rasters/reload", "")
		p := problemIn(t, got)
		if got.Code != 422 || p.Type != "/docs#problem-rasters-not-reloaded" || !strings.Contains(p.Detail, c.Error()) || !strings.Contains(p.Title, "those in use stay") {
			t.Errorf("got %d %s, want %q", got.Code, got.Body, c)
		}
		conforms(t, contract, "Problem", got.Body.Bytes())
	}
	if strings.Contains(log.String(), "loaded anew") {
		t.Errorf("the log says that they were: %s", &log)
	}
}

// A caller whose time is up did not break the catalogue.
func TestReloadIsGivenUp(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	h := handlers{Dependencies{Elevation: height{err: errors.New("reading stopped")}, Log: slog.New(slog.DiscardHandler)}}
	_, err := h.ReloadRasters(ctx, ReloadRastersRequestObject{})
	if p := problemOf(err); p.Type != "/docs#problem-timed-out" {
		t.Errorf("got %v, want timed-out", p)
	}
}
