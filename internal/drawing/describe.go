package drawing

import (
	"math"
	"slices"
	"strings"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

// title is the sheet's name, for a tab, a tool tip or a screen reader.
func title(a *assess.Assessment) string {
	return "Radio link " + string(a.Judgement.Verdict) + ": " + endName(a.Request.A, "A") + " to " + endName(a.Request.B, "B")
}

// endName is what the end is called, or its letter.
func endName(e assess.End, letter string) string {
	if name := plain(e.Name); name != "" {
		return name
	}
	return "end " + letter
}

// plain drops what is not seen but would turn around or garble the text beside
// a name: controls and directional marks.
func plain(name string) string {
	return strings.TrimSpace(strings.Map(func(r rune) rune {
		switch {
		case r < ' ', r >= 0x7f && r <= 0x9f, r >= 0x202a && r <= 0x202e, r >= 0x2066 && r <= 0x2069:
			return -1
		}
		return r
	}, name))
}

// description is the sheet in words, for whoever cannot see it.
func description(a *assess.Assessment) string {
	parts := []string{
		"Verdict: " + string(a.Judgement.Verdict) + ".",
		headline(a),
		"Path length " + distance(a.Link.Path.LengthM) + ", " + frequency(a.Link.FrequencyGHz) + ".",
		leastClearance(tightest(a.Judgement.Clearance)),
		sureSentence(a),
		raiseSentence(a),
	}
	if a.Judgement.VoidShare > 0 {
		parts = append(parts, "No height is known for "+share(a.Judgement.VoidShare)+" of the path.")
	}
	return strings.Join(slices.DeleteFunc(parts, func(part string) bool { return part == "" }), " ")
}

func leastClearance(c profile.Clearance) string {
	if math.IsNaN(c.MinRatio) {
		return "Least clearance not known."
	}
	return "Least clearance " + ratio(c.MinRatio) + ", " + atMostM(c.ClearanceM) + ", at " + place(c.AtM) +
		" and " + kFactor(c.K) + ", where " + fraction(c.F1Fraction) + " is required."
}

// raiseSentence says what to raise.
func raiseSentence(a *assess.Assessment) string {
	r := a.Judgement.Raise
	switch advice(a) {
	case raiseNothing:
		return "No antenna needs to be raised."
	case raiseUnknown:
		return "What to raise is not known."
	case raiseOutOfReach:
		return outOfReach(r)
	case raiseNeverSure:
		return neverSure(r)
	case raiseToBeSure:
		return "To be " + clearWords() + " " + raiseThese(a.Judgement.ExtraHeight, reach(r))
	case raiseByFigures:
	}
	return "To meet every criterion " + raiseThese(profile.ExtraHeight{AM: r.AM, BM: r.BM, BothM: r.BothM}, reach(r))
}

func raiseThese(m profile.ExtraHeight, most float64) string {
	return "raise A alone by " + raiseWords(m.AM, most) + ", or B alone by " + raiseWords(m.BM, most) +
		", or both by " + raiseWords(m.BothM, most) + " each."
}
