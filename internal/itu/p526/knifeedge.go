package p526

import (
	"math"

	"ridgehop/internal/itu/p525"
)

// NuClear is the diffraction parameter at and below which [KnifeEdgeDB] takes a
// knife edge to cause no loss (P.526-16 section 4.5.1).
const NuClear = -0.78

// Nu returns the diffraction parameter of an edge hM above the straight line
// between the antennas (negative when below), d1KM from one and d2KM from the other:
//
//	nu = h sqrt(2 (d1+d2)/(lambda d1 d2))
//
// The frequency is in GHz; frequency and distances are positive. It equals sqrt(2)
// times h in radii of the first Fresnel zone.
//
// Source: P.526-16 eq (26).
func Nu(frequencyGHz, hM, d1KM, d2KM float64) float64 {
	lambda := p525.Wavelength(frequencyGHz)
	return hM * math.Sqrt(0.002*(d1KM+d2KM)/(lambda*d1KM*d2KM))
}

// KnifeEdgeDB returns the loss of a knife edge in dB for the diffraction
// parameter nu, by the approximation
//
//	J = 6.9 + 20 log10(sqrt((nu-0.1)^2+1) + nu - 0.1)
//
// and 0 at and below [NuClear]. It lies within 0.13 dB of [KnifeEdgeExactDB] above
// NuClear, and steps by 0.004 dB there.
//
// Source: P.526-16 eq (31).
func KnifeEdgeDB(nu float64) float64 {
	if nu <= NuClear {
		return 0
	}
	u := nu - 0.1
	return 6.9 + 20*math.Log10(math.Sqrt(u*u+1)+u)
}

// KnifeEdgeExactDB returns the loss of a knife edge in dB for any finite
// diffraction parameter nu, from the Fresnel integrals:
//
//	J = -20 log10(sqrt((1-C-S)^2 + (C-S)^2)/2)
//
// Below about nu = -0.77 it swings around 0 dB, and a negative value is a gain.
//
// Source: P.526-16 eq (30).
func KnifeEdgeExactDB(nu float64) float64 {
	c, s := FresnelIntegrals(nu)
	return -20 * math.Log10(math.Hypot(1-c-s, c-s)/2)
}
