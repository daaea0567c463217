package terrain

import (
	"math"
)

// strip is a layer's height along a path: between node i and the next, at
// distance d, it is
//
//	the straight line between both + bend[i] (d - at[i]) (at[i+1] - d)
//
// A node without a height, NaN, makes the stretches beside it void. It keeps
// its memory from one path to the next.
type strip struct {
	at, height, bend []float64
	source           []int16
}

// jointM is how far apart two nodes are put where the height jumps, from one
// raster to another or into a void: distances rise all the same.
const jointM = 1e-3

// sameM is how far two heights may be apart, by rounding, and be one.
const sameM = 1e-6

func (s *strip) reset() {
	s.at, s.height, s.bend, s.source = s.at[:0], s.height[:0], s.bend[:0], s.source[:0]
}

func (s *strip) node(at, height float64, source int16) {
	s.at, s.height = append(s.at, at), append(s.height, height)
	s.bend, s.source = append(s.bend, 0), append(s.source, source)
}

// known adds a stretch of a raster, which begins where the last one ended.
func (s *strip) known(from, fromM, to, toM, bend float64, source int16) {
	n := len(s.at)
	switch {
	case n == 0 || s.at[n-1] < from:
		s.node(from, fromM, source)
	case s.source[n-1] == source && math.Abs(s.height[n-1]-fromM) <= sameM:
	case to-from > 2*jointM:
		t := jointM / (to - from)
		s.node(from+jointM, fromM+t*(toM-fromM)+bend*jointM*(to-from-jointM), source)
	default:
		return // less than a joint: the next stretch takes its place
	}
	s.bend[len(s.bend)-1] = bend
	s.node(to, toM, source)
}

// void adds a stretch without a height.
func (s *strip) void(from, to float64) {
	nan := math.NaN()
	n := len(s.at)
	switch {
	case n == 0:
		s.node(from, nan, -1)
	case s.source[n-1] < 0:
		if n > 1 && s.source[n-2] < 0 { // the void goes on
			s.at[n-1] = max(s.at[n-1], to-jointM)
			return
		}
	case to-from > 2*jointM:
		s.node(from+jointM, nan, -1)
	default:
		s.node((from+to)/2, nan, -1)
		return
	}
	if end := to - jointM; end > s.at[len(s.at)-1] {
		s.node(end, nan, -1)
	}
}

// close puts the last node at the path's end, where a void or a joint may have
// left it short, and widens a strip of too few nodes.
func (s *strip) close(lengthM float64) {
	if n := len(s.at); s.at[n-1] < lengthM {
		if lengthM-s.at[n-1] <= 2*jointM && n > 1 {
			s.at[n-1] = lengthM
		} else {
			s.node(lengthM, math.NaN(), -1)
		}
	}
}

// reader reads a strip at rising distances.
type reader struct {
	*strip
	i int // the stretch at hand begins at node i
}

// reach moves to the stretch that holds distance d, which is no less than in
// the call before. At a node it is the stretch before it.
func (r *reader) reach(d float64) {
	for r.i+2 < len(r.at) && r.at[r.i+1] < d {
		r.i++
	}
}

// heightAt is the height at the distance d of the stretch at hand, and the
// source; NaN and -1 over a void.
func (r *reader) heightAt(d float64) (float64, int16) {
	i := r.i
	if d == r.at[i+1] {
		return r.height[i+1], r.source[i+1]
	}
	if d == r.at[i] {
		return r.height[i], r.source[i]
	}
	before, after := d-r.at[i], r.at[i+1]-d
	h := (r.height[i]*after+r.height[i+1]*before)/(r.at[i+1]-r.at[i]) + r.bend[i]*before*after
	if h != h {
		return h, -1
	}
	return h, r.source[i+1]
}
