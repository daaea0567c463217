package footprints

import (
	"math"
	"slices"
	"testing"

	"github.com/paulmach/orb"
	"pgregory.net/rapid"
)

// The laws compare with a plain count of what is north of a point: no tree, no
// lines, no distances.

// clearOf is how far from all walls a place must be to be compared: it is
// anyone's guess which side of a wall a rounded place is.
const clearOf = 1e-6

// insideByCount reports whether a place is inside a building by the even-odd
// rule of each polygon, and whether it is too near a wall to tell.
func insideByCount(b building, p orb.Point) (inside, near bool) {
	for _, polygon := range b.polygons {
		north := 0
		for _, ring := range polygon {
			for i := 1; i < len(ring); i++ {
				a, c := ring[i-1], ring[i]
				near = near || distanceTo(a, c, p) < clearOf
				if (a[0] <= p[0]) != (c[0] <= p[0]) && a[1]+(p[0]-a[0])/(c[0]-a[0])*(c[1]-a[1]) > p[1] {
					north++
				}
			}
		}
		inside = inside || north%2 == 1
	}
	return inside, near
}

// distanceTo is the distance of p from the wall between a and b.
func distanceTo(a, b, p orb.Point) float64 {
	d := orb.Point{b[0] - a[0], b[1] - a[1]}
	t := 0.0
	if square := d[0]*d[0] + d[1]*d[1]; square > 0 {
		t = min(max(((p[0]-a[0])*d[0]+(p[1]-a[1])*d[1])/square, 0), 1)
	}
	return length(p, orb.Point{a[0] + t*d[0], a[1] + t*d[1]})
}

// aPoint is a place in a small town: half of them on a lattice, so that corners
// and walls coincide and paths run along them.
func aPoint(t *rapid.T) orb.Point {
	if rapid.Bool().Draw(t, "on the lattice") {
		return orb.Point{float64(rapid.IntRange(0, 8).Draw(t, "x")), float64(rapid.IntRange(0, 8).Draw(t, "y"))}
	}
	return orb.Point{rapid.Float64Range(0, 8).Draw(t, "lon"), rapid.Float64Range(0, 8).Draw(t, "lat")}
}

// aBuilding may cross itself, and its holes lie anywhere.
func aBuilding(t *rapid.T) building {
	b := building{height: float64(rapid.IntRange(1, 6).Draw(t, "height"))}
	for range rapid.IntRange(1, 2).Draw(t, "polygons") {
		var polygon orb.Polygon
		for range rapid.IntRange(1, 2).Draw(t, "rings") {
			var ring orb.Ring
			for range rapid.IntRange(3, 6).Draw(t, "corners") {
				ring = append(ring, aPoint(t))
			}
			polygon = append(polygon, append(ring, ring[0]))
		}
		b.polygons = append(b.polygons, polygon)
	}
	return b
}

func TestAlongAgreesWithCounting(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		buildings := rapid.SliceOfN(rapid.Custom(aBuilding), 1, 24).Draw(t, "buildings")
		points := rapid.SliceOfN(rapid.Custom(aPoint), 2, 5).Draw(t, "path")
		f := build(t, buildings...)
		path := pathOf(points...)
		if path[len(path)-1].DistanceM == 0 {
			t.Skip("a path of no length has no spans")
		}
		spans := f.Along(path, nil)
		checkOrder(t, spans, path)
		for _, distanceM := range telling(spans, path) {
			p := placeAt(path, distanceM)
			for id, b := range buildings {
				want, near := insideByCount(b, p)
				got := slices.ContainsFunc(spans, func(s Span) bool {
					return s.ID == id && s.HeightM == b.height && s.FromM <= distanceM && distanceM <= s.ToM
				})
				if !near && got != want {
					t.Errorf("building %d, %.9g m along, at %v: got inside %v, want %v, of %+v", id, distanceM, p, got, want, spans)
				}
			}
		}
	})
}

// checkOrder holds the spans to what Along promises of their order.
func checkOrder(t *rapid.T, spans []Span, path []Vertex) {
	last := map[int]float64{}
	for i, s := range spans {
		if !(s.FromM < s.ToM && s.FromM >= 0 && s.ToM <= path[len(path)-1].DistanceM) {
			t.Errorf("span %d: got %+v, want one on the path", i, s)
		}
		if i > 0 && (s.FromM < spans[i-1].FromM || s.FromM == spans[i-1].FromM && s.ID <= spans[i-1].ID) {
			t.Errorf("span %d: got %+v after %+v, want them sorted", i, s, spans[i-1])
		}
		if end, ok := last[s.ID]; ok && s.FromM <= end {
			t.Errorf("span %d: got %+v, want it apart from that building's last, which ends at %g", i, s, end)
		}
		last[s.ID] = s.ToM
	}
}

// telling are distances on both sides of each end of a span, between the ends,
// and all along the path.
func telling(spans []Span, path []Vertex) []float64 {
	end := path[len(path)-1].DistanceM
	var marks []float64
	for _, s := range spans {
		marks = append(marks, s.FromM, s.ToM)
	}
	for i := range 60 {
		marks = append(marks, min(end*float64(i)/59, end))
	}
	slices.Sort(marks)
	var places []float64
	for i, m := range marks {
		places = append(places, min(m+0.01, end), max(m-0.01, 0))
		if i > 0 {
			places = append(places, (marks[i-1]+m)/2)
		}
	}
	return places
}

// placeAt is where the path is at a distance.
func placeAt(path []Vertex, distanceM float64) orb.Point {
	for i := 1; i < len(path); i++ {
		a, b := path[i-1], path[i]
		if distanceM <= b.DistanceM && b.DistanceM > a.DistanceM {
			return between(orb.Point{a.Lon, a.Lat}, orb.Point{b.Lon, b.Lat}, (distanceM-a.DistanceM)/(b.DistanceM-a.DistanceM))
		}
	}
	return orb.Point{path[len(path)-1].Lon, path[len(path)-1].Lat}
}

func TestAtAgreesWithCounting(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		buildings := rapid.SliceOfN(rapid.Custom(aBuilding), 1, 40).Draw(t, "buildings")
		f := build(t, buildings...)
		for range 20 {
			p := aPoint(t)
			tallest, first, beside := 0.0, 0, false
			for id, b := range buildings {
				inside, near := insideByCount(b, p)
				beside = beside || near
				if h := b.height.(float64); inside && h > tallest {
					tallest, first = h, id
				}
			}
			heightM, id, ok := f.At(p.Lon(), p.Lat())
			if !beside && (heightM != tallest || id != first || ok != (tallest > 0)) {
				t.Errorf("at %v: got %g m, %d, %v; want %g m, %d", p, heightM, id, ok, tallest, first)
			}
		}
	})
}

// The tree finds the rectangles that a segment meets, as a look at all of them
// does, in their order, and no others but for rounding.
func TestTreeAgreesWithScan(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		bounds := rapid.SliceOfN(rapid.Custom(func(t *rapid.T) orb.Bound {
			return orb.MultiPoint{aPoint(t), aPoint(t)}.Bound()
		}), 0, 700).Draw(t, "bounds")
		leaves := make([]orb.Bound, 0, len(bounds))
		for _, i := range packedOrder(bounds) {
			leaves = append(leaves, bounds[i])
		}
		s := newSegment(aPoint(t), aPoint(t))
		index := newTree(leaves)
		found := index.search(&s, nil)
		if !slices.IsSorted(found) || len(slices.Compact(slices.Clone(found))) != len(found) {
			t.Errorf("got %v, want each once, in order", found)
		}
		for i, b := range leaves {
			got := slices.Contains(found, int32(i))
			if !got && touches(s, b, 0) || got && !touches(s, b, 1e-9) {
				t.Errorf("%+v and %v: got %v, want %v", s, b, got, !got)
			}
		}
	})
}

// touches clips the segment by the four sides of the rectangle, widened by
// slack, in turn (method of Liang and Barsky, from memory).
func touches(s segment, b orb.Bound, slack float64) bool {
	from, to := 0.0, 1.0
	for axis := range 2 {
		low, high := b.Min[axis]-s.a[axis]-slack, b.Max[axis]-s.a[axis]+slack
		if s.d[axis] == 0 {
			if low > 0 || high < 0 {
				return false
			}
			continue
		}
		near, far := low/s.d[axis], high/s.d[axis]
		from, to = max(from, math.Min(near, far)), min(to, math.Max(near, far))
	}
	return from <= to
}
