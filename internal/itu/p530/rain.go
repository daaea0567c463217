package p530

import (
	"cmp"
	"math"

	"ridgehop/internal/itu/p838"
	"ridgehop/internal/itu/validity"
)

// The range of the rain method (P.530-19 section 2.4.1).
const (
	// MaxRainKM is the largest path length in km.
	MaxRainKM = 60.0
	// MinRainGHz and MaxRainGHz bound the frequency in GHz. The lower bound is that of
	// P.838; below about 5 GHz rain is negligible.
	MinRainGHz = p838.MinFrequencyGHz
	MaxRainGHz = 175.0
	// MinRainPercent and MaxRainPercent bound the percentage of the year.
	MinRainPercent = 0.001
	MaxRainPercent = 1.0
	// RainReferencePercent is the percentage of the year that the rain rate belongs to.
	RainReferencePercent = 0.01
)

// RainEdition chooses between the editions where they differ: how the distance factor
// is limited.
type RainEdition int

const (
	// RainEdition19 limits frequency, path length and rain rate inside the distance
	// factor alone, to at least 6 GHz, at most 30 km and at least 3 mm/h.
	RainEdition19 RainEdition = iota
	// RainEdition17 caps the distance factor at 2.5 instead, as editions -16 and -17
	// do. Paths shorter than about half a kilometre differ.
	RainEdition17
)

// RainPath is a path in rain.
type RainPath struct {
	// DistanceKM is the path length in km, above 0 and up to 60.
	DistanceKM float64
	// FrequencyGHz is the frequency in GHz, 1 to 175.
	FrequencyGHz float64
	// TiltDeg is the tilt of the polarisation from the horizontal in degrees:
	// horizontal 0, vertical 90, slant and circular 45.
	TiltDeg float64
	// RainRateMMH is the rain rate in mm/h, in the mean over a minute, that is exceeded
	// for 0.01 % of the year; not negative.
	RainRateMMH float64
	// Edition is the edition of the Recommendation.
	Edition RainEdition
}

// Rain is the distribution of rain attenuation on a path over the average year.
type Rain struct {
	// SpecificDB is the specific attenuation in dB/km at the rain rate of 0.01 %.
	SpecificDB float64
	// DistanceFactor is r: the effective over the true path length.
	DistanceFactor float64
	// ReferenceDB is A0.01, the attenuation in dB exceeded for 0.01 % of the year.
	// AttenuationDB gives within about 1 % of it there; take this value.
	ReferenceDB float64

	c1, c2, c3 float64
}

// Rain returns the distribution of rain attenuation on the path. The error wraps a
// validity.RangeError.
//
// Source: P.530-19 section 2.4.1, eqs (32) to (36).
func (p RainPath) Rain() (Rain, error) {
	linear, err := p838.At(p.FrequencyGHz)
	if err := cmp.Or(
		validity.AboveUpTo("path length", p.DistanceKM, 0, MaxRainKM, "km"),
		validity.Between("frequency", p.FrequencyGHz, MinRainGHz, MaxRainGHz, "GHz"),
		validity.AtLeast("rain rate", p.RainRateMMH, 0, "mm/h"),
		err,
	); err != nil {
		return Rain{}, err
	}
	coefficients := linear.Combined(0, p.TiltDeg)
	rain := Rain{
		SpecificDB:     coefficients.SpecificDB(p.RainRateMMH),
		DistanceFactor: p.distanceFactor(coefficients.Alpha),
	}
	rain.ReferenceDB = rain.SpecificDB * p.DistanceKM * rain.DistanceFactor
	rain.c1, rain.c2, rain.c3 = rainShape(p.FrequencyGHz)
	return rain, nil
}

// distanceFactor is r of eq (32).
func (p RainPath) distanceFactor(alpha float64) float64 {
	d, f, rate := p.DistanceKM, p.FrequencyGHz, p.RainRateMMH
	if p.Edition == RainEdition19 {
		d, f, rate = min(d, 30), max(f, 6), max(rate, 3)
	}
	inverse := 0.477*math.Pow(d, 0.633)*math.Pow(rate, 0.073*alpha)*math.Pow(f, 0.123) -
		10.579*(1-math.Exp(-0.024*d))
	const largest = 2.5
	if p.Edition == RainEdition17 && inverse < 1/largest {
		return largest
	}
	return 1 / inverse
}

// rainShape returns C1, C2 and C3 of eqs (34) to (36). The exponent 0.8 of eq (36)
// stands inside the logarithm, so that 0.4 log10((f/10)^0.8) = 0.32 log10(f/10).
func rainShape(frequencyGHz float64) (c1, c2, c3 float64) {
	c0 := 0.12
	if frequencyGHz >= 10 {
		c0 += 0.32 * math.Log10(frequencyGHz/10)
	}
	c1 = math.Pow(0.07, c0) * math.Pow(0.12, 1-c0)
	return c1, 0.855*c0 + 0.546*(1-c0), 0.139*c0 + 0.043*(1-c0)
}

// AttenuationDB returns the attenuation in dB exceeded for a percentage of the
// average year:
//
//	Ap = A0.01 C1 p^-(C2 + C3 log10 p)
//
// The error wraps a validity.RangeError outside 0.001 % to 1 %.
//
// Source: P.530-19 section 2.4.1, eq (33).
func (r Rain) AttenuationDB(annualPercent float64) (float64, error) {
	err := validity.Between("annual percentage", annualPercent, MinRainPercent, MaxRainPercent, "%")
	if err != nil {
		return 0, err
	}
	return r.ReferenceDB * r.c1 * math.Pow(annualPercent, -(r.c2+r.c3*math.Log10(annualPercent))), nil
}

// Percent returns the percentage of the average year during which the attenuation
// exceeds attenuationDB. Where that is not between 0.001 % and 1 % the nearer of
// these bounds is returned and within is false: the truth is then beyond it.
//
// Source: P.530-19 section 2.4.1, eq (33) solved for p.
func (r Rain) Percent(attenuationDB float64) (annualPercent float64, within bool) {
	ratio := math.Log10(r.ReferenceDB * r.c1 / attenuationDB)
	if !(attenuationDB > 0) {
		return MaxRainPercent, false
	}
	root := r.c2*r.c2 + 4*r.c3*ratio
	if !(root >= 0) {
		return MinRainPercent, false
	}
	percent := math.Pow(10, (math.Sqrt(root)-r.c2)/(2*r.c3))
	bounded := min(max(percent, MinRainPercent), MaxRainPercent)
	return bounded, bounded == percent
}
