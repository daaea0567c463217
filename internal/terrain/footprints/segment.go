package footprints

import (
	"math"
	"slices"

	"github.com/paulmach/orb"
)

// roundingDeg is more than rounding moves a coordinate in degrees, 0.1 µm. The
// search for buildings nearby is wider by it, the crossings are not.
const roundingDeg = 1e-12

// segment is a straight piece of a path, or a point where both ends are one.
type segment struct {
	a     orb.Point
	d     orb.Point // from a to the other end
	bound orb.Bound // around both, and roundingDeg wider
}

func newSegment(a, b orb.Point) segment {
	return segment{
		a: a, d: orb.Point{b[0] - a[0], b[1] - a[1]},
		bound: orb.Bound{
			Min: orb.Point{min(a[0], b[0]) - roundingDeg, min(a[1], b[1]) - roundingDeg},
			Max: orb.Point{max(a[0], b[0]) + roundingDeg, max(a[1], b[1]) + roundingDeg},
		},
	}
}

// meets reports whether the segment has a point in the rectangle: their own
// rectangles overlap, and the rectangle's corners are not all on one side of the
// line (separating axes). A NaN meets nothing.
func (s *segment) meets(b *orb.Bound) bool {
	if !(s.bound.Min[0] <= b.Max[0] && s.bound.Max[0] >= b.Min[0] && s.bound.Min[1] <= b.Max[1] && s.bound.Max[1] >= b.Min[1]) {
		return false
	}
	x, y := (b.Min[0]+b.Max[0])/2, (b.Min[1]+b.Max[1])/2
	return math.Abs(s.side(orb.Point{x, y})) <=
		math.Abs(s.d[0])*(b.Max[1]-y+roundingDeg)+math.Abs(s.d[1])*(b.Max[0]-x+roundingDeg)
}

// side is negative to the right of the line, seen along it, and 0 on it.
func (s *segment) side(p orb.Point) float64 {
	return s.d[0]*(p[1]-s.a[1]) - s.d[1]*(p[0]-s.a[0])
}

// along is where on the line the foot of p is: 0 at one end, 1 at the other.
func (s *segment) along(p orb.Point) float64 {
	return (s.d[0]*(p[0]-s.a[0]) + s.d[1]*(p[1]-s.a[1])) / (s.d[0]*s.d[0] + s.d[1]*s.d[1])
}

// distance is the distance at t, 0 to 1, linear and exact at both ends.
func (s *segment) distance(t, fromM, toM float64) float64 {
	if t == 1 {
		return toM
	}
	return min(fromM+t*(toM-fromM), toM)
}

// stretch is a part of a segment, as [segment.along] counts: from <= to.
type stretch struct{ from, to float64 }

// clipped appends what of a stretch lies on the segment itself.
func clipped(into []stretch, from, to float64) []stretch {
	from, to = max(min(from, to), 0), min(max(from, to), 1)
	if from <= to {
		into = append(into, stretch{from, to})
	}
	return into
}

// stretches appends the parts of a segment inside a polygon, walls included;
// they may overlap. A segment that is a point is wholly inside or not at all.
func (f *Footprints) stretches(s *segment, p polygon, into []stretch) []stretch {
	if s.d[0] != 0 || s.d[1] != 0 {
		return f.lineStretches(s, p, into)
	}
	var some [16]stretch
	eastward := segment{a: s.a, d: orb.Point{1, 0}} // a point is inside if a line from there begins inside
	for _, part := range f.lineStretches(&eastward, p, some[:0]) {
		if part.from == 0 {
			return append(into, stretch{0, 1})
		}
	}
	return into
}

// lineStretches does it for a segment that is no point. The whole line of the
// segment crosses the closed rings an even number of times, if a corner on it
// counts as left of it; between each odd crossing and the next the line is
// inside. That asks no start for being inside, and a wall along the line, which
// does not cross it, is added for itself.
func (f *Footprints) lineStretches(s *segment, p polygon, into []stretch) []stretch {
	var few [32]float64
	crossings := few[:0]
	for ring := range f.rings(p) {
		a := ring[0]
		sideA := s.side(a)
		for _, b := range ring[1:] {
			sideB := s.side(b)
			switch {
			case (sideA < 0) != (sideB < 0):
				crossings = append(crossings, s.along(between(a, b, sideA/(sideA-sideB))))
			case sideA == 0 && sideB == 0:
				into = clipped(into, s.along(a), s.along(b))
			}
			a, sideA = b, sideB
		}
	}
	slices.Sort(crossings)
	for i := 1; i < len(crossings); i += 2 {
		into = clipped(into, crossings[i-1], crossings[i])
	}
	return into
}

// between is the point at u, 0 to 1, from a to b.
func between(a, b orb.Point, u float64) orb.Point {
	return orb.Point{a[0] + u*(b[0]-a[0]), a[1] + u*(b[1]-a[1])}
}
