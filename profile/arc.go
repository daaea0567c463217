package profile

import "math"

// straight is a value that changes linearly from A, per metre.
type straight struct{ atA, perM float64 }

func (s straight) at(d float64) float64 { return s.atA + s.perM*d }

// target is what refine looks for: the place d where
//
//	clearance(d) + raiseM lever(d) - f1s F1(d)
//
// is least. It starts at zero or above and every place that is taken makes the
// target harder, so that no other counts but one that is worse still: f1s falls
// to the clearance over F1 there if it is free, or else raiseM rises to the
// raise that is needed there. At the extreme nothing is below zero.
type target struct {
	bulge       float64
	f1s, raiseM float64
	lever       straight
	free        bool
	f1Scale     float64 // F1^2 over d1*d2
	square      float64 // f1s^2 f1Scale, but 0 for a negative f1s

	atM      float64
	interval int
	between  bool // the extreme is inside the interval, not at a sample
}

func (g *geometry) target(bulge, f1s float64, lever straight) target {
	return target{bulge: bulge, f1s: f1s, lever: lever, f1Scale: g.f1Scale, square: f1s * f1s * g.f1Scale}
}

// gainM is by how much a place is worse than the worst before; NaN in a void.
func (t *target) gainM(atM, clearanceM, f1M float64) float64 {
	return t.f1s*f1M - clearanceM - t.raiseM*t.lever.at(atM)
}

func (t *target) take(atM, clearanceM, f1M float64) {
	t.atM = atM
	if t.free {
		t.f1s = clearanceM / f1M
		t.square = max(t.f1s, 0) * t.f1s * t.f1Scale
		return
	}
	t.raiseM = (t.f1s*f1M - clearanceM) / t.lever.at(atM)
}

// shift is 1 if the lever is least at the far end of an interval, else 0.
func (t *target) shift() int {
	if t.lever.perM < 0 {
		return 1
	}
	return 0
}

// counts keeps rounding from making samples: a gain must be more than a tenth
// of what ratioTolerance forgives, and more than the heights resolve.
func counts(gainM, f1M float64) bool { return gainM > ratioTolerance/10*f1M+1e-11 }

// arc is the clearance between two samples:
//
//	atStartM + slope x + bend x^2, x metres from startM
type arc struct {
	startM, atStartM, slope, bend float64
	fromM, toM                    float64 // the open part of the interval
	fromEdge, toEdge              bool    // it ends where no sample is judged
}

// arc is that of the interval after sample i. The earth's bulge bends the
// clearance as well: d1*d2 exceeds the straight line between two of its values
// by the product of the distances to both.
func (r *refiner) arc(t *target, i int) arc {
	start, end := r.p.DistanceM[i], r.p.DistanceM[i+1]
	atStart, _ := r.at(i, t.bulge)
	atEnd, _ := r.at(i+1, t.bulge)
	bend := r.p.BendPerM[i] + t.bulge
	return arc{
		startM: start, atStartM: atStart, slope: (atEnd-atStart)/(end-start) - bend*(end-start), bend: bend,
		fromM: max(start, r.fromM), toM: min(end, r.toM),
		fromEdge: i < r.first, toEdge: i+1 > r.last,
	}
}

func (a *arc) clearanceM(d float64) float64 {
	x := d - a.startM
	return a.atStartM + (a.slope+a.bend*x)*x
}

func (g *geometry) f1Squared(d float64) float64 { return g.f1Scale * d * (g.lengthM - d) }

// best is the place inside the arc with the largest gain; false if none counts.
func (r *refiner) best(t *target, a *arc) (atM, clearanceM, f1M float64, ok bool) {
	most := 0.0
	try := func(d float64) {
		c, f1 := a.clearanceM(d), math.Sqrt(r.f1Squared(d))
		if gain := t.gainM(d, c, f1); gain > most && counts(gain, f1) {
			most, atM, clearanceM, f1M, ok = gain, d, c, f1, true
		}
	}
	if !(a.fromM < a.toM) {
		return 0, 0, 0, false
	}
	if a.fromEdge {
		try(a.fromM)
	}
	if a.toEdge {
		try(a.toM)
	}
	if math.IsInf(t.f1s, 1) {
		return atM, clearanceM, f1M, ok
	}
	// Each half of the path has one side where the target bends upwards.
	middle := min(max(r.lengthM/2, a.fromM), a.toM)
	if d, found := r.lowest(t, a, a.fromM, middle); found {
		try(d)
	}
	if d, found := r.lowest(t, a, middle, a.toM); found {
		try(d)
	}
	return atM, clearanceM, f1M, ok
}
