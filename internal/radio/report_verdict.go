package radio

import (
	"fmt"
	"math"
)

// verdict decides whether the link meets its target, and says why not.
func (j *judge) verdict() {
	r := j.report
	j.judgeAim("A", &r.Aim.A)
	j.judgeAim("B", &r.Aim.B)
	if j.known() {
		j.judgeBudget("from A to B", &r.AToB)
		j.judgeBudget("from B to A", &r.BToA)
		j.judgeAvailability()
	} else {
		r.reason(ReasonBudgetUnknown, "The received level cannot be told, so neither can the margin.")
	}
	r.Meets = len(r.Reasons) == 0
}

func (j *judge) judgeAim(name string, aim *EndAim) {
	if !aim.Covered {
		j.report.reason(ReasonBeamMisses, fmt.Sprintf(
			"The half-power beam of the antenna at %s misses the far end by %.1f degrees in azimuth and %.1f in elevation.",
			name, aim.MissAzimuthDeg, aim.MissElevationDeg))
	}
}

func (j *judge) judgeBudget(direction string, b *Budget) {
	r, target := j.report, &j.link.Target
	switch {
	case b.Target == "":
		r.reason(ReasonCapacityUnreachable, fmt.Sprintf(
			"No modulation that both radios have carries %.6g Mbit/s %s.", target.CapacityMbps, direction))
	case !(b.TargetMarginDB >= target.MarginDB):
		r.reason(ReasonMarginShort, fmt.Sprintf("The margin %s is %.1f dB in %s; %.1f dB is asked for.",
			direction, b.TargetMarginDB, b.Target, target.MarginDB))
	}
	if b.Overload.ExcessDB > 0 {
		r.reason(ReasonOverload, fmt.Sprintf(
			"The level received %s is %.1f dB above what the receiver takes: turn the power down or put in %.0f dB.",
			direction, b.Overload.ExcessDB, b.Overload.AttenuationDB))
	}
}

// judgeAvailability compares the worse direction with the target.
func (j *judge) judgeAvailability() {
	r, wanted := j.report, j.link.Target.AvailabilityPercent
	both := &r.Availability.Both
	if wanted == 0 || r.AToB.Target == "" || r.BToA.Target == "" {
		return
	}
	switch {
	case both.MarginDB < 0:
		r.reason(ReasonAvailabilityShort, fmt.Sprintf(
			"An availability of %.6g %% is asked for, and the level is below the threshold even without fading.", wanted))
	case !both.Known || math.IsNaN(both.TotalAnnualPercent):
		r.reason(ReasonAvailabilityUnknown, fmt.Sprintf(
			"An availability of %.6g %% is asked for and cannot be told.", wanted))
	case both.RainBound == AtLeast || both.TotalAnnualPercent > 100-wanted+roundingPercent:
		r.reason(ReasonAvailabilityShort, fmt.Sprintf("The availability of both directions is %s%.6g %% of the year; %.6g %% is asked for.",
			availabilityBound(both.RainBound), both.AvailabilityAnnualPercent, wanted))
	}
}

// availabilityBound says how an availability is bounded by the bound of its outage.
func availabilityBound(outage Bound) string {
	switch outage {
	case AtMost:
		return "only vouched for up to "
	case AtLeast:
		return "at most "
	}
	return ""
}
