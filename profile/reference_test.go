package profile

import (
	"math"
	"slices"
)

// reference judges a link straight from the formulas, one criterion and one
// sample at a time, and searches where the code under test solves. It shares no
// code with it.
//
// Sources: P.526-16 section 2.1 (bulge) and eq (2) (Fresnel radius), P.530-19
// section 2.2 (criteria).
type reference struct {
	link Link
	p    *Profile
}

const (
	lightSpeed   = 299792458.0 // m/s, exact
	earthRadiusM = 6371e3
	edge         = 1e-9 // of F1: what counts as exactly met
	micrometre   = 1e-6 // what counts as exactly as far apart
)

func (r reference) ends(i int) (d1, d2 float64) {
	return r.p.DistanceM[i], r.link.Path.LengthM - r.p.DistanceM[i]
}

func (r reference) f1(i int) float64 {
	d1, d2 := r.ends(i)
	return math.Sqrt(lightSpeed / (r.link.FrequencyGHz * 1e9) * d1 * d2 / (d1 + d2))
}

func (r reference) line(i int) float64 {
	d1, d2 := r.ends(i)
	return (r.link.AntennaAM*d2 + r.link.AntennaBM*d1) / (d1 + d2)
}

func (r reference) bulge(i int, k float64) float64 {
	d1, d2 := r.ends(i)
	return d1 * d2 / (2 * k * earthRadiusM)
}

func (r reference) top(i int) float64 {
	if len(r.p.CoverM) == 0 {
		return r.p.GroundM[i]
	}
	return r.p.GroundM[i] + r.p.CoverM[i]
}

func (r reference) clearance(i int, k float64) float64 {
	return r.line(i) - r.top(i) - r.bulge(i, k)
}

func (r reference) ratio(i int, k float64) float64 { return r.clearance(i, k) / r.f1(i) }

// known lists the samples between the ends that have a height.
func (r reference) known() []int {
	var out []int
	for i := 1; i < len(r.p.GroundM)-1; i++ {
		if !math.IsNaN(r.p.GroundM[i]) {
			out = append(out, i)
		}
	}
	return out
}

func (r reference) least(k float64) float64 {
	least := math.NaN()
	for _, i := range r.known() {
		if ratio := r.ratio(i, k); !(ratio >= least) {
			least = ratio
		}
	}
	return least
}

func (r reference) failing(k, fraction float64) []int {
	return slices.DeleteFunc(r.known(), func(i int) bool { return r.ratio(i, k) >= fraction-edge })
}

// widest is the largest distance between any two of the samples.
func (r reference) widest(samples []int) float64 {
	widest := 0.0
	for _, i := range samples {
		for _, j := range samples {
			widest = max(widest, r.p.DistanceM[j]-r.p.DistanceM[i])
		}
	}
	return widest
}

func (r reference) isolated(c Criterion) bool {
	failing := r.failing(c.K, c.F1Fraction)
	return c.IsolatedF1Fraction < c.F1Fraction && r.p.Voids() == 0 && len(failing) > 0 &&
		r.widest(failing) <= max(250, r.link.Path.LengthM/20)+micrometre
}

func (r reference) fraction(c Criterion) float64 {
	if r.isolated(c) {
		return c.IsolatedF1Fraction
	}
	return c.F1Fraction
}

func (r reference) met(c Criterion) bool {
	return r.p.Voids() == 0 && len(r.failing(c.K, r.fraction(c))) == 0
}

func (r reference) allMet() bool {
	return !slices.ContainsFunc(r.link.Criteria, func(c Criterion) bool { return !r.met(c) })
}

func (r reference) verdict() Verdict {
	cut := slices.ContainsFunc(r.link.Criteria, func(c Criterion) bool { return len(r.failing(c.K, 0)) > 0 })
	switch {
	case cut:
		return Obstructed
	case r.p.Voids() > 0:
		return Unknown
	case r.allMet():
		return Clear
	}
	return Marginal
}

func (r reference) raised(aM, bM float64) reference {
	r.link.AntennaAM += aM
	r.link.AntennaBM += bM
	return r
}

// raise searches, by halving, for the least raise that meets every criterion,
// shared between the ends as the weights say.
func (r reference) raise(weightA, weightB, capM float64) float64 {
	meets := func(m float64) bool { return r.raised(m*weightA, m*weightB).allMet() }
	if meets(0) {
		return 0
	}
	if !meets(capM) {
		return math.NaN()
	}
	low, high := 0.0, capM
	for range 60 {
		if middle := (low + high) / 2; meets(middle) {
			high = middle
		} else {
			low = middle
		}
	}
	return high
}

// onEdge reports whether rounding alone may decide the scene: a ratio meets a
// fraction almost exactly.
func (r reference) onEdge() bool {
	for _, c := range r.link.Criteria {
		for _, fraction := range []float64{c.F1Fraction, c.IsolatedF1Fraction, 0} {
			for _, i := range r.known() {
				if math.Abs(r.ratio(i, c.K)-fraction) < 1e-6 {
					return true
				}
			}
		}
	}
	return false
}

// obstructions groups the failing samples whose neighbours lie up to 250 m
// apart (P.526-16 section 4.4).
func (r reference) obstructions(c Criterion) []Obstruction {
	var out []Obstruction
	fraction := r.fraction(c)
	for _, i := range r.failing(c.K, fraction) {
		d, last := r.p.DistanceM[i], len(out)-1
		if last < 0 || d-out[last].ToM > 250+micrometre {
			out, last = append(out, Obstruction{K: c.K, F1Fraction: fraction, FromM: d, PeakAtM: d}), last+1
		}
		peak := slices.Index(r.p.DistanceM, out[last].PeakAtM)
		if r.ratio(i, c.K) < r.ratio(peak, c.K) {
			peak = i
		}
		out[last].ToM, out[last].PeakAtM, out[last].TopM = d, r.p.DistanceM[peak], r.top(peak)
		out[last].ShortM = fraction*r.f1(peak) - r.clearance(peak, c.K)
	}
	return out
}
