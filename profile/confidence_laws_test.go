package profile

import (
	"math"
	"math/rand/v2"
	"testing"

	"pgregory.net/rapid"
)

// Two estimates, each within 0.035.
const confidenceNoise = 0.07

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
