package profile

import (
	"fmt"

	"ridgehop/internal/itu/p530"
)

// Criterion is one clearance criterion: at the k-factor K, the clearance must
// reach F1Fraction of the first Fresnel radius at every sample between the
// ends.
type Criterion struct {
	K          float64
	F1Fraction float64
	// IsolatedF1Fraction is the smaller fraction that is enough where the
	// obstruction is isolated; equal to F1Fraction where there is no such
	// relief.
	IsolatedF1Fraction float64
}

// Flat is the criterion without relief for isolated obstructions.
func Flat(k, f1Fraction float64) Criterion {
	return Criterion{K: k, F1Fraction: f1Fraction, IsolatedF1Fraction: f1Fraction}
}

// CriteriaSet names a set of clearance criteria.
type CriteriaSet string

// The sets of criteria.
const (
	// P530Temperate is ITU-R P.530-19 section 2.2 for temperate climates: full
	// first-Fresnel-zone clearance at the median k, and at k_e 0.3 F1, or 0.0
	// where the obstruction is isolated.
	P530Temperate CriteriaSet = "p530_temperate"
	// P530Tropical is the same section for tropical climates: 0.6 F1 at k_e on
	// paths over about 30 km; shorter ones as in temperate climates.
	P530Tropical CriteriaSet = "p530_tropical"
	// F160 is 0.6 F1 at the median k: common practice, no source.
	F160 CriteriaSet = "f1_60"
)

// MedianK is the k-factor of the median atmosphere, 4/3 (P.530-19 2.2.1).
const MedianK = p530.MedianK

// Criteria returns the set's criteria for a path of the given length in
// metres. An unknown set is an error.
func (s CriteriaSet) Criteria(lengthM float64) ([]Criterion, error) {
	lengthKM := lengthM / 1000
	ke, err := p530.EffectiveK(lengthKM)
	if err != nil {
		return nil, fmt.Errorf("criteria set %s: %w", s, err)
	}
	temperate := Criterion{
		K:                  ke,
		F1Fraction:         p530.TemperateExtendedFraction,
		IsolatedF1Fraction: p530.TemperateIsolatedFraction,
	}
	switch s {
	case P530Temperate:
		return []Criterion{Flat(MedianK, p530.MedianFraction), temperate}, nil
	case P530Tropical:
		if lengthKM > p530.TropicalLengthKM {
			return []Criterion{Flat(MedianK, p530.MedianFraction), Flat(temperate.K, p530.TropicalFraction)}, nil
		}
		return []Criterion{Flat(MedianK, p530.MedianFraction), temperate}, nil
	case F160:
		return []Criterion{Flat(MedianK, 0.6)}, nil
	}
	return nil, fmt.Errorf("no criteria set %q; there are %s, %s and %s", string(s), P530Temperate, P530Tropical, F160)
}

// isolatedSpanM is how much of a path, from the first to the last sample that
// misses the full fraction, an obstruction may take and still be called
// isolated. P.530 gives no number. 250 m is the spacing under which P.526-16
// section 4.4 counts neighbouring samples as one obstacle; a twentieth of the
// path is common practice, no source. The span, not the number of humps,
// decides, so that a higher antenna can never turn isolated into extended.
func isolatedSpanM(lengthM float64) float64 {
	return max(250, lengthM/20) + distanceToleranceM
}

// distanceToleranceM absorbs floating-point rounding where samples lie exactly
// a limit apart, as evenly spaced ones often do: without it the path could be
// judged otherwise from its other end.
const distanceToleranceM = 1e-6
