package p530

import (
	"cmp"
	"math"

	"ridgehop/internal/itu/validity"
)

// ReflectionRadiusKM is the earth radius in km that the Recommendation prints for
// surface reflection; everywhere else it is 6371 km.
const ReflectionRadiusKM = 6375.0

// bulgeDivisor is the rounded divisor of d^2/(12.74 k) in the equations for the
// heights above the plane that touches the earth at the point of reflection.
const bulgeDivisor = 12.74

// ReflectionPath is a path over a smooth reflecting surface.
type ReflectionPath struct {
	// DistanceKM is the path length in km, positive.
	DistanceKM float64
	// TxM and RxM are the antenna heights in m above the surface, positive.
	TxM, RxM float64
	// K is the k-factor, positive.
	K float64
	// FrequencyGHz is the frequency in GHz, positive.
	FrequencyGHz float64
}

// Reflection is the specular reflection of a path.
type Reflection struct {
	// TxKM and RxKM are the distances in km from the ends to the point of reflection.
	TxKM, RxKM float64
	// GrazingRad is the grazing angle in radians.
	GrazingRad float64
	// Divergence is the factor D, 0 to 1, by which the curved surface spreads the ray.
	Divergence float64
	// DifferenceWavelengths is how much longer the reflected ray is than the direct
	// one, in wavelengths.
	DifferenceWavelengths float64
	// TxDeg and RxDeg are the angles in degrees between the direct and the reflected
	// ray at the two antennas.
	TxDeg, RxDeg float64
}

// Reflection returns the specular reflection of the path. The error wraps a
// validity.RangeError when an input is not positive, or when the path is so long that
// the bulge hides the antennas from each other and nothing is reflected.
//
// Source: P.530-19 section 6.1.2, eqs (121) to (126), (128), (132), (140) and (141).
func (p ReflectionPath) Reflection() (Reflection, error) {
	if err := p.check(); err != nil {
		return Reflection{}, err
	}
	d, sum := p.DistanceKM, p.TxM+p.RxM
	m := 250 * d * d / (p.K * ReflectionRadiusKM * sum)
	b := reflectionOffset((p.TxM-p.RxM)/sum, m)
	spread := 1 - m*(1+b*b)
	if err := validity.Above("grazing angle", sum/d*spread, 0, "mrad"); err != nil {
		return Reflection{}, err
	}
	out := Reflection{
		TxKM: d * (1 + b) / 2, RxKM: d * (1 - b) / 2,
		GrazingRad: sum / d * spread / 1000,
		Divergence: math.Sqrt(spread / (1 + m*(1-3*b*b))),
	}
	tx := p.TxM - out.TxKM*out.TxKM/(bulgeDivisor*p.K)
	rx := p.RxM - out.RxKM*out.RxKM/(bulgeDivisor*p.K)
	out.DifferenceWavelengths = 2 * p.FrequencyGHz / (0.3 * d) * tx * rx / 1000
	const degrees = 0.18 / math.Pi
	slope := (tx - rx) / d
	out.TxDeg = degrees * (tx/out.TxKM - slope)
	out.RxDeg = degrees * (rx/out.RxKM + slope)
	return out, nil
}

// reflectionOffset is b, the position of the point of reflection: it divides the path in
// the ratio (1+b)/(1-b).
func reflectionOffset(c, m float64) float64 {
	rise := m + 1
	cosine := 1.5 * c * math.Sqrt(3*m/(rise*rise*rise))
	angle := math.Acos(min(max(cosine, -1), 1))
	return 2 * math.Sqrt(rise/(3*m)) * math.Cos(math.Pi/3+angle/3)
}

func (p ReflectionPath) check() error {
	return cmp.Or(
		validity.Above("path length", p.DistanceKM, 0, "km"),
		validity.Above("height of the transmit antenna above the surface", p.TxM, 0, "m"),
		validity.Above("height of the receive antenna above the surface", p.RxM, 0, "m"),
		validity.Above("k-factor", p.K, 0, ""),
		validity.Above("frequency", p.FrequencyGHz, 0, "GHz"),
	)
}

// PatternLossDB returns the loss in dB of an antenna angleDeg off its axis, for a
// half-power beamwidth in degrees, by the parabola 12 (angle/beamwidth)^2 that the
// Recommendation uses for a reflected ray inside the main lobe.
//
// Source: P.530-19 section 6.1.2.
func PatternLossDB(angleDeg, beamwidthDeg float64) float64 {
	ratio := angleDeg / beamwidthDeg
	return 12 * ratio * ratio
}
