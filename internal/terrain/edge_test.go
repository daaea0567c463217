package terrain

import (
	"math"
	"testing"

	"github.com/paulmach/orb"

	"ridgehop/profile"
)

// Between the outermost pixel centres and the edge the pixels that are there
// decide alone; beyond the edge there is nothing. The grid is 20 x 20 of 10 m,
// heights 0 to 19 by column plus 100 times the row.
func TestHalfPixelAtTheEdge(t *testing.T) {
	terrain := loadedGrids(t, map[string]grid{
		"a.asc": square(20, 10, func(column, row int) float64 { return float64(column) + 100*float64(row) }),
	})
	at := metresFrom(t, terrain)
	cases := []struct {
		name        string
		east, north float64
		want        float64
	}{
		{"the outermost centre in the west", -95, 5, 900},
		{"west of it, at the height of a centre", -99, 5, 900},
		{"west of it, between two centres", -99, 2, 930},
		{"just beyond the western edge", -100.1, 5, math.NaN()},
		{"east of the outermost centre", 99, 5, 919},
		{"just beyond the eastern edge", 100.1, 5, math.NaN()},
		{"north of the outermost centre", 5, 99, 10},
		{"just beyond the northern edge", 5, 100.1, math.NaN()},
		{"south of the outermost centre", 5, -99, 1910},
		{"just beyond the southern edge", 5, -100.1, math.NaN()},
		{"the north-western corner", -99, 99, 0},
		{"the south-eastern corner", 99, -99, 1919},
		{"beyond the corner", 101, -101, math.NaN()},
	}
	for _, c := range cases {
		// A geodesic metre is 1.0004 grid metres here, and a centimetre is
		// enough for what lies under the point.
		if got := spot(t, terrain, at(c.east, c.north)); !near(got, c.want, 0.02) {
			t.Errorf("%s: got %g, want %g", c.name, got, c.want)
		}
	}
}

// A hole of one tile among four: what its neighbours' edges hold still counts
// in their half pixel, and nothing is made up in the hole.
func TestMissingTileAtACorner(t *testing.T) {
	whole := square(20, 10, constant(50))
	terrain := loadedGrids(t, map[string]grid{
		"nw.asc": whole.cut(0, 0, 10, 10), "ne.asc": whole.cut(10, 0, 10, 10), "sw.asc": whole.cut(0, 10, 10, 10),
	})
	at := metresFrom(t, terrain)
	for _, c := range []struct {
		east, north float64
		want        float64
	}{
		{-1, 1, 50}, {1, 1, 50}, {-1, -1, 50}, {1, -1, math.NaN()}, {6, -2, math.NaN()}, {6, 2, 50}, {-2, -60, 50}, {2, -60, math.NaN()},
	} {
		if got := spot(t, terrain, at(c.east, c.north)); !near(got, c.want, 1e-9) {
			t.Errorf("%g east, %g north: got %g, want %g", c.east, c.north, got, c.want)
		}
	}
}

func TestEndsOutside(t *testing.T) {
	withHole := func(column, row int) float64 {
		if column < 4 && row < 4 {
			return math.NaN()
		}
		return 7
	}
	terrain := loadedGrids(t, map[string]grid{"a.asc": square(20, 10, withHole)})
	at := metresFrom(t, terrain)
	inside, void, beside, far := at(50, -50), at(-90, 90), at(400, 0), orb.Point{100, -30}
	cases := []struct {
		name               string
		a, b               orb.Point
		aOutside, bOutside bool
		aVoid, bVoid       bool
	}{
		{"both inside", inside, at(-50, -50), false, false, false, false},
		{"a outside", beside, inside, true, false, true, false},
		{"b outside", inside, beside, false, true, false, true},
		{"a void of the raster at a", void, inside, false, false, true, false},
		{"a void of the raster at b", inside, void, false, false, false, true},
		{"a void at a, nothing at b", void, beside, false, true, true, true},
		{"across it, both outside", at(-300, 0), at(300, 0), true, true, true, true},
		{"beside it", beside, at(400, 100), true, true, true, true},
		{"on the other side of the earth", far, orb.Point{100.1, -30}, true, true, true, true},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			p := sampled(t, terrain, pathOf(t, c.a, c.b), profile.Sampling{})
			n := len(p.GroundM) - 1
			if p.AOutside != c.aOutside || p.BOutside != c.bOutside {
				t.Errorf("outside: got %t, %t, want %t, %t", p.AOutside, p.BOutside, c.aOutside, c.bOutside)
			}
			if math.IsNaN(p.GroundM[0]) != c.aVoid || math.IsNaN(p.GroundM[n]) != c.bVoid {
				t.Errorf("ends: got %g, %g, want voids %t, %t", p.GroundM[0], p.GroundM[n], c.aVoid, c.bVoid)
			}
			checkSources(t, p)
		})
	}
}

// A raster that only the last step of a long path reaches is found, from
// whichever side the path comes.
func TestPathThatEndsInsideARaster(t *testing.T) {
	terrain := loadedGrids(t, map[string]grid{"a.asc": slanted(10, 50, 64, 64, 10)})
	for name, ends := range map[string][2]orb.Point{
		"from the west":       {{9, 49.5}, {10.03, 49.5}},
		"from the east":       {{12, 49.5}, {10.97, 49.5}},
		"from the north":      {{10.5, 51}, {10.5, 49.97}},
		"from the south":      {{10.5, 48}, {10.5, 49.03}},
		"from the south-west": {{9, 48}, {10.03, 49.03}},
	} {
		for _, back := range []bool{false, true} {
			a, b := ends[0], ends[1]
			if back {
				a, b = b, a
			}
			p := sampled(t, terrain, pathOf(t, a, b), profile.Sampling{})
			n := len(p.GroundM) - 1
			outside, inside, known := p.AOutside, p.BOutside, p.GroundM[n]
			if back {
				outside, inside, known = p.BOutside, p.AOutside, p.GroundM[0]
			}
			want := slantedAt(ends[1].Lon()-10, ends[1].Lat())
			if !outside || inside || !near(known, want, 1e-3) {
				t.Errorf("%s, back %t: got outside %t, inside outside %t, height %g; want true, false, %g", name, back, outside, inside, known, want)
			}
		}
	}
}

// With no raster at all there are still samples, all of them void.
func TestNoRasters(t *testing.T) {
	terrain := loaded(t, t.TempDir())
	p := sampled(t, terrain, pathOf(t, orb.Point{1, 2}, orb.Point{1.1, 2}), profile.Sampling{})
	if len(p.GroundM) != profile.MinIntervals+1 || p.Voids() != len(p.GroundM) || !p.AOutside || !p.BOutside || len(p.Sources) != 0 || p.PixelM != 0 {
		t.Errorf("got %+v, want %d voids", p, profile.MinIntervals+1)
	}
	if got := terrain.Usable(); got != 0 {
		t.Errorf("usable: got %d, want 0", got)
	}
}
