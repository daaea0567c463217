package drawing

import (
	"math"
	"strconv"
	"strings"
)

const (
	unknownWord = "not known"
	// nbsp holds a figure and its unit together.
	nbsp = "\u00a0"
)

// nudge keeps a figure that is meant to be whole from being rounded a step
// further by its last binary digit.
const nudge = 1e-6

// fixed writes v with so many decimals, a minus sign that is one, and zero
// without any.
func fixed(v float64, decimals int) string {
	s := strconv.FormatFloat(v, 'f', decimals, 64)
	digits, negative := strings.CutPrefix(s, "-")
	if negative && strings.Trim(digits, "0.") != "" {
		return "\u2212" + digits
	}
	return digits
}

// metres is a height: to a decimetre, from a kilometre up to a metre, from ten
// up in kilometres.
func metres(m float64) string {
	switch {
	case math.IsNaN(m):
		return unknownWord
	case math.Abs(m) >= 9999:
		return fixed(m/1000, 1) + nbsp + "km"
	case math.Abs(m) >= 999.9:
		return fixed(m, 0) + nbsp + "m"
	}
	return fixed(m, 1) + nbsp + "m"
}

// atLeastM is metres rounded up: what is missing or must be added, so that
// nobody builds a few centimetres too low.
func atLeastM(m float64) string { return metres(math.Ceil(m*10-nudge) / 10) }

// atMostM is metres rounded down: what is free.
func atMostM(m float64) string { return metres(math.Floor(m*10+nudge) / 10) }

// ratio is a clearance in first Fresnel radii, rounded down, so that a missed
// fraction never reads as reached.
func ratio(r float64) string {
	switch {
	case math.IsNaN(r):
		return unknownWord
	case r >= 999:
		return ">999" + nbsp + "F1"
	case r <= -999:
		return "<\u2212999" + nbsp + "F1"
	}
	decimals := 2
	switch size := math.Abs(r); {
	case size >= 99.9:
		decimals = 0
	case size >= 9.99:
		decimals = 1
	}
	scale := math.Pow10(decimals)
	return fixed(math.Floor(r*scale+nudge)/scale, decimals) + nbsp + "F1"
}

// fraction is a required fraction as its author wrote it.
func fraction(f float64) string { return strconv.FormatFloat(f, 'g', 3, 64) + nbsp + "F1" }

// kFactor is a k-factor by its name.
func kFactor(k float64) string { return "k" + nbsp + kFigure(k) }

// kFigure is a k-factor to three digits, or three decimals if it is small.
func kFigure(k float64) string {
	switch {
	case k < 0.001:
		return "<0.001"
	case k < 0.1:
		return fixed(k, 3)
	}
	return strconv.FormatFloat(k, 'g', 3, 64)
}

// distance is a length along the path: kilometres, or metres below one.
func distance(m float64) string {
	switch {
	case math.IsNaN(m):
		return unknownWord
	case m >= 100e3:
		return fixed(m/1000, 1) + nbsp + "km"
	case m >= 1000:
		return fixed(m/1000, 2) + nbsp + "km"
	case m >= 100:
		return fixed(m, 0) + nbsp + "m"
	}
	return fixed(m, 1) + nbsp + "m"
}

// trimmed is a figure as its author wrote it, to four decimals.
func trimmed(v float64) string {
	s := fixed(v, 4)
	return strings.TrimRight(strings.TrimRight(s, "0"), ".")
}

func place(m float64) string { return distance(m) + " from A" }

func frequency(ghz float64) string { return strconv.FormatFloat(ghz, 'g', 5, 64) + nbsp + "GHz" }

// share is a part of a whole; what is there at all is never shown as nothing.
func share(part float64) string {
	switch percent := 100 * part; {
	case percent > 0 && percent < 0.1:
		return "under 0.1" + nbsp + "%"
	case percent < 100 && percent > 99.9:
		return "over 99.9" + nbsp + "%"
	default:
		return fixed(percent, 1) + nbsp + "%"
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
		return fixed(rounded, 2) + "°" + nbsp + "up"
	case rounded < 0:
		return fixed(-rounded, 2) + "°" + nbsp + "down"
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
	return fixed(math.Abs(degrees), 5) + "°" + nbsp + side
}
