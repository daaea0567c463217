package footprints

import (
	"cmp"
	"math"
	"slices"

	"github.com/paulmach/orb"
)

// Footprints are the outlines of buildings with their heights. They never change
// and are safe for concurrent use. Make them by [Read]; the zero value holds no
// building.
type Footprints struct {
	polygons []polygon // in the order of the tree's leaves
	ringEnds []int32   // of all polygons, each the end of a ring in corners
	corners  []orb.Point
	tree     tree
}

// polygon is an outline and its holes. A building may have several.
type polygon struct {
	heightM             float64
	feature             int32
	firstRing, ringsEnd int32 // in ringEnds
}

// Vertex is a bend of a path, which goes straight from each to the next, in
// degrees. Distances in metres must not decrease along the path. Longitudes may
// run beyond 180 or -180, to 540, or jump from one to the other.
type Vertex struct {
	DistanceM, Lon, Lat float64
}

// Span is a stretch of a path inside a building.
type Span struct {
	// FromM and ToM are distances along the path in metres, FromM < ToM.
	FromM, ToM float64
	// HeightM is the building's height above the ground in metres.
	HeightM float64
	// ID is the building's place among the features of the document, from 0.
	ID int
}

// Along appends to into the stretches of the path inside buildings, by rising
// FromM, and of those that begin together by rising ID. Stretches of different
// buildings may overlap; those of one do not. Distances are linear between two
// vertices. A path that begins inside a building gives a span from its first
// distance. A slice with room for the answer saves the allocation.
func (f *Footprints) Along(path []Vertex, into []Span) []Span {
	kept := len(into)
	for i := 1; i < len(path); i++ {
		into = f.alongSegment(path[i-1], path[i], into)
	}
	slices.SortFunc(into[kept:], func(a, b Span) int {
		return cmp.Or(cmp.Compare(a.ID, b.ID), cmp.Compare(a.FromM, b.FromM))
	})
	into = into[:kept+len(joined(into[kept:]))]
	slices.SortFunc(into[kept:], func(a, b Span) int {
		return cmp.Or(cmp.Compare(a.FromM, b.FromM), cmp.Compare(a.ID, b.ID))
	})
	return into
}

// joined makes one span of those of one building that overlap or touch, in
// place. They are sorted by ID and FromM.
func joined(spans []Span) []Span {
	n := 0
	for _, s := range spans {
		if n > 0 && spans[n-1].ID == s.ID && s.FromM <= spans[n-1].ToM {
			spans[n-1].ToM = max(spans[n-1].ToM, s.ToM)
			continue
		}
		spans[n] = s
		n++
	}
	return spans[:n]
}

// alongSegment appends the spans between two vertices.
func (f *Footprints) alongSegment(a, b Vertex, into []Span) []Span {
	const turn = 360
	lonB := b.Lon
	if math.Abs(lonB-a.Lon) > turn/2 {
		lonB = a.Lon + math.Remainder(lonB-a.Lon, turn)
	}
	west, east := min(a.Lon, lonB), max(a.Lon, lonB)
	for _, shift := range [...]float64{-turn, 0, turn} {
		if west+shift <= turn/2 && east+shift >= -turn/2 {
			s := newSegment(orb.Point{a.Lon + shift, a.Lat}, orb.Point{lonB + shift, b.Lat})
			into = f.cross(&s, a.DistanceM, b.DistanceM, into)
		}
	}
	return into
}

// cross appends the spans of one segment between two distances.
func (f *Footprints) cross(s *segment, fromM, toM float64, into []Span) []Span {
	var nearby [64]int32
	var inside [16]stretch
	for _, i := range f.tree.search(s, nearby[:0]) {
		p := f.polygons[i]
		for _, part := range f.stretches(s, p, inside[:0]) {
			span := Span{FromM: s.distance(part.from, fromM, toM), ToM: s.distance(part.to, fromM, toM), HeightM: p.heightM, ID: int(p.feature)}
			if span.FromM < span.ToM {
				into = append(into, span)
			}
		}
	}
	return into
}

// At is the tallest building at a place in degrees: its height in metres and
// its place among the features of the document, from 0; of several of that
// height the first. It is false where there is none.
func (f *Footprints) At(lon, lat float64) (heightM float64, id int, ok bool) {
	if math.Abs(lon) > 180 {
		lon = math.Remainder(lon, 360)
	}
	var nearby [64]int32
	var inside [16]stretch
	s := newSegment(orb.Point{lon, lat}, orb.Point{lon, lat})
	for _, i := range f.tree.search(&s, nearby[:0]) {
		p := f.polygons[i]
		taller := !ok || p.heightM > heightM || p.heightM == heightM && int(p.feature) < id
		if taller && len(f.stretches(&s, p, inside[:0])) > 0 {
			heightM, id, ok = p.heightM, int(p.feature), true
		}
	}
	return heightM, id, ok
}

// Bound is the least rectangle around all buildings in degrees, empty
// ([orb.Bound.IsEmpty]) where there are none.
func (f *Footprints) Bound() orb.Bound { return f.tree.bound() }

// rings are the outlines of a polygon, each closed.
func (f *Footprints) rings(p polygon) func(yield func([]orb.Point) bool) {
	return func(yield func([]orb.Point) bool) {
		start := int32(0)
		if p.firstRing > 0 {
			start = f.ringEnds[p.firstRing-1]
		}
		for _, end := range f.ringEnds[p.firstRing:p.ringsEnd] {
			if !yield(f.corners[start:end]) {
				return
			}
			start = end
		}
	}
}
