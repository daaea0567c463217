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
	nodes []stripNode
}

// stripNode is one node: bend is that of the stretch after it.
type stripNode struct {
	at, height, bend float64
	source           int16
}

// jointM is how far apart two nodes are put where the height jumps, from one
// raster to another or into a void: distances rise all the same.
const jointM = 1e-3

// sameM is how far two heights may be apart, by rounding, and be one.
const sameM = 1e-6

func (s *strip) reset() { s.nodes = s.nodes[:0] }

// empty reports whether the layer says nothing at all.
func (s *strip) empty() bool { return len(s.nodes) == 0 }

func (s *strip) node(at, height float64, source int16) {
	s.nodes = append(s.nodes, stripNode{at: at, height: height, source: source})
}

// known adds a stretch of a raster, which begins where the last one ended.
func (s *strip) known(from, fromM, to, toM, bend float64, source int16) {
	n := len(s.nodes)
	if n == 0 || s.nodes[n-1].at < from {
		s.node(from, fromM, source)
	} else if last := &s.nodes[n-1]; last.source != source || math.Abs(last.height-fromM) > sameM {
		if to-from <= 2*jointM {
			return // less than a joint: the next stretch takes its place
		}
		t := jointM / (to - from)
		s.node(from+jointM, fromM+t*(toM-fromM)+bend*jointM*(to-from-jointM), source)
	}
	s.nodes[len(s.nodes)-1].bend = bend
	s.node(to, toM, source)
}

// void adds a stretch without a height.
func (s *strip) void(from, to float64) {
	nan := math.NaN()
	n := len(s.nodes)
	switch {
	case n == 0:
		s.node(from, nan, -1)
	case s.nodes[n-1].source < 0:
		if n > 1 && s.nodes[n-2].source < 0 { // the void goes on
			s.nodes[n-1].at = max(s.nodes[n-1].at, to-jointM)
			return
		}
	case to-from > 2*jointM:
		s.node(from+jointM, nan, -1)
	default:
		s.node((from+to)/2, nan, -1)
		return
	}
	if end := to - jointM; end > s.nodes[len(s.nodes)-1].at {
		s.node(end, nan, -1)
	}
}

// close puts the last node at the path's end, where a void or a joint may have
// left it short.
func (s *strip) close(lengthM float64) {
	n := len(s.nodes)
	last := &s.nodes[n-1]
	switch {
	case last.at >= lengthM:
	case lengthM-last.at <= 2*jointM && n > 1:
		last.at = lengthM
	default:
		s.node(lengthM, math.NaN(), -1)
	}
}

// reader reads a strip at rising distances.
type reader struct {
	nodes []stripNode
	i     int // the stretch at hand begins at node i
}

// reach moves to the stretch that holds distance d, which is no less than in
// the call before. At a node it is the stretch before it.
func (r *reader) reach(d float64) {
	for r.i+2 < len(r.nodes) && r.nodes[r.i+1].at < d {
		r.i++
	}
}

// heightAt is the height at the distance d of the stretch at hand, and the
// source; NaN and -1 over a void.
func (r *reader) heightAt(d float64) (float64, int16) {
	a, b := &r.nodes[r.i], &r.nodes[r.i+1]
	switch d {
	case b.at:
		return b.height, b.source
	case a.at:
		return a.height, a.source
	}
	before, after := d-a.at, b.at-d
	h := (a.height*after+b.height*before)/(b.at-a.at) + a.bend*before*after
	if h != h {
		return h, -1
	}
	return h, b.source
}
