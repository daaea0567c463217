package profile

import "math"

// stretch is a part of the path, with the intervals that its ends lie in.
type stretch struct {
	fromM, toM  float64
	first, last int
}

// below is the stretch from the first to the last place where the target is
// below zero, looked for from one interval to another; false if nowhere.
func (r *refiner) below(t *target, start, stop int) (stretch, bool) {
	for i := start; i < stop; i++ {
		fromM, ok := r.crossing(t, i, false)
		if !ok {
			continue
		}
		for k := stop - 1; k >= i; k-- {
			if toM, ok := r.crossing(t, k, true); ok {
				return stretch{fromM, toM, i, k}, true
			}
		}
	}
	return stretch{}, false
}

// crossing is the first place of interval i, or the last, where the target is
// below zero; false if there is none. Between two neighbours of the ends, the
// middle of the path and the lowest points, it crosses zero once if at all.
func (r *refiner) crossing(t *target, i int, last bool) (float64, bool) {
	if !r.mayBeat(t, i) {
		return 0, false
	}
	a := r.arc(t, i)
	if !(a.fromM < a.toM) {
		return 0, false
	}
	middle := min(max(r.lengthM/2, a.fromM), a.toM)
	turns := [5]float64{a.fromM, a.fromM, middle, middle, a.toM}
	if d, ok := r.lowest(t, &a, a.fromM, middle); ok {
		turns[1] = d
	}
	if d, ok := r.lowest(t, &a, middle, a.toM); ok {
		turns[3] = d
	}
	if last {
		turns[0], turns[1], turns[3], turns[4] = turns[4], turns[3], turns[1], turns[0]
	}
	before := turns[0]
	if r.value(t, &a, before) < 0 {
		return before, true
	}
	for _, d := range turns[1:] {
		if r.value(t, &a, d) < 0 {
			return r.halve(t, &a, before, d), true
		}
		before = d
	}
	return 0, false
}

func (r *refiner) value(t *target, a *arc, d float64) float64 {
	return -t.gainM(d, a.clearanceM(d), math.Sqrt(r.f1Squared(d)))
}

// halve is a place below zero next to where the target crosses zero, between one
// above and one below.
func (r *refiner) halve(t *target, a *arc, above, below float64) float64 {
	for math.Abs(below-above) > stepM/10 {
		middle := (above + below) / 2
		if r.value(t, a, middle) < 0 {
			below = middle
		} else {
			above = middle
		}
	}
	return below
}

// ends notes where the stretch that misses the fraction begins and ends: its
// length decides whether an obstruction is isolated. The fraction is a little
// less so that rounding leaves the two places on the side that misses it.
func (r *refiner) ends(bulge, fraction float64) {
	t := r.target(bulge, fraction-2*ratioTolerance, straight{})
	s, ok := r.below(&t, r.start, r.stop)
	if ok {
		r.ws.places = append(r.ws.places, place{s.first, s.fromM}, place{s.last, s.toM})
	}
}

// shrinkBetween is the least raise, from leastM to mostM, after which all that
// misses the full fraction lies within spanM, between the samples as well. The
// longer the raise, the shorter the stretch: it is halved until it fits.
func (r *refiner) shrinkBetween(c Criterion, lever straight, spanM, leastM, mostM float64) float64 {
	t := r.target(bulgeFactor(c.K), c.F1Fraction, lever)
	start, stop := r.start, r.stop
	for t.raiseM = leastM; mostM-leastM > raiseToleranceM; t.raiseM = (leastM + mostM) / 2 {
		s, ok := r.below(&t, start, stop)
		if !ok || s.toM-s.fromM <= spanM {
			if t.raiseM == leastM {
				return leastM
			}
			mostM = t.raiseM
			continue
		}
		leastM, start, stop = t.raiseM, s.first, s.last+1
	}
	return mostM
}

// raiseToleranceM is how much more than the least a raise may be that is not
// solved for but halved to.
const raiseToleranceM = 1e-6
