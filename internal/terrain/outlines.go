package terrain

import (
	"cmp"
	"math"
	"slices"

	"ridgehop/internal/terrain/footprints"
)

// vertexStepM is how far the points are apart through which outlines see the
// path as straight in longitude and latitude: it bends less than a centimetre
// between two of them, save near the poles.
const vertexStepM = 300.0

// outlines lays the strip of the buildings that are known by their outlines: a
// wall is a jump.
func (s *sampler) outlines() {
	out := &s.strips[outlinesLayer]
	out.reset()
	walls := s.walls()
	if len(walls) == 0 {
		return
	}
	length := s.line.LengthM()
	var open []wall
	at := 0.0
	for at < length {
		open = slices.DeleteFunc(open, func(w wall) bool { return w.ToM <= at })
		for len(walls) > 0 && walls[0].FromM <= at {
			open, walls = append(open, walls[0]), walls[1:]
		}
		next, tallest, source := length, 0.0, int16(-1)
		if len(walls) > 0 {
			next = min(next, walls[0].FromM)
		}
		for _, w := range open {
			next = min(next, w.ToM)
			if w.HeightM > tallest {
				tallest, source = w.HeightM, w.source
			}
		}
		out.known(at, tallest, next, tallest, 0, source)
		at = next
	}
	out.close(length)
}

// wall is a stretch of the path inside a building.
type wall struct {
	footprints.Span
	source int16
}

// walls are the stretches inside buildings, by where they begin.
func (s *sampler) walls() []wall {
	if len(s.prints) == 0 {
		return nil
	}
	length := s.line.LengthM()
	steps := max(1, math.Ceil(length/vertexStepM))
	s.vertices = s.vertices[:0]
	for k := range int(steps) + 1 {
		d := length * float64(k) / steps
		p := s.line.At(d)
		s.vertices = append(s.vertices, footprints.Vertex{DistanceM: d, Lon: math.Remainder(p.Lon(), 360), Lat: p.Lat()})
	}
	var out []wall
	for _, print := range s.prints {
		s.inside = print.outlines.Along(s.vertices, s.inside[:0])
		for _, span := range s.inside {
			out = append(out, wall{span, s.sources.entry(print.entry)})
		}
	}
	slices.SortFunc(out, func(a, b wall) int { return cmp.Compare(a.FromM, b.FromM) })
	return out
}
