package drawing

import (
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"
)

func TestThinKeepsPeaks(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		n := rapid.IntRange(3, 20000).Draw(r, "n")
		columns := rapid.SampledFrom([]int{fewColumns, allColumns}).Draw(r, "columns")
		peak := rapid.IntRange(0, n-1).Draw(r, "peak")
		hollow := rapid.IntRange(0, n-1).Draw(r, "hollow")
		distances, values := make([]float64, n), make([]float64, n)
		crowd := rapid.Float64Range(0, 6).Draw(r, "crowd") // how much closer samples lie at A than at B
		for i := range n {
			distances[i], values[i] = 7.3*float64(n)*math.Pow(float64(i)/float64(n), 1+crowd), math.Sin(float64(i))
		}
		values[hollow], values[peak] = -9, 9
		got := thin(distances, values, columns)
		if len(got) > 2*columns+2 && len(got) != n {
			r.Fatalf("got %d samples of %d, want at most %d", len(got), n, 2*columns+2)
		}
		if !slices.IsSorted(got) || got[0] != 0 || got[len(got)-1] != n-1 {
			r.Fatalf("got %v: unsorted, or without an end", got)
		}
		if !slices.Contains(got, peak) || (peak != hollow && !slices.Contains(got, hollow)) {
			r.Fatalf("peak %d or hollow %d of %d lost", peak, hollow, n)
		}
	})
}

// Samples a millimetre apart, and then a gap of many columns: the line across it
// starts and ends where the samples do, not at a summit near by.
func TestThinKeepsTheEdgesOfGaps(t *testing.T) {
	var distances, values []float64
	add := func(from float64) int {
		for i := range 2000 {
			distances, values = append(distances, from+float64(i)*1e-3), append(values, float64(100*(i%2)))
		}
		values[len(values)-1], values[len(values)-2000] = 50, 50
		return len(values) - 1
	}
	add(0)
	last := add(3000)
	next := add(7000) - 1999
	distances, values = append(distances, 10_000), append(values, 0)
	got := thin(distances, values, allColumns)
	for _, want := range []int{1999, 2000, last, next, len(values) - 2} {
		if !slices.Contains(got, want) {
			t.Errorf("got %v, want sample %d at %g m among them", got, want, distances[want])
		}
	}
}

func TestThinBreaksAtVoids(t *testing.T) {
	n := 10000
	distances, values := make([]float64, n), make([]float64, n)
	for i := range n {
		distances[i] = float64(i)
		if i >= 4000 && i < 6000 {
			values[i] = math.NaN()
		}
	}
	got := runs(thin(distances, values, allColumns), values)
	if len(got) != 2 {
		t.Fatalf("got %d runs, want 2", len(got))
	}
	if last, first := got[0][len(got[0])-1], got[1][0]; last >= 4000 || first < 6000 {
		t.Errorf("got a run to %d and one from %d, want them to stop at the void, 4000 to 6000", last, first)
	}
}

func TestRuns(t *testing.T) {
	nan := math.NaN()
	values := []float64{nan, 1, 2, nan, nan, 3, nan}
	got := runs([]int{0, 1, 2, 3, 4, 5, 6}, values)
	if len(got) != 2 || !slices.Equal(got[0], []int{1, 2}) || !slices.Equal(got[1], []int{5}) {
		t.Errorf("got %v, want [[1 2] [5]]", got)
	}
	if got := runs([]int{0, 3}, values); len(got) != 0 {
		t.Errorf("all voids: got %v, want none", got)
	}
}

func TestJoinSpans(t *testing.T) {
	got := joinSpans([]span{{0, 4}, {2, 3}, {5, 6}, {20, 22}}, 2)
	if !slices.Equal(got, []span{{0, 6}, {20, 22}}) {
		t.Errorf("got %v, want [{0 6} {20 22}]", got)
	}
}
