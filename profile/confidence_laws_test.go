package profile

import (
	"math"
	"math/rand/v2"
	"testing"

	"pgregory.net/rapid"
)

// Two estimates, each within 0.022, and a little more.
const confidenceNoise = 0.05

func drawErrorChain(t *rapid.T, most int) *errorChain {
	shape := rapid.IntRange(0, len(marginShapes)-1).Draw(t, "shape")
	return randomErrorChain(rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 1)), shape, most)
}

func TestConfidenceIsAProbability(t *testing.T) {
	ws := &confidenceScratch{}
	rapid.Check(t, func(t *rapid.T) {
		c := drawErrorChain(t, 100)
		got := c.confidence(ws)
		if !(got >= 0 && got <= 1) {
			t.Fatalf("got %g", got)
		}
		if again := c.confidence(&confidenceScratch{}); again != got {
			t.Fatalf("got %g with used memory, %g with new", got, again)
		}
		// No sample is surer than all of them together.
		lowest := 1.0
		for i := range c.marginM {
			one := c.clone()
			for j := range one.marginM {
				if j != i {
					one.marginM[j] = math.NaN()
				}
			}
			lowest = min(lowest, one.confidence(ws))
		}
		if got > lowest+1e-9 {
			t.Fatalf("got %g, and %g for one sample alone", got, lowest)
		}
	})
}

func TestConfidenceGrowsWithMargins(t *testing.T) {
	ws, worst := &confidenceScratch{}, 0.0
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
		fall := c.confidence(ws) - more.confidence(ws)
		if worst = max(worst, fall); fall > confidenceNoise {
			t.Fatalf("falls by %g", fall)
		}
	})
	t.Logf("largest fall %.4f", worst)
}

func TestConfidenceFallsWithErrors(t *testing.T) {
	ws, worst := &confidenceScratch{}, 0.0
	rapid.Check(t, func(t *rapid.T) {
		c := drawErrorChain(t, 100)
		for i := range c.marginM {
			c.marginM[i] = max(c.marginM[i], 0)
		}
		more, by := c.clone(), rapid.Float64Range(1, 3).Draw(t, "by")
		for i := range more.errorM {
			more.errorM[i] *= by
		}
		more.a.errorM *= by
		more.b.errorM *= by
		rise := more.confidence(ws) - c.confidence(ws)
		if worst = max(worst, rise); rise > confidenceNoise {
			t.Fatalf("rises by %g", rise)
		}
	})
	t.Logf("largest rise %.4f", worst)
}

func TestConfidenceIsTheSameFromB(t *testing.T) {
	ws, worst := &confidenceScratch{}, 0.0
	rapid.Check(t, func(t *rapid.T) {
		c := drawErrorChain(t, 100)
		off := math.Abs(c.confidence(ws) - c.mirrored().confidence(ws))
		if worst = max(worst, off); off > confidenceNoise {
			t.Fatalf("differs by %g", off)
		}
	})
	t.Logf("largest difference %.4f", worst)
}

func TestConfidenceRaise(t *testing.T) {
	ws := &confidenceScratch{}
	rapid.Check(t, func(t *rapid.T) {
		c := drawErrorChain(t, 50)
		by := rapid.SampledFrom([]lever{atA, atB, atBoth}).Draw(t, "lever")
		probability := rapid.SampledFrom([]float64{0.5, 0.9, 0.99}).Draw(t, "probability")
		m := c.raiseFor(probability, DefaultRaiseCapM, by, ws)
		after := func(raiseM float64) float64 {
			raised := c.clone()
			for i, d := range raised.distanceM {
				raised.marginM[i] += raiseM * by(d/c.lengthM)
			}
			return raised.confidence(ws)
		}
		if got := after(m); !(got >= probability) {
			t.Fatalf("raised by %g m: got %g, want %g", m, got, probability)
		}
		if m == 0 {
			return
		}
		if got := after(m - 1.0/raiseSteps); got > probability+1e-9 {
			t.Fatalf("raised by 1 cm less than %g m: got %g already", m, got)
		}
		if got := c.raiseFor(probability, m, by, ws); got != m {
			t.Fatalf("with itself for cap: got %g, want %g", got, m)
		}
		if got := c.raiseFor(probability, m/2, by, ws); !math.IsNaN(got) && after(got) < probability {
			t.Fatalf("with half the cap: got %g", got)
		}
	})
}

// The raise that makes one sample sure is known.
func TestConfidenceRaiseOfOneSample(t *testing.T) {
	c, ws := lone(2, 300, -5), &confidenceScratch{}
	want := math.Ceil((5+2*1.2815515655446004)/0.5*100) / 100 // the quantile of 0.9
	near(t, "at a", c.raiseFor(0.9, 100, atA, ws), want, 1e-9)
	if got := c.raiseFor(0.9, 15, atA, ws); !math.IsNaN(got) {
		t.Errorf("beyond the cap: got %g, want NaN", got)
	}
	c.marginM[0] = 50
	if got := c.raiseFor(0.9, 100, atA, ws); got != 0 {
		t.Errorf("sure already: got %g, want 0", got)
	}
}
