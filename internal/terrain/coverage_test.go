package terrain

import (
	"context"
	"math"
	"testing"

	"github.com/paulmach/orb"
	"github.com/paulmach/orb/planar"

	"ridgehop/profile"
)

// Eight tiles around a place without one are an outline with a hole in it.
func TestCoverageHasHoles(t *testing.T) {
	whole := grid{columns: 30, rows: 30, left: 10, top: 50, pixel: 0.1, height: constant(1)}
	tiles := map[string]grid{}
	for k, name := range []string{"nw", "n", "ne", "w", "", "e", "sw", "s", "se"} {
		if name != "" {
			tiles[name+".asc"] = whole.cut(10*(k%3), 10*(k/3), 10, 10)
		}
	}
	got, err := loadedGrids(t, tiles).Coverage(context.Background())
	must(t, err)
	if len(got) != 1 || got[0].Rasters != 8 || len(got[0].Area) != 1 || len(got[0].Area[0]) != 2 {
		t.Fatalf("got %+v, want one outline with one hole", got)
	}
	area := got[0].Area[0]
	if b := area.Bound(); math.Abs(b.Min[0]-10)+math.Abs(b.Min[1]-47)+math.Abs(b.Max[0]-13)+math.Abs(b.Max[1]-50) > 1e-6 {
		t.Errorf("got %v, want longitudes 10 to 13 and latitudes 47 to 50", b)
	}
	if area[0].Orientation() != orb.CCW || area[1].Orientation() != orb.CW {
		t.Error("got rings that wind the wrong way (RFC 7946 section 3.1.6)")
	}
	for place, want := range map[orb.Point]bool{{10.5, 49.5}: true, {11.5, 48.5}: false, {12.5, 48.5}: true, {9.9, 48}: false} {
		if planar.MultiPolygonContains(got[0].Area, place) != want {
			t.Errorf("at %v: got %v, want %v", place, !want, want)
		}
	}
}

// Over the antimeridian the outline is cut, as RFC 7946 section 3.1.9 asks.
func TestCoverageOverTheAntimeridian(t *testing.T) {
	got, err := loadedGrids(t, map[string]grid{"a.asc": {columns: 40, rows: 10, left: 178, top: 10, pixel: 0.1, height: constant(1)}}).Coverage(context.Background())
	must(t, err)
	if len(got) != 1 || len(got[0].Area) != 2 {
		t.Fatalf("got %+v, want two parts", got)
	}
	for place, want := range map[orb.Point]bool{{179, 9.5}: true, {-179, 9.5}: true, {-177, 9.5}: false, {177, 9.5}: false} {
		if planar.MultiPolygonContains(got[0].Area, place) != want {
			t.Errorf("at %v: got %v, want %v", place, !want, want)
		}
	}
}

// Every raster says its own height, and what a path makes of them is said too.
func TestHeights(t *testing.T) {
	terrain := stated(t, layersOf(t), "sources:\n"+oneSource("earth", "ground", "datum: odn, files: [earth.asc]")+
		oneSource("top", "surface", "datum: odn, priority: 3, files: [top.asc]")+oneSource("woods", "canopy", "files: [woods.asc]"))
	at := metresFrom(t, terrain)
	place := at(-80, 2)
	got, err := terrain.Heights(context.Background(), place.Lon(), place.Lat())
	must(t, err)
	if got.GroundM != 100 || got.CoverM != 30 || got.Ground.Name != "earth/earth.asc" || got.Cover.Name != "top/top.asc" || got.VerticalDatum != "odn" {
		t.Errorf("got %+v", got)
	}
	heights := map[string]float64{}
	for _, h := range got.Heights {
		heights[h.Source.Name] = h.HeightM
	}
	if len(heights) != 3 || heights["earth/earth.asc"] != 100 || heights["top/top.asc"] != 130 || heights["woods/woods.asc"] != 15 {
		t.Errorf("got %v", heights)
	}
	void := at(80, 2)
	got, err = terrain.Heights(context.Background(), void.Lon(), void.Lat())
	must(t, err)
	if got.CoverM != 15 || got.Cover.Kind != profile.KindCanopy {
		t.Errorf("where the surface is void: got %+v", got)
	}
	far := at(5000, 0)
	got, err = terrain.Heights(context.Background(), far.Lon(), far.Lat())
	must(t, err)
	if !math.IsNaN(got.GroundM) || len(got.Heights) != 0 || got.Ground != nil {
		t.Errorf("outside: got %+v", got)
	}
}
