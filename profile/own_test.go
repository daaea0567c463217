package profile

import (
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"
)

// What the antennas stand on could as well lie deep in the earth: nothing but the
// diffraction loss, which sees the whole ground, may tell.
func TestOwnStretchIsNotJudged(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t)
		n := len(s.p.DistanceM)
		first := rapid.IntRange(0, n-2).Draw(t, "own at a")
		last := rapid.IntRange(first+1, n-1).Draw(t, "own at b")
		if last-first < 2 {
			t.Skip("nothing is judged")
		}
		deep := s.clone()
		for i := 1; i < n-1; i++ {
			if i <= first || i >= last {
				deep.p.GroundM[i] = -1e5
			}
		}
		s.p.OwnAM = s.p.DistanceM[first]
		s.p.OwnBM = s.link.Path.LengthM - s.p.DistanceM[last]
		got, want := s.assess(t), deep.assess(t)
		got.Diffraction, want.Diffraction = nil, nil
		if diff := equal(want, got); diff != "" {
			t.Fatalf("(-deep +own):\n%s", diff)
		}
	})
}

// Where an antenna's own stretch ends, in an interval or at a sample, the path
// begins: 10 km, wavelength 0.1 m, antennas at 100 m, no bulge to speak of, a
// ramp from 150 m down to 50 m between 1000 m and 2000 m. An own stretch of
// 1700 m leaves of it what lies below 80 m:
//
//	F1        = sqrt(0.1*1700*8300/10000) = 11.8786 m
//	clearance = 100 - 80                  = 20 m, 1.68370 F1
//	at 2000 m:  50/sqrt(160)              =       3.95285 F1
func TestPathBeginsWhereTheOwnStretchEnds(t *testing.T) {
	s := plain(10e3, 100, 100, []Criterion{Flat(1e12, 0.6)}, 0, 150, 50, 50, 0)
	s.link.FrequencyGHz = wave10cm
	s.p.DistanceM = []float64{0, 1000, 2000, 8000, 10e3}
	s.p.OwnAM = 1700
	near(t, "ratio at samples", s.assess(t).Clearance[0].MinRatio, 3.95285, 1e-5)
	s.p.BendPerM = make([]float64, 5)
	c := s.assess(t).Clearance[0]
	near(t, "place", c.AtM, 1700, 1e-8)
	near(t, "ratio", c.MinRatio, 1.68370, 1e-5)
	s.p.OwnAM = 1000
	if v := s.assess(t).Verdict; v != Obstructed {
		t.Errorf("right behind a wall of its own: %s", v)
	}
}

func TestNothingButOwnStretches(t *testing.T) {
	for _, bends := range [][]float64{nil, {0, 0, 0, 0}} {
		s := plain(30, 50, 50, []Criterion{Flat(MedianK, 0.6)}, 0, 0, 0, 0)
		s.p.OwnAM, s.p.OwnBM, s.p.BendPerM = 15, 15, bends
		a := s.assess(t)
		if a.Verdict != Unknown || a.Clearance[0].Met || len(a.Obstructions) != 0 {
			t.Errorf("got %s, %+v", a.Verdict, a.Clearance)
		}
		near(t, "raise", a.Raise.AM, math.NaN(), 0)
	}
}

// Between two neighbouring samples of own stretches the path can still be open.
func TestOpenPathBetweenOwnSamples(t *testing.T) {
	s := plain(1000, 50, 50, []Criterion{Flat(MedianK, 0)}, 0, 0, 0, 0)
	s.p.DistanceM = []float64{0, 300, 700, 1000}
	s.p.OwnAM, s.p.OwnBM = 310, 310
	s.p.BendPerM = []float64{0, 60.0 / (200 * 200), 0, 0} // 60 m high at 500 m
	a := s.assess(t)
	if a.Verdict != Obstructed {
		t.Fatalf("got %s", a.Verdict)
	}
	near(t, "place", a.Clearance[0].AtM, 500, 1)
}

// A profile without own stretches is judged between its ends.
func TestJudgedSamples(t *testing.T) {
	p := Profile{DistanceM: []float64{0, 10, 20, 30, 40}}
	cases := []struct {
		a, b float64
		want [2]int
	}{
		{0, 0, [2]int{1, 3}},
		{-5, math.NaN(), [2]int{1, 3}},
		{10, 0, [2]int{2, 3}},
		{9, 10, [2]int{1, 2}},
		{10 - 1e-9, 10 - 1e-9, [2]int{2, 2}}, // rounding
		{20, 9, [2]int{3, 3}},
		{20, 20, [2]int{3, 2}},
		{50, 50, [2]int{4, 3}},
	}
	for _, c := range cases {
		p.OwnAM, p.OwnBM = c.a, c.b
		first, last := p.judged(40)
		if diff := cmp.Diff(c.want, [2]int{first, last}); diff != "" {
			t.Errorf("own %g and %g (-want +got):\n%s", c.a, c.b, diff)
		}
	}
}
