package profile

import (
	"math"
	"slices"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"pgregory.net/rapid"
)

func TestRefineAgainstSmooth(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawBent(t)
		want := s.smooth()
		if !want.judges() {
			t.Skip("nothing is judged")
		}
		got := s.assess(t)
		for j, c := range s.link.Criteria {
			g := got.Clearance[j]
			near(t, "least ratio", g.MinRatio, want.leastRatio(c.K), 1e-6)
			near(t, "clearance where it says", g.ClearanceM, want.clearance(want.anywhere(g.AtM), g.AtM, c.K), 1e-8)
		}
		if want.onEdge() {
			t.Skip("rounding decides")
		}
		for _, way := range raiseWays {
			m := want.raise(s.link.Criteria, way.a, way.b, DefaultRaiseCapM)
			if math.Abs(m-DefaultRaiseCapM) < 1 {
				t.Skip("rounding decides")
			}
			if g := way.of(got.Raise); !(math.Abs(g-m) < 0.001) && !(math.IsNaN(g) && math.IsNaN(m)) {
				t.Fatalf("raise at %s: got %.9g, want %.9g", way.name, g, m)
			}
		}
	})
}

// The profile must stand for the same function after samples were inserted, and
// hold together.
func TestRefineKeepsTheTop(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawBent(t)
		want := s.smooth()
		s.refined(t)
		p := &s.p
		after := s.smooth()
		for range 20 {
			d := rapid.Float64Range(0, s.link.Path.LengthM).Draw(t, "d")
			near(t, "top", after.anywhere(d), want.anywhere(d), 1e-8)
		}
		widest := 0.0
		for i := range p.DistanceM {
			near(t, "top at a sample", after.top[i], want.anywhere(p.DistanceM[i]), 1e-8)
			if i > 0 && !(p.DistanceM[i] > p.DistanceM[i-1]) {
				t.Fatalf("distance %g follows %g", p.DistanceM[i], p.DistanceM[i-1])
			}
			if i > 0 {
				widest = max(widest, p.DistanceM[i]-p.DistanceM[i-1])
			}
			if len(p.CoverM) > 0 && p.CoverM[i] < 0 {
				t.Fatalf("cover of %g m", p.CoverM[i])
			}
		}
		if got := [...]int{len(p.GroundM), len(p.BendPerM), len(p.SourceIndex), p.Sources[0].Samples}; got != [...]int{len(p.DistanceM), len(p.DistanceM), len(p.DistanceM), len(p.DistanceM)} {
			t.Fatalf("%d distances, others %d", len(p.DistanceM), got)
		}
		near(t, "widest step", p.SpacingM, widest, 0)
		for _, d := range want.d {
			if !slices.Contains(p.DistanceM, d) {
				t.Fatalf("the sample at %g m is gone", d)
			}
		}
	})
}

func TestRefineTwiceAddsNothing(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawBent(t)
		first := s.refined(t)
		once := s.clone()
		second := s.refined(t)
		if diff := cmp.Diff(once.p.DistanceM, s.p.DistanceM); diff != "" {
			t.Fatalf("(-once +twice):\n%s", diff)
		}
		if diff := equal(first, second); diff != "" {
			t.Fatalf("(-once +twice):\n%s", diff)
		}
	})
}

// Whatever misses a criterion has a sample in its interval that misses it too,
// so that no obstruction goes unlisted.
func TestNoObstructionHidesBetweenSamples(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawBent(t)
		want := s.smooth()
		s.refined(t)
		r := s.reference()
		for _, c := range s.link.Criteria {
			for range 100 {
				d := rapid.Float64Range(want.fromM, max(want.fromM, want.toM)).Draw(t, "d")
				i, _ := slices.BinarySearch(want.d, d)
				if i = max(i-1, 0); d > want.toM || want.ratio(i, d, c.K) >= c.F1Fraction-1e-6 {
					continue
				}
				if !slices.ContainsFunc(r.failing(c.K, c.F1Fraction), func(j int) bool {
					return s.p.DistanceM[j] >= want.d[i] && s.p.DistanceM[j] <= want.d[i+1]
				}) {
					t.Fatalf("%g F1 at %g m has no sample", want.ratio(i, d, c.K), d)
				}
			}
		}
	})
}

func TestRefineFromTheOtherEnd(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawBent(t)
		m, edge := s.mirrored(), s.smooth()
		a, b := s.assess(t), m.assess(t)
		for i, c := range a.Clearance {
			near(t, "least ratio", b.Clearance[i].MinRatio, c.MinRatio, 1e-6)
		}
		if edge.onEdge() {
			t.Skip("rounding decides")
		}
		near(t, "raise a", b.Raise.AM, a.Raise.BM, 1e-6)
		near(t, "raise b", b.Raise.BM, a.Raise.AM, 1e-6)
		near(t, "raise both", b.Raise.BothM, a.Raise.BothM, 1e-6)
		if a.Verdict != b.Verdict {
			t.Fatalf("verdict: %s from a, %s from b", a.Verdict, b.Verdict)
		}
	})
}

func TestRaiseBetweenSamplesIsEnoughAndLeast(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawBent(t)
		if want := s.smooth(); !want.judges() {
			t.Skip("nothing is judged")
		}
		checkRaise(t, s)
	})
}

func TestIsolatedAgainstSmooth(t *testing.T) {
	isolated, extended := 0, 0
	rapid.Check(t, func(t *rapid.T) {
		s := drawRelieved(t)
		want, c := s.smooth(), s.link.Criteria[0]
		spanM, stepM := want.span(c.K, c.F1Fraction)
		limitM := max(250, s.link.Path.LengthM/20)
		if math.Abs(spanM-limitM) < 3*stepM || want.onEdge() {
			t.Skip("the grid decides")
		}
		got := s.assess(t).Clearance[0]
		if missed := want.leastRatio(c.K) < c.F1Fraction; got.Isolated != (missed && spanM < limitM) {
			t.Fatalf("got %+v over %g m", got, spanM)
		}
		if got.Isolated {
			isolated++
		} else {
			extended++
		}
	})
	if isolated == 0 || extended == 0 {
		t.Errorf("%d isolated, %d not: nothing is tested", isolated, extended)
	}
}

func TestRaiseBetweenSamplesWithRelief(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawRelieved(t)
		checkRaise(t, s)
	})
}

// Voids stay voids, and what is known between them is still looked into.
func TestRefineOverVoids(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawBent(t)
		n := len(s.p.GroundM)
		s.p.GroundM[rapid.IntRange(1, n-2).Draw(t, "void at")] = math.NaN()
		s.p.GroundM[rapid.IntRange(1, n-2).Draw(t, "void at")] = math.NaN()
		want, voids := s.smooth(), s.p.Voids()
		a := s.refined(t)
		if s.p.Voids() != voids {
			t.Fatalf("%d voids, then %d", voids, s.p.Voids())
		}
		if a.Verdict != Obstructed && a.Verdict != Unknown {
			t.Fatalf("verdict: %s", a.Verdict)
		}
		for j, c := range s.link.Criteria {
			least := want.leastRatio(c.K)
			// A sample alone between voids belongs to no interval.
			for i := range want.d {
				if want.d[i] >= want.fromM && want.d[i] <= want.toM && !math.IsNaN(want.top[i]) {
					least = min(least, want.clearance(want.top[i], want.d[i], c.K)/want.f1(want.d[i]))
				}
			}
			if math.IsInf(least, 1) {
				least = math.NaN()
			}
			near(t, "least ratio of what is known", a.Clearance[j].MinRatio, least, 1e-6)
		}
	})
}

// A profile without bends is left as it was.
func TestNoBendsNoRefining(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t)
		before := s.clone()
		s.refined(t)
		if diff := cmp.Diff(before.p, s.p, cmpopts.EquateNaNs(), cmpopts.EquateEmpty()); diff != "" {
			t.Fatalf("(-before +after):\n%s", diff)
		}
	})
}

// Ten kilometres of plain, wavelength 0.1 m, antennas at 30 m. Between two samples
// 20 m apart in the middle a bend of 0.4 per metre lifts the top by
// 0.4 * 10 * 10 = 40 m over both. At k 4/3:
//
//	clearance = 30 - 40 - 5000*5000/(2 * 4/3 * 6371000) = -11.4715 m
//	F1        = sqrt(0.1*5000*5000/10000)               =  15.8114 m
func TestRidgeBetweenTwoSamples(t *testing.T) {
	s := plain(10e3, 30, 30, []Criterion{Flat(MedianK, 0.6)}, 0, 0, 0, 0)
	s.link.FrequencyGHz = wave10cm
	s.p.DistanceM = []float64{0, 4990, 5010, 10e3}
	if got := s.assess(t).Verdict; got != Clear {
		t.Fatalf("without the ridge: %s", got)
	}
	s.p.BendPerM = []float64{0, 0.4, 0, 0}
	a := s.assess(t)
	if a.Verdict != Obstructed {
		t.Fatalf("got %s", a.Verdict)
	}
	c := a.Clearance[0]
	near(t, "place", c.AtM, 5000, 1e-9)
	near(t, "clearance", c.ClearanceM, -11.4715115, 1e-7)
	near(t, "ratio", c.MinRatio, -11.4715115/15.8113883, 1e-7)
	near(t, "raise at both", a.Raise.BothM, 11.4715115+0.6*15.8113883, 1e-6)
	near(t, "peak", a.Obstructions[0].PeakAtM, 5000, 0.01)
	near(t, "top", a.Obstructions[0].TopM, 40, 1e-6)
}

// Near an end, where the Fresnel zone is narrow, a lower ridge can be the worse:
// 3 m over the line at 300 m of 10 km, F1 5.4 m, against 7.9 m in the middle, F1
// 15.8 m. Samples show only the latter.
func TestLowerRidgeInTheNarrowZone(t *testing.T) {
	s := plain(10e3, 100, 100, []Criterion{Flat(1e12, 0.6)}, 0, 99, 99, 107.9, 0, 0)
	s.link.FrequencyGHz = wave10cm
	s.p.DistanceM = []float64{0, 10, 1000, 5000, 9000, 10e3}
	near(t, "ratio at samples", s.assess(t).Clearance[0].MinRatio, -7.9/15.8113883, 1e-6)
	s.p.BendPerM = []float64{0, 5 * 4 / (990.0 * 990), 0, 0, 0, 0}
	want := s.smooth()
	c := s.assess(t).Clearance[0]
	near(t, "ratio", c.MinRatio, want.leastRatio(1e12), 1e-6)
	if !(c.AtM > 10 && c.AtM < 1000) {
		t.Errorf("got it at %g m", c.AtM)
	}
}

// Two ridges between samples, 6 km apart, neither seen by a sample: they are no
// isolated obstruction, though only the higher one is an extreme.
func TestHiddenRidgesAreNotIsolated(t *testing.T) {
	s := plain(10e3, 30, 30, []Criterion{{K: MedianK, F1Fraction: 0.6}}, 0, 0, 0, 0, 0, 0)
	s.link.FrequencyGHz = wave10cm
	s.p.DistanceM = []float64{0, 1990, 2010, 7990, 8010, 10e3}
	s.p.BendPerM = []float64{0, 0.25, 0, 0.26, 0, 0}
	a := s.assess(t)
	if a.Clearance[0].Isolated || a.Clearance[0].Met || len(a.Obstructions) != 2 {
		t.Errorf("got %+v, %+v", a.Clearance, a.Obstructions)
	}
}

// The bend is the trees' where there are trees at both sides, but never more
// than they are high; elsewhere it is the ground's.
func TestBendOfGroundOrCover(t *testing.T) {
	cases := []struct {
		name          string
		coverM        []float64
		bend          float64
		ground, cover float64
	}{
		{"no cover", nil, 0.4, 47, 0},
		{"trees that rise", []float64{0, 10, 10, 0}, 0.4, 7, 50},
		{"trees on one side", []float64{0, 10, 0, 0}, 0.4, 47, 5},
		{"trees that sink", []float64{0, 10, 10, 0}, -0.05, 7, 5},
		{"ground below the trees sinks", []float64{0, 10, 10, 0}, -0.4, -23, 0},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			s := plain(10e3, 30, 30, []Criterion{Flat(MedianK, 0.6)}, 0, 6, 8, 0)
			s.p.DistanceM = []float64{0, 4990, 5010, 10e3}
			s.p.BendPerM, s.p.CoverM = []float64{0, c.bend, 0, 0}, c.coverM
			s.p.SourceIndex, s.p.Sources = []int16{0, 1, 0, 0}, []Source{{Samples: 3}, {Samples: 1}}
			s.p.SpacingM = 4990
			s.p.insert([]place{{1, 5000}})
			near(t, "ground", s.p.GroundM[2], c.ground, 1e-12)
			if c.coverM != nil {
				near(t, "cover", s.p.CoverM[2], c.cover, 1e-12)
			}
			if s.p.SourceIndex[2] != 1 || s.p.Sources[1].Samples != 2 {
				t.Errorf("source %d, %+v", s.p.SourceIndex[2], s.p.Sources)
			}
		})
	}
}

func TestRefineAllocatesNothing(t *testing.T) {
	for _, antennaM := range []float64{400, 120} {
		s, ws := bent(450, antennaM), &Workspace{}
		from := s.clone()
		again := func() {
			s.p.restore(&from.p)
			refine(&s.link, &s.p, ws, false)
		}
		again()
		if got := testing.AllocsPerRun(20, again); got != 0 {
			t.Errorf("antennas at %g m: %g allocations", antennaM, got)
		}
	}
}

func TestBendsOfAnotherNumber(t *testing.T) {
	s := plain(1000, 50, 50, []Criterion{Flat(1, 0.6)}, 0, 1, 0)
	s.p.BendPerM = []float64{0, 0}
	if _, err := Assess(&s.link, &s.p, &Workspace{}); err == nil {
		t.Error("no error")
	}
}
