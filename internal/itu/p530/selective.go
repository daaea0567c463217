package p530

import (
	"cmp"
	"math"

	"ridgehop/internal/itu/validity"
)

// Signature is the signature curve of a radio: how sensitive it is to
// frequency-selective fading.
type Signature struct {
	// WidthGHz is the width W in GHz, not negative.
	WidthGHz float64
	// DepthDB is the depth B in dB.
	DepthDB float64
	// DelayNS is the reference delay in ns with which the signature was measured,
	// often 6.3; positive.
	DelayNS float64
}

// MeanDelayNS returns the mean delay of the second ray in ns on a path of distanceKM,
// which must not be negative: 0.7 (d/50)^1.3.
//
// Source: P.530-19 section 5.1, eq (116).
func MeanDelayNS(distanceKM float64) float64 { return 0.7 * math.Pow(distanceKM/50, 1.3) }

// SelectiveOutage returns the probability of outage by selective fading in the worst
// month, 0 to 1, for the activity of [MultipathActivity] and the signatures of minimum
// and non-minimum phase:
//
//	Ps = 2.15 eta sum of W 10^(-B/20) tm^2/tr
//
// The error wraps a validity.RangeError when the activity is not in 0 to 1, the path
// length not positive, or a signature not possible.
//
// Source: P.530-19 section 5.1, eq (117).
func SelectiveOutage(activity, distanceKM float64, minimum, nonMinimum Signature) (float64, error) {
	if err := cmp.Or(
		validity.Between("multipath activity", activity, 0, 1, ""),
		validity.Above("path length", distanceKM, 0, "km"),
		minimum.check(), nonMinimum.check(),
	); err != nil {
		return 0, err
	}
	delay := MeanDelayNS(distanceKM)
	sum := minimum.weight(delay) + nonMinimum.weight(delay)
	return min(2.15*activity*sum, 1), nil
}

func (s Signature) weight(delayNS float64) float64 {
	return s.WidthGHz * math.Pow(10, -s.DepthDB/20) * delayNS * delayNS / s.DelayNS
}

func (s Signature) check() error {
	return cmp.Or(
		validity.AtLeast("width of the signature", s.WidthGHz, 0, "GHz"),
		validity.AtLeast("depth of the signature", s.DepthDB, 0, "dB"),
		validity.Above("reference delay of the signature", s.DelayNS, 0, "ns"),
	)
}
