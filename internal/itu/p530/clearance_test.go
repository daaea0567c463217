package p530_test

import (
	"errors"
	"math"
	"testing"

	"ridgehop/internal/itu/p530"
	"ridgehop/internal/itu/validity"
)

// near reports a value that is not within tolerance of the one wanted.
func near(t *testing.T, name string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: got %v, want %v (within %v)", name, got, want, tolerance)
	}
}

// outOfRange reports an error that is not a range error.
func outOfRange(t *testing.T, name string, err error) {
	t.Helper()
	if !errors.Is(err, validity.ErrOutOfRange) {
		t.Errorf("%s: got the error %v, want one that matches ErrOutOfRange", name, err)
	}
}

func TestEffectiveK(t *testing.T) {
	// P.530-19 Fig. 2, read from the printed curve, which lies up to 0.013 above
	// eq (4).
	tests := []struct{ distanceKM, want float64 }{
		{19, 0.5588}, {35, 0.7236}, {65, 0.8509}, {120, 0.9473}, {190, 0.9952},
	}
	previous := 0.0
	for _, tt := range tests {
		got, err := p530.EffectiveK(tt.distanceKM)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "ke", got, tt.want, 0.015)
		if got <= previous {
			t.Errorf("%v km: got %v, want more than %v", tt.distanceKM, got, previous)
		}
		previous = got
	}
	for _, distanceKM := range []float64{0, -1, math.NaN(), math.Inf(1)} {
		_, err := p530.EffectiveK(distanceKM)
		outOfRange(t, "path length", err)
	}
}

func TestAverageTerrainLossDB(t *testing.T) {
	// P.530-19 eq (2): 10 dB when the obstacle touches the line of sight.
	for ratio, want := range map[float64]float64{0: 10, -0.5: 20, 0.2: 6} {
		got, err := p530.AverageTerrainLossDB(ratio)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "Ad", got, want, 1e-12)
	}
	for _, ratio := range []float64{0.21, 1, math.NaN()} {
		_, err := p530.AverageTerrainLossDB(ratio)
		outOfRange(t, "clearance", err)
	}
}
