package profile

import (
	"math"
	"slices"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"pgregory.net/rapid"
)

func TestThinLaws(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawBent(t)
		n := len(s.p.GroundM)
		s.p.Sources = []Source{{Samples: 1}, {Samples: n - 1}}
		for i := range s.p.GroundM {
			if rapid.IntRange(0, 5).Draw(t, "void") == 0 {
				s.p.GroundM[i] = math.NaN()
			}
			s.p.SourceIndex[i] = int16(min(i, 1))
		}
		before := s.clone().p
		most := rapid.IntRange(0, n+2).Draw(t, "most")
		keep := []float64{before.DistanceM[rapid.IntRange(0, n-1).Draw(t, "keep")], math.NaN()}
		Thin(&s.p, most, keep)
		got := &s.p
		if n <= max(most, 2) {
			if diff := cmp.Diff(before, *got, cmpopts.EquateNaNs(), cmpopts.EquateEmpty()); diff != "" {
				t.Fatalf("small enough, and yet (-before +after):\n%s", diff)
			}
			return
		}
		if len(got.DistanceM) > max(most, 2) {
			t.Fatalf("got %d samples, want at most %d", len(got.DistanceM), most)
		}
		if got.DistanceM[0] != 0 || got.DistanceM[len(got.DistanceM)-1] != s.link.Path.LengthM {
			t.Fatalf("ends: %g", got.DistanceM)
		}
		if most >= 3 && !slices.Contains(got.DistanceM, keep[0]) {
			t.Fatalf("%g m is gone", keep[0])
		}
		if len(got.BendPerM) != 0 {
			t.Fatal("bends are left")
		}
		counts, widest := [2]int{}, 0.0
		for i, d := range got.DistanceM {
			at := slices.Index(before.DistanceM, d)
			if at < 0 || got.SourceIndex[i] != before.SourceIndex[at] ||
				got.GroundM[i] != before.GroundM[at] && !math.IsNaN(before.GroundM[at]) ||
				len(got.CoverM) > 0 && got.CoverM[i] != before.CoverM[at] {
				t.Fatalf("sample %d at %g m is not one of before", i, d)
			}
			counts[got.SourceIndex[i]]++
			if i > 0 {
				widest = max(widest, d-got.DistanceM[i-1])
			}
		}
		if diff := cmp.Diff(counts, [2]int{got.Sources[0].Samples, got.Sources[1].Samples}); diff != "" {
			t.Fatalf("samples of the sources (-counted +stated):\n%s", diff)
		}
		near(t, "widest step", got.SpacingM, widest, 0)
	})
}

func thinned(heightsM []float64, most int, keep ...float64) []float64 {
	s := plain(float64(len(heightsM)-1), 0, 0, nil, heightsM...)
	Thin(&s.p, most, keep)
	return s.p.DistanceM
}

// Tops stay, on a slope as well; hollows go.
func TestThinKeepsTops(t *testing.T) {
	heights := []float64{0, 0, 3, 0, -9, 0, 0, 7, 0, 0, 1, 0, 0}
	for i := range heights {
		heights[i] += 100 - 5*float64(i)
	}
	// Stretches of 4 m: the tops are at 2, 7 and 10 m.
	if diff := cmp.Diff([]float64{0, 2, 7, 10, 12}, thinned(heights, 5)); diff != "" {
		t.Errorf("(-want +got):\n%s", diff)
	}
}

func TestThinKeepsWhereTheClearanceIsLeast(t *testing.T) {
	if diff := cmp.Diff([]float64{0, 3, 6}, thinned([]float64{0, 0, 9, 0, 9, 0, 0}, 3, 3.2)); diff != "" {
		t.Errorf("(-want +got):\n%s", diff)
	}
}

// A run of voids keeps both its ends, so that it is seen where it is.
func TestThinKeepsVoids(t *testing.T) {
	nan := math.NaN()
	heights := []float64{0, 0, 0, nan, nan, nan, nan, 0, 0, 0, nan, 0, 0}
	got := thinned(heights, 8)
	for _, d := range []float64{3, 6, 10} {
		if !slices.Contains(got, d) {
			t.Errorf("the void at %g m is gone: %g", d, got)
		}
	}
	// With all void there is nothing else to keep.
	if got := thinned(slices.Repeat([]float64{nan}, 20), 6); len(got) != 6 {
		t.Errorf("got %g", got)
	}
}

// The peak of the profile survives, whatever else goes.
func TestThinKeepsTheHighest(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		heights := rapid.SliceOfN(rapid.Float64Range(0, 10), 20, 60).Draw(t, "heights")
		peak := rapid.IntRange(1, len(heights)-2).Draw(t, "peak")
		heights[0], heights[len(heights)-1], heights[peak] = 0, 0, 11
		if got := thinned(heights, rapid.IntRange(3, 19).Draw(t, "most")); !slices.Contains(got, float64(peak)) {
			t.Fatalf("the peak at %d is gone: %g", peak, got)
		}
	})
}
