package api

import (
	"context"
	"errors"
	"math"
	"net/http"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

func knownPlace() assess.Spot {
	ground := assess.Source{Name: "town/dtm.tif", Version: "3", Kind: profile.KindGround, VerticalDatum: "evrf2007", Attribution: "Town survey", Licence: "Free"}
	roofs := assess.Source{Name: "roofs.geojson", Version: "1", Kind: profile.KindBuildings}
	world := assess.Source{Name: "world.tif", Version: "2", Kind: profile.KindSurface, VerticalDatum: "egm96"}
	return assess.Spot{
		GroundM: 412.34567, CoverM: 9.5, VerticalDatum: "egm2008", Ground: &ground, Cover: &roofs,
		Heights:     []assess.SpotHeight{{Source: ground, HeightM: 412.1}, {Source: world, HeightM: math.NaN()}, {Source: roofs, HeightM: 9.5}},
		Unreachable: []profile.Unreachable{{Source: "far.tif", Reason: "it did not answer"}},
	}
}

func TestElevation(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	cases := map[string]struct {
		spot assess.Spot
		want Spot
	}{
		"known": {knownPlace(), Spot{
			Lon: 7.5, Lat: -46.25, GroundM: new(412.346), CoverM: new(9.5), VerticalDatum: new("egm2008"),
			Ground: &RasterVersion{Name: "town/dtm.tif", Version: "3"}, Cover: &RasterVersion{Name: "roofs.geojson", Version: "1"},
			Heights: []RasterHeight{
				{Name: "town/dtm.tif", Version: "3", Kind: "ground", HeightM: new(412.1), VerticalDatum: new("evrf2007"), Attribution: "Town survey", Licence: "Free"},
				{Name: "world.tif", Version: "2", Kind: "surface", VerticalDatum: new("egm96")},
				{Name: "roofs.geojson", Version: "1", Kind: "buildings", HeightM: new(9.5)},
			},
			Unreachable: []UnreachableSource{{Name: "far.tif", Reason: "it did not answer"}},
		}},
		"unknown": {assess.Spot{GroundM: math.NaN(), CoverM: math.NaN()}, Spot{
			Lon: 7.5, Lat: -46.25, Heights: []RasterHeight{}, Unreachable: []UnreachableSource{},
		}},
	}
	for name, c := range cases {
		t.Run(name, func(t *testing.T) {
			h := service(t, func(d *Dependencies) { d.Elevation = height{spot: c.spot} })
			got := ask(h, http.MethodGet, "/v1/elevation?lon=7.5&lat=-46.25", "")
			if got.Code != http.StatusOK {
				t.Fatalf("got %d %s", got.Code, got.Body)
			}
			conforms(t, contract, "Spot", got.Body.Bytes())
			if diff := cmp.Diff(decoded[Spot](t, got.Body.Bytes()), c.want); diff != "" {
				t.Error(diff)
			}
		})
	}
}

func TestElevationProblems(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	unreadable := height{err: &assess.UnreadableError{Raster: "N01E001.hgt", Err: errors.New("cut short")}}
	cases := []struct {
		query, kind, contains string
		status                int
		terrain               height
	}{
		{"", "bad-request", "The parameter lon is missing", 400, height{}},
		{"?lon=7.5", "bad-request", "The parameter lat is missing", 400, height{}},
		{"?lon=east&lat=46", "bad-request", "The parameter lon is missing, or does not read", 400, height{}},
		{"?lon=7.5&lat=", "bad-request", "lat is missing, or does not read", 400, height{}},
		{"?lon=180.001&lat=46", "bad-request", "lon is 180.001; it must be -180 to 180", 400, height{}},
		{"?lon=7.5&lat=-90.5", "bad-request", "lat is -90.5; it must be -90 to 90", 400, height{}},
		{"?lon=NaN&lat=46", "bad-request", "lon is NaN", 400, height{}},
		{"?lon=7&lat=NaN", "bad-request", "lat is NaN", 400, height{}},
		{"?lon=Inf&lat=46", "bad-request", "lon is +Inf", 400, height{}},
		{"?lon=7.5&lat=46", "raster-unreadable", "N01E001.hgt", 503, unreadable},
		{"?lon=7.5&lat=46", "timed-out", "given up", 503, height{err: context.DeadlineExceeded}},
		{"?lon=7.5&lat=46", "internal", "log", 500, height{err: errSecret}},
	}
	for _, c := range cases {
		t.Run(c.query+c.kind, func(t *testing.T) {
			h := service(t, func(d *Dependencies) { d.Elevation = c.terrain })
			got := ask(h, http.MethodGet, "/v1/elevation"+c.query, "")
			p := problemIn(t, got)
			if got.Code != c.status || p.Type != "/docs#problem-"+c.kind || !strings.Contains(p.Detail, c.contains) {
				t.Errorf("got %d %s, want %d and %q", got.Code, got.Body, c.status, c.contains)
			}
			conforms(t, contract, "Problem", got.Body.Bytes())
		})
	}
}
