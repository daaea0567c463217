package terrain

import (
	"fmt"
	"math"

	"ridgehop/profile"
)

// exact samples wherever the path crosses a line between pixel centres of any
// raster that speaks, and keeps how the surface runs in between.
func (s *sampler) exact() error {
	for l := range layerCount {
		if err := s.lay(l); err != nil {
			return err
		}
	}
	s.outlines()
	s.shiftDatums()
	distances := s.nodes()
	if n := len(distances); n > profile.MaxExactSamples {
		return fmt.Errorf("%w: %d pixels lie under the path; at most %d are taken: a spacing of %.3g m fits it",
			profile.ErrTooManySamples, n, profile.MaxExactSamples, roundedUp(s.line.LengthM()/(profile.MaxSamples-1)))
	}
	s.compose(distances)
	widest := 0.0
	for i := 1; i < len(distances); i++ {
		if step := distances[i] - distances[i-1]; step > widest { // several times as fast as max, which minds NaN
			widest = step
		}
	}
	s.into.SpacingM = widest
	return nil
}

// lay walks one layer.
func (s *sampler) lay(l layer) error {
	out := &s.strips[l]
	out.reset()
	if len(s.layers[l]) == 0 {
		return nil
	}
	w := walk{ctx: s.ctx, levels: s.levels(l), out: out, sources: &s.sources}
	if err := w.run(0, 0, s.line.LengthM()); err != nil {
		return err
	}
	out.close(s.line.LengthM())
	return nil
}

// nodes are the distances at which any layer has a node, rising, into the
// profile's own memory; no fewer than profile.MinIntervals apart.
func (s *sampler) nodes() []float64 {
	length := s.line.LengthM()
	if only := s.only(); only != nil && len(only.nodes) > profile.MinIntervals {
		out := s.into.DistanceM[:0]
		for i := range only.nodes {
			out = append(out, only.nodes[i].at)
		}
		return out
	}
	out := append(s.into.DistanceM[:0], 0)
	var at [layerCount]int
	for {
		next := length
		for l := range s.strips {
			strip := &s.strips[l]
			for at[l] < len(strip.nodes) && strip.nodes[at[l]].at <= out[len(out)-1]+leastStepM {
				at[l]++
			}
			if at[l] < len(strip.nodes) {
				next = min(next, strip.nodes[at[l]].at)
			}
		}
		if !(next < length-leastStepM) {
			break
		}
		out = append(out, next)
	}
	out = append(out, length)
	if len(out) <= profile.MinIntervals {
		out = subdivided(out, length/profile.MinIntervals)
	}
	return out
}

// subdivided puts nodes between those that lie further apart than step.
func subdivided(at []float64, step float64) []float64 {
	out := make([]float64, 0, len(at)+profile.MinIntervals)
	for i := range at[:len(at)-1] {
		parts := max(1, math.Ceil((at[i+1]-at[i])/step-1e-9))
		for k := range int(parts) {
			out = append(out, at[i]+(at[i+1]-at[i])*float64(k)/parts)
		}
	}
	return append(out, at[len(at)-1])
}
