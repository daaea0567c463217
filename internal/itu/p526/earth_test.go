package p526_test

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"ridgehop/internal/itu/p526"
)

// near reports a value that is not within tolerance of the one wanted.
func near(t *testing.T, name string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: got %v, want %v (within %v)", name, got, want, tolerance)
	}
}

func TestBulge(t *testing.T) {
	// P.530-19 eq (151) prints d1 d2/(12.74 k); the exact divisor is 12.742.
	near(t, "25 km from both ends, k 4/3", p526.Bulge(25, 25, 4.0/3), 25*25/(12.742*4.0/3), 1e-9)
	near(t, "against the printed divisor", p526.Bulge(10, 40, 1), 400/12.74, 0.01)
	near(t, "at an end", p526.Bulge(0, 40, 1), 0, 0)
	near(t, "effective radius", p526.EffectiveRadiusKM(4.0/3), 8494.6667, 1e-3)
}

func TestHorizonKM(t *testing.T) {
	// The trade's practical form is 3.57 sqrt(k h).
	near(t, "100 m, k 1", p526.HorizonKM(100, 1), 35.7, 0.01)
	near(t, "the ground", p526.HorizonKM(0, 1), 0, 0)
	// At the horizon the chord touches the sphere: the bulge equals what the line lost.
	rapid.Check(t, func(rt *rapid.T) {
		h := rapid.Float64Range(1, 500).Draw(rt, "m")
		k := rapid.Float64Range(0.3, 3).Draw(rt, "k")
		d := p526.HorizonKM(h, k)
		if got := 1000 * d * d / (2 * p526.EffectiveRadiusKM(k)); math.Abs(got-h) > 1e-9*h {
			rt.Errorf("got a drop of %v m at the horizon, want %v", got, h)
		}
	})
}
