package p530_test

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"ridgehop/internal/itu/p530"
)

// longHop is the first path of the check values for edition -18, which come from
// public reference code for P.530-18 (eeveetza/p530).
func longHop() p530.MultipathPath {
	return p530.MultipathPath{DistanceKM: 35, FrequencyGHz: 7.4, TxM: 120, RxM: 95, TerrainM: 30}
}

func TestOccurrence(t *testing.T) {
	p0, err := longHop().Occurrence(-4.2, 10)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "p0", p0, 88.4674851797, 1e-6)
	near(t, "inclination", longHop().InclinationMrad(), 25.0/35, 1e-12)
	mirrored := longHop()
	mirrored.TxM, mirrored.RxM = mirrored.RxM, mirrored.TxM
	back, _ := mirrored.Occurrence(-4.2, 10)
	near(t, "mirrored", back, p0, 1e-9)
}

func TestQuickOccurrence(t *testing.T) {
	// ITU-R WP 3M validation examples for P.530-14, Table 1.
	near(t, "K, row 1", p530.QuickK(-333.54), 0.0001998, 1.2e-7)
	near(t, "K, row 3", p530.QuickK(-324.14), 0.0001884, 1.2e-7)
	p0, err := longHop().QuickOccurrence(-333.54)
	if err != nil {
		t.Fatal(err)
	}
	want := p530.QuickK(-333.54) * math.Pow(35, 3.1) * math.Pow(1+25.0/35, -1.29) *
		math.Pow(7.4, 0.8) * math.Pow(10, -0.00089*95)
	near(t, "p0", p0, want, 1e-9)
}

func TestDetailedOccurrence(t *testing.T) {
	// At a roughness of 30 m both methods have the same order of magnitude.
	smooth, err := longHop().DetailedOccurrence(-300, 0)
	if err != nil {
		t.Fatal(err)
	}
	rough, _ := longHop().DetailedOccurrence(-300, 90)
	near(t, "ten times (10+sa)", rough/smooth, math.Pow(10, -0.46), 1e-12)
	want := math.Pow(10, -4.4+0.81-0.46) * math.Pow(35, 3.4) * math.Pow(1+25.0/35, -1.03) *
		math.Pow(7.4, 0.8) * math.Pow(10, -0.00076*95)
	near(t, "p0", smooth, want, 1e-9)
}

func TestMultipathOutOfRange(t *testing.T) {
	short, low, high := longHop(), longHop(), longHop()
	short.DistanceKM, low.FrequencyGHz, high.FrequencyGHz = 5, 0.4, 46
	for name, p := range map[string]p530.MultipathPath{"5 km": short, "0.4 GHz": low, "46 GHz": high} {
		_, err := p.Occurrence(-4, 10)
		outOfRange(t, name, err)
		_, err = p.QuickOccurrence(-300)
		outOfRange(t, name, err)
		_, err = p.DetailedOccurrence(-300, 10)
		outOfRange(t, name, err)
	}
	_, err := longHop().DetailedOccurrence(-300, -1)
	outOfRange(t, "roughness", err)
}

func TestFadePercent(t *testing.T) {
	// ITU-R WP 3M validation examples for P.530-14, Table 1; p0 is printed with 4
	// digits.
	tests := []struct{ p0, depthDB, want, tolerance float64 }{
		{138.7, 2, 25.86, 0.012}, {138.7, 10, 4.842, 0.002},
		{974.3, 2, 37.24, 0.014}, {974.3, 10, 19.18, 0.01},
	}
	for _, tt := range tests {
		got, err := p530.FadePercent(tt.p0, tt.depthDB)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "pw", got, tt.want, tt.tolerance)
	}
	near(t, "At", p530.TransitionDepthDB(138.7), 27.5705, 1e-4)
}

func TestFadePercentLaws(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		p0 := math.Pow(10, rapid.Float64Range(-4, 3.3).Draw(rt, "log p0"))
		atZero, err := p530.FadePercent(p0, 0)
		if err != nil {
			rt.Fatal(err)
		}
		if want := 100 * (1 - math.Exp(-1)); math.Abs(atZero-want) > 1e-9 {
			rt.Errorf("got %v %% at 0 dB, want %v", atZero, want)
		}
		transition := p530.TransitionDepthDB(p0)
		below, _ := p530.FadePercent(p0, transition*(1-1e-9))
		above, _ := p530.FadePercent(p0, transition)
		if math.Abs(below/above-1) > 1e-6 {
			rt.Errorf("got %v %% below the transition and %v above, want them equal", below, above)
		}
	})
	p0 := 10.0
	previous := 100.0
	for depth := 0.0; depth < 60; depth += 0.25 {
		got, err := p530.FadePercent(p0, depth)
		if err != nil || got >= previous {
			t.Fatalf("%v dB: got %v %% (%v), want less than %v", depth, got, err, previous)
		}
		previous = got
	}
}

func TestEnhancementPercent(t *testing.T) {
	// Computed with public reference code for P.530-18 (eeveetza/p530).
	p0, _ := longHop().Occurrence(-4.2, 10)
	for enhancement, want := range map[float64]float64{4: 97.8870983106, 8: 99.7274421842, 12: 99.9780709788} {
		got, err := p530.EnhancementPercent(p0, enhancement)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "not exceeded", got, want, 1e-6)
	}
	below, _ := p530.EnhancementPercent(p0, 10)
	above, _ := p530.EnhancementPercent(p0, math.Nextafter(10, 11))
	// The two branches are approximations that nearly meet.
	near(t, "almost continuous at 10 dB", above, below, 0.002)
}

func TestFadingOutOfRange(t *testing.T) {
	for _, p0 := range []float64{0, -1, 2001, math.NaN()} {
		_, err := p530.FadePercent(p0, 10)
		outOfRange(t, "p0", err)
		_, err = p530.EnhancementPercent(p0, 10)
		outOfRange(t, "p0", err)
	}
	_, err := p530.FadePercent(10, -1)
	outOfRange(t, "depth", err)
	_, err = p530.EnhancementPercent(10, 0)
	outOfRange(t, "enhancement", err)
}

func TestAnnualDecrementDB(t *testing.T) {
	at := func(latitude, distance, inclination float64) float64 {
		got, err := p530.AnnualDecrementDB(latitude, distance, inclination)
		if err != nil {
			t.Fatal(err)
		}
		return got
	}
	// At 45 degrees cos 2 lat is 0: 10.5 - 5.6 log10(1.1) - 2.7 log10(d).
	near(t, "45 degrees", at(45, 50, 0), 10.5-5.6*math.Log10(1.1)-2.7*math.Log10(50), 1e-9)
	near(t, "the equator", at(0, 50, 0), 10.5-5.6*math.Log10(2.1)-2.7*math.Log10(50), 1e-9)
	near(t, "north as south", at(-30, 50, 1), at(30, 50, 1), 0)
	near(t, "capped", at(90, 10, 5), 10.8, 0)
	for _, in := range [][3]float64{{91, 10, 0}, {0, 0, 0}, {0, 10, -1}} {
		_, err := p530.AnnualDecrementDB(in[0], in[1], in[2])
		outOfRange(t, "decrement", err)
	}
}
