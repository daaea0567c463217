package api

import (
	"net/http"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/paulmach/orb"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

// twiceAreaDeg2 is twice the signed area of a ring (the shoelace formula),
// positive counter-clockwise.
func twiceAreaDeg2(ring [][]float64) float64 {
	sum := 0.0
	for i := range len(ring) - 1 {
		sum += ring[i][0]*ring[i+1][1] - ring[i+1][0]*ring[i][1]
	}
	return sum
}

func TestCoverageIsGeoJSON(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	square := func(west, south, side float64) orb.Ring {
		return orb.Ring{{west, south}, {west + side, south}, {west + side, south + side}, {west, south + side}, {west, south}}
	}
	clockwise := square(20, -5, 1)
	clockwise.Reverse()
	given := []assess.Coverage{
		{Kind: profile.KindUnstated, Rasters: 2, Area: orb.MultiPolygon{{square(7, 46, 3), square(8, 47, 1)}, {clockwise}}},
		{Name: "world", Kind: profile.KindSurface, OnDemand: true, Area: orb.MultiPolygon{{square(-180, -80.123456789, 10)}}, Attribution: "Somebody", Licence: "Free"},
	}
	h := service(t, func(d *Dependencies) { d.Elevation = height{coverage: given} })
	got := ask(h, http.MethodGet, "/v1/rasters/coverage.geojson", "")
	if kind := got.Header().Get("Content-Type"); got.Code != http.StatusOK || kind != "application/geo+json" {
		t.Fatalf("got %d %q %s", got.Code, kind, got.Body)
	}
	conforms(t, contract, "CoverageCollection", got.Body.Bytes())
	features := decoded[CoverageCollection](t, got.Body.Bytes()).Features
	if len(features) != 2 {
		t.Fatalf("got %d features, want one a source", len(features))
	}
	want := CoverageProperties{Source: "world", Kind: "surface", OnDemand: true, Attribution: "Somebody", Licence: "Free"}
	if diff := cmp.Diff(features[1].Properties, want); diff != "" {
		t.Error(diff)
	}
	for _, f := range features {
		for _, polygon := range f.Geometry.Coordinates {
			for k, ring := range polygon {
				if turn := twiceAreaDeg2(ring); turn > 0 != (k == 0) {
					t.Errorf("ring %d of %q turns the wrong way: %v", k, f.Properties.Source, ring)
				}
				if diff := cmp.Diff(ring[0], ring[len(ring)-1]); diff != "" || len(ring) < 4 {
					t.Errorf("ring %d of %q is not closed: %v", k, f.Properties.Source, ring)
				}
			}
		}
	}
	first := features[0].Geometry.Coordinates
	if len(first) != 2 || len(first[0]) != 2 || len(first[1]) != 1 {
		t.Errorf("polygons and holes: got %v", first)
	}
	if got, want := features[1].Geometry.Coordinates[0][0][0], []float64{-180, -80.1234568}; !cmp.Equal(got, want) {
		t.Errorf("decimals: got %v, want %v", got, want)
	}
	if clockwise[1] != (orb.Point{20, -4}) {
		t.Error("the terrain's own ring was turned")
	}
	if again := ask(h, http.MethodGet, "/v1/rasters/coverage.geojson", "", "If-None-Match", got.Header().Get("ETag")); again.Code != http.StatusNotModified {
		t.Errorf("with its tag: got %d, want 304", again.Code)
	}
}

func TestCoverageOfNothing(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	got := ask(service(t, nil), http.MethodGet, "/v1/rasters/coverage.geojson", "")
	conforms(t, contract, "CoverageCollection", got.Body.Bytes())
	if want := `{"type":"FeatureCollection","features":[]}` + "\n"; got.Body.String() != want {
		t.Errorf("got %s, want %s", got.Body, want)
	}
	failed := ask(service(t, func(d *Dependencies) { d.Elevation = height{err: errSecret} }), http.MethodGet, "/v1/rasters/coverage.geojson", "")
	if failed.Code != http.StatusInternalServerError || problemIn(t, failed).Type != "/docs#problem-internal" {
		t.Errorf("got %d %s", failed.Code, failed.Body)
	}
}
