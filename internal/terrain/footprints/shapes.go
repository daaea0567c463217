package footprints

import (
	"errors"
	"fmt"
	"math"

	"github.com/paulmach/orb"
)

// minPositions is what a closed ring needs (RFC 7946, section 3.1.6).
const minPositions = 4

// maxSpanDeg is the widest polygon: a wider one crosses the antimeridian, or is
// no building.
const maxSpanDeg = 180

// shapes collects outlines as they are read.
type shapes struct {
	maxCorners int
	found      Footprints
	bounds     []orb.Bound // of each polygon
}

// add adds the polygons of one feature, all or none.
func (s *shapes) add(g *geometry, heightM float64, feature int) error {
	before := *s
	if err := s.addPolygons(g, polygon{heightM: heightM, feature: int32(feature)}); err != nil {
		s.found.corners = s.found.corners[:len(before.found.corners)]
		s.found.ringEnds = s.found.ringEnds[:len(before.found.ringEnds)]
		s.found.polygons = s.found.polygons[:len(before.found.polygons)]
		s.bounds = s.bounds[:len(before.bounds)]
		return err
	}
	return nil
}

func (s *shapes) addPolygons(g *geometry, p polygon) error {
	if g == nil {
		return refusedError("it has no geometry")
	}
	before := len(s.found.polygons)
	text := scanner{text: g.Coordinates}
	one := func() error { return s.addPolygon(&text, p) }
	var err error
	if g.Type == "Polygon" {
		err = one()
	} else {
		err = text.list(one)
	}
	switch {
	case err != nil:
		return err
	case !text.end():
		return errCoordinates
	case len(s.found.polygons) == before:
		return refusedError("its geometry is empty")
	}
	return nil
}

// addPolygon adds one outline and its holes. An empty one adds nothing.
func (s *shapes) addPolygon(text *scanner, p polygon) error {
	first := len(s.found.corners)
	p.firstRing = int32(len(s.found.ringEnds))
	if err := text.list(func() error { return s.addRing(text) }); err != nil {
		return err
	}
	p.ringsEnd = int32(len(s.found.ringEnds))
	if p.ringsEnd == p.firstRing {
		return nil
	}
	bound := orb.MultiPoint(s.found.corners[first:]).Bound()
	if span := bound.Max[0] - bound.Min[0]; span > maxSpanDeg {
		return refusedError(fmt.Sprintf("a polygon spans %g degrees of longitude: one across the antimeridian must be cut there", span))
	}
	s.found.polygons = append(s.found.polygons, p)
	s.bounds = append(s.bounds, bound)
	return nil
}

func (s *shapes) addRing(text *scanner) error {
	first := len(s.found.corners)
	if err := text.list(func() error { return s.addCorner(text) }); err != nil {
		return err
	}
	ring := s.found.corners[first:]
	if len(ring) < minPositions {
		return refusedError(fmt.Sprintf("a ring has %d positions: must be %d at least", len(ring), minPositions))
	}
	if ring[0] != ring[len(ring)-1] {
		return refusedError(fmt.Sprintf("a ring is not closed: it begins at %v and ends at %v", ring[0], ring[len(ring)-1]))
	}
	s.found.ringEnds = append(s.found.ringEnds, int32(len(s.found.corners)))
	return nil
}

func (s *shapes) addCorner(text *scanner) error {
	p, err := text.position()
	if err != nil {
		return err
	}
	if err := checkCorner(p); err != nil {
		return err
	}
	if len(s.found.corners) >= s.maxCorners {
		return fmt.Errorf("more than %d corners in all", s.maxCorners)
	}
	s.found.corners = append(s.found.corners, p)
	return nil
}

// checkCorner refuses what is no place on earth.
func checkCorner(p orb.Point) error {
	lon, lat := math.Abs(p.Lon()), math.Abs(p.Lat())
	switch {
	case lon <= 180 && lat <= 90:
		return nil
	case lon <= 90 && lat <= 180:
		return refusedError(fmt.Sprintf("latitude %g: must be -90 to 90; the position looks swapped, longitude comes first", p.Lat()))
	}
	return refusedError(fmt.Sprintf("longitude %g, latitude %g: must be degrees, -180 to 180 and -90 to 90", p.Lon(), p.Lat()))
}

// footprints is what was collected, in the order of its tree.
func (s *shapes) footprints() *Footprints {
	f := s.found
	order := packedOrder(s.bounds)
	leaves := make([]orb.Bound, len(order))
	f.polygons = make([]polygon, len(order))
	for i, from := range order {
		leaves[i], f.polygons[i] = s.bounds[from], s.found.polygons[from]
	}
	f.tree = newTree(leaves)
	return &f
}

// errCoordinates means lists nested otherwise than the geometry's type says.
var errCoordinates = errors.New("coordinates: must be lists of rings of positions, two numbers or more each, as the type of the geometry has them")
