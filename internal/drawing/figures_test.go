package drawing

import (
	"math"
	"strings"
	"testing"
)

func TestFigures(t *testing.T) {
	nan := math.NaN()
	for _, c := range []struct{ what, got, want string }{
		{"height", metres(12.34), "12.3 m"},
		{"no height", metres(nan), "not known"},
		{"height just below zero", metres(-0.04), "0.0 m"},
		{"height below sea level", metres(-3.25), "−3.2 m"},
		{"height of a mountain", metres(2345.6), "2346 m"},
		{"missing, rounded up", atLeastM(1.01), "1.1 m"},
		{"missing, already round", atLeastM(1.1), "1.1 m"},
		{"missing, a hair", atLeastM(0.002), "0.1 m"},
		{"free, rounded down", atMostM(1.19), "1.1 m"},
		{"free, already round", atMostM(0.3), "0.3 m"},
		{"blocked, rounded away from free", atMostM(-0.31), "−0.4 m"},
		{"ratio that just misses", ratio(0.5999), "0.59 F1"},
		{"ratio that just reaches", ratio(0.6 - 1e-10), "0.60 F1"},
		{"ratio just cut", ratio(-0.0001), "−0.01 F1"},
		{"ratio over ten", ratio(12.345), "12.3 F1"},
		{"ratio over a hundred", ratio(135.9), "135 F1"},
		{"ratio out of all measure", ratio(1e6), ">999 F1"},
		{"ratio out of all measure, below", ratio(-1e6), "<−999 F1"},
		{"no ratio", ratio(nan), "not known"},
		{"required", fraction(0.577), "0.577 F1"},
		{"required, whole", fraction(1), "1 F1"},
		{"median k", kFactor(4.0 / 3), "k 1.33"},
		{"small k", kFactor(0.0567), "k 0.057"},
		{"tiny k", kFactor(1e-5), "k <0.001"},
		{"large k", kFactor(100), "k 100"},
		{"short way", distance(51.04), "51.0 m"},
		{"way below a kilometre", distance(812.5), "812 m"},
		{"way", distance(12345), "12.35 km"}, // 12.345 is a hair more in binary
		{"long way", distance(176123), "176.1 km"},
		{"frequency", frequency(18.7), "18.7 GHz"},
		{"low frequency", frequency(0.1), "0.1 GHz"},
		{"share", share(0.1204), "12.0 %"},
		{"share of almost nothing", share(1e-6), "under 0.1 %"},
		{"share of almost all", share(0.99999), "over 99.9 %"},
		{"azimuth", azimuth(51.66), "51.7°"},
		{"azimuth that rounds to north", azimuth(359.97), "0.0°"},
		{"tilt up", tilt(0.424), "0.42° up"},
		{"tilt down", tilt(-3), "3.00° down"},
		{"no tilt", tilt(-0.001), "level"},
		{"tilt not known", tilt(nan), "not known"},
		{"north", latitude(57.10321), "57.10321° N"},
		{"west", longitude(-4.612345), "4.61235° W"},
		{"step of centimetres", spacing(0.25), "0.25 m"},
	} {
		if got := strings.ReplaceAll(c.got, nbsp, " "); got != c.want {
			t.Errorf("%s: got %q, want %q", c.what, got, c.want)
		}
	}
}
