package p530

import (
	"cmp"
	"math"

	"ridgehop/internal/itu/validity"
)

// The range of frequencies for scaling rain attenuation in GHz, from memory, no
// source at hand.
const (
	minScalingGHz = 7.0
	maxScalingGHz = 50.0
)

// ScaleRainFrequencyDB returns the rain attenuation in dB at the frequency toGHz that is
// exceeded as often as attenuationDB at fromGHz on the same path:
//
//	A2 = A1 (phi2/phi1)^(1-H), phi = f^2/(1+1e-4 f^2),
//	H = 1.12e-3 (phi2/phi1)^0.5 (phi1 A1)^0.55
//
// The error wraps a validity.RangeError when the attenuation is negative or a
// frequency outside 7 GHz to 50 GHz (from memory, no source at hand).
//
// Source: P.530-19 section 2.4, eqs (72) to (74).
func ScaleRainFrequencyDB(attenuationDB, fromGHz, toGHz float64) (float64, error) {
	if err := cmp.Or(
		validity.AtLeast("rain attenuation", attenuationDB, 0, "dB"),
		validity.Between("known frequency", fromGHz, minScalingGHz, maxScalingGHz, "GHz"),
		validity.Between("wanted frequency", toGHz, minScalingGHz, maxScalingGHz, "GHz"),
	); err != nil {
		return 0, err
	}
	from, to := scalingWeight(fromGHz), scalingWeight(toGHz)
	h := 1.12e-3 * math.Sqrt(to/from) * math.Pow(from*attenuationDB, 0.55)
	return attenuationDB * math.Pow(to/from, 1-h), nil
}

func scalingWeight(f float64) float64 { return f * f / (1 + 1e-4*f*f) }

// VerticalRainDB returns the rain attenuation in dB for vertical polarisation exceeded
// as often as horizontalDB for horizontal: AV = 300 AH/(335+AH). The error wraps a
// validity.RangeError when it is negative.
//
// Source: P.530-19 section 2.4, polarisation scaling.
func VerticalRainDB(horizontalDB float64) (float64, error) {
	if err := validity.AtLeast("rain attenuation", horizontalDB, 0, "dB"); err != nil {
		return 0, err
	}
	return 300 * horizontalDB / (335 + horizontalDB), nil
}

// HorizontalRainDB is the inverse of [VerticalRainDB]: AH = 335 AV/(300-AV). The error
// wraps a validity.RangeError outside 0 dB to 299 dB.
func HorizontalRainDB(verticalDB float64) (float64, error) {
	if err := validity.Between("rain attenuation", verticalDB, 0, 299, "dB"); err != nil {
		return 0, err
	}
	return 335 * verticalDB / (300 - verticalDB), nil
}

// WetSnowMatters reports whether part of a path can lie in the melting layer, so that
// wet snow adds to the attenuation of rain: when its higher antenna is above
// rainHeightM - 3600 m and its lower antenna below rainHeightM + 2400 m. All heights are
// amsl in m. rainHeightM is that of P.839, the mean 0 degree isotherm plus 360 m.
//
// Source: P.530-19 section 2.4.2.
func WetSnowMatters(lowerM, higherM, rainHeightM float64) bool {
	return higherM > rainHeightM-3600 && lowerM < rainHeightM+2400
}
