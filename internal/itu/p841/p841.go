// Package p841 converts percentages of the average worst month to percentages of
// the average year and back, as in Recommendation ITU-R P.841 and as P.530-19
// section 2.3.4 uses it. The text of P.841 was not at hand: the part below 3 % is
// known from P.530-19, the part above it is from memory.
//
// All functions are pure and all types are plain values: everything is safe for
// concurrent use.
package p841

import (
	"cmp"
	"math"

	"ridgehop/internal/itu/validity"
)

// largestRatio is the ratio of worst month to annual percentage that the
// rarest events tend to: all of the year's in one month.
const largestRatio = 12.0

// The annual percentages at which the two upper branches begin.
const (
	flatFromPercent = 3.0
	// From memory, no source at hand.
	fallFromPercent = 30.0
)

// Parameters describe how the events of a climate gather in its worst month.
type Parameters struct {
	// Q1 is the ratio of worst month to annual percentage at 1 % of the year, from 1 to
	// 12.
	Q1 float64
	// Beta is the exponent with which that ratio falls, at least 0 and below 1.
	Beta float64
}

// Multipath returns the parameters for multipath fading, 2.85 and 0.13, which
// P.530-19 section 2.3.4 gives; they are also the values for global planning.
func Multipath() Parameters { return Parameters{Q1: 2.85, Beta: 0.13} }

// RainWet returns the parameters for rain in tropical, subtropical and temperate
// climates with frequent rain, 2.82 and 0.15: from memory, no source at hand.
func RainWet() Parameters { return Parameters{Q1: 2.82, Beta: 0.15} }

// RainDry returns the parameters for rain in dry temperate, polar and desert
// climates, 4.48 and 0.11: from memory, no source at hand.
func RainDry() Parameters { return Parameters{Q1: 4.48, Beta: 0.11} }

// Ratio returns the ratio Q of worst month to annual percentage for an
// annual percentage above 0 and up to 100: 12 for the rarest events, then
// Q1 p^-beta up to 3 %, constant up to 30 %, and falling to 1 at 100 %. The error wraps a
// validity.RangeError.
//
// Source: P.530-19 section 2.3.4; above 3 % from memory, no source at hand.
func (p Parameters) Ratio(annualPercent float64) (float64, error) {
	err := cmp.Or(p.validate(), validity.AboveUpTo("annual percentage", annualPercent, 0, 100, "%"))
	if err != nil {
		return 0, err
	}
	switch {
	case annualPercent < p.rarePercent():
		return largestRatio, nil
	case annualPercent <= flatFromPercent:
		return p.Q1 * math.Pow(annualPercent, -p.Beta), nil
	case annualPercent <= fallFromPercent:
		return p.flatRatio(), nil
	}
	return p.flatRatio() * math.Pow(annualPercent/fallFromPercent, p.fallExponent()), nil
}

// WorstMonthPercent returns the percentage of the worst month for an
// annual percentage above 0 and up to 100, never more than 100 (which strongly seasonal
// parameters would reach at a quarter of the year). The error wraps a
// validity.RangeError.
func (p Parameters) WorstMonthPercent(annualPercent float64) (float64, error) {
	ratio, err := p.Ratio(annualPercent)
	return min(ratio*annualPercent, 100), err
}

// AnnualPercent returns the annual percentage for a percentage of the worst month
// above 0 and up to 100: the inverse of [Parameters.WorstMonthPercent], exact because
// each branch is a power law. The error wraps a validity.RangeError.
func (p Parameters) AnnualPercent(worstMonthPercent float64) (float64, error) {
	err := cmp.Or(p.validate(), validity.AboveUpTo("worst month percentage", worstMonthPercent, 0, 100, "%"))
	if err != nil {
		return 0, err
	}
	flat := p.flatRatio()
	switch {
	case worstMonthPercent < largestRatio*p.rarePercent():
		return worstMonthPercent / largestRatio, nil
	case worstMonthPercent <= flat*flatFromPercent:
		return math.Pow(worstMonthPercent/p.Q1, 1/(1-p.Beta)), nil
	case worstMonthPercent <= flat*fallFromPercent:
		return worstMonthPercent / flat, nil
	}
	ratio := worstMonthPercent / (flat * fallFromPercent)
	return fallFromPercent * math.Pow(ratio, 1/(1+p.fallExponent())), nil
}

// validate keeps the branches in order: the ratio never falls below 1.
func (p Parameters) validate() error {
	return cmp.Or(
		validity.Between("Q1", p.Q1, 1, largestRatio, ""),
		validity.Between("beta", p.Beta, 0, 0.99, ""),
		validity.AtLeast("ratio Q from 3 % to 30 %", p.flatRatio(), 1, ""),
	)
}

// rarePercent is the annual percentage below which the ratio is 12.
func (p Parameters) rarePercent() float64 {
	if p.Beta == 0 {
		return 0
	}
	return math.Pow(p.Q1/largestRatio, 1/p.Beta)
}

func (p Parameters) flatRatio() float64 { return p.Q1 * math.Pow(flatFromPercent, -p.Beta) }

// fallExponent makes the ratio 1 at 100 %.
func (p Parameters) fallExponent() float64 { return math.Log(p.flatRatio()) / math.Log(0.3) }
