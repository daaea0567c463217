package drawing

import (
	"math"
	"strconv"
	"testing"
)

// luminance is the relative luminance of "#rrggbb" as WCAG 2.2 defines it.
func luminance(t *testing.T, colour string) float64 {
	t.Helper()
	sum := 0.0
	for i, weight := range []float64{0.2126, 0.7152, 0.0722} {
		v, err := strconv.ParseUint(colour[1+2*i:3+2*i], 16, 8)
		if err != nil {
			t.Fatal(err)
		}
		c := float64(v) / 255
		if c <= 0.04045 {
			c /= 12.92
		} else {
			c = math.Pow((c+0.055)/1.055, 2.4)
		}
		sum += weight * c
	}
	return sum
}

func contrast(t *testing.T, a, b string) float64 {
	t.Helper()
	p, q := luminance(t, a), luminance(t, b)
	return (max(p, q) + 0.05) / (min(p, q) + 0.05)
}

// Without colour, too, texts are legible and neighbours apart. 7, 4.5 and 3
// are WCAG 2.2's contrasts for text enhanced, text, and graphics (1.4.6,
// 1.4.3, 1.4.11); between two fills with an outline less is enough.
func TestContrast(t *testing.T) {
	for _, c := range []struct {
		what, a, b string
		least      float64
	}{
		{"text on paper", ink, paper, 7},
		{"secondary text on paper", quiet, paper, 7},
		{"secondary text in a cell", quiet, band, 4.5},
		{"text in a callout", paper, alarm, 7},
		{"word of clear", paper, pass, 7},
		{"word of marginal", doubt, paper, 7},
		{"line over what is in the way", ink, intruder, 3},
		{"line over ground", ink, earth, 7},
		{"zone over ground", zoneInk, earth, 4.5},
		{"zone over what is in the way", zoneInk, intruder, 1.8},
		{"outline of ground", earthInk, earth, 4.5},
		{"strokes of cover", leafInk, leaf, 3},
		{"in the way beside ground", intruder, earth, 2},
		{"in the way beside cover", intruder, leaf, 1.8},
		{"clear beside marginal", pass, paper, 7},
	} {
		if got := contrast(t, c.a, c.b); got < c.least {
			t.Errorf("%s: got a contrast of %.2f, want at least %g", c.what, got, c.least)
		}
	}
}
