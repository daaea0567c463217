package island

import "math"

// blend gives the four weights of a uniform cubic B-spline at t in [0, 1).
// It does not pass through its nodes, which is wanted here: the steps of the
// lattice vanish and crests come out rounded.
func blend(t float64) [4]float64 {
	s := 1 - t
	tt, ss := t*t, s*s
	return [4]float64{
		ss * s / 6,
		(4 - float64(tt*float64(3*(2-t)))) / 6,
		(4 - float64(ss*float64(3*(2-s)))) / 6,
		tt * t / 6,
	}
}

// spline returns the value at a fractional column and row; beyond the edge it
// repeats the last node.
func (l *lattice) spline(col, row float64) float64 {
	fc, fr := math.Floor(col), math.Floor(row)
	c, r := int(fc)-1, int(fr)-1
	wc, wr := blend(col-fc), blend(row-fr)
	sum := 0.0
	for j, w := range wr {
		base := min(max(r+j, 0), l.rows-1) * l.cols
		line := 0.0
		for i, u := range wc {
			line += float64(u * l.v[base+min(max(c+i, 0), l.cols-1)])
		}
		sum += float64(w * line)
	}
	return sum
}
