package p530

import "ridgehop/internal/itu/validity"

// The clearances of the main antenna, as fractions of the first Fresnel radius
// (P.530-19 section 2.2).
const (
	// MedianK is the k-factor of the median atmosphere, used where none is known
	// from measurements.
	MedianK = 4.0 / 3
	// MedianFraction is required over the highest obstacle at the median k-factor,
	// in every climate.
	MedianFraction = 1.0
	// TemperateIsolatedFraction is required at the k-factor ke of [EffectiveK] in a
	// temperate climate when one isolated obstacle stands in the way.
	TemperateIsolatedFraction = 0.0
	// TemperateExtendedFraction is required at ke in a temperate climate when the
	// obstruction extends along part of the path.
	TemperateExtendedFraction = 0.3
	// TropicalFraction is required at ke in a tropical climate on paths longer than
	// [TropicalLengthKM].
	TropicalFraction = 0.6
	// TropicalLengthKM is the path length in km above which TropicalFraction
	// applies; the Recommendation says about.
	TropicalLengthKM = 30.0
)

// The clearances of the lower antenna of a space-diversity pair at the median
// k-factor, as fractions of the first Fresnel radius; both are ranges (P.530-19
// section 2.2).
const (
	// LowerExtendedMinFraction and LowerExtendedMaxFraction hold where the
	// obstruction extends along part of the path.
	LowerExtendedMinFraction = 0.3
	LowerExtendedMaxFraction = 0.6
	// LowerIsolatedMinFraction and LowerIsolatedMaxFraction hold for one or two
	// isolated obstacles.
	LowerIsolatedMinFraction = 0.0
	LowerIsolatedMaxFraction = 0.3
)

// EffectiveK returns ke, the k-factor exceeded for about 99.9 % of the worst month
// in a continental temperate climate, for a path length in km:
//
//	ke = 157/(144 + 2670/d)
//
// It grows with the path length, since strong gradients do not extend over a long
// path, and tends to 1.09. The path length must be positive; the error wraps a
// validity.RangeError otherwise. No other range is printed with the equation; the curve
// of Fig. 2, which lies up to 0.013 above it, covers roughly 10 km to 200 km, and
// on shorter paths the bulge is small whatever ke is.
//
// Source: P.530-19 section 2.2, eq (4).
func EffectiveK(distanceKM float64) (float64, error) {
	if err := validity.Above("path length", distanceKM, 0, "km"); err != nil {
		return 0, err
	}
	return 157 / (144 + 2670/distanceKM), nil
}

// leastAverageLossDB is the smallest loss to which the Recommendation draws the
// line of eq (2), while it calls it valid above about 15 dB.
const leastAverageLossDB = 6

// AverageTerrainLossDB returns the diffraction loss in dB over average terrain
// when the clearance is ratio times the first Fresnel radius (negative when blocked):
//
//	Ad = -20 h/F1 + 10
//
// The Recommendation calls it valid above about 15 dB (ratio below -0.25) and draws
// it down to 6 dB (ratio 0.2). The error wraps a validity.RangeError where it would be
// less than 6 dB.
//
// Source: P.530-19 section 2.2, eq (2).
func AverageTerrainLossDB(ratio float64) (float64, error) {
	const largest = (10.0 - leastAverageLossDB) / 20
	if err := validity.AtMost("clearance in first Fresnel radii", ratio, largest, ""); err != nil {
		return 0, err
	}
	return 10 - 20*ratio, nil
}
