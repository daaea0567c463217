package drawing

import (
	"math"
	"strings"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

// headline is the verdict in a plain sentence or two.
func headline(a *assess.Assessment) string {
	j := &a.Judgement
	worst := tightest(j.Clearance)
	switch j.Verdict {
	case profile.Clear:
		return "Every criterion is met. The tightest place, " + place(worst.AtM) + ", keeps " + ratio(worst.MinRatio) +
			" free; " + fraction(worst.F1Fraction) + " is required."
	case profile.Marginal:
		if shortM(worst) > 0 {
			return "The line is open, but " + atLeastM(shortM(worst)) + " short of " + fraction(worst.F1Fraction) + ", " +
				place(worst.AtM) + " (" + kFactor(worst.K) + "). The radio's margin decides."
		}
	case profile.Obstructed:
		if worst = deepest(j.Clearance); worst.ClearanceM < 0 {
			return "Ground or cover stands " + atLeastM(-worst.ClearanceM) + " above the line, " + place(worst.AtM) +
				" (" + kFactor(worst.K) + ")." + voidRemark(a)
		}
	case profile.Unknown:
		return "Cannot be judged: " + unknownCause(a)
	}
	return reasons(a)
}

// unknownCause says what keeps the path from being judged, and what is known
// all the same.
func unknownCause(a *assess.Assessment) string {
	worst := tightest(a.Judgement.Clearance)
	noA, noB := math.IsNaN(a.Link.AntennaAM), math.IsNaN(a.Link.AntennaBM)
	switch {
	case noA && noB:
		return "no ground height at either end."
	case noA:
		return "no ground height at end A."
	case noB:
		return "no ground height at end B."
	case shortM(worst) > 0:
		return strings.TrimSpace(voidRemark(a)) + " What is known is " + atLeastM(shortM(worst)) + " short of " +
			fraction(worst.F1Fraction) + "."
	case a.Judgement.VoidShare > 0:
		return strings.TrimSpace(voidRemark(a))
	}
	return reasons(a)
}

// voidRemark is empty where every height is known.
func voidRemark(a *assess.Assessment) string {
	if a.Judgement.VoidShare == 0 {
		return ""
	}
	return " " + share(a.Judgement.VoidShare) + " of the path has no data."
}

// reasons are the judge's own sentences, for a verdict this package has no
// words for.
func reasons(a *assess.Assessment) string {
	details := make([]string, len(a.Judgement.Reasons))
	for i, r := range a.Judgement.Reasons {
		details[i] = r.Detail()
	}
	return strings.Join(details, " ")
}

// shortM is how much clearance is missing at the least of c; NaN if nothing
// is known.
func shortM(c profile.Clearance) float64 { return c.F1Fraction*c.F1M - c.ClearanceM }

// tightest is the clearance with the least to spare over what is required, in
// first Fresnel radii.
func tightest(all []profile.Clearance) profile.Clearance {
	return least(all, func(c profile.Clearance) float64 { return c.MinRatio - c.F1Fraction })
}

// deepest is the clearance where most stands above the line.
func deepest(all []profile.Clearance) profile.Clearance {
	return least(all, func(c profile.Clearance) float64 { return c.ClearanceM })
}

// least is the first of all where nothing is known.
func least(all []profile.Clearance, of func(profile.Clearance) float64) profile.Clearance {
	best := all[0]
	for _, c := range all[1:] {
		if value := of(c); value < of(best) || (math.IsNaN(of(best)) && !math.IsNaN(value)) {
			best = c
		}
	}
	return best
}
