package terrain

import (
	"math"

	"github.com/paulmach/orb"

	"ridgehop/internal/geodesy"
	"ridgehop/internal/raster"
)

// track is a path in some plane coordinates as pieces of cubic polynomials in
// the distance from A. Solving the geodesic, or a projection, for every sample
// would cost more than all the rest; a few exact positions and a checked
// interpolation between them do not.
type track []piece

// piece runs over distances from..to; with t = (d-from)/(to-from),
// x = x[0] + x[1] t + x[2] t^2 + x[3] t^3, and y alike.
type piece struct {
	from, to float64
	perM     float64 // 1/(to-from)
	x, y     [4]float64
}

// trackToleranceM is how far a piece may be from the exact position half way
// between its inner knots. Interpolation through t = 0, 1/3, 2/3, 1 leaves an
// error of f””/24 t(t-1/3)(t-2/3)(t-1), whose largest value (1/81, near the
// ends) is 1.8 times that in the middle (1/144), so that the whole piece stays
// within 4 mm.
const trackToleranceM = 0.002

// maxTrackDepth ends the halving where coordinates are singular, at a pole,
// with pieces of a thousandth of the path or less.
const maxTrackDepth = 14

// plane gives exact coordinates of the points at the distances, and how many
// metres one unit of x and y is worth near them.
type plane func(distances []float64, x, y []float64) (metresX, metresY float64, err error)

// newTrack fits the pieces from 0 to lengthM.
func newTrack(lengthM float64, exact plane) (track, error) {
	return fitTrack(nil, 0, lengthM, exact, 0)
}

func fitTrack(done track, from, to float64, exact plane, depth int) (track, error) {
	step := (to - from) / 3
	at := [5]float64{from, from + step, to - step, to, (from + to) / 2}
	var x, y [5]float64
	metresX, metresY, err := exact(at[:], x[:], y[:])
	if err != nil {
		return done, err
	}
	p := piece{from: from, to: to, perM: 1 / (to - from), x: throughKnots(x[0], x[1], x[2], x[3]), y: throughKnots(y[0], y[1], y[2], y[3])}
	px, py := p.at(at[4])
	if off := math.Hypot((px-x[4])*metresX, (py-y[4])*metresY); off <= trackToleranceM || depth == maxTrackDepth {
		return append(done, p), nil
	}
	middle := at[4]
	if done, err = fitTrack(done, from, middle, exact, depth+1); err != nil {
		return done, err
	}
	return fitTrack(done, middle, to, exact, depth+1)
}

// throughKnots is the cubic through f0 at 0, f1 at 1/3, f2 at 2/3 and f3 at 1.
func throughKnots(f0, f1, f2, f3 float64) [4]float64 {
	return [4]float64{
		f0,
		(-11*f0 + 18*f1 - 9*f2 + 2*f3) / 2,
		9 * (2*f0 - 5*f1 + 4*f2 - f3) / 2,
		9 * (-f0 + 3*f1 - 3*f2 + f3) / 2,
	}
}

func (p *piece) at(d float64) (x, y float64) {
	t := (d - p.from) * p.perM
	return p.x[0] + t*(p.x[1]+t*(p.x[2]+t*p.x[3])), p.y[0] + t*(p.y[1]+t*(p.y[2]+t*p.y[3]))
}

// metresPerDegree is a degree of latitude at its longest, on WGS 84.
const metresPerDegree = 111_700.0

// geographicPlane is the plane of longitude and latitude along a line. A pole
// on the line makes longitudes jump, which halving narrows down to metres.
func geographicPlane(line geodesy.Line) plane {
	return func(distances, x, y []float64) (float64, float64, error) {
		var p orb.Point
		for i, d := range distances {
			p = line.At(d)
			x[i], y[i] = p.Lon(), p.Lat()
		}
		return metresPerDegree * math.Cos(p.Lat()*math.Pi/180), metresPerDegree, nil
	}
}

// projectedPlane is the plane of a CRS along a line. Where that counts degrees
// they do not jump at the antimeridian, as those of geographicPlane do not.
func projectedPlane(line geodesy.Line, crs raster.CRS, projector *raster.Projector) plane {
	geographic := geographicPlane(line)
	start := line.At(0).Lon()
	return func(distances, x, y []float64) (float64, float64, error) {
		metresX, metresY, _ := geographic(distances, x, y)
		for i := range x {
			x[i] = math.Remainder(x[i], 360)
		}
		err := projector.Project(x, y)
		if !crs.Geographic {
			return crs.MetresPerUnit, crs.MetresPerUnit, err
		}
		for i := range x {
			x[i] = start + math.Remainder(x[i]-start, 360)
		}
		return metresX, metresY, err
	}
}

// onGrid turns a track in CRS coordinates into one in a mosaic's pixel-centre
// coordinates: x counts columns and y rows, whole numbers at pixel centres.
func (t track) onGrid(g raster.Grid) track {
	out := make(track, len(t))
	for i, p := range t {
		for k := range 4 {
			p.x[k] /= g.PixelX
			p.y[k] /= -g.PixelY
		}
		p.x[0] -= g.Left/g.PixelX + 0.5
		p.y[0] += g.Top/g.PixelY - 0.5
		out[i] = p
	}
	return out
}

// shifted moves the track by whole columns.
func (t track) shifted(columns float64) track {
	for i := range t {
		t[i].x[0] += columns
	}
	return t
}
