package profile

import "math"

// bottom is a target's value and its first two derivatives at one place.
type bottom struct{ value, slope, curve float64 }

// bottom follows from F1^2 = f1Scale d1 d2, which makes
//
//	F1'  = f1Scale (d2 - d1) / (2 F1)
//	F1'' = -(f1Scale length)^2 / (4 F1^3)
func (r *refiner) bottom(t *target, a *arc, d float64) bottom {
	f1 := math.Sqrt(r.f1Squared(d))
	x := d - a.startM
	span := r.f1Scale * r.lengthM
	return bottom{
		value: a.clearanceM(d) + t.raiseM*t.lever.at(d) - t.f1s*f1,
		slope: a.slope + 2*a.bend*x + t.raiseM*t.lever.perM - t.f1s*r.f1Scale*(r.lengthM-2*d)/(2*f1),
		curve: 2*a.bend + t.f1s*span*span/(4*f1*f1*f1),
	}
}

// lowest is where the target has its lowest point between two distances on one
// half of the path. False if it has none that counts: then it is least at an
// end. On one half the curve of F1, and with it the target's, only rises or only falls, so that
// the target bends upwards in one piece, if at all.
func (r *refiner) lowest(t *target, a *arc, fromM, toM float64) (float64, bool) {
	if !(fromM < toM) {
		return 0, false
	}
	from, to := r.bottom(t, a, fromM), r.bottom(t, a, toM)
	switch {
	case from.curve <= 0 && to.curve <= 0:
		return 0, false
	case from.curve < 0:
		fromM = max(fromM, r.turn(t, a, (fromM+toM)/2))
		from = r.bottom(t, a, fromM)
	case to.curve < 0:
		toM = min(toM, r.turn(t, a, (fromM+toM)/2))
		to = r.bottom(t, a, toM)
	}
	if !(from.slope < 0 && to.slope >= 0) {
		return 0, false
	}
	// The target lies above its tangents, and so above where they cross.
	width := toM - fromM
	crossing := (to.value - from.value - to.slope*width) / (from.slope - to.slope)
	if from.value+from.slope*crossing >= 0 {
		return 0, false
	}
	start := fromM - from.slope*width/(to.slope-from.slope)
	return r.descend(t, a, fromM, toM, start), true
}

// descend is Newton's method for the zero of a rising slope, kept between two
// distances by halving.
func (r *refiner) descend(t *target, a *arc, fromM, toM, d float64) float64 {
	for range 60 {
		b := r.bottom(t, a, d)
		if b.slope < 0 {
			fromM = d
		} else {
			toM = d
		}
		next := d - b.slope/b.curve
		if !(next > fromM && next < toM) {
			next = (fromM + toM) / 2
		}
		if math.Abs(next-d) < stepM/10 {
			return next
		}
		d = next
	}
	return d
}

// turn is where the target bends neither way, on the same half of the path as d:
// where 2 bend and what F1 bends are equal.
func (r *refiner) turn(t *target, a *arc, d float64) float64 {
	span := r.f1Scale * r.lengthM
	f1 := math.Cbrt(math.Abs(t.f1s/a.bend) * span * span / 8)
	w := f1 * f1 / r.f1Scale
	root := math.Sqrt(max(0, r.lengthM*r.lengthM-4*w))
	nearerM := 2 * w / (r.lengthM + root) // from the nearer end
	if 2*d > r.lengthM {
		return r.lengthM - nearerM
	}
	return nearerM
}
