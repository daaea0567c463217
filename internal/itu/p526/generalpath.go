package p526

import (
	"errors"
	"fmt"

	"ridgehop/internal/itu/validity"
)

// ErrProfile is what [NewGeneralPath] wraps when the slices do not form a
// profile.
var ErrProfile = errors.New("not a profile")

// GeneralPath is a path over any terrain, with all that the delta-Bullington
// method can work out before the effective earth radius and the frequency are
// known. Make it with [NewGeneralPath].
//
// It keeps the slices it was made from and never writes to them. It may be
// used from several goroutines at once as long as nobody changes those slices.
type GeneralPath struct {
	distances, surface []float64
	lengthKM           float64
	txM, rxM           float64
	smoothTx, smoothRx float64
}

// NewGeneralPath returns the path over a profile of at least two points.
//
// distanceKM holds the distances from the transmitter in km: the first 0, the
// last the path length, each larger than the one before. surfaceM holds the
// heights amsl in m that stand in the way, cover included; the first and last are
// not used. groundM holds the heights amsl in m of the bare ground, for the smooth
// surface and its ends; it may be the same slice as surfaceM. txM and rxM are the
// antenna heights amsl in m.
//
// The points must be as dense as the terrain data behind them, flat stretches
// included. The slices are kept, not copied, and nothing is allocated.
//
// The error wraps [ErrProfile] when lengths differ, distances do not increase
// from 0, or a height is not a finite number.
//
// Source: P.526-16 section 4.5.2, the steps for the smooth surface.
func NewGeneralPath(distanceKM, surfaceM, groundM []float64, txM, rxM float64) (GeneralPath, error) {
	n := len(distanceKM)
	if n < 2 || len(surfaceM) != n || len(groundM) != n {
		return GeneralPath{}, fmt.Errorf("%w: %d distances, %d surface and %d ground heights",
			ErrProfile, n, len(surfaceM), len(groundM))
	}
	if distanceKM[0] != 0 {
		return GeneralPath{}, fmt.Errorf("%w: the first distance is %g km, not 0", ErrProfile, distanceKM[0])
	}
	g := GeneralPath{
		distances: distanceKM, surface: surfaceM, lengthKM: distanceKM[n-1], txM: txM, rxM: rxM,
	}
	v1, v2, err := moments(distanceKM, groundM)
	if err != nil {
		return GeneralPath{}, err
	}
	if sum := txM + rxM + finiteSum(surfaceM); sum-sum != 0 {
		return GeneralPath{}, fmt.Errorf("%w: an antenna or surface height is not finite", ErrProfile)
	}
	g.smoothTx, g.smoothRx = g.smoothSurface(groundM, v1, v2)
	return g, nil
}

// LengthKM returns the path length in km.
func (g *GeneralPath) LengthKM() float64 { return g.lengthKM }

// moments returns v1 and v2, which the line that fits the ground best follows
// from, and checks the profile on the way.
func moments(distanceKM, groundM []float64) (v1, v2 float64, err error) {
	heights := groundM[:len(distanceKM)]
	x0, h0 := distanceKM[0], heights[0]
	for i := 1; i < len(distanceKM); i++ {
		x, h := distanceKM[i], heights[i]
		step := x - x0
		if !(step > 0) {
			return 0, 0, fmt.Errorf("%w: distance %d (%g km) does not follow %g km", ErrProfile, i, x, x0)
		}
		v1 += step * (h + h0)
		v2 += step * (h*(2*x+x0) + h0*(x+2*x0))
		x0, h0 = x, h
	}
	if v2-v2 != 0 {
		return 0, 0, fmt.Errorf("%w: a distance or ground height is not finite", ErrProfile)
	}
	return v1, v2, nil
}

// finiteSum returns a sum that is finite only if every height is, in four strands
// so that additions do not wait for each other.
func finiteSum(heights []float64) float64 {
	var a, b, c, d float64
	for ; len(heights) >= 4; heights = heights[4:] {
		a += heights[0]
		b += heights[1]
		c += heights[2]
		d += heights[3]
	}
	for _, h := range heights {
		a += h
	}
	return a + b + c + d
}

// smoothSurface returns the heights of the smooth surface at the two ends: the line of
// best fit, lowered below the obstacles of the flat-earth profile and held at or
// below the ground at its ends.
func (g *GeneralPath) smoothSurface(groundM []float64, v1, v2 float64) (tx, rx float64) {
	d := g.lengthKM
	tx = (2*v1*d - v2) / (d * d)
	rx = (v2 - v1*d) / (d * d)
	highest, fromTx, fromRx := g.flatObstacles(groundM)
	if highest > 0 {
		tx -= highest * fromTx / (fromTx + fromRx)
		rx -= highest * fromRx / (fromTx + fromRx)
	}
	return min(tx, groundM[0]), min(rx, groundM[len(groundM)-1])
}

// flatObstacles returns the largest height of the ground above the straight line
// between the antennas, and the steepest slopes to it from both ends in m/km. The
// earth counts as flat here. Without an obstacle all three are zero.
func (g *GeneralPath) flatObstacles(groundM []float64) (highest, fromTx, fromRx float64) {
	distances := g.distances
	heights := groundM[:len(distances)]
	length, tx := g.lengthKM, g.txM
	slope := (g.rxM - tx) / length
	s := steepest{x: 1, y: 1}
	for i := 1; i < len(distances)-1; i++ {
		x := distances[i]
		if h := heights[i] - tx - slope*x; h > 0 {
			if h > highest {
				highest = h
			}
			s.meet(h, x, length-x)
		}
	}
	return highest, s.overX / s.x, s.overY / s.y
}

// Conditions are what the loss of a path depends on besides the profile.
type Conditions struct {
	// EffectiveRadiusKM is the effective earth radius in km, positive; see
	// [EffectiveRadiusKM].
	EffectiveRadiusKM float64
	// FrequencyGHz is the frequency in GHz, positive.
	FrequencyGHz float64
	// Polarisation is the polarisation of the wave.
	Polarisation Polarisation
	// SeaFraction is the part of the path over sea, 0 to 1.
	SeaFraction float64
	// Land is the ground of the part not over sea; the zero value means [Land].
	Land Ground
}

// Validate returns an error wrapping a validity.RangeError when a condition is not
// usable, else nil.
func (c Conditions) Validate() error {
	return errors.Join(
		validity.Above("effective earth radius", c.EffectiveRadiusKM, 0, "km"),
		validity.Above("frequency", c.FrequencyGHz, 0, "GHz"),
		validity.Between("fraction of the path over sea", c.SeaFraction, 0, 1, ""),
	)
}
