package profile

import (
	"math"
	"math/rand/v2"
	"testing"
)

// The tolerance is what confidence promises; four sigmas of the simulation's own
// noise come on top.
func TestConfidenceAgainstSimulation(t *testing.T) {
	ws := &confidenceScratch{}
	check := func(seed uint64, chains, most, draws int) {
		r, largest := rand.New(rand.NewPCG(seed, 12)), 0.0
		for i := range chains {
			shape := i % len(marginShapes)
			c := randomErrorChain(r, shape, most)
			got, want := c.confidence(ws), c.simulated(r, draws)
			off := math.Abs(got - want)
			tolerance := 0.022
			if want < 0.8 {
				tolerance = 0.04
			}
			if off > tolerance+4*math.Sqrt(want*(1-want)/float64(draws)) {
				t.Errorf("seed %d, chain %d, %s: got %.4f, want %.4f", seed, i, marginShapes[shape].name, got, want)
			}
			largest = max(largest, off)
		}
		t.Logf("%d chains of %d draws: largest deviation %.4f", chains, draws, largest)
	}
	check(11, 42, 100, 20000)
	check(13, 3, 60, 200000)
}

// lone is a path with so many samples 100 m apart, with sigma and correlation
// length the same, between ends above sea level.
func lone(sigmaM, correlationM float64, marginsM ...float64) *errorChain {
	c := &errorChain{lengthM: 100 * float64(len(marginsM)+1), marginM: marginsM}
	for i := range marginsM {
		c.distanceM = append(c.distanceM, 100*float64(i+1))
		c.errorM = append(c.errorM, sigmaM)
		c.correlationM = append(c.correlationM, correlationM)
		c.source = append(c.source, 0)
	}
	return c
}

func TestConfidenceOfOneSample(t *testing.T) {
	ws := &confidenceScratch{}
	for _, m := range []float64{-6, -2, 0, 1, 2.5, 8} {
		c := lone(2, 500, m)
		near(t, "ends exact", c.confidence(ws), normalCDF(m/2), 1e-12)
		c.a, c.b = endError{1.5, 8}, endError{3, 9}
		near(t, "ends on sources of their own", c.confidence(ws), normalCDF(m/math.Sqrt(4+0.75*0.75+1.5*1.5)), 1e-12)
		c.a, c.b = endError{2, 0}, endError{2, 0}
		// The variance of (eA + eB)/2 - e, all of one source, e half way.
		r := math.Exp(-100.0 / 500)
		sigma := 2 * math.Sqrt(1.5+r*r/2-2*r)
		near(t, "ends on the same source", c.confidence(ws), normalCDF(m/sigma), 1e-12)
	}
}

// Sheppard's theorem on two normal values of zero mean, and its extension to
// three: W. F. Sheppard, Phil. Trans. R. Soc. A 192 (1899) 101-167 (from memory).
func TestConfidenceOfOrthants(t *testing.T) {
	ws := &confidenceScratch{}
	for _, correlationM := range []float64{1, 40, 100, 300, 2000, 1e5, 1e12} {
		r := math.Exp(-100 / min(correlationM, longestCorrelationM))
		near(t, "two", lone(2, correlationM, 0, 0).confidence(ws), 0.25+math.Asin(r)/(2*math.Pi), 0.003)
		want := 0.125 + (2*math.Asin(r)+math.Asin(r*r))/(4*math.Pi)
		near(t, "three", lone(2, correlationM, 0, 0, 0).confidence(ws), want, 0.006)
	}
}

// Samples of sources that take turns are independent.
func TestConfidenceOfIndependentSamples(t *testing.T) {
	margins, want := []float64{}, 1.0
	for i := range 40 {
		m := 2.5 + float64(i%7)
		margins = append(margins, m)
		want *= normalCDF(m / 2)
	}
	c := lone(2, 5000, margins...)
	for i := range c.source {
		c.source[i] = int16(i % 2)
	}
	near(t, "confidence", c.confidence(&confidenceScratch{}), want, 0.005)
}

func TestConfidenceOfExactHeights(t *testing.T) {
	for _, c := range []struct {
		name    string
		margins []float64
		want    float64
	}{
		{"met", []float64{3, 0.001}, 1},
		{"just met", []float64{3, 0}, 1},
		{"just met but for rounding", []float64{3, -1e-10}, 1},
		{"missed", []float64{3, -1e-6}, 0},
		{"nothing asked", []float64{math.NaN(), math.NaN()}, 1},
		{"no samples", nil, 1},
	} {
		if got := lone(0, 300, c.margins...).confidence(&confidenceScratch{}); got != c.want {
			t.Errorf("%s: got %g, want %g", c.name, got, c.want)
		}
	}
}

// Exact terrain below an antenna whose height is not: one error moves all.
func TestConfidenceOfExactTerrain(t *testing.T) {
	c := lone(0, 300, 1, 1, 1)
	c.a = endError{2, 3}
	near(t, "confidence", c.confidence(&confidenceScratch{}), normalCDF(1/(0.75*2)), 0.003)
}

// Where nothing is asked, nothing changes.
func TestConfidenceSkipsWhereNothingIsAsked(t *testing.T) {
	ws := &confidenceScratch{}
	c := lone(2, 300, 2, 1, 3)
	want := c.confidence(ws)
	c.lengthM = 400
	c.distanceM = []float64{0, 100, 150, 200, 300, 400}
	c.marginM = []float64{math.NaN(), 2, math.NaN(), 1, 3, math.NaN()}
	c.errorM, c.correlationM = []float64{9, 2, 9, 2, 2, 9}, []float64{9, 300, 9, 300, 300, 9}
	c.source = []int16{4, 0, -1, 0, 0, 4}
	if got := c.confidence(ws); got != want {
		t.Errorf("got %g, want %g", got, want)
	}
}

func TestNormalTables(t *testing.T) {
	n := newNormalTables()
	for x := -9.0; x < 7; x += 0.0037 {
		near(t, "cdf", n.cdf(x), normalCDF(x), 1e-5)
	}
	for p := 1e-9; p < 1; p = min(p*1.1, p+0.0017) {
		near(t, "quantile", n.at(p), normalQuantile(p), 1e-3)
	}
	if got := n.cdf(math.NaN()); got != 0 {
		t.Errorf("cdf of NaN: got %g, want 0", got)
	}
}

// Φ(1.96) and Φ(-3): Abramowitz and Stegun, table 26.1 (from memory).
func TestNormalCDF(t *testing.T) {
	near(t, "1.96", normalCDF(1.96), 0.975002105, 1e-9)
	near(t, "-3", normalCDF(-3), 0.001349898032, 1e-12)
	near(t, "quantile", normalQuantile(normalCDF(1.25)), 1.25, 1e-12)
}

func TestConfidenceAllocatesNothing(t *testing.T) {
	c, ws := doubtfulPath(60), &confidenceScratch{}
	if got := testing.AllocsPerRun(10, func() { c.confidence(ws); c.extraHeight(100, ws) }); got > 0 {
		t.Errorf("got %g allocations, want none", got)
	}
}
