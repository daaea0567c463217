package p530

import (
	"cmp"
	"math"

	"ridgehop/internal/itu/validity"
)

// The range of the multipath methods (P.530-19 section 2.3.1). Below 15/d GHz and on
// shorter paths multipath fading can be left out.
const (
	// MinMultipathKM is the path length in km that must be exceeded.
	MinMultipathKM = 5.0
	// MaxMultipathGHz is the highest frequency in GHz; the Recommendation says about.
	MaxMultipathGHz = 45.0
	// leastFrequencyTimesKM divided by the path length is the lowest frequency.
	leastFrequencyTimesKM = 15.0
	// maxOccurrencePercent bounds p0 for the distribution of all fades.
	maxOccurrencePercent = 2000.0
)

// MultipathPath is what the fading of a path depends on besides the climate.
type MultipathPath struct {
	// DistanceKM is the path length in km, more than 5.
	DistanceKM float64
	// FrequencyGHz is the frequency in GHz, from 15/d to 45.
	FrequencyGHz float64
	// TxM and RxM are the antenna heights amsl in m, he and hr.
	TxM, RxM float64
	// TerrainM is the mean height amsl in m of the terrain along the path, ht. Only
	// Occurrence needs it.
	TerrainM float64
}

// InclinationMrad returns the magnitude of the path inclination in milliradians,
// |hr-he|/d (P.530-19 section 2.3.1).
func (p MultipathPath) InclinationMrad() float64 {
	return math.Abs(p.RxM-p.TxM) / p.DistanceKM
}

// Occurrence returns the multipath occurrence factor p0 in percent of the average
// worst month, by the method of editions -18 and -19. logK and dN75 are read from
// the Recommendation's maps, which the caller has to hold. p0 belongs to the
// deep fades, and may exceed 100. The error wraps a validity.RangeError.
//
// Source: P.530-19 section 2.3.1, eqs (5) to (9).
func (p MultipathPath) Occurrence(logK, dN75 float64) (float64, error) {
	if err := p.check(); err != nil {
		return 0, err
	}
	d, f := p.DistanceKM, p.FrequencyGHz
	clearance := (p.RxM+p.TxM)/2 - d*d/102 - p.TerrainM
	reflection := min(
		math.Pow(dN75/50, 1.8)*math.Exp(-clearance/(2.5*math.Sqrt(d))),
		dN75*math.Pow(d, 1.5)*math.Sqrt(f)/24730,
	)
	exponent := logK - 0.376*math.Tanh((clearance-147)/125) -
		0.334*math.Pow(p.InclinationMrad(), 0.39) - 0.00027*p.lowerM() + 17.85*reflection
	return math.Pow(d, 3.51) * math.Pow(f*f+13, 0.447) * math.Pow(10, exponent), nil
}

// QuickOccurrence returns the multipath occurrence factor p0 in percent of the
// average worst month, by the method for initial planning of editions -14 to -17,
// which P.2001-6 (eqs B.1 and B.6) still uses. dN1 is the refractivity gradient in
// N-units/km of the lowest 65 m that is not exceeded for 1 % of the year. The limits of
// edition -19 are applied, since those of the older editions were not at hand. The
// error wraps a validity.RangeError.
//
//	p0 = K d^3.1 (1+|ep|)^-1.29 f^0.8 10^(-0.00089 hL), K = 10^(-4.6-0.0027 dN1)
func (p MultipathPath) QuickOccurrence(dN1 float64) (float64, error) {
	if err := p.check(); err != nil {
		return 0, err
	}
	return QuickK(dN1) * math.Pow(p.DistanceKM, 3.1) * math.Pow(1+p.InclinationMrad(), -1.29) *
		math.Pow(p.FrequencyGHz, 0.8) * math.Pow(10, -0.00089*p.lowerM()), nil
}

// DetailedOccurrence returns the multipath occurrence factor p0 in percent of the
// average worst month, by the detailed method of edition -17, known from reference
// code. dN1 is as for QuickOccurrence, and roughnessM is the area terrain roughness sa in
// m: the standard deviation of terrain heights in a square of 110 km, not negative. The
// limits of edition -19 are applied. The error wraps a validity.RangeError.
//
//	p0 = K d^3.4 (1+|ep|)^-1.03 f^0.8 10^(-0.00076 hL), K = 10^(-4.4-0.0027 dN1) (10+sa)^-0.46
func (p MultipathPath) DetailedOccurrence(dN1, roughnessM float64) (float64, error) {
	if err := cmp.Or(p.check(), validity.AtLeast("area terrain roughness", roughnessM, 0, "m")); err != nil {
		return 0, err
	}
	k := math.Pow(10, -4.4-0.0027*dN1) * math.Pow(10+roughnessM, -0.46)
	return k * math.Pow(p.DistanceKM, 3.4) * math.Pow(1+p.InclinationMrad(), -1.03) *
		math.Pow(p.FrequencyGHz, 0.8) * math.Pow(10, -0.00076*p.lowerM()), nil
}

// QuickK returns the geoclimatic factor K = 10^(-4.6-0.0027 dN1) of
// [MultipathPath.QuickOccurrence].
func QuickK(dN1 float64) float64 { return math.Pow(10, -4.6-0.0027*dN1) }

func (p MultipathPath) lowerM() float64 { return min(p.TxM, p.RxM) }

func (p MultipathPath) check() error {
	return cmp.Or(
		validity.Above("path length", p.DistanceKM, MinMultipathKM, "km"),
		validity.Between("frequency", p.FrequencyGHz, leastFrequencyTimesKM/p.DistanceKM, MaxMultipathGHz, "GHz"),
	)
}
