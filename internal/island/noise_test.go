package island

import (
	"math"
	"testing"
)

func TestHashIsFixed(t *testing.T) {
	// The finaliser's published first output for seed 0 of the generator.
	if got, want := hash(1, 0, 0), uint64(0xe220a8397b1dcdaf); got != want {
		t.Errorf("hash %#x, want %#x", got, want)
	}
	if hash(1, 2, 3) == hash(1, 3, 2) || hash(1, -1, 0) == hash(1, 1, 0) {
		t.Error("mirrored lattice points share a hash")
	}
}

func TestNoiseVanishesOnTheLattice(t *testing.T) {
	for x := -3.0; x <= 3; x++ {
		for y := -3.0; y <= 3; y++ {
			if got := noise(5, x, y); got != 0 {
				t.Errorf("noise(%v, %v) = %v, want 0", x, y, got)
			}
		}
	}
}

func TestNoiseIsBoundedAndContinuous(t *testing.T) {
	last := noise(5, -20, 0.4)
	for i := 1; i < 40000; i++ {
		x := -20 + float64(i)*0.001
		v := noise(5, x, 0.4)
		if math.Abs(v) > 0.8 || math.Abs(v-last) > 0.005 {
			t.Fatalf("noise jumps from %v to %v at %v", last, v, x)
		}
		if r := ridged(5, x, 0.4, 3); r < 0 || r > 1 {
			t.Fatalf("ridged noise %v at %v, want 0 to 1", r, x)
		}
		last = v
	}
}

func TestSmooth(t *testing.T) {
	tests := []struct{ lo, hi, v, want float64 }{
		{0, 1, -1, 0}, {0, 1, 0, 0}, {0, 1, 0.5, 0.5}, {0, 1, 1, 1}, {0, 1, 9, 1},
		{2, 4, 2.5, 0.15625},
		{1, -1, 2, 0}, {1, -1, -2, 1}, {1, -1, 0, 0.5}, // falling
	}
	for _, tt := range tests {
		if got := smooth(tt.lo, tt.hi, tt.v); got != tt.want {
			t.Errorf("smooth(%v, %v, %v) = %v, want %v", tt.lo, tt.hi, tt.v, got, tt.want)
		}
	}
}
