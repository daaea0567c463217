// Package f699 holds the reference radiation patterns of Recommendation ITU-R
// F.699-8 for the antennas of fixed wireless links: peak side-lobe envelopes for
// coordination and interference, with the approximations between size, gain and
// beamwidth.
//
// Gains are in dBi, angles in degrees off the axis, the antenna diameter in
// wavelengths. All functions are pure and all types are plain values: everything is safe
// for concurrent use.
package f699

import (
	"cmp"
	"math"

	"ridgehop/internal/itu/validity"
)

// The range of frequencies in GHz. Edition 9 goes further; its text was not at hand.
const (
	MinFrequencyGHz = 0.1
	MaxFrequencyGHz = 86.0
)

// minDiameter is the least diameter over wavelength at and below 1 GHz.
const minDiameter = 0.63

// MaxGainDBI returns the gain in dBi of an antenna whose diameter is known in
// wavelengths: 20 log10(D/lambda) + 7.7.
//
// Source: F.699-8 recommends 3.
func MaxGainDBI(diameterWavelengths float64) float64 {
	return 20*math.Log10(diameterWavelengths) + 7.7
}

// DiameterWavelengths returns the diameter in wavelengths of an antenna whose gain
// in dBi is known, the inverse of [MaxGainDBI].
func DiameterWavelengths(gainDBI float64) float64 { return math.Pow(10, (gainDBI-7.7)/20) }

// DiameterFromBeamwidth returns the diameter in wavelengths of an antenna whose
// half-power beamwidth in degrees is known: 70/beamwidth.
//
// Source: F.699-8 recommends 4.
func DiameterFromBeamwidth(beamwidthDeg float64) float64 { return 70 / beamwidthDeg }

// GainFromBeamwidth returns the gain in dBi of an antenna whose half-power
// beamwidth in degrees is known: 44.5 - 20 log10(beamwidth).
//
// Source: F.699-8 recommends 4.
func GainFromBeamwidth(beamwidthDeg float64) float64 { return 44.5 - 20*math.Log10(beamwidthDeg) }

// DishGainDBI returns the gain in dBi of a dish of the diameter in wavelengths and an
// aperture efficiency, 0 to 1: 10 log10(efficiency (pi D/lambda)^2).
func DishGainDBI(diameterWavelengths, efficiency float64) float64 {
	return 10*math.Log10(efficiency) + 20*math.Log10(math.Pi*diameterWavelengths)
}

// PowerSumDBI returns the effective gain of a transmit and a receive antenna for both
// polarisations together, from the gains in dBi towards each other:
//
//	10 log10(10^((GtH+GrH)/10) + 10^((GtV+GrV)/10))
//
// where txH and txV are the gains of the transmit antenna in the two polarisations,
// and rxForH and rxForV those with which the receive antenna takes them up.
//
// Source: F.699-8 recommends 7.1 and Annex 2.
func PowerSumDBI(txH, rxForH, txV, rxForV float64) float64 {
	return 10 * math.Log10(math.Pow(10, (txH+rxForH)/10)+math.Pow(10, (txV+rxForV)/10))
}

// Antenna is what a pattern is made from.
type Antenna struct {
	// GainDBI is the maximum gain in dBi.
	GainDBI float64
	// DiameterWavelengths is the diameter over the wavelength; for an antenna that
	// is not round, [DiameterWavelengths] of its gain.
	DiameterWavelengths float64
	// FrequencyGHz is the frequency in GHz, 0.1 to 86.
	FrequencyGHz float64
}

// Pattern is the envelope of an antenna. Make it with [Antenna.Pattern].
type Pattern struct {
	gainDBI, diameter float64
	mainLobeDeg       float64 // the main lobe ends here
	shelfDBI          float64
	shelfDeg          float64 // the first side lobe ends here
	slopeDBI          float64 // the gain of the slope at one degree
	slopeDeg          float64 // the slope ends here
	backDBI           float64
}

// Pattern returns the envelope of the peak side lobes. The error wraps a
// validity.RangeError when the frequency is out of range, the diameter is not larger
// than 0.63 wavelengths, or the gain lies below that of the first side lobe.
//
// Source: F.699-8 recommends 2.
func (a Antenna) Pattern() (Pattern, error) {
	shelf := 2 + 15*math.Log10(a.DiameterWavelengths)
	if err := cmp.Or(
		validity.Between("frequency", a.FrequencyGHz, MinFrequencyGHz, MaxFrequencyGHz, "GHz"),
		validity.Above("diameter in wavelengths", a.DiameterWavelengths, minDiameter, ""),
		validity.AtLeast("maximum gain", a.GainDBI, shelf, "dBi"),
	); err != nil {
		return Pattern{}, err
	}
	p := Pattern{gainDBI: a.GainDBI, diameter: a.DiameterWavelengths, shelfDBI: shelf}
	p.mainLobeDeg = 20 / p.diameter * math.Sqrt(p.gainDBI-shelf)
	p.slopeDeg = slopeEndDeg(a.FrequencyGHz, p.diameter)
	log := math.Log10(p.diameter)
	if p.diameter > 100 {
		p.shelfDeg, p.slopeDBI = 15.85*math.Pow(p.diameter, -0.6), 32
	} else {
		p.shelfDeg, p.slopeDBI = 100/p.diameter, 52-10*log
	}
	p.backDBI = backDBI(a.FrequencyGHz, p.diameter)
	return p, nil
}

// slopeEndDeg is where the slope reaches the level behind the antenna.
func slopeEndDeg(frequencyGHz, diameter float64) float64 {
	switch {
	case frequencyGHz < 1:
		return 144.5 * math.Pow(diameter, -0.2)
	case frequencyGHz <= 70:
		return 48
	}
	return 120
}

// backDBI is the level behind the antenna.
func backDBI(frequencyGHz, diameter float64) float64 {
	log := math.Log10(diameter)
	switch {
	case frequencyGHz < 1:
		return -2 - 5*log
	case frequencyGHz <= 70 && diameter > 100:
		return -10
	case frequencyGHz <= 70:
		return 10 - 10*log
	case diameter > 100:
		return -20
	}
	return -10 * log
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
