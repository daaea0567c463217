package p526

import (
	"math"

	"ridgehop/internal/itu/p525"
)

// DeltaBullington is the result of the delta-Bullington method, losses in dB
// relative to free space.
type DeltaBullington struct {
	// LossDB is the diffraction loss of the path.
	LossDB float64
	// ActualDB is the Bullington loss over the actual profile, Lba.
	ActualDB float64
	// SmoothDB is the Bullington loss over the smooth surface, Lbs.
	SmoothDB float64
	// SphericalDB is the loss over the smooth earth of section 3, Lsph.
	SphericalDB float64
	// SmoothTxM and SmoothRxM are the heights amsl in m of the smooth surface at
	// the ends, hst and hsr.
	SmoothTxM, SmoothRxM float64
	// EffectiveTxM and EffectiveRxM are the antenna heights in m above the smooth
	// surface, h1 and h2.
	EffectiveTxM, EffectiveRxM float64
}

// DeltaBullington returns the diffraction loss of the path by the
// delta-Bullington method, the general method of P.526:
//
//	L = Lba + max(Lsph - Lbs, 0)
//
// It allocates nothing. Conditions that fail Validate give NaN or a
// meaningless loss; check them once before a run over many paths. A path of two
// points has nothing between its ends, so that only the smooth earth counts.
//
// Source: P.526-16 section 4.5.2.
func (g *GeneralPath) DeltaBullington(in Conditions) DeltaBullington {
	b := bullington{
		lengthKM: g.lengthKM,
		bend:     500 / in.EffectiveRadiusKM,
		nuScale:  0.002 * g.lengthKM / p525.Wavelength(in.FrequencyGHz),
	}
	out := DeltaBullington{
		SmoothTxM: g.smoothTx, SmoothRxM: g.smoothRx,
		EffectiveTxM: g.txM - g.smoothTx, EffectiveRxM: g.rxM - g.smoothRx,
	}
	out.ActualDB = b.lossDB(b.overProfile(g.distances, g.surface, g.txM, g.rxM))
	out.SmoothDB = b.lossDB(b.overZero(g.distances, out.EffectiveTxM, out.EffectiveRxM))
	out.SphericalDB = SmoothEarth{
		DistanceKM: g.lengthKM, TxM: out.EffectiveTxM, RxM: out.EffectiveRxM,
		EffectiveRadiusKM: in.EffectiveRadiusKM, FrequencyGHz: in.FrequencyGHz,
		SeaFraction: in.SeaFraction, Land: in.Land, Polarisation: in.Polarisation,
	}.LossDB()
	out.LossDB = out.ActualDB + max(out.SphericalDB-out.SmoothDB, 0)
	return out
}

// bullington holds what is common to the Bullington constructions of one path.
//
// The Recommendation compares slopes; here everything is said with the height g of a
// point above the straight line between the antennas, at distances x and y from
// them. The slope from the transmitter then exceeds that of the line by g/x, and
// from the receiver by g/y. When any g reaches zero, the two steepest slopes
// a = max g/x and b = max g/y meet at a point whose diffraction parameter reduces
// to nu = sqrt(0.002 d a b/lambda); otherwise nu is the largest -sqrt(0.002 d/lambda)
// |g|/sqrt(x y). So no root is needed before the end, and divisions are replaced
// by comparing cross products.
type bullington struct {
	lengthKM float64
	bend     float64 // 500/ae: the bulge in m is bend x y, distances in km
	nuScale  float64 // 0.002 d/lambda
}

// overProfile returns the diffraction parameter of the construction over a profile.
func (b bullington) overProfile(distances, heights []float64, txM, rxM float64) float64 {
	heights = heights[:len(distances)]
	length, bend := b.lengthKM, b.bend
	slope := (rxM - txM) / length
	least, product := math.Inf(1), 1.0
	for i := 1; i < len(distances)-1; i++ {
		x := distances[i]
		y := length - x
		g := heights[i] - txM + x*(bend*y-slope)
		if g >= 0 {
			return b.blockedByProfile(distances[i:], heights[i:], txM, slope)
		}
		if g2, xy := g*g, x*y; g2*product < least*xy {
			least, product = g2, xy
		}
	}
	return -math.Sqrt(b.nuScale * least / product)
}

// blockedByProfile continues overProfile from the first point that reaches the line.
func (b bullington) blockedByProfile(distances, heights []float64, txM, slope float64) float64 {
	heights = heights[:len(distances)]
	length, bend := b.lengthKM, b.bend
	s := steepest{x: 1, y: 1}
	for i := range len(distances) - 1 {
		x := distances[i]
		y := length - x
		if g := heights[i] - txM + x*(bend*y-slope); g > 0 {
			s.meet(g, x, y)
		}
	}
	return math.Sqrt(b.nuScale * s.product())
}

// overZero is overProfile for a profile of zero heights.
func (b bullington) overZero(distances []float64, txM, rxM float64) float64 {
	length, bend := b.lengthKM, b.bend
	slope := (rxM - txM) / length
	least, product := math.Inf(1), 1.0
	for i := 1; i < len(distances)-1; i++ {
		x := distances[i]
		y := length - x
		g := x*(bend*y-slope) - txM
		if g >= 0 {
			return b.blockedByZero(distances[i:], txM, slope)
		}
		if g2, xy := g*g, x*y; g2*product < least*xy {
			least, product = g2, xy
		}
	}
	return -math.Sqrt(b.nuScale * least / product)
}

// blockedByZero is blockedByProfile for a profile of zero heights.
func (b bullington) blockedByZero(distances []float64, txM, slope float64) float64 {
	length, bend := b.lengthKM, b.bend
	s := steepest{x: 1, y: 1}
	for _, x := range distances[:len(distances)-1] {
		y := length - x
		if g := x*(bend*y-slope) - txM; g > 0 {
			s.meet(g, x, y)
		}
	}
	return math.Sqrt(b.nuScale * s.product())
}

// steepest keeps the largest g/x and g/y as fractions.
type steepest struct {
	overX, x float64
	overY, y float64
}

func (s *steepest) meet(g, x, y float64) {
	if g*s.x > s.overX*x {
		s.overX, s.x = g, x
	}
	if g*s.y > s.overY*y {
		s.overY, s.y = g, y
	}
}

func (s *steepest) product() float64 { return s.overX / s.x * (s.overY / s.y) }

// lossDB returns the Bullington loss for the diffraction parameter.
func (b bullington) lossDB(nu float64) float64 {
	edge := KnifeEdgeDB(nu)
	if edge == 0 {
		return 0
	}
	return edge + (1-math.Exp(-edge/6))*(10+0.02*b.lengthKM)
}
