package radio

import (
	"math"

	"ridgehop/internal/itu/p530"
	"ridgehop/internal/itu/p841"
)

// known reports whether an outage can be told.
func (f *fading) known() bool {
	return f.rainState != rainUnknown && !math.IsNaN(f.occurrencePercent)
}

// multipathPercent returns the multipath outage of the worst month and of the year in
// percent, at a margin that is not negative; NaN if unknown.
func (f *fading) multipathPercent(marginDB float64) (worstMonth, annual float64) {
	if f.occurrencePercent == 0 {
		return 0, 0
	}
	worstMonth, err := p530.FadePercent(f.occurrencePercent, marginDB)
	if err != nil {
		return math.NaN(), math.NaN()
	}
	if worstMonth == 0 {
		return 0, 0
	}
	annual, err = p841.Multipath().AnnualPercent(worstMonth)
	if err != nil {
		return worstMonth, math.NaN()
	}
	return worstMonth, annual
}

// rainPercent returns the rain outage of the year in percent, and how it is bounded; NaN if
// unknown.
func (f *fading) rainPercent(marginDB float64) (float64, Bound) {
	switch f.rainState {
	case rainLeftOut:
		return 0, Exact
	case rainUnknown:
		return math.NaN(), Exact
	}
	percent, within := f.rain.Percent(marginDB)
	switch {
	case within:
		return percent, Exact
	case percent == p530.MinRainPercent:
		return percent, AtMost
	}
	return percent, AtLeast
}

// annual returns the outage of the year in percent, NaN if unknown.
func (f *fading) annual(marginDB float64) (float64, Bound) {
	if !(marginDB >= 0) {
		return math.NaN(), Exact
	}
	_, multipath := f.multipathPercent(marginDB)
	rain, bound := f.rainPercent(marginDB)
	return min(multipath+rain, 100), bound
}

// outage returns all of the outage at a margin.
func (f *fading) outage(marginDB float64) Outage {
	nan := math.NaN()
	o := Outage{
		MarginDB:                   marginDB,
		MultipathWorstMonthPercent: nan, MultipathAnnualPercent: nan,
		RainAnnualPercent: nan, RainWorstMonthPercent: nan,
	}
	if marginDB >= 0 {
		o.MultipathWorstMonthPercent, o.MultipathAnnualPercent = f.multipathPercent(marginDB)
		o.RainAnnualPercent, o.RainBound = f.rainPercent(marginDB)
		o.RainWorstMonthPercent = f.rainWorstMonth(o.RainAnnualPercent)
	}
	o.TotalAnnualPercent = min(o.MultipathAnnualPercent+o.RainAnnualPercent, 100)
	o.TotalWorstMonthPercent = min(o.MultipathWorstMonthPercent+o.RainWorstMonthPercent, 100)
	o.AvailabilityAnnualPercent = 100 - o.TotalAnnualPercent
	o.AvailabilityWorstMonthPercent = 100 - o.TotalWorstMonthPercent
	o.MinutesAnnual = o.TotalAnnualPercent / 100 * minutesInYear
	o.MinutesWorstMonth = o.TotalWorstMonthPercent / 100 * minutesInMonth
	o.Known = !math.IsNaN(o.TotalAnnualPercent)
	return o
}

func (f *fading) rainWorstMonth(annualPercent float64) float64 {
	if !(annualPercent > 0) {
		return annualPercent // none, or unknown
	}
	percent, err := f.season.WorstMonthPercent(annualPercent)
	if err != nil {
		return math.NaN()
	}
	return percent
}
