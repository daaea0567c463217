package p525_test

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"ridgehop/internal/itu/p525"
)

func near(t *testing.T, name string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: got %v, want %v (within %v)", name, got, want, tolerance)
	}
}

func TestFreeSpaceLossDB(t *testing.T) {
	tests := []struct {
		name                     string
		frequencyGHz, distanceKM float64
		want, tolerance          float64
	}{
		// P.525 prints 32.4 for MHz and km, which is 92.4 for GHz.
		{"printed constant", 1, 1, 92.4, 0.05},
		// 20 log10(4 pi d/lambda) evaluated by hand with the exact speed of light.
		{"18 GHz, 7.5 km", 18, 7.5, 135.054458592, 1e-8},
		{"80 GHz, 100 m", 80, 0.1, 110.509582962, 1e-8},
	}
	for _, tt := range tests {
		near(t, tt.name, p525.FreeSpaceLossDB(tt.frequencyGHz, tt.distanceKM), tt.want, tt.tolerance)
	}
}

func TestFreeSpaceLossFollowsWavelength(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		f := rapid.Float64Range(0.03, 200).Draw(rt, "GHz")
		d := rapid.Float64Range(0.001, 500).Draw(rt, "km")
		want := 20 * math.Log10(4*math.Pi*d*1000/p525.Wavelength(f))
		if got := p525.FreeSpaceLossDB(f, d); math.Abs(got-want) > 1e-9 {
			rt.Errorf("got %v, want %v", got, want)
		}
		if got := p525.FreeSpaceLossDB(f, 2*d) - p525.FreeSpaceLossDB(f, d); math.Abs(got-20*math.Log10(2)) > 1e-9 {
			rt.Errorf("got %v dB for a doubled distance, want 6.02", got)
		}
	})
}

func TestFieldStrengthDB(t *testing.T) {
	// sqrt(30 P)/d with P = 1 W (30 dBm) and d = 1 km is 5477.2 uV/m.
	near(t, "1 W at 1 km", p525.FieldStrengthDB(30, 1), 20*math.Log10(math.Sqrt(30)*1000), 1e-9)
	near(t, "ten times further", p525.FieldStrengthDB(30, 10)-p525.FieldStrengthDB(30, 1), -20, 1e-9)
}

func TestWavelength(t *testing.T) {
	near(t, "1 GHz", p525.Wavelength(1), 0.299792458, 1e-15)
	near(t, "80 GHz", p525.Wavelength(80), 0.003747405725, 1e-12)
}
