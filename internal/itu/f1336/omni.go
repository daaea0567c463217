package f1336

import (
	"cmp"
	"math"

	"ridgehop/internal/itu/validity"
)

// Omni is an omnidirectional antenna without electrical tilt.
type Omni struct {
	// GainDBI is the maximum gain in dBi, at the horizon; at least 0.
	GainDBI float64
	// BeamwidthDeg is the half-power beamwidth in elevation in degrees; 0 means
	// [OmniBeamwidth] of the gain.
	BeamwidthDeg float64
	// K is the side-lobe parameter, 0 to 1: [TypicalK] or [ImprovedK].
	K float64
	// Lobes chooses peak or average side lobes.
	Lobes Lobes
}

// OmniPattern is the pattern of an omnidirectional antenna. Make it with
// [Omni.Pattern].
type OmniPattern struct {
	gainDBI, beamwidthDeg, k float64
	mainLobeDeg, shelfDeg    float64
	sideLobeDBI              float64
}

// Pattern returns the pattern of the antenna. The error wraps a validity.RangeError when
// the gain or the beamwidth is negative or k is not in 0 to 1.
//
// Source: F.1336-5 recommends 2.1 (peak) and 2.2 (average).
func (a Omni) Pattern() (OmniPattern, error) {
	if err := cmp.Or(
		validity.AtLeast("gain", a.GainDBI, 0, "dBi"),
		validity.Between("beamwidth in elevation", a.BeamwidthDeg, 0, 180, "degrees"),
		validity.Between("side-lobe parameter k", a.K, 0, 1, ""),
	); err != nil {
		return OmniPattern{}, err
	}
	width := a.BeamwidthDeg
	if width == 0 {
		width = OmniBeamwidth(a.GainDBI)
	}
	p := OmniPattern{gainDBI: a.GainDBI, beamwidthDeg: width, k: a.K}
	p.sideLobeDBI = a.GainDBI - a.Lobes.sideLobeDB()
	reduction := math.Log10(a.K+1) / 1.2
	if a.Lobes == Average {
		p.mainLobeDeg, p.shelfDeg = width, width*math.Sqrt(1.25-reduction)
	} else {
		p.mainLobeDeg, p.shelfDeg = width*math.Sqrt(1-reduction), width
	}
	return p, nil
}

// GainDBI returns the gain in dBi at an elevation in degrees, -90 to 90, the horizon
// being 0.
func (p OmniPattern) GainDBI(elevationDeg float64) float64 {
	angle := math.Abs(elevationDeg)
	x := angle / p.beamwidthDeg
	switch {
	case angle < p.mainLobeDeg:
		return p.gainDBI - 12*x*x
	case angle < p.shelfDeg:
		return p.sideLobeDBI + 10*math.Log10(p.k+1)
	}
	return p.sideLobeDBI + 10*math.Log10(math.Pow(x, -1.5)+p.k)
}
