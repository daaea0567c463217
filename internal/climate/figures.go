package climate

import "math"

// Figures are the figures of the climate at a place. One that is not known is NaN, never
// zero: a place without rain has a rain rate of 0.
type Figures struct {
	// LogK is the logarithm to base 10 of the geoclimatic factor K of the multipath method
	// of P.530-18 and -19 section 2.3.1.
	LogK float64
	// DN75 is the increase of the refractivity with height over the lowest 75 m, in
	// N-units, that is exceeded for 0.1 % of the average worst month; for the same
	// method.
	DN75 float64
	// DN1 is the gradient dN/dh of the refractivity in the lowest 65 m, in N-units/km, that is
	// not exceeded for 1 % of an average year; mostly negative. For the methods of
	// P.530-14 to -17.
	DN1 float64
	// RainRateMMH is the rain rate in mm/h, in the mean over a minute, that is exceeded for
	// 0.01 % of an average year, R0.01.
	RainRateMMH float64
	// Sources says in one line for each known figure where it comes from, beginning
	// with the name of the figure, such as "log_k: LogK.csv (ITU-R P.530)".
	Sources []string
}

// Unknown returns figures of which none is known.
func Unknown() Figures {
	nan := math.NaN()
	return Figures{LogK: nan, DN75: nan, DN1: nan, RainRateMMH: nan}
}

// quantity is the name of a figure in settings and sources.
type quantity string

const (
	logK     quantity = "log_k"
	dN75     quantity = "dn75"
	dN1      quantity = "dn1"
	rainRate quantity = "rain_rate_mmh"
)

// quantities are all figures, in the order in which they are told.
func quantities() []quantity { return []quantity{logK, dN75, dN1, rainRate} }

// from is the line that says where the figure comes from.
func (q quantity) from(source string) string { return string(q) + ": " + source }

// set writes a figure and its line of source, unless the value is NaN.
func (f *Figures) set(q quantity, value float64, line string) {
	if math.IsNaN(value) {
		return
	}
	switch q {
	case logK:
		f.LogK = value
	case dN75:
		f.DN75 = value
	case dN1:
		f.DN1 = value
	case rainRate:
		f.RainRateMMH = value
	}
	f.Sources = append(f.Sources, line)
}

// bounds are the least and greatest sane value of something, and its unit with a
// leading blank.
type bounds struct {
	low, high float64
	unit      string
}

// holds reports whether the value is inside; NaN is not.
func (b bounds) holds(value float64) bool { return value >= b.low && value <= b.high }

// typedBounds are the bounds of a figure that somebody types. They are common practice, no
// source: wider than any climate, and narrow enough to catch K in place of its
// logarithm, a gradient without its sign, and inches.
func (q quantity) typedBounds() bounds {
	switch q {
	case logK:
		return bounds{-8, -0.5, ""}
	case dN75:
		return bounds{0, 500, " N-units"}
	case dN1:
		return bounds{-2000, 0, " N-units/km"}
	}
	return bounds{0, 250, " mm/h"}
}
