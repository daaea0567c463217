// Package p452 holds what ridgehop takes from Recommendation ITU-R P.452-18
// and its sister P.1812-8: the k-factor that a refractivity gradient makes.
//
// All functions are pure and safe for concurrent use.
package p452

import "ridgehop/internal/itu/validity"

// earthCurvature is the curvature of the earth in N-units/km: 1e6/6371, rounded to 157
// in the Recommendation.
const earthCurvature = 157.0

// KFromGradient returns the k-factor (effective over true earth radius) for the
// gradient of refractivity dN/dh in N-units/km near the ground:
//
//	k = 157/(157 + dN/dh)
//
// A normal atmosphere has about -39 (k = 4/3). The error wraps a
// validity.RangeError at and below -157, where rays bend as much as the earth and more
// and k has no finite positive value.
//
// Source: P.452-18 eq (5) and P.1812-8 eq (6), whose DN is -dN/dh.
func KFromGradient(gradient float64) (float64, error) {
	if err := validity.Above("refractivity gradient", gradient, -earthCurvature, "N-units/km"); err != nil {
		return 0, err
	}
	return earthCurvature / (earthCurvature + gradient), nil
}

// GradientFromK returns the gradient of refractivity in N-units/km that makes the
// k-factor k, the inverse of [KFromGradient]. The error wraps a
// validity.RangeError unless k is positive.
func GradientFromK(k float64) (float64, error) {
	if err := validity.Above("k-factor", k, 0, ""); err != nil {
		return 0, err
	}
	return earthCurvature/k - earthCurvature, nil
}
