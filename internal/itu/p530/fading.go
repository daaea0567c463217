package p530

import (
	"cmp"
	"math"

	"ridgehop/internal/itu/validity"
)

// DeepFadePercent returns the percentage of the average worst month during which a
// fade is deeper than depthDB, by the law of deep fades alone:
//
//	pw = p0 10^(-A/10)
//
// p0 is the multipath occurrence factor in percent. It holds at and beyond
// [TransitionDepthDB]; at small depths it overestimates and may exceed 100. It is also a
// hundred times the non-selective outage at the flat fade margin.
//
// Source: P.530-19 section 2.3.1.
func DeepFadePercent(occurrencePercent, depthDB float64) float64 {
	return occurrencePercent * math.Pow(10, -depthDB/10)
}

// TransitionDepthDB returns the depth in dB from which on fades follow the law of
// deep fades: At = 25 + 1.2 log10(p0), for a positive p0 in percent.
//
// Source: P.530-19 section 2.3.2, eq (12).
func TransitionDepthDB(occurrencePercent float64) float64 {
	return 25 + 1.2*math.Log10(occurrencePercent)
}

// FadePercent returns the percentage of the average worst month during which a
// fade is deeper than depthDB, for any depth from 0 dB: the deep fades beyond the
// transition depth, and an interpolation below it that gives 63.2 % at 0 dB. The
// error wraps a validity.RangeError unless p0 is above 0 and up to 2000 % and
// the depth is not negative.
//
// Source: P.530-19 section 2.3.2, eqs (12) to (18).
func FadePercent(occurrencePercent, depthDB float64) (float64, error) {
	if err := cmp.Or(
		checkOccurrence(occurrencePercent),
		validity.AtLeast("fade depth", depthDB, 0, "dB"),
	); err != nil {
		return 0, err
	}
	transition := TransitionDepthDB(occurrencePercent)
	if depthDB >= transition {
		return DeepFadePercent(occurrencePercent, depthDB), nil
	}
	// A strong p0 would make this 100 % and more, of which there is no logarithm.
	atTransition := min(DeepFadePercent(occurrencePercent, transition), 99.9999)
	qa := -20 * math.Log10(-math.Log((100-atTransition)/100)) / transition
	qt := (qa-2)/fadeScale(transition) - fadeShift(transition)
	q := 2 + fadeScale(depthDB)*(qt+fadeShift(depthDB))
	return 100 * (1 - math.Exp(-math.Pow(10, -q*depthDB/20))), nil
}

// fadeScale and fadeShift are the two functions of the depth that eqs (16) and (17)
// share.
func fadeScale(depthDB float64) float64 {
	return (1 + 0.3*math.Pow(10, -depthDB/20)) * math.Pow(10, -0.016*depthDB)
}

func fadeShift(depthDB float64) float64 {
	return 4.3 * (math.Pow(10, -depthDB/20) + depthDB/800)
}

// EnhancementPercent returns the percentage of the average worst month during which
// the level does not rise more than enhancementDB above its value in free space, for a
// multipath occurrence factor in percent. The error wraps a validity.RangeError unless
// p0 is above 0 and up to 2000 % and the enhancement is above 0 dB.
//
// Source: P.530-19 section 2.3.3, eqs (19) to (23). The constants of eqs (21) to (23)
// are from memory and agree with reference code.
func EnhancementPercent(occurrencePercent, enhancementDB float64) (float64, error) {
	if err := cmp.Or(
		checkOccurrence(occurrencePercent),
		validity.Above("enhancement", enhancementDB, 0, "dB"),
	); err != nil {
		return 0, err
	}
	if enhancementDB > strongEnhancementDB {
		return strongEnhancementPercent(occurrencePercent, enhancementDB), nil
	}
	const rest = 58.21
	strong := strongEnhancementPercent(occurrencePercent, strongEnhancementDB)
	at := -20 / strongEnhancementDB * math.Log10(-math.Log(1-(100-strong)/rest))
	shift := 2.05*at - 20.3
	e := enhancementDB
	q := 8 + (1+0.3*math.Pow(10, -e/20))*math.Pow(10, -0.7*e/20)*(shift+12*(math.Pow(10, -e/20)+e/800))
	return 100 - rest*(1-math.Exp(-math.Pow(10, -q*e/20))), nil
}

// strongEnhancementDB is the enhancement above which eq (19) holds.
const strongEnhancementDB = 10.0

// strongEnhancementPercent is eq (19), with the fade depth exceeded for 0.01 %.
func strongEnhancementPercent(occurrencePercent, enhancementDB float64) float64 {
	depth := 10 * math.Log10(occurrencePercent/0.01)
	return 100 - math.Pow(10, (-1.7+0.2*depth-enhancementDB)/3.5)
}

func checkOccurrence(percent float64) error {
	return validity.AboveUpTo("multipath occurrence factor", percent, 0, maxOccurrencePercent, "%")
}

// AnnualDecrementDB returns the logarithmic geoclimatic conversion factor in dB by which
// editions -8 to -18 and P.2001-6 (eq B.7) turn a percentage of the worst month into
// one of the year, p = pw 10^(-dG/10):
//
//	dG = min(10.8, 10.5 - 5.6 log10(1.1 +- |cos 2 lat|^0.7) - 2.7 log10(d) + 1.7 log10(1+|ep|))
//
// with plus up to 45 degrees of latitude, north or south. Edition -19 uses P.841
// instead. The error wraps a validity.RangeError unless the latitude is one, the path
// length is positive and the inclination (in milliradians) is not negative.
func AnnualDecrementDB(latitudeDeg, distanceKM, inclinationMrad float64) (float64, error) {
	if err := cmp.Or(
		validity.Between("latitude", latitudeDeg, -90, 90, "degrees"),
		validity.Above("path length", distanceKM, 0, "km"),
		validity.AtLeast("path inclination", inclinationMrad, 0, "mrad"),
	); err != nil {
		return 0, err
	}
	seasons := math.Pow(math.Abs(math.Cos(2*latitudeDeg*math.Pi/180)), 0.7)
	if math.Abs(latitudeDeg) > 45 {
		seasons = -seasons
	}
	decrement := 10.5 - 5.6*math.Log10(1.1+seasons) - 2.7*math.Log10(distanceKM) +
		1.7*math.Log10(1+inclinationMrad)
	return min(10.8, decrement), nil
}
