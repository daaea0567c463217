package screening

import (
	"cmp"
	"math"
	"slices"
	"strings"
)

// prefer compares two choices by the order of preference that the package
// states: negative where a is the better one. No two sites compare equal.
func prefer(a, b *Choice) int {
	return cmp.Or(
		cmp.Compare(a.Verdict.rank(), b.Verdict.rank()),
		cmp.Compare(a.mast(), b.mast()), // none is least, out of reach is infinite
		cmp.Compare(b.hundredths(), a.hundredths()),
		cmp.Compare(known(b.MarginF1), known(a.MarginF1)),
		cmp.Compare(a.LengthM, b.LengthM),
		strings.Compare(a.SiteID, b.SiteID),
	)
}

// rank counts the verdicts from the best.
func (v Verdict) rank() int {
	return slices.Index([]Verdict{Clear, Marginal, Obstructed, Unknown}, v)
}

// mast is the mast needed, infinite where none does.
func (c *Choice) mast() float64 {
	if math.IsNaN(c.MastM) {
		return math.Inf(1)
	}
	return c.MastM
}

// hundredths is the confidence as far as it decides: it is an estimate.
func (c *Choice) hundredths() float64 { return math.Round(100 * known(c.Confidence)) }

// known puts what is not known behind everything.
func known(v float64) float64 {
	if math.IsNaN(v) {
		return math.Inf(-1)
	}
	return v
}

// take keeps a choice among the best, in order; at is where, or -1.
func take(best []Choice, c *Choice) (kept []Choice, at int) {
	at, _ = slices.BinarySearchFunc(best, c, func(have Choice, c *Choice) int { return prefer(&have, c) })
	if at == mostChoices {
		return best, -1
	}
	if len(best) == mostChoices {
		best = best[:mostChoices-1]
	}
	return slices.Insert(best, at, *c), at
}
