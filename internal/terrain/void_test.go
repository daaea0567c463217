package terrain

import (
	"context"
	"errors"
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/paulmach/orb"

	"ridgehop/profile"
)

// square is a grid in UTM zone 30N around its middle on the central meridian.
// The place of a point some metres east and north of the middle is metresFrom.
func square(side int, pixel float64, height func(column, row int) float64) grid {
	half := float64(side) / 2 * pixel
	return grid{columns: side, rows: side, left: 500_000 - half, top: 6_200_000 + half, pixel: pixel, system: "32630", height: height}
}

// metresFrom finds the place of a point of the grid of square.
func metresFrom(t testing.TB, terrain *Terrain) func(east, north float64) orb.Point {
	t.Helper()
	projector, err := terrain.gdal.NewProjector(described(t, "32630"))
	must(t, err)
	t.Cleanup(projector.Close)
	return func(east, north float64) orb.Point {
		x, y := []float64{500_000 + east}, []float64{6_200_000 + north}
		must(t, projector.Unproject(x, y))
		return orb.Point{x[0], y[0]}
	}
}

// A void is filled by the next raster, or stays one.
func TestVoids(t *testing.T) {
	hole := func(h float64, from, to int) func(int, int) float64 {
		return func(column, row int) float64 {
			if column >= from && column < to && row >= from && row < to {
				return math.NaN()
			}
			return h
		}
	}
	// Fine: 40 x 40 of 10 m, void in columns and rows 10 to 29: 100 m around
	// the middle. Coarse: 20 x 20 of 30 m, void in 8 to 11: 60 m around it.
	fine, coarse := square(40, 10, hole(100, 10, 30)), square(20, 30, hole(300, 8, 12))
	terrain := loadedGrids(t, map[string]grid{"fine.asc": fine, "coarse.asc": coarse})
	at := metresFrom(t, terrain)
	nan := math.NaN()
	cases := []struct {
		name        string
		east, north float64
		want        float64
	}{
		{"the finer raster", 150, 0, 100},
		{"its void, filled by the coarser", 90, 0, 300},
		{"where a void pixel of the finer has a part", 104, 0, 300},
		{"just where none has", 106, 0, 100},
		{"the void of both", 30, -20, nan},
		{"where a void pixel of the coarser has a part", 70, 0, nan},
		{"just where none of the coarser has", 76, 0, 300},
		{"beside the finer", 250, 0, 300},
		{"beside both", 400, 0, nan},
	}
	for _, c := range cases {
		if got := spot(t, terrain, at(c.east, c.north)); !near(got, c.want, 0) {
			t.Errorf("%s: got %g, want %g", c.name, got, c.want)
		}
	}
	t.Run("along a path", func(t *testing.T) {
		p := sampled(t, terrain, pathOf(t, at(-400, 0), at(400, 0)), profile.Sampling{SpacingM: 1})
		checkSources(t, p)
		seen := map[float64]bool{}
		for _, h := range p.GroundM {
			if !math.IsNaN(h) {
				seen[math.Round(h*1e6)/1e6] = true
			}
		}
		if diff := cmp.Diff(seen, map[float64]bool{100: true, 300: true}); diff != "" {
			t.Errorf("heights: got -, want +\n%s", diff)
		}
		if p.Voids() == 0 || !p.AOutside || !p.BOutside {
			t.Errorf("got %d voids, ends outside %t, %t; want some, true, true", p.Voids(), p.AOutside, p.BOutside)
		}
	})
}

// Where the tile that comes first has a void on the shared column, the other
// tile's pixel counts.
func TestVoidOnASharedColumn(t *testing.T) {
	whole := square(20, 10, rough)
	left, right := whole.cut(0, 0, 11, 20), whole.cut(10, 0, 10, 20)
	intact := left.height
	left.height = func(column, row int) float64 {
		if column == 10 {
			return math.NaN()
		}
		return intact(column, row)
	}
	uncut := loadedGrids(t, map[string]grid{"whole.asc": whole})
	for name, grids := range map[string]map[string]grid{
		"the void first":  {"a.asc": left, "b.asc": right},
		"the void second": {"b.asc": left, "a.asc": right},
	} {
		terrain := loadedGrids(t, grids)
		at := metresFrom(t, terrain)
		for _, ends := range [][2]orb.Point{{at(-80, 11), at(80, -33)}, {at(80, -33), at(-80, 11)}, {at(5, -80), at(5, 80)}} {
			path := pathOf(t, ends[0], ends[1])
			got, want := sampled(t, terrain, path, profile.Sampling{SpacingM: 1}), sampled(t, uncut, path, profile.Sampling{SpacingM: 1})
			for i := range want.GroundM {
				if !near(got.GroundM[i], want.GroundM[i], 1e-6) {
					t.Fatalf("%s: sample %d: got %g, want %g", name, i, got.GroundM[i], want.GroundM[i])
				}
			}
		}
	}
}

func TestFinestFirst(t *testing.T) {
	// By name the coarsest comes first; by size of pixel the last.
	terrain := loadedGrids(t, map[string]grid{
		"a.asc": square(10, 100, constant(1)), "b.asc": square(20, 20, constant(2)), "c.asc": square(20, 5, constant(3)),
	})
	at := metresFrom(t, terrain)
	for east, want := range map[float64]float64{0: 3, 40: 3, 100: 2, 190: 2, 300: 1, -480: 1} {
		if got := spot(t, terrain, at(east, 0)); got != want {
			t.Errorf("%g m east: got %g, want %g", east, got, want)
		}
	}
	p := sampled(t, terrain, pathOf(t, at(-450, 10), at(450, -10)), profile.Sampling{})
	var names []string
	for _, s := range p.Sources {
		names = append(names, s.Name)
	}
	if diff := cmp.Diff(names, []string{"c.asc", "b.asc", "a.asc"}); diff != "" {
		t.Errorf("sources: got -, want +\n%s", diff)
	}
	checkSources(t, p)
	if p.PixelM != 5 {
		t.Errorf("finest pixel: got %g, want 5", p.PixelM)
	}
	if p := sampled(t, terrain, pathOf(t, at(150, 10), at(190, -10)), profile.Sampling{}); p.PixelM != 20 {
		t.Errorf("finest pixel beside the finest raster: got %g, want 20", p.PixelM)
	}
}

// Of two rasters alike the name decides, whichever was found first.
func TestEqualPixelsGoByName(t *testing.T) {
	a, b := t.TempDir(), t.TempDir()
	square(10, 10, constant(1)).write(t, a, "z.asc")
	square(10, 10, constant(2)).write(t, b, "y.asc")
	for _, folders := range [][]string{{a, b}, {b, a}} {
		terrain := loaded(t, folders...)
		if got := spot(t, terrain, metresFrom(t, terrain)(3, 3)); got != 2 {
			t.Errorf("got %g, want 2 of y.asc", got)
		}
	}
}

func TestOnlyNamedRasters(t *testing.T) {
	terrain := loadedGrids(t, map[string]grid{"fine.asc": square(20, 5, constant(3)), "coarse.asc": square(10, 100, constant(1))})
	at := metresFrom(t, terrain)
	cases := []struct {
		name string
		only []string
		want [2]float64 // in the middle, and beside the finer raster
	}{
		{"all", nil, [2]float64{3, 1}},
		{"both", []string{"coarse.asc", "fine.asc"}, [2]float64{3, 1}},
		{"one twice", []string{"fine.asc", "fine.asc"}, [2]float64{3, math.NaN()}},
		{"the finer", []string{"fine.asc"}, [2]float64{3, math.NaN()}},
		{"the coarser", []string{"coarse.asc"}, [2]float64{1, 1}},
	}
	for _, c := range cases {
		got := [2]float64{spot(t, terrain, at(0, 0), c.only...), spot(t, terrain, at(200, 0), c.only...)}
		if !near(got[0], c.want[0], 0) || !near(got[1], c.want[1], 0) {
			t.Errorf("%s: got %v, want %v", c.name, got, c.want)
		}
	}
	for _, only := range [][]string{{"other.asc"}, {"fine.asc", "FINE.asc"}, {""}} {
		err := terrain.Sample(context.Background(), pathOf(t, at(0, 0), at(10, 0)), profile.Sampling{Rasters: only}, &profile.Profile{})
		if !errors.Is(err, profile.ErrUnknownRaster) || !strings.Contains(err.Error(), `"`+only[len(only)-1]+`"`) {
			t.Errorf("%q: got %v, want ErrUnknownRaster with its name", only, err)
		}
	}
}

// Tiles that do not lie on one grid, or overlap by more than a column, are not
// laid together: each keeps its own pixels to its edge, and the first by name
// decides where both have one.
func TestTilesOffTheGrid(t *testing.T) {
	whole := square(20, 10, constant(1))
	shifted, wide := whole.cut(10, 0, 10, 20), whole.cut(8, 0, 12, 20)
	shifted.left += 4
	wide.height, shifted.height = constant(2), constant(2)
	for name, right := range map[string]grid{"shifted by 4 m": shifted, "overlapping by two columns": wide} {
		terrain := loadedGrids(t, map[string]grid{"a.asc": whole.cut(0, 0, 10, 20), "b.asc": right})
		if n := len(terrain.mosaics); n != 2 {
			t.Errorf("%s: got %d mosaics, want 2", name, n)
		}
		at := metresFrom(t, terrain)
		for east, want := range map[float64]float64{-50: 1, -2: 1, 6: 2, 50: 2} {
			if got := spot(t, terrain, at(east, 3)); !near(got, want, 1e-9) {
				t.Errorf("%s, %g m east: got %g, want %g", name, east, got, want)
			}
		}
	}
}

func TestKindOf(t *testing.T) {
	for name, want := range map[string]profile.Kind{
		"town_dtm_1m.tif": profile.KindGround, "DTM/N51.tif": profile.KindGround, "uk-DSM.tif": profile.KindSurface,
		"DSM/town_dtm.tif": profile.KindGround, "dsm/dtm/N51.tif": profile.KindUnstated, "dsm_minus_dtm.tif": profile.KindUnstated,
		"dtm/dsm_minus_dtm.tif": profile.KindGround,
		"town_dem.tif":          profile.KindUnstated, "N51W001.hgt": profile.KindUnstated, "dtmx.tif": profile.KindUnstated, "": profile.KindUnstated,
	} {
		if got := kindOf(name); got != want {
			t.Errorf("%q: got %s, want %s", name, got, want)
		}
	}
}
