package radio

import (
	"fmt"
	"math"
)

// Overload compares the unfaded level with what the receiver takes.
type Overload struct {
	// MaxInputDBM is the receiver's, at the same point as the received level.
	MaxInputDBM float64
	// ExcessDB is the level above it: positive is an overload.
	ExcessDB float64
	// AttenuationDB is what an attenuator must take away, in whole dB; 0 if none is
	// needed.
	AttenuationDB float64
	// EnhancementDB is by how much multipath lifts the level for 0.01 % of the worst
	// month, by P.530-19 section 2.3.3; NaN if unknown. EnhancementAtMost is true where it
	// is less than this.
	EnhancementDB     float64
	EnhancementAtMost bool
}

// strongEnhancementDB is from where on the closed formula holds (P.530-19 eq 19).
const strongEnhancementDB = 10.0

// enhancementDB returns the enhancement in dB exceeded for 0.01 % of the worst month, and
// whether it is less than that. Eq (19) solved for 100 - 0.01 %:
//
//	E = 7 - 1.7 + 0.2 A0.01, A0.01 = 10 log10(p0/0.01)
//
// Below 10 dB another formula holds, and 10 dB is an upper bound.
func enhancementDB(occurrencePercent float64) (float64, bool) {
	enhancement := 7 - 1.7 + 0.2*10*math.Log10(occurrencePercent/0.01)
	if enhancement < strongEnhancementDB {
		return strongEnhancementDB, true
	}
	return enhancement, false
}

// overload judges the receiver at the named end.
func (j *judge) overload(budget *Budget, name string) {
	radio := &j.link.A.Radio
	if name == "B" {
		radio = &j.link.B.Radio
	}
	o := Overload{
		MaxInputDBM:   radio.MaxInputDBM,
		ExcessDB:      budget.ReceivedDBM - radio.MaxInputDBM,
		EnhancementDB: math.NaN(),
	}
	if o.ExcessDB > 0 {
		o.AttenuationDB = math.Ceil(o.ExcessDB)
	}
	if p0 := j.fadingA.occurrencePercent; p0 > 0 {
		o.EnhancementDB, o.EnhancementAtMost = enhancementDB(p0)
	}
	budget.Overload = o
	if o.ExcessDB <= 0 && !o.EnhancementAtMost && o.ExcessDB+o.EnhancementDB > 0 {
		j.report.Warnings = append(j.report.Warnings, Statement{WarningEnhanced, fmt.Sprintf(
			"Multipath may lift the level at %s by %.1f dB for 0.01 %% of the worst month, %.1f dB above what the receiver takes.",
			name, o.EnhancementDB, o.ExcessDB+o.EnhancementDB)})
	}
}
