package profile

import (
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"pgregory.net/rapid"
)

// Ten kilometres, wavelength 0.1 m, antennas at 100 m and 200 m, k 4/3:
//
//	bulge = 2500*7500/(2 * 4/3 * 6371000) = 1.10363 m, 1.47151 m in the middle
//	F1    = sqrt(0.1*2500*7500/10000) = 13.69306 m, 15.81139 m in the middle
func TestSamples(t *testing.T) {
	s := plain(10e3, 100, 200, []Criterion{Flat(MedianK, 1)}, 5, 10, math.NaN(), 20, 7)
	s.link.FrequencyGHz = wave10cm
	want := Samples{
		K:         4.0 / 3,
		DistanceM: []float64{0, 2500, 5000, 7500, 10e3},
		GroundM:   []float64{5, 10, math.NaN(), 20, 7},
		CoverM:    []float64{0, 0, 0, 0, 0},
		BulgeM:    []float64{0, 1.10363, 1.47151, 1.10363, 0},
		LineM:     []float64{100, 125, 150, 175, 200},
		F1M:       []float64{0, 13.69306, 15.81139, 13.69306, 0},
	}
	approx := cmpopts.EquateApprox(0, 1e-5)
	if diff := cmp.Diff(want, NewSamples(&s.link, &s.p, 4.0/3), approx, cmpopts.EquateNaNs()); diff != "" {
		t.Errorf("(-want +got):\n%s", diff)
	}
	s.p.CoverM = []float64{0, 1, 2, 3, 0}
	if diff := cmp.Diff(s.p.CoverM, NewSamples(&s.link, &s.p, 1).CoverM); diff != "" {
		t.Errorf("cover (-want +got):\n%s", diff)
	}
}

// The least of (line - ground - cover - bulge)/F1 over the arrays is the ratio of
// the assessment.
func TestSamplesAgreeWithTheAssessment(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t)
		for _, c := range s.assess(t).Clearance {
			arrays := NewSamples(&s.link, &s.p, c.K)
			least := math.Inf(1)
			for i := 1; i < len(arrays.LineM)-1; i++ {
				clearance := arrays.LineM[i] - arrays.GroundM[i] - arrays.CoverM[i] - arrays.BulgeM[i]
				least = min(least, clearance/arrays.F1M[i])
			}
			near(t, "least ratio", least, c.MinRatio, 1e-7)
		}
	})
}

// A distance that rounding puts beyond the end has no negative bulge and no F1
// that is not a number.
func TestSamplesBeyondTheEnd(t *testing.T) {
	s := plain(1000, 10, 10, []Criterion{Flat(1, 0)}, 0, 0, 0)
	s.p.DistanceM[2] = math.Nextafter(1000, 2000)
	arrays := NewSamples(&s.link, &s.p, 1)
	if arrays.BulgeM[2] != 0 || arrays.F1M[2] != 0 {
		t.Errorf("got bulge %g, F1 %g", arrays.BulgeM[2], arrays.F1M[2])
	}
}
