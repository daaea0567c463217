package drawing

import (
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"
)

func TestRoundStep(t *testing.T) {
	for _, c := range []struct{ least, want float64 }{{0.7, 1}, {1, 1}, {1.1, 2}, {2.1, 5}, {5.01, 10}, {0.023, 0.05}, {180, 200}} {
		if got := roundStep(c.least); math.Abs(got-c.want) > 1e-9*c.want {
			t.Errorf("step of at least %g: got %g, want %g", c.least, got, c.want)
		}
	}
}

func TestTicks(t *testing.T) {
	if got := ticks(-1.5, 2, 1); !slices.Equal(got, []float64{-1, 0, 1, 2}) {
		t.Errorf("got %v, want [-1 0 1 2]", got)
	}
	for _, c := range []struct {
		step float64
		want int
	}{{1, 0}, {50, 0}, {0.5, 1}, {0.02, 2}, {0.001, 3}} {
		if got := decimalsFor(c.step); got != c.want {
			t.Errorf("decimals for %g: got %d, want %d", c.step, got, c.want)
		}
	}
}

// A curve of one height is as far from the chord as the ground of that height.
func TestLevelFollowsTheEarth(t *testing.T) {
	for _, c := range cases() {
		s := newSheet(c.assessment(t))
		s.view.plot = box{0, 1000, 0, 300}
		for _, level := range s.view.level((s.view.low + s.view.high) / 2) {
			for _, at := range level {
				if at.y < -1e-6 || at.y > 300+1e-6 {
					t.Errorf("%s: got a level at y %g, outside the plot", c.name, at.y)
				}
			}
		}
	}
}

// Whatever is drawn of the profile lies in the plot.
func TestRangeHoldsEverything(t *testing.T) {
	for _, c := range cases() {
		v := newView(c.assessment(t))
		v.plot = box{0, 1000, 0, 300}
		for i, d := range v.a.Profile.DistanceM {
			heights := []float64{v.ground[i], v.top[i]}
			if v.known() {
				heights = append(heights, v.lineAt(d), v.lineAt(d)+v.f1(d), v.lineAt(d)-v.drawn.F1Fraction*v.f1(d))
			}
			if v.second.K != 0 {
				heights = append(heights, v.top[i]-v.bulge(d)+v.bulgeAt(d, v.second.K))
			}
			for _, h := range heights {
				if y := v.y(h); y < 0 || y > 300 {
					t.Fatalf("%s: height %g at %g m is drawn at y %g, outside 0 to 300", c.name, h, d, y)
				}
			}
		}
	}
}

// The view's bulge and zone, of a formula, are those of the samples.
func TestViewAgreesWithSamples(t *testing.T) {
	a := cases()[0].assessment(t)
	v := newView(a)
	for i, d := range a.Profile.DistanceM {
		if got, want := v.bulge(d), v.ground[i]-a.Profile.GroundM[i]; math.Abs(got-want) > 1e-9 {
			t.Fatalf("bulge at %g m: got %g, want %g", d, got, want)
		}
	}
	c := a.Judgement.Clearance[0]
	if got := v.f1(c.AtM); math.Abs(got-c.F1M) > 1e-9*c.F1M {
		t.Errorf("first Fresnel radius at %g m: got %g, want %g", c.AtM, got, c.F1M)
	}
}

func TestHatchStaysInItsBox(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		b := box{left: rapid.Float64Range(0, 500).Draw(r, "left"), top: rapid.Float64Range(0, 500).Draw(r, "top")}
		b.right, b.bottom = b.left+rapid.Float64Range(4, 900).Draw(r, "wide"), b.top+rapid.Float64Range(20, 400).Draw(r, "tall")
		for _, stroke := range hatch(b, 14) {
			for _, p := range stroke {
				if p.x < b.left-1e-9 || p.x > b.right+1e-9 || p.y < b.top-1e-9 || p.y > b.bottom+1e-9 {
					r.Fatalf("got a stroke to %v outside %v", p, b)
				}
			}
		}
	})
}
