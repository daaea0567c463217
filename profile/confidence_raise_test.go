package profile

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"pgregory.net/rapid"
)

// raiseLevers are the levers and what an answer has for them.
var raiseLevers = []struct {
	name string
	by   lever
	of   func(ExtraHeight) float64
}{
	{"a", atA, func(e ExtraHeight) float64 { return e.AM }},
	{"b", atB, func(e ExtraHeight) float64 { return e.BM }},
	{"both", atBoth, func(e ExtraHeight) float64 { return e.BothM }},
}

func (c *errorChain) raised(raiseM float64, by lever) *errorChain {
	r := c.clone()
	for i, d := range r.distanceM {
		r.marginM[i] += raiseM * by(d/c.lengthM)
	}
	return r
}

// extra is the extra height of a path, whatever its confidence is.
func (c *errorChain) extra(capM float64, ws *confidenceScratch) ExtraHeight {
	c.gather(ws)
	return c.extraHeight(capM, ws)
}

// Four sigmas of the simulation's own noise come on top of the tolerance.
func TestExtraHeightAgainstSimulation(t *testing.T) {
	const draws = 20000
	noise := 4 * math.Sqrt(ClearConfidence*(1-ClearConfidence)/draws)
	r, ws := rand.New(rand.NewPCG(21, 22)), &confidenceScratch{}
	for _, l := range raiseLevers {
		largest, squares, n := 0.0, 0.0, 0.0
		for i := 0; n < 25; i++ {
			c := randomErrorChain(r, i%len(marginShapes), 100)
			confidence, extra := c.judge(DefaultRaiseCapM, ws)
			raiseM := l.of(extra)
			if confidence >= ClearConfidence || raiseM <= 1.0/raiseSteps {
				continue
			}
			off := c.raised(raiseM, l.by).simulated(r, draws) - ClearConfidence
			if math.Abs(off) > 0.02+noise {
				t.Errorf("chain %d raised at %s by %.2f m: got %.4f, want %.4f", i, l.name, raiseM, ClearConfidence+off, ClearConfidence)
			}
			largest, squares, n = max(largest, math.Abs(off)), squares+off*off, n+1
		}
		t.Logf("at %s: largest deviation %.4f, root mean square %.4f", l.name, largest, math.Sqrt(squares/n))
	}
}

// The draws are the same for both paths, so the law is exact.
func TestExtraHeightFallsWithMargins(t *testing.T) {
	ws := &confidenceScratch{}
	rapid.Check(t, func(t *rapid.T) {
		c := drawErrorChain(t, 100)
		more := c.clone()
		at, by := rapid.IntRange(0, len(c.marginM)-1).Draw(t, "at"), rapid.Float64Range(0, 3).Draw(t, "by")
		all := rapid.Bool().Draw(t, "all")
		for i := range more.marginM {
			if all || i == at {
				more.marginM[i] += by
			}
		}
		less, got := c.extra(math.MaxInt, ws), more.extra(math.MaxInt, ws)
		for _, l := range raiseLevers {
			if !(l.of(got) <= l.of(less)) {
				t.Fatalf("at %s: got %g with more margin, %g with less", l.name, l.of(got), l.of(less))
			}
		}
		if again := more.extra(math.MaxInt, &confidenceScratch{}); again != got {
			t.Fatalf("got %v with used memory, %v with new", got, again)
		}
	})
}

// Samples that are not decisive might as well not be in doubt.
func TestExtraHeightOfDecisiveSamples(t *testing.T) {
	ws := &confidenceScratch{}
	rapid.Check(t, func(t *rapid.T) {
		c := drawErrorChain(t, 100)
		want, few := c.extra(DefaultRaiseCapM, ws), c.clone()
		for i := range few.marginM {
			decisive := func(d decisiveSample) bool { return int(d.at) == i }
			if !slices.ContainsFunc(ws.decisive, decisive) {
				few.marginM[i] = 1e6
			}
		}
		if got := few.extra(DefaultRaiseCapM, ws); got != want {
			t.Fatalf("got %v, want %v", got, want)
		}
	})
}

// What is enough seen from B is enough seen from A.
func TestExtraHeightIsTheSameFromB(t *testing.T) {
	ws, worst := &confidenceScratch{}, 0.0
	rapid.Check(t, func(t *rapid.T) {
		c := drawErrorChain(t, 60)
		if c.confidence(ws) >= ClearConfidence {
			t.Skip("sure already")
		}
		e := c.mirrored().extra(math.MaxInt, ws)
		e.AM, e.BM = e.BM, e.AM
		for _, l := range raiseLevers {
			if l.of(e) <= 1.0/raiseSteps {
				continue
			}
			off := math.Abs(c.raised(l.of(e), l.by).confidence(ws) - ClearConfidence)
			if worst = max(worst, off); off > confidenceNoise {
				t.Fatalf("at %s: %g off", l.name, off)
			}
		}
	})
	t.Logf("largest difference %.4f", worst)
}

func TestExtraHeightUpToTheCap(t *testing.T) {
	ws := &confidenceScratch{}
	rapid.Check(t, func(t *rapid.T) {
		c := drawErrorChain(t, 50)
		e := c.extra(DefaultRaiseCapM, ws)
		l := rapid.SampledFrom(raiseLevers).Draw(t, "lever")
		want := l.of(e)
		if math.IsNaN(want) {
			t.Skip("beyond the cap")
		}
		if got := l.of(c.extra(want, ws)); got != want {
			t.Fatalf("with itself for cap: got %g, want %g", got, want)
		}
		if got := l.of(c.extra(want-0.5/raiseSteps, ws)); !math.IsNaN(got) {
			t.Fatalf("with less for cap than %g: got %g, want NaN", want, got)
		}
	})
}

// The raise that makes one sample sure is known.
func TestExtraHeightOfOneSample(t *testing.T) {
	c, ws := lone(2, 300, -5), &confidenceScratch{}
	want := 5 + 2*normalQuantile(ClearConfidence)
	e := c.extra(DefaultRaiseCapM, ws)
	near(t, "at a", e.AM, 2*want, 0.005)
	near(t, "at b", e.BM, 2*want, 0.005)
	near(t, "at both", e.BothM, want, 0.005)
	c.marginM[0] = 50
	if _, got := c.judge(DefaultRaiseCapM, ws); got != (ExtraHeight{}) {
		t.Errorf("sure already: got %v, want none", got)
	}
	// Two estimates of one thing may differ; the answer is not zero then.
	if got := c.extra(DefaultRaiseCapM, ws); got != (ExtraHeight{0.01, 0.01, 0.01}) {
		t.Errorf("sure by the draws alone: got %v, want a centimetre", got)
	}
}

// A long path is drawn less often.
func TestExtraHeightOfALongPath(t *testing.T) {
	margins := make([]float64, 30001)
	for i := range margins {
		margins[i] = 100
	}
	margins[15000] = -5
	e := lone(2, 300, margins...).extra(DefaultRaiseCapM, &confidenceScratch{})
	near(t, "at both", e.BothM, 5+2*normalQuantile(ClearConfidence), 0.03)
}

func TestExtraHeightOfExactHeights(t *testing.T) {
	ws := &confidenceScratch{}
	c := lone(0, 300, 1, -2, -3) // at 100, 200 and 300 of 400 m
	confidence, got := c.judge(DefaultRaiseCapM, ws)
	if want := (ExtraHeight{AM: 12, BM: 4, BothM: 3}); confidence != 0 || got != want {
		t.Errorf("got %g and %v, want 0 and %v", confidence, got, want)
	}
	for _, l := range raiseLevers {
		if after := c.raised(l.of(got), l.by).confidence(ws); after != 1 {
			t.Errorf("raised at %s: got %g, want 1", l.name, after)
		}
	}
}

func TestNthLargest(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		values := rapid.SliceOfN(rapid.Float64Range(-3, 3), 1, 50).Draw(t, "values")
		if rapid.Bool().Draw(t, "many alike") {
			for i := range values {
				values[i] = math.Round(values[i])
			}
		}
		n := rapid.IntRange(0, len(values)-1).Draw(t, "n")
		sorted := slices.Sorted(slices.Values(values))
		if got, want := nthLargest(values, n), sorted[len(sorted)-1-n]; got != want {
			t.Fatalf("got %g, want %g", got, want)
		}
	})
}
