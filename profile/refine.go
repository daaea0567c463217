package profile

import (
	"cmp"
	"math"
	"slices"
)

// refiner finds where between the samples of a profile in the exact mode the
// extremes lie.
type refiner struct {
	geometry
	ws          *Workspace
	fromM, toM  float64 // the open path
	start, stop int     // the intervals that it touches: start <= i < stop
	seed        int     // one that is likely near the next extreme
	voids       bool    // no raise is worked out
}

// reach bounds what lies between a sample and the next, both included.
type reach struct {
	flatM float64 // the line is at least so high above the top, bulge aside
	w     float64 // the distances to both ends multiply to this at most
}

// place is a new sample, between the samples after and after+1.
type place struct {
	after int
	atM   float64
}

// refine inserts into p the samples between the known ones at which the least
// clearance over F1 of a criterion lies and, for one that is missed, the
// largest needs of the three raises. A criterion that is missed also gets a
// sample in every interval that misses it unseen by the samples at its ends.
func refine(link *Link, p *Profile, ws *Workspace, voids bool) {
	r := newRefiner(newGeometry(link, p), ws)
	r.voids = voids
	ws.places = ws.places[:0]
	if r.fromM < r.toM && r.start < r.stop {
		for _, c := range link.Criteria {
			r.criterion(c)
		}
	}
	slices.SortFunc(ws.places, func(a, b place) int {
		return cmp.Or(cmp.Compare(a.after, b.after), cmp.Compare(a.atM, b.atM))
	})
	p.insert(ws.places)
}

func newRefiner(g geometry, ws *Workspace) refiner {
	r := refiner{geometry: g, ws: ws}
	r.fromM, r.toM = g.p.open(g.lengthM)
	// Between two samples that are not judged there may still be open path.
	r.start, r.stop = g.first-1, g.last+1
	r.bound()
	return r
}

// criterion finds the places of one criterion.
func (r *refiner) criterion(c Criterion) {
	least := r.target(bulgeFactor(c.K), math.Inf(1), straight{})
	least.free = true
	r.find(&least)
	if !short(least.f1s, c.F1Fraction) {
		return
	}
	r.dips(&least, c.F1Fraction)
	if r.voids {
		return
	}
	if c.IsolatedF1Fraction < c.F1Fraction {
		r.ends(least.bulge, c.F1Fraction)
	}
	for _, l := range [...]straight{{1, -1 / r.lengthM}, {0, 1 / r.lengthM}, {1, 0}} { // atA, atB, atBoth
		full := r.target(least.bulge, c.F1Fraction, l)
		r.find(&full)
		if c.IsolatedF1Fraction < c.F1Fraction {
			isolated := r.target(least.bulge, c.IsolatedF1Fraction, l)
			r.find(&isolated)
		}
	}
}

// bound fills ws.reaches, one for every interval. Between two samples the
// height of the line over the top is a quadratic: it hangs below the straight
// line between its ends by at most a quarter of the squared step times the
// bend, and d1*d2 rises over its own by a quarter of the squared step.
func (r *refiner) bound() {
	n := len(r.p.DistanceM)
	d, ground, bend := r.p.DistanceM[:n], r.p.GroundM[:n], r.p.BendPerM[:n]
	cover := r.p.CoverM
	r.ws.reaches = slices.Grow(r.ws.reaches[:0], n)[:n]
	reaches := r.ws.reaches[:n]
	leastSquare, leastW, widest := math.Inf(1), 1.0, 0.0
	d0, flat0, w0 := 0.0, r.aM-r.topM(0), 0.0
	for i := 1; i < n; i++ {
		d1, top := d[i], ground[i]
		if i < len(cover) {
			top += cover[i]
		}
		step, flat1, w1 := d1-d0, r.aM+r.slope*d1-top, d1*(r.lengthM-d1)
		quarter, higher := 0.25*step*step, w0
		if w1 > w0 {
			higher = w1
		}
		// Halves of sums and differences keep the NaN of a void.
		s := reach{
			flatM: 0.5 * (flat0 + flat1 - math.Abs(flat0-flat1) - quarter*(bend[i-1]+math.Abs(bend[i-1]))),
			w:     higher + quarter,
		}
		reaches[i-1] = s
		// The least ratio without bulge: flatM^2/w in order of sign.
		if square := s.flatM * math.Abs(s.flatM); square*leastW < leastSquare*s.w {
			leastSquare, leastW, r.seed = square, s.w, i-1
		}
		if step > widest { // the builtin max takes longer
			widest = step
		}
		d0, flat0, w0 = d1, flat1, w1
	}
	r.p.SpacingM = widest
	r.seed = min(max(r.seed, r.start), max(r.start, r.stop-1))
}

// find brings t to its extreme over the open path and notes the place if that
// lies between samples. Few intervals come into question: those whose bound
// beats the worst sample.
func (r *refiner) find(t *target) {
	t.interval = r.seed
	r.samples(t, r.seed)
	r.ws.near = r.ws.near[:0]
	reaches, d := r.ws.reaches[:r.stop], r.p.DistanceM[t.shift():][:r.stop]
	for i := r.start; i < r.stop; i++ {
		s := &reaches[i]
		low := s.flatM - t.bulge*s.w + t.raiseM*t.lever.at(d[i])
		if low*math.Abs(low) < t.square*s.w && r.mayBeat(t, i) {
			r.samples(t, i)
			r.ws.near = append(r.ws.near, i)
		}
	}
	for _, i := range r.ws.near {
		if r.mayBeat(t, i) {
			r.inside(t, i)
		}
	}
	if t.between {
		r.ws.places = append(r.ws.places, place{t.interval, t.atM})
	}
	r.seed = t.interval
}

// mayBeat is false if nothing in interval i is worse than what t has. F1 is at
// least what it is at one end of the interval.
func (r *refiner) mayBeat(t *target, i int) bool {
	s, d := &r.ws.reaches[i], r.p.DistanceM
	squared := r.f1Scale * s.w
	if t.f1s < 0 {
		squared = min(r.f1Squared(d[i]), r.f1Squared(d[i+1]))
	}
	return s.flatM-t.bulge*s.w+t.raiseM*t.lever.at(d[i+t.shift()]) < t.f1s*math.Sqrt(squared)
}

// samples tries the samples at the ends of an interval.
func (r *refiner) samples(t *target, interval int) {
	for i := max(interval, r.first); i <= min(interval+1, r.last); i++ {
		clearanceM, f1M := r.at(i, t.bulge)
		if t.gainM(r.p.DistanceM[i], clearanceM, f1M) > 0 {
			t.take(r.p.DistanceM[i], clearanceM, f1M)
			t.interval, t.between = interval, false
		}
	}
}

// inside tries what lies between the samples of an interval. Every round at
// least squares the distance to the extreme: it moves to where the gain over
// the last value is largest (Dinkelbach's method for the least quotient, from
// memory).
func (r *refiner) inside(t *target, interval int) {
	a := r.arc(t, interval)
	for range maxRounds {
		atM, clearanceM, f1M, ok := r.best(t, &a)
		if !ok {
			return
		}
		t.take(atM, clearanceM, f1M)
		t.interval, t.between = interval, true
	}
}

const maxRounds = 30

// dips notes a place in every interval of which some misses the fraction but
// neither sample does, so that no obstruction goes unseen. The one of the least
// ratio has been noted.
func (r *refiner) dips(least *target, fraction float64) {
	t := r.target(least.bulge, fraction, straight{})
	for i := r.start; i < r.stop; i++ {
		if !r.mayBeat(&t, i) || r.misses(i, &t) || r.misses(i+1, &t) || least.between && i == least.interval {
			continue
		}
		a := r.arc(&t, i)
		if atM, clearanceM, f1M, ok := r.best(&t, &a); ok && short(clearanceM/f1M, fraction) {
			r.ws.places = append(r.ws.places, place{i, atM})
		}
	}
}

// misses is true if sample i is judged and misses t's fraction.
func (r *refiner) misses(i int, t *target) bool {
	if i < r.first || i > r.last {
		return false
	}
	clearanceM, f1M := r.at(i, t.bulge)
	return short(clearanceM/f1M, t.f1s)
}
