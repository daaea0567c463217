package profile

import (
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"
)

// rank orders the verdicts from good to bad.
func rank(v Verdict) int { return slices.Index([]Verdict{Clear, Marginal, Obstructed}, v) }

func TestSwappedEndsMirrorTheAnswer(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t)
		if s.reference().onEdge() {
			t.Skip("rounding decides")
		}
		m := s.mirrored()
		a, b := s.assess(t), m.assess(t)
		if a.Verdict != b.Verdict {
			t.Fatalf("verdict: %s from a, %s from b", a.Verdict, b.Verdict)
		}
		near(t, "tilt a", b.TiltADeg, a.TiltBDeg, 1e-9)
		near(t, "tilt b", b.TiltBDeg, a.TiltADeg, 1e-9)
		near(t, "raise a", b.Raise.AM, a.Raise.BM, 1e-6)
		near(t, "raise b", b.Raise.BM, a.Raise.AM, 1e-6)
		near(t, "raise both", b.Raise.BothM, a.Raise.BothM, 1e-6)
		for i, c := range a.Clearance {
			near(t, "least ratio", b.Clearance[i].MinRatio, c.MinRatio, 1e-7)
			if b.Clearance[i].Met != c.Met || b.Clearance[i].Isolated != c.Isolated {
				t.Fatalf("criterion %d: %+v from a, %+v from b", i, c, b.Clearance[i])
			}
		}
		for i, d := range a.Diffraction {
			near(t, "diffraction", b.Diffraction[i].LossDB, d.LossDB, 1e-6)
		}
		sameMirrored(t, a.Obstructions, b.Obstructions, s.link.Path.LengthM)
	})
}

// sameMirrored compares obstructions seen from both ends. Where two samples are
// equally bad, either may be the worst.
func sameMirrored(t rapid.TB, a, b []Obstruction, lengthM float64) {
	t.Helper()
	if len(a) != len(b) {
		t.Fatalf("obstructions: %d from a, %d from b", len(a), len(b))
	}
	before := func(x, y Obstruction) int {
		for _, d := range []float64{x.K - y.K, x.F1Fraction - y.F1Fraction, x.FromM - y.FromM} {
			if math.Abs(d) > 1e-6 {
				return int(math.Copysign(1, d))
			}
		}
		return 0
	}
	mirrored := slices.Clone(b)
	for i := range mirrored {
		mirrored[i].FromM, mirrored[i].ToM = lengthM-mirrored[i].ToM, lengthM-mirrored[i].FromM
	}
	slices.SortStableFunc(mirrored, before)
	sorted := slices.Clone(a)
	slices.SortStableFunc(sorted, before)
	for i, o := range sorted {
		near(t, "obstruction from", mirrored[i].FromM, o.FromM, 1e-6)
		near(t, "obstruction to", mirrored[i].ToM, o.ToM, 1e-6)
		if mirrored[i].PeakAtM == lengthM-o.PeakAtM {
			near(t, "missing clearance", mirrored[i].ShortM, o.ShortM, 1e-6)
		}
	}
}

func TestHigherAntennaNeverHarms(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t)
		higher := s.raised(rapid.Float64Range(0, 500).Draw(t, "at a"), rapid.Float64Range(0, 500).Draw(t, "at b"))
		neverWorse(t, s, higher)
		low, high := s.assess(t).Raise, higher.assess(t).Raise
		for _, way := range raiseWays {
			// NaN, out of reach, may become a number but not the other way.
			if l := way.of(low); way.of(high) > l+1e-6*max(1, l) || math.IsNaN(way.of(high)) && !math.IsNaN(l) {
				t.Fatalf("raise at %s grows from %g to %g", way.name, l, way.of(high))
			}
		}
	})
}

// neverWorse checks that no clearance and no verdict of the second is worse
// than that of the first.
func neverWorse(t rapid.TB, worse, better scene) {
	t.Helper()
	w, b := worse.assess(t), better.assess(t)
	for i, c := range w.Clearance {
		if got := b.Clearance[i]; got.MinRatio < c.MinRatio-1e-9*max(1, math.Abs(c.MinRatio)) {
			t.Fatalf("criterion %d: ratio falls from %.12g to %.12g", i, c.MinRatio, got.MinRatio)
		}
		if c.Met && !b.Clearance[i].Met {
			t.Fatalf("criterion %d is no longer met", i)
		}
	}
	if rank(b.Verdict) > rank(w.Verdict) {
		t.Fatalf("verdict falls from %s to %s", w.Verdict, b.Verdict)
	}
}

func TestRaiseIsEnoughAndLeast(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t)
		checkRaise(t, s)
	})
}

func TestRaiseOfTemperateSetIsEnoughAndLeast(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t)
		criteria, err := P530Temperate.Criteria(s.link.Path.LengthM)
		if err != nil {
			t.Fatal(err)
		}
		s.link.Criteria = criteria
		checkRaise(t, s)
		// The relief shows where the full zone is not asked for as well.
		s.link.Criteria = criteria[1:]
		checkRaise(t, s)
	})
}

// checkRaise applies each raise that the answer states, and 1 mm less.
func checkRaise(t rapid.TB, s scene) {
	t.Helper()
	stated := s.assess(t)
	for _, way := range raiseWays {
		m := way.of(stated.Raise)
		if math.IsNaN(m) {
			continue
		}
		if (m == 0) != allMet(stated) {
			t.Fatalf("raise at %s: got %g where criteria met is %t", way.name, m, allMet(stated))
		}
		if got := s.raised(m*way.a, m*way.b).assess(t); !allMet(got) || got.Raise.AM != 0 {
			t.Fatalf("raised by the %.12g m stated for %s: %+v", m, way.name, got.Clearance)
		}
		if less := m - 0.001; less > 0 && allMet(s.raised(less*way.a, less*way.b).assess(t)) {
			t.Fatalf("the %.12g m stated for %s are more than needed", m, way.name)
		}
	}
}

func allMet(a Assessment) bool {
	return !slices.ContainsFunc(a.Clearance, func(c Clearance) bool { return !c.Met })
}

func TestLongerWavelengthWidensTheZone(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t)
		long := s.clone()
		long.link.FrequencyGHz *= rapid.Float64Range(0.1, 0.9).Draw(t, "share")
		short, wide := NewSamples(&s.link, &s.p, 1), NewSamples(&long.link, &long.p, 1)
		for i := 1; i < len(short.F1M)-1; i++ {
			if !(wide.F1M[i] > short.F1M[i]) {
				t.Fatalf("sample %d: F1 goes from %g to %g", i, short.F1M[i], wide.F1M[i])
			}
		}
		a, b := s.assess(t), long.assess(t)
		for i, c := range b.Clearance {
			if c.Met && !a.Clearance[i].Met {
				t.Fatalf("criterion %d is met only in the wider zone", i)
			}
		}
		if rank(a.Verdict) > rank(b.Verdict) {
			t.Fatalf("verdict: %s, and %s at the longer wavelength", a.Verdict, b.Verdict)
		}
	})
}

func TestLargerKNeverLowersClearance(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t)
		flatter := s.clone()
		for i := range flatter.link.Criteria {
			flatter.link.Criteria[i].K *= rapid.Float64Range(1, 10).Draw(t, "factor")
		}
		neverWorse(t, s, flatter)
	})
}

func TestCoverNeverRaisesClearance(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t)
		covered := s.clone()
		covered.p.SourceIndex = make([]int16, len(s.p.GroundM))
		covered.p.Sources = []Source{{Name: "one"}}
		covered.p.AddCover(Cover{StatedM: rapid.Float64Range(0, 50).Draw(t, "cover")})
		s.p.CoverM = nil
		neverWorse(t, covered, s)
		higher := covered.clone()
		for i := range higher.p.GroundM {
			higher.p.GroundM[i] += rapid.Float64Range(0, 50).Draw(t, "more ground")
		}
		neverWorse(t, higher, covered)
	})
}

// Antennas stand on the ends: what lies at the ends themselves is not in the
// way of the line.
func TestEndsAreNotJudged(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t)
		if len(s.p.CoverM) == 0 {
			s.p.CoverM = make([]float64, len(s.p.GroundM))
		}
		walled := s.clone()
		last := len(walled.p.GroundM) - 1
		walled.p.GroundM[0], walled.p.CoverM[0] = 4000, 100
		walled.p.GroundM[last], walled.p.CoverM[last] = 4000, 100
		a, b := s.assess(t), walled.assess(t)
		// The diffraction loss does see the ground at the ends: its smooth
		// surface (P.526-16 section 4.5.2) is fitted to the whole profile.
		a.Diffraction, b.Diffraction = nil, nil
		if diff := equal(a, b); diff != "" {
			t.Fatal(diff)
		}
	})
}
