package p530

import (
	"cmp"
	"math"

	"ridgehop/internal/itu/validity"
)

// The range of space diversity (P.530-19, with eqs (155) to (162)). The method was made from paths of
// 43 km and more, and the Recommendation allows it down to 25 km.
const (
	minDiversityKM  = 25.0
	maxDiversityKM  = 240.0
	minDiversityGHz = 2.0
	maxDiversityGHz = 11.0
	minSeparationM  = 3.0
	maxSeparationM  = 23.0
)

// DiversityLink is a link protected by a second receiver.
type DiversityLink struct {
	// OccurrencePercent is the multipath occurrence factor p0 in percent of the worst
	// month, above 0 and up to 2000.
	OccurrencePercent float64
	// DistanceKM is the path length in km, and FrequencyGHz the frequency in GHz.
	DistanceKM, FrequencyGHz float64
	// FadeMarginDB is the flat fade margin A of the better receiver in dB, not negative.
	FadeMarginDB float64
	// GainDifferenceDB is the magnitude V in dB of the difference between the gains of the
	// two receive antennas, not negative.
	GainDifferenceDB float64
	// SelectiveOutage is the probability of outage by selective fading in the worst month
	// without protection, from [SelectiveOutage]; 0 leaves it out.
	SelectiveOutage float64
}

// Diversity is the outage of a protected link in the worst month. Outages are
// probabilities, 0 to 1.
type Diversity struct {
	// NonSelectiveCorrelation is kns^2 and SelectiveCorrelation is ks^2, the squared
	// correlations of the two signals; AmplitudeCorrelation is rw.
	NonSelectiveCorrelation, SelectiveCorrelation, AmplitudeCorrelation float64
	// Improvement is I: non-selective outage without over that with protection.
	Improvement float64
	// NonSelective and Selective are the outages with protection, Pdns and Pds.
	NonSelective, Selective float64
	// Outage is the outage by both, Pd.
	Outage float64
}

// SpaceDiversity returns the outage with two receive antennas separationM apart
// vertically, centre to centre. The error wraps a validity.RangeError outside 25 km to
// 240 km, 2 GHz to 11 GHz and 3 m to 23 m.
//
// Source: P.530-19 eqs (155) to (162); the coefficients of rw and ks^2 are
// from memory and agree with the check values.
func (l DiversityLink) SpaceDiversity(separationM float64) (Diversity, error) {
	if err := cmp.Or(
		l.check(),
		validity.Between("path length", l.DistanceKM, minDiversityKM, maxDiversityKM, "km"),
		validity.Between("frequency", l.FrequencyGHz, minDiversityGHz, maxDiversityGHz, "GHz"),
		validity.Between("antenna separation", separationM, minSeparationM, maxSeparationM, "m"),
	); err != nil {
		return Diversity{}, err
	}
	exponent := 0.0004 * math.Pow(separationM, 0.87) * math.Pow(l.FrequencyGHz, -0.12) *
		math.Pow(l.DistanceKM, 0.48) * math.Pow(l.OccurrencePercent, -0.04) /
		MultipathActivity(l.OccurrencePercent)
	return l.protected(math.Exp(-exponent)), nil
}

// FrequencyDiversity returns the outage with a second channel spacingGHz away. The
// spacing must be above 0 and below the frequency; no other range was at hand. The
// error wraps a validity.RangeError.
//
// Source: P.530-19, kns^2 = exp(-0.07 df/(eta f)) in place of eq (155).
func (l DiversityLink) FrequencyDiversity(spacingGHz float64) (Diversity, error) {
	if err := cmp.Or(
		l.check(),
		validity.Above("path length", l.DistanceKM, 0, "km"),
		validity.Above("frequency", l.FrequencyGHz, 0, "GHz"),
		validity.AboveUpTo("spacing of the channels", spacingGHz, 0, l.FrequencyGHz, "GHz"),
	); err != nil {
		return Diversity{}, err
	}
	activity := MultipathActivity(l.OccurrencePercent)
	return l.protected(math.Exp(-0.07 * spacingGHz / (activity * l.FrequencyGHz))), nil
}

// protected works out the outages from the non-selective correlation.
func (l DiversityLink) protected(correlation float64) Diversity {
	activity := MultipathActivity(l.OccurrencePercent)
	ratio := l.OccurrencePercent / (100 * activity)
	fade := math.Pow(10, -l.FadeMarginDB/10)
	out := Diversity{NonSelectiveCorrelation: correlation}
	out.Improvement = (1 - correlation*(1-ratio*fade)) / ratio *
		math.Pow(10, (l.FadeMarginDB-l.GainDifferenceDB)/10)
	out.AmplitudeCorrelation = amplitudeCorrelation(correlation)
	out.SelectiveCorrelation = selectiveCorrelation(out.AmplitudeCorrelation)
	out.NonSelective = l.OccurrencePercent / 100 * fade / out.Improvement
	out.Selective = l.SelectiveOutage * l.SelectiveOutage / (activity * (1 - out.SelectiveCorrelation))
	out.Outage = math.Pow(math.Pow(out.NonSelective, 0.75)+math.Pow(out.Selective, 0.75), 4.0/3)
	return out
}

// amplitudeCorrelation is rw as a function of kns^2.
func amplitudeCorrelation(correlation float64) float64 {
	if correlation <= 0.26 {
		return 1 - 0.9746*math.Pow(1-correlation, 2.170)
	}
	return 1 - 0.6921*math.Pow(1-correlation, 1.034)
}

// selectiveCorrelation is ks^2 as a function of rw.
func selectiveCorrelation(amplitude float64) float64 {
	rest := 1 - amplitude
	switch {
	case amplitude <= 0.5:
		return 0.8238
	case amplitude <= 0.9628:
		return 1 - 0.195*math.Pow(rest, 0.109-0.13*math.Log10(rest))
	}
	return 1 - 0.3957*math.Pow(rest, 0.5136)
}

func (l DiversityLink) check() error {
	return cmp.Or(
		checkOccurrence(l.OccurrencePercent),
		validity.AtLeast("fade margin", l.FadeMarginDB, 0, "dB"),
		validity.AtLeast("difference of antenna gains", l.GainDifferenceDB, 0, "dB"),
		validity.Between("outage by selective fading", l.SelectiveOutage, 0, 1, ""),
	)
}
