package geodesy

import (
	"errors"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// planeGrid is a grid whose values are a plane, which bilinear interpolation
// gives back between the nodes: 2 + 0.5 (lon - west) - 0.25 (lat - south).
func planeGrid(west, south, step float64, width, height int) GeoidGrid {
	grid := GeoidGrid{
		WestDeg: west, NorthDeg: south + float64(height-1)*step,
		StepLonDeg: step, StepLatDeg: step, Width: width, Height: height,
	}
	for row := range height {
		for column := range width {
			grid.ValuesM = append(grid.ValuesM, float32(2+0.5*float64(column)*step-0.25*float64(height-1-row)*step))
		}
	}
	return grid
}

func newGeoid(t rapid.TB, grid GeoidGrid) *Geoid {
	t.Helper()
	g, err := NewGeoid(grid)
	if err != nil {
		t.Fatal(err)
	}
	return g
}

func checkUndulation(t rapid.TB, g *Geoid, lon, lat, want, tolerance float64) {
	t.Helper()
	got, ok := g.UndulationM(lon, lat)
	if !ok || !(math.Abs(got-want) <= tolerance) {
		t.Errorf("longitude %.12g, latitude %.12g: got %.6f m (%v), want %.6f within %g", lon, lat, got, ok, want, tolerance)
	}
}

func checkNoUndulation(t rapid.TB, g *Geoid, lon, lat float64) {
	t.Helper()
	if got, ok := g.UndulationM(lon, lat); ok {
		t.Errorf("longitude %.12g, latitude %.12g: got %.6f m, want no value", lon, lat, got)
	}
}

func TestGeoidIsAPlane(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		west := rapid.Float64Range(-360, 360).Draw(t, "west")
		south := rapid.Float64Range(-90, 60).Draw(t, "south")
		g := newGeoid(t, planeGrid(west, south, 0.75, 12, 9))
		east := rapid.Float64Range(0, 11*0.75).Draw(t, "east")
		north := rapid.Float64Range(0, 8*0.75).Draw(t, "north")
		turns := float64(rapid.IntRange(-3, 3).Draw(t, "turns"))
		checkUndulation(t, g, west+east+360*turns, south+north, 2+0.5*east-0.25*north, 1e-6)
	})
}

func TestGeoidEdges(t *testing.T) {
	g := newGeoid(t, planeGrid(170, 40, 0.1, 151, 21)) // 170 to 185 east, 40 to 42 north
	west, south, east, north := g.Bound()
	for i, pair := range [][2]float64{{west, 170}, {south, 40}, {east, 185}, {north, 42}} {
		if math.Abs(pair[0]-pair[1]) > 1e-9 {
			t.Errorf("edge %d: got %g, want %g", i, pair[0], pair[1])
		}
	}
	for _, lon := range []float64{170, -190, 530} {
		checkUndulation(t, g, lon, 42, 1.5, 1e-6)
	}
	for _, lon := range []float64{185, -175, 545} {
		checkUndulation(t, g, lon, 40, 9.5, 1e-6)
	}
	for _, place := range [][2]float64{
		{169.9999, 41}, {185.0001, 41}, {-174.9999, 41}, {0, 41}, {175, 39.9999}, {175, 42.0001}, {175, -41},
		{math.NaN(), 41}, {math.Inf(1), 41}, {math.Inf(-1), 41}, {175, math.NaN()}, {175, math.Inf(1)}, {175, 1e300}, {1e300, 91},
	} {
		checkNoUndulation(t, g, place[0], place[1])
	}
}

// A row of 8 nodes round the earth, with the first meridian once or twice, and
// counted from anywhere: between the last column and the first it goes on.
func TestGeoidClosesOnItself(t *testing.T) {
	wave := func(node float64) float32 { return float32(10 * math.Abs(4-node)) } // 40 at node 0, 0 at 4, 40 at 8
	for _, west := range []float64{-180, 0, 180, -157.5, 360} {
		for _, width := range []int{8, 9} {
			grid := GeoidGrid{WestDeg: west, NorthDeg: 45, StepLonDeg: 45, StepLatDeg: 90, Width: width, Height: 2}
			for range 2 {
				for node := range width {
					grid.ValuesM = append(grid.ValuesM, wave(float64(node)))
				}
			}
			g := newGeoid(t, grid)
			for node := -8.0; node <= 16; node += 0.125 {
				want := 10 * math.Abs(4-(node-8*math.Floor(node/8)))
				checkUndulation(t, g, west+45*node, 3, want, 1e-9)
			}
			if w, _, e, _ := g.Bound(); e-w != 360 || w < -180 || w >= 180 {
				t.Errorf("from %g, %d columns: got %g to %g, want 360 degrees from -180 or later", west, width, w, e)
			}
		}
	}
}

// A column short of the turn, the gap stays a gap.
func TestGeoidDoesNotClose(t *testing.T) {
	g := newGeoid(t, planeGrid(-180, -3, 1, 359, 7))
	checkUndulation(t, g, 178, 0, 2+0.5*358-0.25*3, 1e-4)
	checkNoUndulation(t, g, 178.5, 0)
	checkNoUndulation(t, g, 179.5, 0)
}

// Steps as some files write them, rounded: 21600 of them miss 360 degrees.
func TestGeoidRoundedSteps(t *testing.T) {
	const step = 0.01666667
	grid := GeoidGrid{WestDeg: -180, NorthDeg: 2 * step, StepLonDeg: step, StepLatDeg: step, Width: 21600, Height: 2}
	grid.ValuesM = make([]float32, 2*21600)
	grid.ValuesM[0], grid.ValuesM[21600], grid.ValuesM[21599], grid.ValuesM[2*21600-1] = 8, 8, 4, 4
	g := newGeoid(t, grid)
	checkUndulation(t, g, 180-1.0/120, 1.5*step, 6, 1e-3)
	checkUndulation(t, g, 180, 1.5*step, 8, 1e-6)
	checkUndulation(t, g, math.Nextafter(180, 0), 1.5*step, 8, 1e-6)
}

// Neither infinities nor what no geoid has are values; a node without weight
// does not spoil its neighbours.
func TestGeoidVoids(t *testing.T) {
	nan, inf := float32(math.NaN()), float32(math.Inf(1))
	for _, void := range []float32{nan, inf, -inf, 201, -9999, 3.4e38} {
		grid := planeGrid(0, 0, 1, 4, 4)
		grid.ValuesM[1*4+1] = void // at 1 east, 2 north
		g := newGeoid(t, grid)
		for _, place := range [][2]float64{{1, 2}, {0.5, 2}, {1.5, 1.5}, {1, 2.9}, {0.01, 1.01}} {
			checkNoUndulation(t, g, place[0], place[1])
		}
		checkUndulation(t, g, 1, 1, 2.25, 1e-6)
		checkUndulation(t, g, 2, 2, 2.5, 1e-6)
		checkUndulation(t, g, 2, 1.5, 2.625, 1e-6)
		checkUndulation(t, g, 2.5, 2.5, 2.625, 1e-6)
	}
	grid := planeGrid(0, 0, 1, 2, 2)
	grid.ValuesM = []float32{-88.8888, -88.8888, 200, -200}
	checkUndulation(t, newGeoid(t, grid), 0.5, 1, -88.8888, 1e-5)
	checkUndulation(t, newGeoid(t, grid), 0.5, 0, 0, 1e-5)
}

func TestGeoidKeepsItsOwnValues(t *testing.T) {
	grid := planeGrid(0, 0, 1, 3, 3)
	g := newGeoid(t, grid)
	clear(grid.ValuesM)
	checkUndulation(t, g, 1, 1, 2.25, 1e-6)
}

func TestGeoidRefuses(t *testing.T) {
	good := planeGrid(0, 0, 1, 3, 4)
	if _, err := NewGeoid(good); err != nil {
		t.Fatal(err)
	}
	nan, inf := math.NaN(), math.Inf(1)
	cases := []struct {
		name string
		want string
		spot func(*GeoidGrid)
	}{
		{"one column", "1 columns", func(g *GeoidGrid) { g.Width = 1 }},
		{"one row", "1 rows", func(g *GeoidGrid) { g.Height = 1 }},
		{"no column", "0 columns", func(g *GeoidGrid) { g.Width = 0 }},
		{"fewer than none", "-3 columns", func(g *GeoidGrid) { g.Width, g.Height = -3, -4 }},
		{"too many", "100001 rows", func(g *GeoidGrid) { g.Height = 100001 }},
		{"too large", "40000 MB", func(g *GeoidGrid) { g.Width, g.Height = 100000, 100000 }},
		{"values missing", "11 values", func(g *GeoidGrid) { g.ValuesM = g.ValuesM[1:] }},
		{"values left", "13 values", func(g *GeoidGrid) { g.ValuesM = append(g.ValuesM, 1) }},
		{"no values", "0 values", func(g *GeoidGrid) { g.ValuesM = nil }},
		{"west nowhere", "western longitude NaN", func(g *GeoidGrid) { g.WestDeg = nan }},
		{"west too far", "western longitude 361", func(g *GeoidGrid) { g.WestDeg = 361 }},
		{"north nowhere", "latitudes NaN", func(g *GeoidGrid) { g.NorthDeg = nan }},
		{"north at infinity", "latitudes +Inf", func(g *GeoidGrid) { g.NorthDeg = inf }},
		{"beyond the north pole", "latitudes 87.5 to 90.5", func(g *GeoidGrid) { g.NorthDeg = 90.5 }},
		{"beyond the south pole", "latitudes -91 to -88", func(g *GeoidGrid) { g.NorthDeg = -88 }},
		{"no step", "0 of longitude", func(g *GeoidGrid) { g.StepLonDeg = 0 }},
		{"step backward", "-1 degrees of latitude", func(g *GeoidGrid) { g.StepLatDeg = -1 }},
		{"step of nothing", "1e-320 of longitude", func(g *GeoidGrid) { g.StepLonDeg = 1e-320 }},
		{"step without end", "+Inf of longitude", func(g *GeoidGrid) { g.StepLonDeg = inf }},
		{"step that is none", "NaN", func(g *GeoidGrid) { g.StepLonDeg = nan }},
		{"more than a turn", "450 degrees", func(g *GeoidGrid) { g.Width, g.Height, g.StepLonDeg = 4, 3, 150 }},
		{"all void", "none of its nodes", func(g *GeoidGrid) { g.ValuesM = []float32{999, 999, 999, 999, 999, 999, 999, 999, 999, 999, 999, 999} }},
	}
	for _, c := range cases {
		grid := planeGrid(0, 0, 1, 3, 4)
		c.spot(&grid)
		g, err := NewGeoid(grid)
		if g != nil || !errors.Is(err, ErrGeoid) || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v (%v), want ErrGeoid with %q", c.name, err, g != nil, c.want)
		}
	}
}
