package radio

import (
	"math"
	"slices"
)

// DefaultCrossPolarDB is the cross-polar discrimination assumed of an antenna that
// states none. Licence records have a median of 30 dB on the axis and a lowest tenth
// of 20 to 30 dB (F.1245-3 Annex 2 Table 1); 25 dB lies between.
const DefaultCrossPolarDB = 25.0

// MismatchDB returns what is lost where the polarisations of the wave and the antenna
// differ by an angle:
//
//	-10 log10(cos^2 a + sin^2 a 10^(-XPD/10))
//
// which is -20 log10(cos a), but never above the discrimination xpdDB of the
// antennas, positive. NaN or infinity is an ideal antenna, whose loss at 90 degrees
// has no bound.
//
// Source: the projection of two linear polarisations and the powers of F.699
// recommends 7 added; textbook, no published example was found.
func MismatchDB(angleDeg, xpdDB float64) float64 {
	sin, cos := math.Sincos(angleDeg * math.Pi / 180)
	crossed := 0.0
	if !math.IsNaN(xpdDB) {
		crossed = math.Pow(10, -xpdDB/10)
	}
	return -10 * math.Log10(cos*cos+sin*sin*crossed)
}

// PolarisationLossDB returns what is lost between two antennas by their
// polarisations: none between equal ones, 3 dB between slant and the others, and
// between vertical and horizontal what both antennas discriminate together. That
// leakage is the sum of what each lets through, so two antennas of 25 dB leave 22 dB.
// An antenna that states no discrimination has [DefaultCrossPolarDB].
//
// An empty polarisation is unknown and costs nothing, which is the careful answer for
// interference. Two slant antennas are taken to face each other in the same slant.
//
// Source: [MismatchDB]; the sum of the powers is F.699-8 recommends 7.1.
func PolarisationLossDB(tx Polarisation, txAntenna Antenna, rx Polarisation, rxAntenna Antenna) float64 {
	if tx == rx || tx == "" || rx == "" {
		return 0
	}
	angle := 90.0
	if tx == Slant || rx == Slant {
		angle = 45
	}
	leak := math.Pow(10, -txAntenna.discriminationDB()/10) + math.Pow(10, -rxAntenna.discriminationDB()/10)
	return MismatchDB(angle, -10*math.Log10(min(leak, 1)))
}

// discriminationDB is the cross-polar discrimination, stated or assumed.
func (a Antenna) discriminationDB() float64 {
	if a.CrossPolarDB > 0 {
		return a.CrossPolarDB
	}
	return DefaultCrossPolarDB
}

// Supports reports whether the antenna can be used in a polarisation.
func (a Antenna) Supports(p Polarisation) bool {
	return slices.Contains(a.Polarisations, p)
}
