package profile

import (
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"
)

func TestNeverClearOverVoids(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t)
		voids := rapid.IntRange(1, len(s.p.GroundM)).Draw(t, "voids")
		for range voids {
			s.p.GroundM[rapid.IntRange(0, len(s.p.GroundM)-1).Draw(t, "void at")] = math.NaN()
		}
		r, a := s.reference(), s.assess(t)
		if r.onEdge() {
			t.Skip("rounding decides")
		}
		// The reference is obstructed if a known sample cuts the line.
		if want := r.verdict(); a.Verdict != want || want == Clear || want == Marginal {
			t.Fatalf("verdict: got %s, want %s", a.Verdict, want)
		}
		for i, c := range a.Clearance {
			near(t, "least ratio of what is known", c.MinRatio, r.least(c.K), 1e-7)
			if c.Met || c.Isolated || c.F1Fraction != s.link.Criteria[i].F1Fraction {
				t.Fatalf("over a void: %+v", c)
			}
		}
		for _, way := range raiseWays {
			near(t, "raise at "+way.name, way.of(a.Raise), math.NaN(), 0)
		}
		for _, d := range a.Diffraction {
			near(t, "diffraction", d.LossDB, math.NaN(), 0)
		}
		near(t, "share of voids", a.VoidShare, float64(s.p.Voids())/float64(len(s.p.GroundM)), 1e-15)
	})
}

func TestVoids(t *testing.T) {
	nan := math.NaN()
	criteria := []Criterion{Flat(MedianK, 1), Flat(1, 0.3), Flat(MedianK, 0.6)}
	unknown := []Diffraction{{K: MedianK, LossDB: nan}, {K: 1, LossDB: nan}}
	noRaise := Raise{AM: nan, BM: nan, BothM: nan, CapM: DefaultRaiseCapM}
	nothing := make([]Clearance, len(criteria))
	for i, c := range criteria {
		nothing[i] = Clearance{K: c.K, F1Fraction: c.F1Fraction, MinRatio: nan, AtM: nan, ClearanceM: nan, F1M: nan}
	}
	tilt := plain(4000, 50, 60, criteria, 0, 0, 0).assess(t)
	cases := []struct {
		name    string
		aM, bM  float64
		heights []float64
		want    Assessment
	}{
		{
			"nothing known between the ends", 50, 60,
			[]float64{0, nan, nan, nan, 0},
			Assessment{
				TiltADeg: tilt.TiltADeg, TiltBDeg: tilt.TiltBDeg, VoidShare: 0.6,
				Reasons: []Reason{{Code: ReasonVoidOnPath, Share: 0.6, FromM: 1000, ToM: 3000}},
			},
		},
		{
			"no ground under a", nan, 60,
			[]float64{nan, 0, 0, 0, 0},
			Assessment{
				TiltADeg: nan, TiltBDeg: nan, VoidShare: 0.2,
				Reasons: []Reason{{Code: ReasonVoidAtEnd, End: "a"}, {Code: ReasonVoidOnPath, Share: 0.2}},
			},
		},
		{
			"no ground under b", 50, nan,
			[]float64{0, 0, 0, 0, nan},
			Assessment{
				TiltADeg: nan, TiltBDeg: nan, VoidShare: 0.2,
				Reasons: []Reason{{Code: ReasonVoidAtEnd, End: "b"}, {Code: ReasonVoidOnPath, Share: 0.2, FromM: 4000, ToM: 4000}},
			},
		},
		{
			"no antenna placed", nan, nan,
			[]float64{0, 0, 0, 0, 0},
			Assessment{
				TiltADeg: nan, TiltBDeg: nan,
				Reasons: []Reason{{Code: ReasonVoidAtEnd, End: "a"}, {Code: ReasonVoidAtEnd, End: "b"}},
			},
		},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			c.want.Verdict, c.want.Clearance, c.want.Raise, c.want.Diffraction = Unknown, nothing, noRaise, unknown
			c.want.Confidence, c.want.ExtraHeight = nan, ExtraHeight{AM: nan, BM: nan, BothM: nan}
			if diff := equal(c.want, plain(4000, c.aM, c.bM, criteria, c.heights...).assess(t)); diff != "" {
				t.Errorf("(-want +got):\n%s", diff)
			}
		})
	}
}

// The known part of a path shows its obstruction whatever the rest hides.
func TestObstructionBesideAVoid(t *testing.T) {
	s := plain(4000, 50, 50, []Criterion{{K: MedianK, F1Fraction: 0.3}}, 0, 90, math.NaN(), 0, 0)
	a := s.assess(t)
	if a.Verdict != Obstructed || len(a.Obstructions) != 1 || a.Clearance[0].Isolated {
		t.Fatalf("got %s, %+v, %+v", a.Verdict, a.Obstructions, a.Clearance)
	}
	if diff := cmp.Diff(1000.0, a.Obstructions[0].PeakAtM); diff != "" {
		t.Error(diff)
	}
	if diff := cmp.Diff([]ReasonCode{ReasonLineCut, ReasonVoidOnPath}, codes(a)); diff != "" {
		t.Error(diff)
	}
}

// A void at an end alone hides nothing of what is judged, but the answer still
// says unknown.
func TestVoidAtAnEndWithAPlacedAntenna(t *testing.T) {
	a := plain(4000, 50, 50, []Criterion{Flat(MedianK, 0.6)}, math.NaN(), 0, 0, 0, 0).assess(t)
	if a.Verdict != Unknown || a.Clearance[0].Met {
		t.Errorf("got %s, %+v", a.Verdict, a.Clearance)
	}
	if diff := cmp.Diff([]ReasonCode{ReasonVoidOnPath}, codes(a)); diff != "" {
		t.Error(diff)
	}
}
