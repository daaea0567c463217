package profile

import (
	"math"
	"slices"

	"pgregory.net/rapid"
)

// smooth is the reference for the exact mode: the function that a profile with
// bends stands for, looked at in many places. It shares no code with what is
// tested.
type smooth struct {
	link         Link
	d, top, bend []float64
	fromM, toM   float64 // the open path: 1 mm off the ends, 1 micrometre off what an antenna stands on
}

// smooth copies what the profile says before anything is inserted.
func (s scene) smooth() smooth {
	r := s.reference()
	out := smooth{link: s.link, d: slices.Clone(s.p.DistanceM), bend: slices.Clone(s.p.BendPerM)}
	for i := range out.d {
		out.top = append(out.top, r.top(i))
	}
	out.fromM, out.toM = 0.001, s.link.Path.LengthM-0.001
	if s.p.OwnAM > 0 {
		out.fromM = max(out.fromM, s.p.OwnAM+1e-6)
	}
	if s.p.OwnBM > 0 {
		out.toM = min(out.toM, s.link.Path.LengthM-s.p.OwnBM-1e-6)
	}
	return out
}

// topAt is the top in interval i.
func (s *smooth) topAt(i int, d float64) float64 {
	before, after := d-s.d[i], s.d[i+1]-d
	return (s.top[i]*after+s.top[i+1]*before)/(before+after) + s.bend[i]*before*after
}

// anywhere is the top at any distance.
func (s *smooth) anywhere(d float64) float64 {
	for i := 0; i+1 < len(s.d); i++ {
		if d >= s.d[i] && d <= s.d[i+1] {
			return s.topAt(i, d)
		}
	}
	return math.NaN()
}

func (s *smooth) f1(d float64) float64 {
	d2 := s.link.Path.LengthM - d
	return math.Sqrt(lightSpeed / (s.link.FrequencyGHz * 1e9) * d * d2 / (d + d2))
}

func (s *smooth) clearance(top, d, k float64) float64 {
	d2 := s.link.Path.LengthM - d
	line := (s.link.AntennaAM*d2 + s.link.AntennaBM*d) / (d + d2)
	return line - top - d*d2/(2*k*earthRadiusM)
}

func (s *smooth) ratio(i int, d, k float64) float64 {
	return s.clearance(s.topAt(i, d), d, k) / s.f1(d)
}

// need is the raise, shared between the ends as the weights say, that a place
// needs.
func (s *smooth) need(i int, d float64, c Criterion, weightA, weightB float64) float64 {
	t := d / s.link.Path.LengthM
	return (c.F1Fraction*s.f1(d) - s.clearance(s.topAt(i, d), d, c.K)) / (weightA*(1-t) + weightB*t)
}

// judges is false if what the antennas stand on reaches over the whole path.
func (s *smooth) judges() bool { return s.fromM < s.toM }

// least looks at 1000 places of every interval, and closer around the lowest.
// An interval beside a void is one itself.
func (s *smooth) least(value func(i int, d float64) float64) float64 {
	const places = 1000
	least := math.Inf(1)
	for i := 0; i+1 < len(s.d); i++ {
		from, to := max(s.d[i], s.fromM), min(s.d[i+1], s.toM)
		if !(from <= to) || math.IsNaN(s.top[i]+s.top[i+1]) {
			continue
		}
		at, here := 0, math.Inf(1)
		for k := range places + 1 {
			if v := value(i, from+(to-from)*float64(k)/places); v < here {
				at, here = k, v
			}
		}
		least = min(least, here)
		if here > least+1e-3*math.Abs(least)+0.1 {
			continue
		}
		low := from + (to-from)*float64(max(at-1, 0))/places
		high := from + (to-from)*float64(min(at+1, places))/places
		for range 100 {
			third := (high - low) / 3
			if value(i, low+third) < value(i, high-third) {
				high -= third
			} else {
				low += third
			}
		}
		least = min(least, value(i, (low+high)/2))
	}
	return least
}

func (s *smooth) leastRatio(k float64) float64 {
	return s.least(func(i int, d float64) float64 { return s.ratio(i, d, k) })
}

func (s *smooth) raise(criteria []Criterion, weightA, weightB, capM float64) float64 {
	most := 0.0
	for _, c := range criteria {
		most = max(most, -s.least(func(i int, d float64) float64 { return -s.need(i, d, c, weightA, weightB) }))
	}
	if most > capM {
		return math.NaN()
	}
	return most
}

// span is the distance from the first to the last of 1000 places in every
// interval that misses the fraction, and how coarse that is.
func (s *smooth) span(k, fraction float64) (spanM, stepM float64) {
	first, last := math.Inf(1), math.Inf(-1)
	s.least(func(i int, d float64) float64 {
		if s.ratio(i, d, k) < fraction {
			first, last = min(first, d), max(last, d)
		}
		return 0
	})
	for i := range len(s.d) - 1 {
		stepM = max(stepM, (s.d[i+1]-s.d[i])/1000)
	}
	return max(0, last-first), stepM
}

// onEdge reports whether rounding may decide a criterion.
func (s *smooth) onEdge() bool {
	return slices.ContainsFunc(s.link.Criteria, func(c Criterion) bool {
		ratio := s.leastRatio(c.K)
		return math.Abs(ratio-c.F1Fraction) < 1e-6 || math.Abs(ratio) < 1e-6
	})
}

// drawBent draws a scene of the exact mode: bends that hide hills and hollows
// as high as the ground is rough, often what the antennas stand on, and
// criteria without relief.
func drawBent(t *rapid.T) scene {
	s := drawScene(t)
	if len(s.p.DistanceM) > 30 {
		t.Skip("large enough is soon drawn")
	}
	for i, c := range s.link.Criteria {
		s.link.Criteria[i].IsolatedF1Fraction = c.F1Fraction
	}
	s.link.Criteria = s.link.Criteria[:min(2, len(s.link.Criteria))]
	n := len(s.p.DistanceM)
	s.p.BendPerM = make([]float64, n)
	heightM := rapid.SampledFrom([]float64{0.01, 1, 30}).Draw(t, "bend height")
	for i := range n - 1 {
		step := s.p.DistanceM[i+1] - s.p.DistanceM[i]
		s.p.BendPerM[i] = rapid.Float64Range(-heightM, heightM).Draw(t, "bend") * 4 / (step * step)
	}
	if len(s.p.CoverM) > 0 {
		s.p.CoverM[0], s.p.CoverM[n-1] = 0, 0
		for i := range s.p.CoverM {
			if rapid.Bool().Draw(t, "bare") {
				s.p.CoverM[i] = 0
			}
		}
	}
	if rapid.Bool().Draw(t, "own at a") {
		s.p.OwnAM = s.link.Path.LengthM * rapid.Float64Range(0, 0.4).Draw(t, "own a")
	}
	if rapid.Bool().Draw(t, "own at b") {
		s.p.OwnBM = s.p.DistanceM[n-1] - s.p.DistanceM[n/2]
	}
	s.p.Sources = []Source{{Name: "one", Samples: n}}
	return s
}

// drawRelieved is drawBent with one criterion, for which less is enough where the
// obstruction is isolated.
func drawRelieved(t *rapid.T) scene {
	s := drawBent(t)
	if want := s.smooth(); !want.judges() {
		t.Skip("nothing is judged")
	}
	s.link.Criteria = []Criterion{{K: 1, F1Fraction: rapid.SampledFrom([]float64{0.3, 1}).Draw(t, "relieved fraction")}}
	return s
}
