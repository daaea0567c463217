package profile

import (
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
)

// humps is a plain of 5 km with samples every 50 m, antennas at 100 m, and hills
// of the given heights at the given distances.
func humps(heightsM map[float64]float64) scene {
	heights := make([]float64, 101)
	for atM, m := range heightsM {
		heights[int(atM/50)] = m
	}
	return plain(5000, 100, 100, []Criterion{Flat(1, 0.6)}, heights...)
}

func TestObstructionGrouping(t *testing.T) {
	type stretch struct{ From, To, Peak float64 }
	cases := []struct {
		name  string
		hills map[float64]float64
		want  []stretch
	}{
		{"none", nil, nil},
		{"one sample", map[float64]float64{2500: 120}, []stretch{{2500, 2500, 2500}}},
		{"neighbours", map[float64]float64{2500: 120, 2550: 125}, []stretch{{2500, 2550, 2550}}},
		{"250 m apart are one", map[float64]float64{2000: 120, 2250: 110}, []stretch{{2000, 2250, 2000}}},
		{"300 m apart are two", map[float64]float64{2000: 120, 2300: 110}, []stretch{{2000, 2000, 2000}, {2300, 2300, 2300}}},
		{"a chain is one", map[float64]float64{1000: 120, 1200: 110, 1400: 130, 1650: 100}, []stretch{{1000, 1650, 1400}}},
		{"each its own worst", map[float64]float64{1000: 120, 1050: 130, 3000: 150, 3100: 140}, []stretch{{1000, 1050, 1050}, {3000, 3100, 3000}}},
		{"hills below the zone", map[float64]float64{2500: 50}, nil},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			var got []stretch
			for _, o := range humps(c.hills).assess(t).Obstructions {
				got = append(got, stretch{o.FromM, o.ToM, o.PeakAtM})
			}
			if diff := cmp.Diff(c.want, got); diff != "" {
				t.Errorf("(-want +got):\n%s", diff)
			}
		})
	}
}

// The worst sample has the least clearance over F1, which need not be the
// highest: near the end the zone is narrow. Path of 10 km, wavelength 0.1 m, k so
// large that the bulge is nothing, antennas at 100 m:
//
//	at 100 m: F1 = sqrt(0.1*100*9900/10000) = 3.1464 m, ground 101 m: -0.318
//	at 300 m: F1 = sqrt(0.1*300*9700/10000) = 5.3944 m, ground 101.5 m: -0.278
//
// At the first, 0.6 F1 = 1.8878 m is asked for and -1 m free: 2.8878 m missing.
func TestWorstPointHasTheLeastRatio(t *testing.T) {
	s := plain(10e3, 100, 100, []Criterion{Flat(1e9, 0.6)}, 0, 100, 100.5, 0)
	s.link.FrequencyGHz = wave10cm
	s.p.DistanceM = []float64{0, 100, 300, 10e3}
	s.p.CoverM = []float64{0, 1, 1, 0}
	want := []Obstruction{{K: 1e9, F1Fraction: 0.6, FromM: 100, ToM: 300, PeakAtM: 100, TopM: 101, ShortM: 2.8878}}
	if diff := cmp.Diff(want, s.assess(t).Obstructions, cmpopts.EquateApprox(0, 1e-4)); diff != "" {
		t.Errorf("(-want +got):\n%s", diff)
	}
}

// Every missed criterion has its own list, in the order of the criteria; one
// that is met has none.
func TestObstructionsOfEachCriterion(t *testing.T) {
	s := humps(map[float64]float64{2500: 95})
	s.link.Criteria = []Criterion{Flat(1, 0), Flat(MedianK, 0.6), Flat(1, 1)}
	var got []Criterion
	for _, o := range s.assess(t).Obstructions {
		got = append(got, Flat(o.K, o.F1Fraction))
	}
	if diff := cmp.Diff(s.link.Criteria[1:], got); diff != "" {
		t.Errorf("(-want +got):\n%s", diff)
	}
}

// Samples a limit apart to the last bit, as even steps often are, must be judged
// the same from either end. Of 20 steps one is a twentieth of the path, the
// longest isolated obstruction.
func TestEvenStepsAreIsolatedFromEitherEnd(t *testing.T) {
	for _, lengthM := range []float64{5000, 8103.083927575384, 12345.678, 33333.3} {
		s := plain(lengthM, 0, 0, []Criterion{{K: 1, F1Fraction: 0.3}}, make([]float64, 21)...)
		r := s.reference()
		for i := range s.p.GroundM {
			clearance := 10 * r.f1(i)
			if i == 7 || i == 8 {
				clearance = 0.1 * r.f1(i)
			}
			s.p.GroundM[i] = r.line(i) - r.bulge(i, 1) - clearance
		}
		for end, a := range map[string]Assessment{"a": s.assess(t), "b": s.mirrored().assess(t)} {
			if a.Verdict != Clear || !a.Clearance[0].Isolated {
				t.Errorf("%g m from %s: got %s, %+v", lengthM, end, a.Verdict, a.Clearance[0])
			}
		}
	}
}

// Steps of 250 m, of which rounding makes some longer: neighbours are one
// obstruction.
func TestEvenStepsAreOneObstructionFromEitherEnd(t *testing.T) {
	for _, steps := range []int{20, 23, 28, 41} {
		s := plain(250.1*float64(steps), 100, 100, []Criterion{Flat(1, 0.6)}, make([]float64, steps+1)...)
		for i := range s.p.DistanceM {
			s.p.DistanceM[i] = 0.1 + 250*float64(i)
		}
		s.p.DistanceM[0], s.p.DistanceM[steps] = 0, s.link.Path.LengthM
		for i := 5; i < 15; i++ {
			s.p.GroundM[i] = 200
		}
		for end, a := range map[string]Assessment{"a": s.assess(t), "b": s.mirrored().assess(t)} {
			if len(a.Obstructions) != 1 {
				t.Errorf("%d steps from %s: got %d obstructions", steps, end, len(a.Obstructions))
			}
		}
	}
}
