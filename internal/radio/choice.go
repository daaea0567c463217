package radio

import "math"

// Choice is the least that does the job, and what a narrower beam would spare. Both ends
// are taken to be aimed at each other.
type Choice struct {
	// WithAvailability is true where the options meet the target's availability too, and
	// false where none is asked for or it cannot be told.
	WithAvailability bool
	// Same is the least antenna for both ends, and with it the least power of each; nil if
	// no candidate does.
	Same *Option
	// AloneA is the least antenna at A while that of B stays, AloneB the other way round;
	// nil if none does.
	AloneA, AloneB *Option
	// Narrow is the next candidate of narrower beam that does, with the power turned down
	// to a like level; nil if there is none.
	Narrow *Option
	// SparedA and SparedB are what Narrow spares against Same.
	SparedA, SparedB Spared
	// ShortDB is what the best candidate lacks at full power where none does: +Inf if no
	// margin would do, NaN where it is not margin that lacks.
	ShortDB      float64
	Polarisation PolarisationAdvice
	// Missing says why there is no option.
	Missing []Statement
}

// Option is one way to equip the link.
type Option struct {
	A, B EndOption
	// Warnings are about the operator's own limits, which do not take part in the choice.
	Warnings []Statement
}

// EndOption is how one end is equipped, and what it then receives.
type EndOption struct {
	Antenna      Antenna
	PowerDBM     float64
	AttenuatorDB float64 // to be put between radio and antenna; it counts both ways
	EIRPDBM      float64
	// ReceivedDBM is the level at this end, MarginDB that above the threshold of the
	// target's modulation.
	ReceivedDBM, MarginDB float64
}

// Spared is how much less noise one end makes and hears with the narrow beam, in
// dB, in the mean over the horizontal plane outside the half-power beam of the wider
// antenna; NaN if a pattern is unknown. Negative is more.
type Spared struct{ MadeDB, HeardDB float64 }

// choose fills in the report's choice.
func (j *judge) choose() {
	choice := &j.report.Choice
	choice.ShortDB = math.NaN()
	choice.Polarisation = j.advise()
	if j.link.Candidates != nil && len(j.link.Candidates) == 0 {
		return
	}
	s, ok := j.newSearch()
	if !ok {
		choice.Missing = append(choice.Missing, j.noSearch())
		return
	}
	choice.WithAvailability = !math.IsNaN(s.there.need.outagePercent) && !math.IsNaN(s.back.need.outagePercent)
	candidates := j.candidates()
	found := -1
	for i := range candidates {
		if s.fits(&candidates[i], true, true) {
			if choice.Same = s.equip(&candidates[i], &candidates[i]); choice.Same != nil {
				found = i
				break
			}
		}
	}
	choice.AloneA = s.least(candidates, func(a *Antenna) *Option {
		return s.equipIf(s.fits(a, true, false), a, &j.link.B.Antenna)
	})
	choice.AloneB = s.least(candidates, func(a *Antenna) *Option {
		return s.equipIf(s.fits(a, false, true), &j.link.A.Antenna, a)
	})
	if found < 0 {
		choice.explain(s, candidates)
		return
	}
	j.narrow(s, candidates[found:])
}

// candidates are the antennas to look among, least first.
func (j *judge) candidates() []Antenna {
	if j.link.Candidates != nil {
		return j.link.Candidates
	}
	return j.tools.candidates(j.link.FrequencyGHz)
}

// narrow looks for the narrower beam beside the least, which is the first candidate.
func (j *judge) narrow(s *search, candidates []Antenna) {
	choice, least := &j.report.Choice, &candidates[0]
	for i := 1; i < len(candidates) && choice.Narrow == nil; i++ {
		c := &candidates[i]
		if c.AzimuthBeamwidthDeg < least.AzimuthBeamwidthDeg && c.GainDBI > least.GainDBI && s.fits(c, true, true) {
			choice.Narrow = s.equip(c, c)
		}
	}
	if choice.Narrow != nil {
		choice.SparedA = j.spared(&choice.Same.A, &choice.Narrow.A)
		choice.SparedB = j.spared(&choice.Same.B, &choice.Narrow.B)
	}
}

// spared compares the sides of two options for one end.
func (j *judge) spared(least, narrow *EndOption) Spared {
	wide, wideErr := j.tools.beam(&least.Antenna, j.link.FrequencyGHz)
	slim, slimErr := j.tools.beam(&narrow.Antenna, j.link.FrequencyGHz)
	if wideErr != nil || slimErr != nil {
		return Spared{math.NaN(), math.NaN()}
	}
	outside := least.Antenna.AzimuthBeamwidthDeg / 2
	heard := wide.sideGainDBI(outside) - slim.sideGainDBI(outside)
	// The power into the antenna is the EIRP less the gain of the axis.
	power := (least.EIRPDBM - least.Antenna.GainDBI) - (narrow.EIRPDBM - narrow.Antenna.GainDBI)
	return Spared{MadeDB: heard + power, HeardDB: heard}
}

// noSearch says why no antenna can be chosen.
func (j *judge) noSearch() Statement {
	if math.IsNaN(j.loss.totalDB()) {
		return Statement{MissingDiffraction, "No antenna can be chosen while the loss of the path is unknown."}
	}
	return Statement{ReasonCapacityUnreachable,
		"No antenna can help: no modulation that both radios have carries the capacity asked for."}
}
