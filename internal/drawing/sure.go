package drawing

import (
	"math"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

// sureness is the probability, 0 to 1, that every criterion holds; NaN where it
// is not known. Heights of which nobody stated or assumed an error count as
// exact, and a yes or no from them would read as a certainty that nobody has.
// A judgement older than the question has no extra height for its doubt.
func sureness(a *assess.Assessment) float64 {
	j := &a.Judgement
	if !errorsKnown(&a.Profile) || (j.Confidence < profile.ClearConfidence && j.ExtraHeight.BothM == 0) {
		return math.NaN()
	}
	return j.Confidence
}

func errorsKnown(p *profile.Profile) bool {
	for _, s := range p.Sources {
		if s.ErrorM > 0 {
			return true
		}
	}
	return false
}

// doubtful says that the path is not sure enough for a clear one.
func doubtful(a *assess.Assessment) bool { return sureness(a) < profile.ClearConfidence }

// sureWords is a probability as a crew says it, rounded down, so that too
// little never reads as enough.
func sureWords(p float64) string {
	const rounding, sure = 1e-12, nbsp + "%" + nbsp + "sure"
	switch {
	case p > 0.99:
		return "over" + nbsp + "99" + sure
	case p < 0.01:
		return "under" + nbsp + "1" + sure
	}
	return fixed(math.Floor(100*p+rounding), 0) + sure
}

// clearWords is how sure a clear path is.
func clearWords() string { return sureWords(profile.ClearConfidence) }

// metWords says that every criterion is met, and how sure that is.
func metWords(a *assess.Assessment) string {
	const met = "All criteria met"
	switch p := sureness(a); {
	case math.IsNaN(p):
		return met + "."
	case doubtful(a):
		return met + ", but only " + sureWords(p) + "; a clear path is " + clearWords() + "."
	default:
		return met + ", " + sureWords(p) + "."
	}
}

// sureSentence is how sure it is that every criterion holds; empty where that
// is not known.
func sureSentence(a *assess.Assessment) string {
	p := sureness(a)
	if math.IsNaN(p) {
		return ""
	}
	words := []byte(sureWords(p) + " that every criterion holds, given the errors of the heights.")
	if words[0] >= 'a' && words[0] <= 'z' {
		words[0] -= 'a' - 'A'
	}
	return string(words)
}
