package profile

import (
	"math"
	"testing"
)

// A hill a quarter of the way along 10 km, k so large that the bulge is
// nothing, only the line asked for: the hill of 140 m stands 40 m over antennas
// at 100 m. One metre at A lifts the line there by 0.75 m, one at B by 0.25 m,
// one at both by 1 m:
//
//	40/0.75 = 53.333 m, 40/0.25 = 160 m, 40 m
func TestRaiseByLever(t *testing.T) {
	hill := func(capM float64) Raise {
		s := plain(10e3, 100, 100, []Criterion{Flat(1e12, 0)}, 0, 140, 0, 0, 0)
		s.link.RaiseCapM = capM
		return s.assess(t).Raise
	}
	nan := math.NaN()
	cases := []struct {
		name        string
		cap, capped float64
		a, b, both  float64
	}{
		{"default cap", 0, DefaultRaiseCapM, 160.0 / 3, 160, 40},
		{"cap beyond all", 500, 500, 160.0 / 3, 160, 40},
		{"cap below b", 100, 100, 160.0 / 3, nan, 40},
		{"cap below a", 50, 50, nan, nan, 40},
		{"cap below all", 10, 10, nan, nan, nan},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			got := hill(c.cap)
			near(t, "cap", got.CapM, c.capped, 0)
			near(t, "a", got.AM, c.a, 1e-9)
			near(t, "b", got.BM, c.b, 1e-9)
			near(t, "both", got.BothM, c.both, 1e-9)
		})
	}
}

// The largest need of all criteria and samples is the raise: here a hill near A
// decides the raise at B, and one near B that at A.
func TestRaiseOfTwoHills(t *testing.T) {
	// At 2.5 km 10 m are missing, at 7.5 km 12 m.
	got := plain(10e3, 100, 100, []Criterion{Flat(1e12, 0)}, 0, 110, 0, 112, 0).assess(t).Raise
	near(t, "a", got.AM, 12/0.25, 1e-9)
	near(t, "b", got.BM, 10/0.25, 1e-9)
	near(t, "both", got.BothM, 12, 1e-9)
}

// With the relief for isolated obstructions the lower of two hills has to be
// cleared in full and the higher one only by the line. Path of 10 km, wavelength
// 0.1 m, no bulge to speak of, 0.3 F1 asked for, 0 where isolated. F1 at 2.5 km
// and 7.5 km is sqrt(0.1*2500*7500/10000) = 13.6931 m, of which 0.3 are 4.1079 m.
// The first hill stands 2 m over the line, the second 1 m below it. For the same
// raise at both ends:
//
//	both in full:         2 + 4.1079 = 6.1079 m
//	second in full only: -1 + 4.1079 = 3.1079 m, and 2 m lift the line off the first
func TestRaiseLeavesAnIsolatedObstruction(t *testing.T) {
	s := plain(10e3, 100, 100, []Criterion{{K: 1e12, F1Fraction: 0.3}}, 0, 102, 0, 99, 0)
	s.link.FrequencyGHz = wave10cm
	near(t, "both", s.assess(t).Raise.BothM, 3.1079191, 1e-6)
	s.link.Criteria = []Criterion{Flat(1e12, 0.3)}
	near(t, "both without relief", s.assess(t).Raise.BothM, 6.1079191, 1e-6)
}

// A narrow hill alone needs no more than the line.
func TestRaiseOfAnIsolatedObstruction(t *testing.T) {
	s := plain(10e3, 100, 100, []Criterion{{K: 1e12, F1Fraction: 0.3}}, 0, 0, 102, 0, 0)
	a := s.assess(t)
	near(t, "both", a.Raise.BothM, 2, 1e-9)
	near(t, "a", a.Raise.AM, 4, 1e-9)
}

func TestNoRaiseWhereMet(t *testing.T) {
	if got := plain(10e3, 100, 100, []Criterion{Flat(1, 0.6)}, 0, 0, 0).assess(t).Raise; got != (Raise{CapM: DefaultRaiseCapM}) {
		t.Errorf("got %+v", got)
	}
}
