package drawing

import (
	"math"
	"strconv"
	"strings"
)

const unknownWord = "not known"

// nudge keeps a figure that is meant to be whole from being rounded a step
// further by its last binary digit.
const nudge = 1e-6

// fixed writes v with so many decimals, and zero without a sign.
func fixed(v float64, decimals int) string {
	s := strconv.FormatFloat(v, 'f', decimals, 64)
	if s[0] == '-' && strings.Trim(s, "-0.") == "" {
		return s[1:]
	}
	return s
}

// metres is a height: to a decimetre, from a kilometre up to a metre.
func metres(m float64) string {
	switch {
	case math.IsNaN(m):
		return unknownWord
	case math.Abs(m) >= 1000:
		return fixed(m, 0) + " m"
	}
	return fixed(m, 1) + " m"
}

// atLeastM is metres rounded up: what is missing or must be added, so that
// nobody builds a few centimetres too low.
func atLeastM(m float64) string { return metres(math.Ceil(m*10-nudge) / 10) }

// atMostM is metres rounded down: what is free.
func atMostM(m float64) string { return metres(math.Floor(m*10+nudge) / 10) }

// ratio is a clearance in first Fresnel radii, rounded down, so that a missed
// fraction never reads as reached.
func ratio(r float64) string {
	if math.IsNaN(r) {
		return unknownWord
	}
	decimals := 2
	if math.Abs(r) >= 100 {
		decimals = 0
	}
	scale := math.Pow10(decimals)
	return fixed(math.Floor(r*scale+nudge)/scale, decimals) + " F1"
}

// fraction is a required fraction as its author wrote it.
func fraction(f float64) string { return strconv.FormatFloat(f, 'g', 3, 64) + " F1" }

// kFactor is a k-factor to three digits.
func kFactor(k float64) string { return "k " + strconv.FormatFloat(k, 'g', 3, 64) }

// distance is a length along the path: kilometres, or metres below one.
func distance(m float64) string {
	switch {
	case math.IsNaN(m):
		return unknownWord
	case m >= 100e3:
		return fixed(m/1000, 1) + " km"
	case m >= 1000:
		return fixed(m/1000, 2) + " km"
	case m >= 100:
		return fixed(m, 0) + " m"
	}
	return fixed(m, 1) + " m"
}

func place(m float64) string { return distance(m) + " from A" }

func frequency(ghz float64) string { return strconv.FormatFloat(ghz, 'g', 5, 64) + " GHz" }

// share is a part of a whole; what is there at all is never shown as nothing.
func share(part float64) string {
	switch percent := 100 * part; {
	case percent > 0 && percent < 0.1:
		return "under 0.1 %"
	case percent < 100 && percent > 99.9:
		return "over 99.9 %"
	default:
		return fixed(percent, 1) + " %"
	}
}

// azimuth is an angle from true north, 0.0 to 359.9.
func azimuth(degrees float64) string {
	tenths := math.Mod(math.Round(degrees*10), 3600)
	return fixed(tenths/10, 1) + "°"
}

// tilt is an elevation angle in words, so that no sign is misread.
func tilt(degrees float64) string {
	switch rounded := math.Round(degrees*100) / 100; {
	case math.IsNaN(degrees):
		return unknownWord
	case rounded > 0:
		return fixed(rounded, 2) + "° up"
	case rounded < 0:
		return fixed(-rounded, 2) + "° down"
	}
	return "level"
}

func latitude(degrees float64) string { return angle(degrees, "N", "S") }

func longitude(degrees float64) string { return angle(degrees, "E", "W") }

// angle has five decimals, about a metre on the ground.
func angle(degrees float64, positive, negative string) string {
	side := positive
	if degrees < 0 {
		side = negative
	}
	return fixed(math.Abs(degrees), 5) + "° " + side
}
