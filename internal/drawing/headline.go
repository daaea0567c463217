package drawing

import (
	"math"
	"strings"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

// headline is the verdict in a plain sentence or two: the path's half, then
// the radio's.
func headline(a *assess.Assessment) string {
	if a.Judgement.Verdict == profile.Unknown {
		return "Cannot be judged: " + unknownCause(a)
	}
	words := pathWords(a)
	if words == "" {
		return reasons(a)
	}
	return words + voidRemark(a) + radioRemark(a)
}

// pathWords says how the line and what must be kept free under it fare; empty
// if nothing is known of it.
func pathWords(a *assess.Assessment) string {
	all := a.Judgement.Clearance
	worst := tightest(all)
	switch c := cut(all); {
	case c.ClearanceM < 0:
		return "Ground or cover stands " + atLeastM(-c.ClearanceM) + " above the line, " + place(c.AtM) + " (" + kFactor(c.K) + ")."
	case missed(worst):
		return "Open, but " + atLeastM(shortM(worst)) + " short of " + fraction(worst.F1Fraction) + ", " + place(worst.AtM) +
			" (" + kFactor(worst.K) + ")."
	case math.IsNaN(worst.MinRatio):
		return ""
	}
	return metWords(a) + " Tightest " + place(worst.AtM) + ": " + ratio(worst.MinRatio) + " free, " +
		fraction(worst.F1Fraction) + " required (" + kFactor(worst.K) + ")."
}

// radioRemark says what the radio makes of it, or that it has the last word.
func radioRemark(a *assess.Assessment) string {
	switch {
	case a.Radio == nil && a.Judgement.Verdict == profile.Marginal && missed(tightest(a.Judgement.Clearance)):
		return " The radio's margin decides."
	case a.Radio == nil:
		return ""
	case !a.Radio.Report.Meets:
		return " The radio misses its target."
	case missed(tightest(a.Judgement.Clearance)):
		return " The radio meets its target all the same."
	}
	return " The radio meets its target."
}

// unknownCause says what keeps the path from being judged, and what is known
// all the same.
func unknownCause(a *assess.Assessment) string {
	worst := tightest(a.Judgement.Clearance)
	cause := voidRemark(a)
	switch noA, noB := math.IsNaN(a.Link.AntennaAM), math.IsNaN(a.Link.AntennaBM); {
	case noA && noB:
		cause = " no ground height at either end."
	case noA:
		cause = " no ground height at end A."
	case noB:
		cause = " no ground height at end B."
	}
	cause = strings.TrimSpace(cause + unreadRemark(a))
	switch {
	case cause == "":
		return reasons(a)
	case missed(worst):
		return cause + " What is known is " + atLeastM(shortM(worst)) + " short of " + fraction(worst.F1Fraction) + "."
	}
	return cause
}

// unreadRemark says what could not be read; it begins with a name or a figure,
// wherever it stands.
func unreadRemark(a *assess.Assessment) string {
	const readable = 300.0
	switch away := a.Profile.Unreachable; len(away) {
	case 0:
		return ""
	case 1:
		return " " + shorten(plain(away[0].Source), face{size: 27}, readable) + " could not be read."
	default:
		return " " + fixed(float64(len(away)), 0) + " rasters could not be read."
	}
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

// missed says that what is known misses the requirement.
func missed(c profile.Clearance) bool { return !c.Met && c.MinRatio < c.F1Fraction }

// shortM is how much clearance is missing at the least of c; NaN if nothing
// is known.
func shortM(c profile.Clearance) float64 { return c.F1Fraction*c.F1M - c.ClearanceM }

// tightest is the clearance with the least to spare over what is required, in
// first Fresnel radii.
func tightest(all []profile.Clearance) profile.Clearance {
	return least(all, func(c profile.Clearance) float64 { return c.MinRatio - c.F1Fraction })
}

// cut is the clearance that the drawing shows if the line is cut there, or
// else the one where most stands above the line.
func cut(all []profile.Clearance) profile.Clearance {
	if drawn := all[drawnIndex(all)]; drawn.ClearanceM < 0 {
		return drawn
	}
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
