package drawing

import (
	"slices"
	"testing"
)

func TestStripClips(t *testing.T) {
	r := stripScale{box{0, 100, 0, 100}, -2, 2}
	for _, c := range []struct {
		name  string
		steps []point
		want  [][]point
	}{
		{"inside", []point{{0, 0}, {10, 1}}, [][]point{{{0, 50}, {10, 25}}}},
		{"above all along", []point{{0, 5}, {10, 9}}, nil},
		{"leaves at the top", []point{{0, 0}, {10, 2}, {20, 4}}, [][]point{{{0, 50}, {10, 0}}}},
		{"comes back", []point{{0, 3}, {5, 2}, {10, 0}, {15, -2}, {20, -9}}, [][]point{{{5, 0}, {10, 50}, {15, 100}}}},
	} {
		if got := r.inside(c.steps); !slices.EqualFunc(got, c.want, slices.Equal) {
			t.Errorf("%s: got %v, want %v", c.name, got, c.want)
		}
	}
}

func TestStripStepsCrossBothEdges(t *testing.T) {
	a := cases()[0].assessment(t)
	v := newView(a)
	v.plot = box{0, 100, 0, 100}
	v.lengthM = 100
	v.a.Profile.DistanceM = []float64{0, 50, 100}
	v.ratio = []float64{6, -6, 0}
	got := stripScale{v.plot, -2, 2}.steps(&v, []int{0, 1, 2})
	want := []point{{0, 6}, {100.0 / 6, 2}, {100.0 / 3, -2}, {50, -6}, {50 + 100.0/3, -2}, {100, 0}}
	same := func(p, q point) bool { return near(p.x, q.x) && near(p.y, q.y) }
	if !slices.EqualFunc(got, want, same) {
		t.Errorf("got %v, want %v", got, want)
	}
}

func near(a, b float64) bool { return a-b < 1e-9 && b-a < 1e-9 }

func TestStripOnlyWhereItShows(t *testing.T) {
	for name, want := range map[string]bool{"clear": false, "marginal": true, "obstructed": true, "unknown_end": false} {
		if got := texts(t, name); want != slices.Contains(splitLines(got), "Clearance, in first Fresnel radii (F1)") {
			t.Errorf("%s: got the strip %v, want %v", name, !want, want)
		}
	}
}
