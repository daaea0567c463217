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
