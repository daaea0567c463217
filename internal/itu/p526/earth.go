package p526

import "math"

// EarthRadiusKM is the mean radius of the earth in km that the methods of
// P.526, P.452 and P.1812 use.
const EarthRadiusKM = 6371.0

// EffectiveRadiusKM returns the effective earth radius ae = k a in km for the
// k-factor k, which must be positive.
func EffectiveRadiusKM(k float64) float64 { return k * EarthRadiusKM }

// Bulge returns the earth bulge in m at a point d1KM from one end and d2KM from
// the other end of a path, over an effective earth of k-factor k:
//
//	bulge = d1 d2/(2 k a) = d1 d2/(12.742 k)
//
// Distances are in km and not negative, k is positive. P.530-19 eq (151) prints
// the divisor as 12.74.
func Bulge(d1KM, d2KM, k float64) float64 {
	return 500 * d1KM * d2KM / (k * EarthRadiusKM)
}

// HorizonKM returns the distance in km from an antenna heightM above a smooth
// earth of k-factor k to its radio horizon:
//
//	d = sqrt(2 k a h) = 3.57 sqrt(k h)
//
// heightM must not be negative, k must be positive. Two antennas see each other over
// the smooth earth up to the sum of their horizons (P.526-16 section 3.2).
func HorizonKM(heightM, k float64) float64 {
	return math.Sqrt(2 * k * EarthRadiusKM * heightM / 1000)
}
