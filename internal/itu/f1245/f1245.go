// Package f1245 holds the reference radiation patterns of Recommendation ITU-R
// F.1245-3 for the antennas of fixed wireless links: the average side-lobe levels that are
// used where many interferers add up. Package f699 has the envelopes of the peaks.
//
// Gains are in dBi, angles in degrees off the axis, the antenna diameter in
// wavelengths. All functions are pure and all types are plain values: everything is safe
// for concurrent use.
package f1245

import (
	"cmp"
	"math"

	"ridgehop/internal/itu/validity"
)

// The range of frequencies in GHz.
const (
	MinFrequencyGHz = 1.0
	MaxFrequencyGHz = 86.0
)

// Antenna is what a pattern is made from.
type Antenna struct {
	// GainDBI is the maximum gain in dBi.
	GainDBI float64
	// DiameterWavelengths is the diameter over the wavelength, positive.
	DiameterWavelengths float64
	// FrequencyGHz is the frequency in GHz, 1 to 86.
	FrequencyGHz float64
}

// Pattern is the average pattern of an antenna. Make it with [Antenna.Pattern].
type Pattern struct {
	gainDBI, diameter float64
	mainLobeDeg       float64 // the main lobe ends here
	shelfDBI          float64
	shelfDeg          float64 // the first side lobe ends here
	slopeDBI          float64 // the gain of the slope at one degree
	slopeDeg          float64 // the slope ends here
	backDBI           float64
}

// Pattern returns the average pattern. The error wraps a validity.RangeError when the
// frequency is out of range, the diameter is not positive, or the gain lies below that of
// the first side lobe.
//
// Source: F.1245-3 recommends 2.
func (a Antenna) Pattern() (Pattern, error) {
	log := math.Log10(a.DiameterWavelengths)
	shelf := 2 + 15*log
	if err := cmp.Or(
		validity.Between("frequency", a.FrequencyGHz, MinFrequencyGHz, MaxFrequencyGHz, "GHz"),
		validity.Above("diameter in wavelengths", a.DiameterWavelengths, 0, ""),
		validity.AtLeast("maximum gain", a.GainDBI, shelf, "dBi"),
	); err != nil {
		return Pattern{}, err
	}
	p := Pattern{gainDBI: a.GainDBI, diameter: a.DiameterWavelengths, shelfDBI: shelf, slopeDeg: 48}
	p.mainLobeDeg = 20 / p.diameter * math.Sqrt(p.gainDBI-shelf)
	if p.diameter > 100 {
		p.shelfDeg = 12.02 * math.Pow(p.diameter, -0.6)
		p.slopeDBI, p.backDBI = 29, -13
	} else {
		p.slopeDBI, p.backDBI = 39-5*log, -3-5*log
	}
	if a.FrequencyGHz > 70 {
		p.slopeDeg, p.backDBI = 120, p.backDBI-10
	}
	return p, nil
}

// GainDBI returns the gain in dBi at an angle off the axis in degrees, of either sign, up
// to 180.
func (p Pattern) GainDBI(offAxisDeg float64) float64 {
	angle := math.Abs(offAxisDeg)
	switch {
	case angle < p.mainLobeDeg:
		u := angle * p.diameter
		return p.gainDBI - 2.5e-3*u*u
	case angle < p.shelfDeg:
		return p.shelfDBI
	case angle < p.slopeDeg:
		return p.slopeDBI - 25*math.Log10(angle)
	}
	return p.backDBI
}
