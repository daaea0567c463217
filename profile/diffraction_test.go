package profile

import (
	"errors"
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"

	"ridgehop/internal/itu/p526"
)

// The loss is that of P.526-16 section 4.5 over the profile in km, with the
// cover in the way of the wave and out of the smooth surface.
func TestDiffractionIsDeltaBullington(t *testing.T) {
	polarisations := map[Polarisation]p526.Polarisation{
		Vertical: p526.Vertical, Horizontal: p526.Horizontal, Slant: p526.Slant,
	}
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t)
		n := len(s.p.GroundM)
		km, top := make([]float64, n), make([]float64, n)
		for i := range n {
			km[i], top[i] = s.p.DistanceM[i]/1000, s.reference().top(i)
		}
		general, err := p526.NewGeneralPath(km, top, s.p.GroundM, s.link.AntennaAM, s.link.AntennaBM)
		if err != nil {
			t.Fatal(err)
		}
		for _, d := range s.assess(t).Diffraction {
			want := general.DeltaBullington(p526.Conditions{
				EffectiveRadiusKM: 6371 * d.K, FrequencyGHz: s.link.FrequencyGHz, Polarisation: polarisations[s.link.Polarisation],
			})
			near(t, "loss", d.LossDB, want.LossDB, 1e-9)
			if d.LossDB < 0 {
				t.Fatalf("loss of %g dB", d.LossDB)
			}
		}
	})
}

// A hill of one sample between high antennas is a knife edge that reaches the
// line: nu 0 and J 6.03 dB by the approximation of P.526-16 eq (31), to which
// section 4.5 adds (1-exp(-6.03/6))(10+0.02*10) = 6.47 dB. The smooth earth lies
// far below and adds nothing.
func TestKnifeEdgeOnTheLine(t *testing.T) {
	s := plain(10e3, 500, 500, []Criterion{Flat(1e9, 0)}, 0, 0, 500, 0, 0)
	near(t, "loss", s.assess(t).Diffraction[0].LossDB, 12.50, 0.001)
}

// Each different k has one entry, in the order of the criteria.
func TestOneDiffractionEntryForEachK(t *testing.T) {
	criteria := []Criterion{Flat(MedianK, 1), Flat(0.7, 0), Flat(MedianK, 0.6), Flat(0.7, 0.3), Flat(1, 0), Flat(1, 1), Flat(2, 0), Flat(MedianK, 0)}
	s := plain(10e3, 100, 100, criteria, 0, 90, 30, 95, 0)
	a := s.assess(t)
	var ks []float64
	for _, d := range a.Diffraction {
		ks = append(ks, d.K)
		s.link.Criteria = []Criterion{Flat(d.K, 0)}
		if alone := s.assess(t).Diffraction; len(alone) != 1 || alone[0] != d {
			t.Errorf("k %g: got %+v among others, %+v alone", d.K, d, alone)
		}
	}
	if diff := cmp.Diff([]float64{MedianK, 0.7, 1, 2}, ks); diff != "" {
		t.Errorf("(-want +got):\n%s", diff)
	}
	if len(a.Clearance) != len(criteria) {
		t.Errorf("got %d clearances of %d criteria", len(a.Clearance), len(criteria))
	}
}

func TestMedianDiffraction(t *testing.T) {
	s := plain(10e3, 100, 100, []Criterion{Flat(1, 0), Flat(MedianK, 0.6)}, 0, 90, 30, 95, 0)
	want := s.assess(t).Diffraction[1].LossDB
	for _, criteria := range [][]Criterion{s.link.Criteria, s.link.Criteria[:1]} {
		s.link.Criteria = criteria
		got, err := MedianDiffractionDB(&s.link, &s.p, &Workspace{})
		if err != nil || got != want {
			t.Errorf("got %g, %v, want %g", got, err, want)
		}
		if len(s.link.Criteria) != len(criteria) || s.link.Criteria[0].K != 1 {
			t.Errorf("the link's criteria became %+v", s.link.Criteria)
		}
	}
	s.link.Polarisation = "circular"
	if got, err := MedianDiffractionDB(&s.link, &s.p, &Workspace{}); !errors.Is(err, ErrLink) || !math.IsNaN(got) {
		t.Errorf("polarisation: got %g, %v", got, err)
	}
	s.p.GroundM[1] = math.NaN()
	if got, err := MedianDiffractionDB(&s.link, &s.p, &Workspace{}); err != nil || !math.IsNaN(got) {
		t.Errorf("void: got %g, %v", got, err)
	}
}
