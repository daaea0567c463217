package terrain

import (
	"fmt"
	"math"

	"ridgehop/profile"
)

// even samples at an even spacing.
func (s *sampler) even(spacingM float64) error {
	if err := space(s.line.LengthM(), spacingM, s.into); err != nil {
		return err
	}
	for l := range layerCount {
		s.strips[l].reset()
		if err := s.read(l); err != nil {
			return err
		}
	}
	s.outlines()
	s.shiftDatums()
	s.compose(s.into.DistanceM)
	s.into.BendPerM = s.into.BendPerM[:0]
	return nil
}

// space lays the samples out evenly, void.
func space(lengthM, spacingM float64, into *profile.Profile) error {
	intervals := max(2, math.Ceil(lengthM/spacingM-1e-9))
	if intervals >= profile.MaxSamples {
		return fmt.Errorf("%w: a step of %.3g m makes %.0f of them; at most %d are taken: a spacing of %.3g m or more fits this path",
			profile.ErrTooManySamples, lengthM/intervals, intervals+1, profile.MaxSamples, roundedUp(lengthM/(profile.MaxSamples-1)))
	}
	n := int(intervals) + 1
	into.DistanceM, into.SpacingM = resized(into.DistanceM, n), lengthM/intervals
	for i := range n {
		into.DistanceM[i] = float64(i) * into.SpacingM
	}
	into.DistanceM[n-1] = lengthM
	return nil
}

// roundedUp is the least number of three digits that is no less than v > 0.
func roundedUp(v float64) float64 {
	digit := math.Pow(10, math.Floor(math.Log10(v))-2)
	return math.Ceil(v/digit) * digit
}

// read reads a layer at the profile's distances, as a strip that is straight
// between them.
func (s *sampler) read(l layer) error {
	out := &s.strips[l]
	if len(s.layers[l]) == 0 {
		return nil
	}
	for _, d := range s.into.DistanceM {
		out.node(d, math.NaN(), -1)
	}
	left := len(out.nodes)
	levels := s.levels(l)
	for i := range levels {
		if left == 0 {
			break
		}
		known, err := s.fill(&levels[i], out)
		if err != nil {
			return err
		}
		left -= known
	}
	return nil
}

// fill gives every node that is still void the mosaic's height, where it has
// one, and counts them.
func (s *sampler) fill(level *level, out *strip) (filled int, err error) {
	if err := s.ctx.Err(); err != nil {
		return 0, err
	}
	cur := &level.cur
	i := 0
	for k := range level.track {
		p := &level.track[k]
		for ; i < len(out.nodes) && out.nodes[i].at <= p.to; i++ {
			n := &out.nodes[i]
			if n.source >= 0 {
				continue
			}
			u, v := p.at(n.at)
			h, ok := cur.inside(u, v)
			tile := cur.tile
			if !ok {
				if h, tile, err = cur.height(u, v); err != nil {
					return filled, err
				}
				if h != h {
					continue
				}
			}
			n.height, n.source = h, s.sources.of(level.mosaic, tile)
			filled++
		}
	}
	return filled, nil
}
