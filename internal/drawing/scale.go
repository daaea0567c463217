package drawing

import "math"

// leastSpanM is the least height that a plot covers: flatter profiles would
// show nothing but noise.
const leastSpanM = 4.0

// heights is the range that the plot must cover: terrain and cover, antennas,
// and the whole of the first Fresnel zone.
func (v *view) heights() (low, high float64) {
	low, high = math.Inf(1), math.Inf(-1)
	take := func(h float64) {
		if !math.IsNaN(h) {
			low, high = min(low, h), max(high, h)
		}
	}
	for i := range v.ground {
		take(v.ground[i])
		take(v.top[i])
	}
	take(v.a.Link.AntennaAM)
	take(v.a.Link.AntennaBM)
	if v.known() {
		for _, d := range v.curve() {
			reach := v.f1(d)
			take(v.lineAt(d) + reach)
			take(v.lineAt(d) - reach*max(1, v.drawn.F1Fraction))
		}
	}
	if low > high {
		low, high, v.blank = 0, 100, true
	}
	if lack := leastSpanM - (high - low); lack > 0 {
		low, high = low-lack/2, high+lack/2
	}
	return low, high
}

// curveSteps is how many pieces a smooth curve across the plot is drawn in.
const curveSteps = 72

// curve is where along the path a smooth curve is computed: densely at the
// ends, where a Fresnel zone is round.
func (v *view) curve() []float64 {
	out := make([]float64, curveSteps+1)
	for i := range out {
		out[i] = v.lengthM * (1 - math.Cos(math.Pi*float64(i)/curveSteps)) / 2
	}
	return out
}

// roundStep is the least 1, 2 or 5 times a power of ten that is no less than
// least.
func roundStep(least float64) float64 {
	power := math.Pow(10, math.Floor(math.Log10(least)))
	for _, m := range []float64{1, 2, 5} {
		if m*power >= least*(1-1e-9) {
			return m * power
		}
	}
	return 10 * power
}

// ticks are the multiples of step from low to high.
func ticks(low, high, step float64) []float64 {
	var out []float64
	for i := math.Ceil(low/step - 1e-9); i*step <= high+1e-9*step; i++ {
		out = append(out, i*step)
	}
	return out
}

// decimalsFor is how many decimals a step needs.
func decimalsFor(step float64) int {
	return max(0, int(math.Ceil(-math.Log10(step)-1e-9)))
}
