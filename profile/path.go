package profile

import (
	"math"

	"github.com/paulmach/orb"
)

// Path is the geodesic between the two ends of a link.
type Path struct {
	// A and B are the ends: longitude and latitude on WGS 84, degrees. They
	// mean nothing unless Located.
	A, B orb.Point
	// Located is false where the caller brought a profile without places.
	Located bool
	// LengthM is the path length in metres, > 0.
	LengthM float64
	// AzimuthADeg and AzimuthBDeg point from each end to the other: degrees
	// clockwise from true north, 0 <= azimuth < 360. Meaningful if Located.
	AzimuthADeg, AzimuthBDeg float64
}

// Middle is about half way between the ends, for figures that change slowly
// over the earth, like those of the climate.
func (p Path) Middle() orb.Point {
	half := math.Remainder(p.B.Lon()-p.A.Lon(), 360) / 2
	return orb.Point{math.Remainder(p.A.Lon()+half, 360), (p.A.Lat() + p.B.Lat()) / 2}
}

// Limits of one path.
const (
	// MaxLengthM is the longest path that is judged.
	MaxLengthM = 300e3
	// MinLengthM is the shortest: nearer ends are taken for one place.
	MinLengthM = 1.0
	// MaxSamples bounds the samples of one profile.
	MaxSamples = 20000
	// MaxExactSamples bounds those of the exact mode, of which MaxSamples are
	// kept once the path is judged.
	MaxExactSamples = 500_000
	// MinIntervals is the least number of steps of a path whose spacing the
	// caller leaves open, so that a path shorter than a pixel is still judged
	// between its ends.
	MinIntervals = 16
)
