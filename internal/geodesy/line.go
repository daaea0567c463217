package geodesy

import (
	"errors"
	"fmt"
	"math"

	"github.com/paulmach/orb"
	"github.com/tidwall/geodesic"
)

// ErrPoint means a longitude or latitude that is no place on earth.
var ErrPoint = errors.New("not a place on earth")

// Line is the geodesic from one point to another. The zero value is a line of
// no length at longitude 0, latitude 0.
type Line struct {
	a, b        orb.Point
	ends        bool // b is known
	lengthM     float64
	azimuthADeg float64
	azimuthBDeg float64
}

// NewLine solves the inverse problem between a and b. Longitudes may be any
// finite number of degrees, latitudes -90 to 90; anything else is ErrPoint.
func NewLine(a, b orb.Point) (Line, error) {
	if err := errors.Join(checkPoint(a), checkPoint(b)); err != nil {
		return Line{}, err
	}
	l := Line{a: a, b: b, ends: true}
	var arrival float64
	geodesic.WGS84.Inverse(a.Lat(), a.Lon(), b.Lat(), b.Lon(), &l.lengthM, &l.azimuthADeg, &arrival)
	l.azimuthADeg = compass(l.azimuthADeg)
	l.azimuthBDeg = compass(arrival + 180)
	return l, nil
}

// checkPoint is ErrPoint for what is no place on earth.
func checkPoint(p orb.Point) error {
	if !(math.Abs(p.Lat()) <= 90) || math.IsNaN(p.Lon()) || math.IsInf(p.Lon(), 0) {
		return fmt.Errorf("%w: longitude %g, latitude %g", ErrPoint, p.Lon(), p.Lat())
	}
	return nil
}

// LineFrom is the geodesic that leaves a at azimuthDeg and is lengthM metres
// long. Its azimuth at the far end is not computed: AzimuthBDeg is NaN.
func LineFrom(a orb.Point, azimuthDeg, lengthM float64) Line {
	return Line{a: a, lengthM: lengthM, azimuthADeg: azimuthDeg, azimuthBDeg: math.NaN()}
}

// To is the line with b, which is known to be its end: At gives b itself there
// instead of solving for it.
func (l Line) To(b orb.Point) Line {
	l.b, l.ends = b, true
	return l
}

// LengthM is the length of the geodesic in metres.
func (l Line) LengthM() float64 { return l.lengthM }

// AzimuthADeg is the azimuth at a towards b: degrees clockwise from true
// north, 0 <= azimuth < 360.
func (l Line) AzimuthADeg() float64 { return l.azimuthADeg }

// AzimuthBDeg is the azimuth at b towards a, like AzimuthADeg.
func (l Line) AzimuthBDeg() float64 { return l.azimuthBDeg }

// At is the point that lies distanceM metres from a along the line. Longitudes
// do not jump at the antimeridian: they lie within 180 degrees of a's, and may
// run beyond 180 or -180. Only a pole on the line makes them jump.
func (l Line) At(distanceM float64) orb.Point {
	var p orb.Point
	switch {
	case distanceM == 0:
		return l.a
	case l.ends && distanceM == l.lengthM:
		p = l.b
	default:
		p = Direct(l.a, l.azimuthADeg, distanceM)
	}
	p[0] = l.a.Lon() + math.Remainder(p.Lon()-l.a.Lon(), 360)
	return p
}

// Direct is the point reached from a by going distanceM metres along the
// geodesic that leaves it at azimuthDeg. The longitude lies in -180 to 180.
func Direct(a orb.Point, azimuthDeg, distanceM float64) orb.Point {
	var p orb.Point
	geodesic.WGS84.Direct(a.Lat(), a.Lon(), azimuthDeg, distanceM, &p[1], &p[0], nil)
	return p
}

// compass brings an azimuth into 0 <= azimuth < 360.
func compass(deg float64) float64 {
	deg = math.Mod(deg, 360)
	if deg < 0 {
		deg += 360
	}
	if deg >= 360 {
		deg = 0
	}
	return deg
}
