package p526_test

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"ridgehop/internal/itu/p526"
)

func TestKnifeEdge(t *testing.T) {
	// Grazing: the exact loss is 20 log10(2); eq (31) evaluates to 6.033.
	near(t, "exact at grazing", p526.KnifeEdgeExactDB(0), 20*math.Log10(2), 1e-12)
	near(t, "approximate at grazing", p526.KnifeEdgeDB(0), 6.03285, 1e-5)
	// The edge at 0.6 of the first zone is the trade's free line of sight.
	near(t, "0.6 of the first zone", p526.KnifeEdgeDB(-math.Sqrt2*0.6), 0, 0)
	near(t, "step at NuClear", p526.KnifeEdgeDB(math.Nextafter(p526.NuClear, 0)), 0.004, 1e-4)
	near(t, "at NuClear", p526.KnifeEdgeDB(p526.NuClear), 0, 0)
	near(t, "far above", p526.KnifeEdgeExactDB(50), 20*math.Log10(50*math.Pi*math.Sqrt2), 1e-4)
	near(t, "minus infinity", p526.KnifeEdgeDB(math.Inf(-1)), 0, 0)
}

func TestKnifeEdgeApproximationIsClose(t *testing.T) {
	// P.526-16 section 4.1 offers eq (31) for nu > -0.78.
	worst := 0.0
	previous := 0.0
	for nu := -0.78; nu < 12; nu += 0.001 {
		approximate := p526.KnifeEdgeDB(nu)
		worst = max(worst, math.Abs(approximate-p526.KnifeEdgeExactDB(nu)))
		if approximate < previous {
			t.Fatalf("got %v dB at nu %v, want at least %v", approximate, nu, previous)
		}
		previous = approximate
	}
	near(t, "largest difference", worst, 0.124, 0.002)
}

func TestNuIsClearanceInFresnelRadii(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		f := rapid.Float64Range(0.1, 90).Draw(rt, "GHz")
		h := rapid.Float64Range(-100, 100).Draw(rt, "h")
		d1 := rapid.Float64Range(0.1, 60).Draw(rt, "d1")
		d2 := rapid.Float64Range(0.1, 60).Draw(rt, "d2")
		want := math.Sqrt2 * h / p526.FresnelRadius(1, f, d1, d2)
		if got := p526.Nu(f, h, d1, d2); math.Abs(got-want) > 1e-9*math.Abs(want) {
			rt.Errorf("got %v, want %v", got, want)
		}
	})
}
