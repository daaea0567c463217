package profile

import (
	"fmt"
	"math"
)

// Verdict is the answer in one word.
type Verdict string

// The verdicts.
const (
	// Clear: every criterion is met, with a confidence of ClearConfidence.
	Clear Verdict = "clear"
	// Marginal: every criterion is met with less confidence, or one is missed
	// but the line between the antennas is open at every k judged, so that a
	// radio with margin may still carry it.
	Marginal Verdict = "marginal"
	// Obstructed: terrain or cover cuts the line itself at a k judged.
	Obstructed Verdict = "obstructed"
	// Unknown: a void keeps the path from being judged.
	Unknown Verdict = "unknown"
)

// ReasonCode names why a verdict is what it is. Codes are stable; sentences
// are not.
type ReasonCode string

// The reasons.
const (
	ReasonCriterionMet    ReasonCode = "criterion_met"
	ReasonClearanceShort  ReasonCode = "clearance_short"
	ReasonLineCut         ReasonCode = "line_cut"
	ReasonVoidOnPath      ReasonCode = "void_on_path"
	ReasonVoidAtEnd       ReasonCode = "void_at_end"
	ReasonRadioWillDecide ReasonCode = "radio_will_decide"
	ReasonConfidenceLow   ReasonCode = "confidence_low"
	ReasonNothingBetween  ReasonCode = "nothing_between"
)

// Reason is one reason, kept as figures so that its sentence is only written
// where somebody reads it.
type Reason struct {
	Code      ReasonCode
	Clearance Clearance // for the three clearance codes
	Share     float64   // of void samples
	FromM     float64   // first void sample
	ToM       float64   // last void sample
	End       string    // "a" or "b"
	// Confidence and ExtraM, the least extra height at both ends that would do,
	// are for ReasonConfidenceLow.
	Confidence, ExtraM float64
	// Sentence is the detail of a reason that another room gives; empty for
	// the codes above.
	Sentence string
}

// Detail is the reason as a sentence.
func (r Reason) Detail() string {
	if r.Sentence != "" {
		return r.Sentence
	}
	c := r.Clearance
	switch r.Code {
	case ReasonCriterionMet:
		return fmt.Sprintf("At k %.3g the clearance is at least %.2f F1 (%.1f m at %.0f m from A); %.2g F1 is required.",
			c.K, c.MinRatio, c.ClearanceM, c.AtM, c.F1Fraction)
	case ReasonClearanceShort:
		return fmt.Sprintf("At k %.3g the clearance falls to %.2f F1 (%.1f m at %.0f m from A); %.2g F1, %.1f m, is required there.",
			c.K, math.Floor(100*c.MinRatio)/100, c.ClearanceM, c.AtM, c.F1Fraction, c.F1Fraction*c.F1M)
	case ReasonLineCut:
		return fmt.Sprintf("At k %.3g the ground or its cover rises %.1f m above the line between the antennas, at %.0f m from A.",
			c.K, -c.ClearanceM, c.AtM)
	case ReasonVoidOnPath:
		return fmt.Sprintf("No height is known for %.1f %% of the path, between %.0f m and %.0f m from A.", 100*r.Share, r.FromM, r.ToM)
	case ReasonVoidAtEnd:
		return fmt.Sprintf("No ground height is known at end %s, so its antenna cannot be placed.", r.End)
	case ReasonConfidenceLow:
		return r.confidenceDetail()
	case ReasonNothingBetween:
		return "Between what the antennas stand on nothing is left to judge."
	case ReasonRadioWillDecide:
		return "The line is open but the Fresnel zone is not: whether the link carries traffic depends on the radio's margin."
	}
	return string(r.Code)
}

func (r Reason) confidenceDetail() string {
	text := fmt.Sprintf("Given the errors of the heights, every criterion holds with a probability of %.0f %%, less than the %.0f %% of a clear path", math.Floor(100*r.Confidence), 100*ClearConfidence)
	if math.IsNaN(r.ExtraM) {
		return text + "."
	}
	return text + fmt.Sprintf("; %.1f m more at both ends would do.", math.Ceil(10*r.ExtraM)/10)
}

// doubt takes clear back where the heights are not known well enough.
func (a *Assessment) doubt() {
	if a.Verdict != Clear || a.Confidence >= ClearConfidence {
		return
	}
	a.Verdict = Marginal
	a.Reasons = append(a.Reasons, Reason{Code: ReasonConfidenceLow, Confidence: a.Confidence, ExtraM: a.ExtraHeight.BothM})
}

// judge decides the verdict from the clearances and voids. A known obstruction
// cannot be undone by what a void hides, so it decides even over voids.
func judge(found []Clearance, p *Profile, voids int) (Verdict, []Reason) {
	reasons := make([]Reason, 0, len(found)+1)
	missed, cut := false, false
	for _, c := range found {
		switch {
		case math.IsNaN(c.MinRatio):
			continue
		case c.MinRatio < -ratioTolerance:
			missed, cut = true, true
			reasons = append(reasons, Reason{Code: ReasonLineCut, Clearance: c})
		case short(c.MinRatio, c.F1Fraction):
			missed = true
			reasons = append(reasons, Reason{Code: ReasonClearanceShort, Clearance: c})
		case voids == 0:
			reasons = append(reasons, Reason{Code: ReasonCriterionMet, Clearance: c})
		}
	}
	if voids > 0 {
		reasons = append(reasons, voidReason(p))
	}
	switch {
	case cut:
		return Obstructed, reasons
	case len(reasons) == 0:
		return Unknown, append(reasons, Reason{Code: ReasonNothingBetween})
	case voids > 0:
		return Unknown, reasons
	case missed:
		return Marginal, append(reasons, Reason{Code: ReasonRadioWillDecide})
	}
	return Clear, reasons
}

func voidReason(p *Profile) Reason {
	r := Reason{Code: ReasonVoidOnPath, Share: p.VoidShare(), FromM: math.NaN()}
	for i, h := range p.GroundM {
		if !math.IsNaN(h) {
			continue
		}
		if math.IsNaN(r.FromM) {
			r.FromM = p.DistanceM[i]
		}
		r.ToM = p.DistanceM[i]
	}
	return r
}
