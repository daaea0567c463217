package p841_test

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"ridgehop/internal/itu/p841"
	"ridgehop/internal/itu/validity"
)

func TestAnnualPercent(t *testing.T) {
	tests := []struct {
		name             string
		parameters       p841.Parameters
		worst, want, tol float64
	}{
		// Q = 12 for the rarest events, P.530-19 section 2.3.4.
		{"all in one month", p841.Multipath(), 1.2e-5, 1e-6, 1e-15},
		// p = (pw/2.85)^(1/0.87), from Q = Q1 p^-beta by hand.
		{"0.01 % of the worst month", p841.Multipath(), 0.01, 0.00150778439, 1e-10},
		{"1 % of the worst month", p841.Multipath(), 1, 0.300047364, 1e-8},
		{"at Q1 the year has 1 %", p841.RainWet(), 2.82, 1, 1e-12},
		{"at Q1 the year has 1 %, dry", p841.RainDry(), 4.48, 1, 1e-12},
		// The flat branch: Q1 3^-beta = 2.4707.
		{"flat branch", p841.Multipath(), 10 * 2.85 * math.Pow(3, -0.13), 10, 1e-9},
		{"always", p841.Multipath(), 100, 100, 1e-9},
		{"no seasons", p841.Parameters{Q1: 1}, 2, 2, 1e-12},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			got, err := tt.parameters.AnnualPercent(tt.worst)
			if err != nil || math.Abs(got-tt.want) > tt.tol {
				t.Errorf("got %v, %v, want %v (within %v)", got, err, tt.want, tt.tol)
			}
		})
	}
}

func TestConversionLaws(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		p := rapid.SampledFrom([]p841.Parameters{p841.Multipath(), p841.RainWet()}).Draw(rt, "climate")
		annual := math.Pow(10, rapid.Float64Range(-7, 2).Draw(rt, "log of the percentage"))
		worst, err := p.WorstMonthPercent(annual)
		if err != nil {
			rt.Fatal(err)
		}
		back, err := p.AnnualPercent(min(worst, 100))
		if err != nil || math.Abs(back/annual-1) > 1e-9 {
			rt.Errorf("got %v %% back (%v), want %v", back, err, annual)
		}
		ratio, err := p.Ratio(annual)
		if err != nil || ratio < 1-1e-12 || ratio > 12 {
			rt.Errorf("got the ratio %v (%v), want 1 to 12", ratio, err)
		}
		more, err := p.WorstMonthPercent(min(100, annual*1.01))
		if err != nil || more < worst*(1-1e-9) {
			rt.Errorf("got %v %% for a larger annual percentage (%v), want at least %v", more, err, worst)
		}
	})
}

func TestStrongSeasonsFillTheMonth(t *testing.T) {
	got, err := p841.RainDry().WorstMonthPercent(28)
	if err != nil || got != 100 {
		t.Errorf("got %v, %v, want 100", got, err)
	}
	annual, err := p841.RainDry().AnnualPercent(100)
	if want := 100 / (4.48 * math.Pow(3, -0.11)); err != nil || math.Abs(annual-want) > 1e-9 {
		t.Errorf("got %v, %v, want %v", annual, err, want)
	}
}

func TestRatioIsContinuous(t *testing.T) {
	p := p841.Multipath()
	for _, at := range []float64{math.Pow(p.Q1/12, 1/p.Beta), 3, 30} {
		below, err1 := p.Ratio(at * (1 - 1e-12))
		above, err2 := p.Ratio(at * (1 + 1e-12))
		if err1 != nil || err2 != nil || math.Abs(above-below) > 1e-9 {
			t.Errorf("at %v %%: got %v and %v, want them equal", at, below, above)
		}
	}
}

func TestOutOfRange(t *testing.T) {
	for _, percent := range []float64{0, -1, 100.1, math.NaN()} {
		_, err1 := p841.Multipath().AnnualPercent(percent)
		_, err2 := p841.Multipath().WorstMonthPercent(percent)
		if !errors.Is(err1, validity.ErrOutOfRange) || !errors.Is(err2, validity.ErrOutOfRange) {
			t.Errorf("%v %%: got %v and %v, want ErrOutOfRange", percent, err1, err2)
		}
	}
	for _, p := range []p841.Parameters{{Q1: 0.5, Beta: 0.1}, {Q1: 13, Beta: 0.1}, {Q1: 2, Beta: 1}, {Q1: 1, Beta: 0.5}} {
		if _, err := p.Ratio(1); !errors.Is(err, validity.ErrOutOfRange) {
			t.Errorf("%+v: got %v, want ErrOutOfRange", p, err)
		}
	}
}
