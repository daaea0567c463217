package profile

import (
	"math"
	"slices"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"pgregory.net/rapid"
)

func TestClearanceAgainstReference(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t)
		got, want := s.assess(t), s.reference()
		if want.onEdge() {
			t.Skip("rounding decides")
		}
		if v := want.verdict(); got.Verdict != v {
			t.Fatalf("verdict: got %s, want %s", got.Verdict, v)
		}
		for j, c := range s.link.Criteria {
			g := got.Clearance[j]
			i := slices.Index(s.p.DistanceM, g.AtM)
			near(t, "least ratio", g.MinRatio, want.least(c.K), 1e-7)
			near(t, "ratio where it says", want.ratio(i, c.K), g.MinRatio, 1e-7)
			near(t, "clearance", g.ClearanceM, want.clearance(i, c.K), 1e-7)
			near(t, "first Fresnel radius", g.F1M, want.f1(i), 1e-9)
			w := Clearance{
				K: c.K, F1Fraction: want.fraction(c), Isolated: want.isolated(c), Met: want.met(c),
				MinRatio: g.MinRatio, AtM: g.AtM, ClearanceM: g.ClearanceM, F1M: g.F1M,
			}
			if diff := cmp.Diff(w, g); diff != "" {
				t.Fatalf("criterion %d (-want +got):\n%s", j, diff)
			}
		}
	})
}

func TestRaiseAgainstReference(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t)
		s.link.RaiseCapM = rapid.SampledFrom([]float64{0, 1, 30, 1000}).Draw(t, "cap")
		capM := s.link.RaiseCapM
		if capM == 0 {
			capM = 20000
		}
		got, r := s.assess(t).Raise, s.reference()
		if got.CapM != capM {
			t.Fatalf("cap: got %g, want %g", got.CapM, capM)
		}
		for _, way := range raiseWays {
			want := r.raise(way.a, way.b, capM)
			if math.Abs(want-capM) < 0.001 || r.onEdge() {
				t.Skip("rounding decides")
			}
			near(t, "raise at "+way.name, way.of(got), want, 1e-4+1e-6*want)
		}
	})
}

// raiseWays are the three raises, with the share of one metre that each end
// gets.
var raiseWays = []struct {
	name string
	a, b float64
	of   func(Raise) float64
}{
	{"a", 1, 0, func(r Raise) float64 { return r.AM }},
	{"b", 0, 1, func(r Raise) float64 { return r.BM }},
	{"both", 1, 1, func(r Raise) float64 { return r.BothM }},
}

func TestObstructionsAgainstReference(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t)
		r := s.reference()
		if r.onEdge() {
			t.Skip("rounding decides")
		}
		var want []Obstruction
		for _, c := range s.link.Criteria {
			want = append(want, r.obstructions(c)...)
		}
		approx := cmpopts.EquateApprox(1e-9, 1e-7)
		if diff := cmp.Diff(want, s.assess(t).Obstructions, approx, cmpopts.EquateEmpty()); diff != "" {
			t.Fatalf("obstructions (-want +got):\n%s", diff)
		}
	})
}
