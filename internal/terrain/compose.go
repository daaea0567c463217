package terrain

import (
	"math"
)

// compose makes the profile out of the layers at the distances, which are the
// profile's own: bare earth with what stands on it, by whatever speaks there. A
// surface model speaks for everything that stands; without one the canopy and
// the buildings do, the taller of the two; and where there is no bare earth the
// surface stands in its place. Nothing is counted twice.
func (s *sampler) compose(distances []float64) {
	if s.alone(distances) {
		return
	}
	into, n := s.into, len(distances)
	into.DistanceM = distances
	into.GroundM, into.SourceIndex, into.BendPerM = resized(into.GroundM, n), resized(into.SourceIndex, n), resized(into.BendPerM, n)
	covered := s.covered()
	if covered {
		into.CoverM, into.CoverIndex = resized(into.CoverM, n), resized(into.CoverIndex, n)
	}
	var readers [layerCount]reader
	for l := range readers {
		readers[l].nodes = s.strips[l].nodes
	}
	var before mix
	for i, d := range distances {
		here := mixed(&readers, d)
		into.GroundM[i], into.SourceIndex[i] = here.groundM, here.ground
		if covered {
			into.CoverM[i], into.CoverIndex[i] = here.coverM, here.cover
		}
		into.BendPerM[i] = 0
		if i > 0 {
			into.BendPerM[i-1] = bendBetween(&readers, &before, &here, d-distances[i-1])
		}
		before = here
	}
}

// covered reports whether anything may stand on bare earth.
func (s *sampler) covered() bool {
	has := func(l layer) bool { return !s.strips[l].empty() }
	return has(groundLayer) && (has(surfaceLayer) || has(canopyLayer) || has(buildingsLayer) || has(outlinesLayer))
}

// only is the layer that speaks where no other does; nil where several do, or
// none.
func (s *sampler) only() *strip {
	var only *strip
	for l := range s.strips {
		switch {
		case s.strips[l].empty():
		case only != nil:
			return nil
		default:
			only = &s.strips[l]
		}
	}
	return only
}

// alone takes a layer of heights above the sea as it is where it is the only
// one, which is what most operators have.
func (s *sampler) alone(distances []float64) bool {
	only, n := s.only(), len(distances)
	if only == nil || len(only.nodes) != n || only != &s.strips[groundLayer] && only != &s.strips[surfaceLayer] {
		return false
	}
	into := s.into
	into.DistanceM = distances
	into.GroundM, into.SourceIndex, into.BendPerM = resized(into.GroundM, n), resized(into.SourceIndex, n), resized(into.BendPerM, n)
	for i := range only.nodes {
		node := &only.nodes[i]
		into.GroundM[i], into.BendPerM[i], into.SourceIndex[i] = node.height, node.bend, node.source
	}
	return true
}

// mix is what the layers make together at one place.
type mix struct {
	groundM, coverM float64
	ground, cover   int16
	top             [2]layer            // the layers whose sum is the top; none is layerCount
	tops            [layerCount]float64 // how high each layer that counts reaches; NaN for the others
}

// mixed reads the layers at a distance, which is no less than in the call
// before.
func mixed(readers *[layerCount]reader, d float64) mix {
	var h [layerCount]float64
	var source [layerCount]int16
	for l := range readers {
		h[l], source[l] = math.NaN(), -1
		if r := &readers[l]; len(r.nodes) > 1 {
			r.reach(d)
			h[l], source[l] = r.heightAt(d)
		}
	}
	ground, surface := h[groundLayer], h[surfaceLayer]
	out := mix{groundM: ground, ground: source[groundLayer], cover: -1, top: topOf(groundLayer), tops: h}
	for l := canopyLayer; l < layerCount; l++ {
		out.tops[l] += ground // heights above it
		if surface == surface {
			out.tops[l] = math.NaN() // the surface speaks
		}
	}
	switch {
	case ground != ground:
		out.groundM, out.ground, out.top = surface, source[surfaceLayer], topOf(surfaceLayer)
	case surface > ground:
		out.coverM, out.cover, out.top = surface-ground, source[surfaceLayer], topOf(surfaceLayer)
	case surface == surface:
		// The surface lies below the ground, by an error of one of the two.
	default:
		for _, l := range []layer{canopyLayer, buildingsLayer, outlinesLayer} {
			if h[l] > out.coverM {
				out.coverM, out.cover, out.top = h[l], source[l], topOf(l)
			}
		}
	}
	return out
}

// bendBetween is how the top runs from one place to the next, a distance stepM
// apart. Where another layer is on top at either end, or may rise above the top in
// between, it runs no lower than both.
func bendBetween(readers *[layerCount]reader, a, b *mix, stepM float64) float64 {
	bend := bendOf(readers, a.top)
	if a.top != b.top {
		bend = max(0, bend, bendOf(readers, b.top))
	}
	topA, topB := a.groundM+a.coverM, b.groundM+b.coverM
	for l := range a.tops {
		layers := topOf(layer(l))
		if layers == a.top || a.tops[l] != a.tops[l] || b.tops[l] != b.tops[l] {
			continue
		}
		// It lies a gap below at both ends; (d - d_i) (d_i+1 - d) is a quarter of
		// the square of the step at most, in the middle.
		gap := min(topA-a.tops[l], topB-b.tops[l])
		bend = max(bend, bendOf(readers, layers)-4*gap/(stepM*stepM))
	}
	return bend
}

// topOf are the layers whose sum is the top where a layer is what stands highest.
func topOf(l layer) [2]layer {
	if l <= surfaceLayer {
		return [2]layer{l, layerCount}
	}
	return [2]layer{groundLayer, l}
}

func bendOf(readers *[layerCount]reader, top [2]layer) float64 {
	sum := 0.0
	for _, l := range top {
		if l < layerCount && len(readers[l].nodes) > 1 {
			sum += readers[l].nodes[readers[l].i].bend
		}
	}
	return sum
}

func resized[T any](s []T, n int) []T {
	if cap(s) < n {
		return make([]T, n)
	}
	return s[:n]
}
