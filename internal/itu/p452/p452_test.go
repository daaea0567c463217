package p452_test

import (
	"errors"
	"math"
	"testing"

	"ridgehop/internal/itu/p452"
	"ridgehop/internal/itu/validity"
)

func TestKFromGradient(t *testing.T) {
	tests := []struct {
		name           string
		gradient, want float64
	}{
		// Columns DN and ae/6371 of the validation examples of the reference
		// software for P.452-18 and P.1812-6 (eeveetza/p452, eeveetza/p1812).
		{"validation example, DN 53", -53, 1.509615384555015},
		{"validation example, DN 42.5", -42.496465, 1.371136708},
		{"no bending", 0, 1},
		{"median atmosphere", -39.25, 4.0 / 3},
		{"sub-refraction", 157, 0.5},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			got, err := p452.KFromGradient(tt.gradient)
			if err != nil || math.Abs(got-tt.want) > 1e-8 {
				t.Errorf("got %v, %v, want %v", got, err, tt.want)
			}
			back, err := p452.GradientFromK(got)
			if err != nil || math.Abs(back-tt.gradient) > 1e-9 {
				t.Errorf("inverse: got %v, %v, want %v", back, err, tt.gradient)
			}
		})
	}
}

func TestOutOfRange(t *testing.T) {
	for _, gradient := range []float64{-157, -200, math.NaN(), math.Inf(1)} {
		if _, err := p452.KFromGradient(gradient); !errors.Is(err, validity.ErrOutOfRange) {
			t.Errorf("gradient %v: got %v, want ErrOutOfRange", gradient, err)
		}
	}
	for _, k := range []float64{0, -1, math.NaN()} {
		if _, err := p452.GradientFromK(k); !errors.Is(err, validity.ErrOutOfRange) {
			t.Errorf("k %v: got %v, want ErrOutOfRange", k, err)
		}
	}
}
