package screening

import (
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"
)

// Each row is preferred to the next, by one rule of the stated order alone where
// that can be.
func TestPreferenceOrder(t *testing.T) {
	nan := math.NaN()
	choices := []struct {
		why string
		c   Choice
	}{
		{"the best", Choice{SiteID: "a", Verdict: Clear, Confidence: 0.95, MarginF1: 0.5, LengthM: 1000}},
		{"site id", Choice{SiteID: "b", Verdict: Clear, Confidence: 0.95, MarginF1: 0.5, LengthM: 1000}},
		{"longer", Choice{SiteID: "a", Verdict: Clear, Confidence: 0.95, MarginF1: 0.5, LengthM: 1001}},
		{"less margin, and confidence within a hundredth", Choice{SiteID: "a", Verdict: Clear, Confidence: 0.954, MarginF1: 0.4, LengthM: 10}},
		{"less confidence", Choice{SiteID: "a", Verdict: Clear, Confidence: 0.94, MarginF1: 9, LengthM: 10}},
		{"marginal, without a mast", Choice{SiteID: "a", Verdict: Marginal, Confidence: 0.89, MarginF1: 0.1}},
		{"a mast", Choice{SiteID: "a", Verdict: Marginal, MastM: 2, Confidence: 0.99, MarginF1: 9}},
		{"a higher mast", Choice{SiteID: "a", Verdict: Marginal, MastM: 2.1, Confidence: 1, MarginF1: 9}},
		{"no mast does", Choice{SiteID: "a", Verdict: Marginal, MastM: nan, Confidence: 1, MarginF1: 9}},
		{"obstructed", Choice{SiteID: "a", Verdict: Obstructed, MastM: 1, MarginF1: -1}},
		{"obstructed for good", Choice{SiteID: "a", Verdict: Obstructed, MastM: nan, MarginF1: -1}},
		{"unknown", Choice{SiteID: "a", Verdict: Unknown, MastM: nan, Confidence: nan, MarginF1: 0}},
		{"unknown, and nothing of the margin", Choice{SiteID: "a", Verdict: Unknown, MastM: nan, Confidence: nan, MarginF1: nan, LengthM: 1}},
	}
	for i := range choices {
		for j := range choices {
			got := prefer(&choices[i].c, &choices[j].c)
			if (got < 0) != (i < j) || (got > 0) != (i > j) {
				t.Errorf("%s against %s: got %d", choices[i].why, choices[j].why, got)
			}
		}
	}
}

// Whatever the order in which sites are judged, the best three are kept, in order.
func TestTheBestThreeAreKept(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(0, 8).Draw(t, "sites")
		all, best := make([]Choice, n), []Choice(nil)
		for i := range all {
			all[i] = Choice{
				SiteID:  string(rune('a' + i)),
				Verdict: rapid.SampledFrom([]Verdict{Clear, Marginal, Obstructed, Unknown}).Draw(t, "verdict"),
				MastM:   rapid.SampledFrom([]float64{0, 1, math.NaN()}).Draw(t, "mast"),
			}
			best, _ = take(best, &all[i])
		}
		slices.SortFunc(all, func(a, b Choice) int { return prefer(&a, &b) })
		same := func(a, b Choice) bool { return a.SiteID == b.SiteID }
		if want := all[:min(mostChoices, n)]; !slices.EqualFunc(best, want, same) {
			t.Fatalf("got %v, want %v", best, want)
		}
	})
}
