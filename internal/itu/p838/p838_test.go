package p838_test

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"ridgehop/internal/itu/p838"
	"ridgehop/internal/itu/validity"
)

func near(t *testing.T, name string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: got %v, want %v (within %v)", name, got, want, tolerance)
	}
}

func at(t *testing.T, frequencyGHz float64) p838.Linear {
	t.Helper()
	l, err := p838.At(frequencyGHz)
	if err != nil {
		t.Fatal(err)
	}
	return l
}

func TestAt(t *testing.T) {
	// Rows of P.838-3 Table 5, as printed.
	tests := []struct{ frequencyGHz, kH, alphaH, kV, alphaV float64 }{
		{1, 0.0000259, 0.9691, 0.0000308, 0.8592},
		{2, 0.0000847, 1.0664, 0.0000998, 0.9490},
		{4, 0.0001071, 1.6009, 0.0002461, 1.2476},
	}
	for _, tt := range tests {
		got := at(t, tt.frequencyGHz)
		near(t, "kH", got.Horizontal.K, tt.kH, 5.1e-8)
		near(t, "kV", got.Vertical.K, tt.kV, 5.1e-8)
		near(t, "alphaH", got.Horizontal.Alpha, tt.alphaH, 5.1e-5)
		near(t, "alphaV", got.Vertical.Alpha, tt.alphaV, 5.1e-5)
	}
	for _, frequencyGHz := range []float64{0.99, 1000.1, math.NaN()} {
		if _, err := p838.At(frequencyGHz); !errors.Is(err, validity.ErrOutOfRange) {
			t.Errorf("%v GHz: got %v, want ErrOutOfRange", frequencyGHz, err)
		}
	}
}

func TestCombined(t *testing.T) {
	// Row 1 of the sheet P.838-3 of the ITU-R Study Group 3 validation examples
	// (rev 5.1).
	got := at(t, 14.25).Combined(31.07699124, 0)
	near(t, "k", got.K, 0.03975488, 2e-8)
	near(t, "alpha", got.Alpha, 1.12418043, 2e-8)
	near(t, "gamma", got.SpecificDB(26.48052), 1.58130839, 2e-8)
}

func TestCombinedLaws(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		l, err := p838.At(rapid.Float64Range(1, 1000).Draw(rt, "GHz"))
		if err != nil {
			rt.Fatal(err)
		}
		h, v, slant := l.Combined(0, 0), l.Combined(0, 90), l.Combined(0, 45)
		if math.Abs(h.K-l.Horizontal.K) > 1e-12 || math.Abs(v.Alpha-l.Vertical.Alpha) > 1e-9 {
			rt.Errorf("got %+v and %+v on a level path, want the linear coefficients %+v", h, v, l)
		}
		if math.Abs(slant.K-(h.K+v.K)/2) > 1e-12 {
			rt.Errorf("got k %v for 45 degrees, want the mean of %v and %v", slant.K, h.K, v.K)
		}
		if got, want := l.Combined(90, 10).K, slant.K; math.Abs(got-want) > 1e-12 {
			rt.Errorf("got k %v straight up, want %v whatever the tilt", got, want)
		}
		light, heavy := h.SpecificDB(10), h.SpecificDB(60)
		if !(light > 0 && heavy > light) || h.SpecificDB(0) != 0 {
			rt.Errorf("got %v dB/km at 10 mm/h and %v at 60, want them to rise from 0", light, heavy)
		}
	})
}
