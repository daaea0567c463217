package terrain

import (
	"context"
	"math"
	"math/rand/v2"
	"path/filepath"
	"testing"

	"github.com/paulmach/orb"

	"ridgehop/internal/geodesy"
	"ridgehop/internal/sharedtest"
	"ridgehop/profile"
)

// topAt is the top of an exact profile at a distance, by its own definition.
func topAt(p *profile.Profile, d float64) float64 {
	i := 0
	for i+2 < len(p.DistanceM) && p.DistanceM[i+1] < d {
		i++
	}
	top := func(k int) float64 {
		if len(p.CoverM) > 0 {
			return p.GroundM[k] + p.CoverM[k]
		}
		return p.GroundM[k]
	}
	before, after := d-p.DistanceM[i], p.DistanceM[i+1]-d
	if before == 0 || after == 0 { // a void beside it does not count
		if after == 0 {
			i++
		}
		return top(i)
	}
	return (top(i)*after+top(i+1)*before)/(before+after) + p.BendPerM[i]*before*after
}

// The exact mode is the bilinear surface itself: at every place of a spacing a
// hundred times finer than a pixel it is what is read there point by point.
func TestExactModeIsTheSurface(t *testing.T) {
	const paths = 500
	terrain := loaded(t, filepath.Join(sharedtest.Dir(t), "elevation"))
	r := rand.New(rand.NewPCG(4, 5))
	worst, compared := 0.0, 0
	for range paths {
		// Over the Highlands, often across the seam of two tiles.
		a := orb.Point{-5 + 0.6*(r.Float64()-0.5), 56.1 + 0.8*r.Float64()}
		length := 300 + 5000*r.Float64()
		path := pathOf(t, a, geodesy.Direct(a, 360*r.Float64(), length))
		exact := sampled(t, terrain, path, profile.Sampling{})
		dense := sampled(t, terrain, path, profile.Sampling{SpacingM: exact.PixelM / 100})
		for i, d := range dense.DistanceM {
			got, want := topAt(exact, d), dense.GroundM[i]
			if math.IsNaN(got) != math.IsNaN(want) {
				t.Fatalf("%v: at %g m: got %g, want %g", path, d, got, want)
			}
			if off := math.Abs(got - want); off > worst {
				worst = off
			}
			compared++
		}
	}
	t.Logf("%d paths, %d places: at most %.3g m apart", paths, compared, worst)
	if worst > 0.001 {
		t.Errorf("got heights up to %g m apart, want at most 0.001", worst)
	}
}

// A ridge that is one pixel wide cannot hide: the least and the highest of the
// surface lie on the lines between pixel centres or where a cell bends.
func TestNoRidgeHides(t *testing.T) {
	ridge := func(column, row int) float64 {
		if column == 10 {
			return 100
		}
		return 0
	}
	terrain := loadedGrids(t, map[string]grid{"a.asc": {columns: 21, rows: 21, left: 500e3, top: 5600e3, pixel: 10, system: "32630", height: ridge}})
	at := metresFrom(t, terrain)
	for _, ends := range [][2]orb.Point{{at(-73, 11), at(81, -17)}, {at(-90, -90), at(90, 77)}, {at(60, 3), at(-60, 3)}} {
		p := sampled(t, terrain, pathOf(t, ends[0], ends[1]), profile.Sampling{})
		highest := 0.0
		for _, h := range p.GroundM {
			highest = max(highest, h)
		}
		if math.Abs(highest-100) > 1e-6 {
			t.Errorf("highest: got %g, want 100", highest)
		}
	}
}

// The exact mode costs no more than a few times as much as one sample a pixel.
func BenchmarkExactPath(b *testing.B) {
	folder, path, _ := benchmarkTile(b)
	terrain := loaded(b, folder)
	into := &profile.Profile{}
	must(b, terrain.Sample(context.Background(), path, profile.Sampling{}, into))
	b.ReportAllocs()
	for b.Loop() {
		must(b, terrain.Sample(context.Background(), path, profile.Sampling{}, into))
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(len(into.GroundM)), "ns/sample")
	b.ReportMetric(float64(len(into.GroundM)), "samples")
}

// A path that leaves a fine raster for a coarse one joins it by a jump: nothing of
// the coarse ground is lowered towards the fine, and each keeps its name.
func TestJumpsBetweenRasters(t *testing.T) {
	terrain := loadedGrids(t, map[string]grid{
		"coarse.asc": square(40, 30, constant(100)), "fine.asc": square(10, 10, constant(0)),
	})
	at, r := metresFrom(t, terrain), rand.New(rand.NewPCG(8, 1))
	for range 300 {
		y := 44 + 7*r.Float64() // along the half pixel outside the fine raster's outermost centres
		p := sampled(t, terrain, pathOf(t, at(-400+r.Float64(), y), at(300, y+2*r.Float64()-1)), profile.Sampling{})
		for i := 1; i < len(p.DistanceM); i++ {
			step := p.DistanceM[i] - p.DistanceM[i-1]
			if jump := math.Abs(p.GroundM[i] - p.GroundM[i-1]); jump > 1 && step > 2*jointM {
				t.Fatalf("at %g m: got a slope of %g m over %g m, want a jump", p.DistanceM[i], jump, step)
			}
			coarse := p.Sources[p.SourceIndex[i]].Name == "coarse.asc"
			if (p.GroundM[i] > 50) != coarse {
				t.Fatalf("at %g m: got %g m of %s", p.DistanceM[i], p.GroundM[i], p.Sources[p.SourceIndex[i]].Name)
			}
		}
	}
}

// A surface that dips below bare earth at both ends of a cell and rises above it
// in between counts where it does.
func TestTopBetweenLayers(t *testing.T) {
	twist := func(column, row int) float64 { // 90 m with 140 m at two opposite corners of every other cell
		if (column+row)%2 == 0 {
			return 140
		}
		return 90
	}
	folder := gridsOf(t, map[string]grid{"earth.asc": square(10, 10, constant(100)), "top.asc": square(10, 10, twist)})
	terrain := stated(t, folder, "sources:\n"+oneSource("earth", "ground", "datum: odn, files: [earth.asc]")+oneSource("top", "surface", "datum: odn, files: [top.asc]"))
	at := metresFrom(t, terrain)
	for _, ends := range [][2]orb.Point{{at(-34, -33), at(36, 37)}, {at(-35.2, 35), at(35, -34.9)}, {at(-30, 12), at(33, -4)}} {
		path := pathOf(t, ends[0], ends[1])
		exact, dense := sampled(t, terrain, path, profile.Sampling{}), sampled(t, terrain, path, profile.Sampling{SpacingM: 0.05})
		for i, d := range dense.DistanceM {
			if got, want := topAt(exact, d), dense.GroundM[i]+dense.CoverM[i]; got < want-0.002 || got > want+15 {
				t.Fatalf("at %g m: got a top of %g m, want %g, and not much more", d, got, want)
			}
		}
	}
}
