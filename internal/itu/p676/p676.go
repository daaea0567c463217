// Package p676 computes the specific attenuation of atmospheric gases as in
// Recommendation ITU-R P.676-13, Annex 1: line by line, from 1 GHz to 1000 GHz. The
// text of edition 13 was not at hand; the method is known from its
// validation examples and public implementations that agree with them.
//
// An [Atmosphere] is a plain comparable value, so that a caller can keep results in
// a map by frequency and atmosphere. A [Spectrum] holds all that depends on the
// atmosphere alone; it is never changed after it is made. Everything is safe
// for concurrent use.
package p676

import (
	"cmp"
	"math"

	"ridgehop/internal/itu/validity"
)

// The range of frequencies of the method, in GHz.
const (
	MinFrequencyGHz = 1.0
	MaxFrequencyGHz = 1000.0
)

// Atmosphere is the state of the air along a path.
type Atmosphere struct {
	// DryPressureHPA is the pressure of the dry air in hPa, without that of the
	// water vapour; positive.
	DryPressureHPA float64
	// TemperatureK is the temperature in K, positive.
	TemperatureK float64
	// VapourDensityGM3 is the density of water vapour in g/m3, not negative.
	VapourDensityGM3 float64
}

// Standard returns the atmosphere that is used where nothing better is known:
// 1013.25 hPa dry, 288.15 K (15 degrees Celsius), 7.5 g/m3.
func Standard() Atmosphere {
	return Atmosphere{DryPressureHPA: 1013.25, TemperatureK: 288.15, VapourDensityGM3: 7.5}
}

// VapourPressureHPA returns the partial pressure of water vapour in hPa:
//
//	e = rho T/216.7
//
// Total pressure less this is the dry pressure.
//
// Source: P.676-13 Annex 1.
func (a Atmosphere) VapourPressureHPA() float64 {
	return a.VapourDensityGM3 * a.TemperatureK / 216.7
}

// Validate returns an error that wraps a validity.RangeError when the atmosphere is
// not a physical one, else nil.
func (a Atmosphere) Validate() error {
	return cmp.Or(
		validity.Above("dry pressure", a.DryPressureHPA, 0, "hPa"),
		validity.Above("temperature", a.TemperatureK, 0, "K"),
		validity.AtLeast("water vapour density", a.VapourDensityGM3, 0, "g/m3"),
	)
}

// Specific is the specific attenuation of the gases, in dB/km.
type Specific struct {
	// OxygenDB is the part of dry air, and VapourDB that of water vapour.
	OxygenDB, VapourDB float64
}

// TotalDB returns the specific attenuation of both in dB/km. Times the path length in
// km it is the attenuation of a terrestrial link (P.530-19 eq (1)); the
// Recommendation counts it above about 10 GHz.
func (s Specific) TotalDB() float64 { return s.OxygenDB + s.VapourDB }

// Specific returns the specific attenuation at a frequency in GHz. It makes a
// [Spectrum] each time; keep one for many frequencies. The error wraps a
// validity.RangeError outside 1 GHz to 1000 GHz, or when Validate fails.
func (a Atmosphere) Specific(frequencyGHz float64) (Specific, error) {
	spectrum, err := NewSpectrum(a)
	if err != nil {
		return Specific{}, err
	}
	return spectrum.Specific(frequencyGHz)
}

// line is a spectral line in a given atmosphere: its frequency, strength, width and
// overlap correction.
type line struct {
	frequencyGHz, strength float64
	width, overlap         float64
}

// Spectrum is the spectrum of oxygen and water vapour in one atmosphere.
type Spectrum struct {
	oxygen [44]line
	water  [35]line
	// debye is the width parameter d of the dry continuum in GHz.
	debye                       float64
	debyeStrength, pressureTerm float64
}

// NewSpectrum returns the spectrum of an atmosphere. The error wraps a
// validity.RangeError when Validate fails.
//
// Source: P.676-13 Annex 1.
func NewSpectrum(a Atmosphere) (*Spectrum, error) {
	if err := a.Validate(); err != nil {
		return nil, err
	}
	p, e, theta := a.DryPressureHPA, a.VapourPressureHPA(), 300/a.TemperatureK
	s := &Spectrum{
		debye:         5.6e-4 * (p + e) * math.Pow(theta, 0.8),
		debyeStrength: 6.14e-5 * p * theta * theta,
		pressureTerm:  1.4e-12 * p * p * math.Pow(theta, 3.5),
	}
	for i, l := range oxygenLines() {
		s.oxygen[i] = l.in(p, e, theta)
	}
	for i, l := range waterLines() {
		s.water[i] = l.in(p, e, theta)
	}
	return s, nil
}

// in returns the line in air of dry pressure p and vapour pressure e in hPa, for
// theta = 300/T. The width includes the Zeeman splitting of oxygen.
func (l oxygenLine) in(p, e, theta float64) line {
	width := l.a3 * 1e-4 * (p*math.Pow(theta, 0.8-l.a4) + 1.1*e*theta)
	return line{
		frequencyGHz: l.frequencyGHz,
		strength:     l.a1 * 1e-7 * p * theta * theta * theta * math.Exp(l.a2*(1-theta)),
		width:        math.Sqrt(width*width + 2.25e-6),
		overlap:      (l.a5 + l.a6*theta) * 1e-4 * (p + e) * math.Pow(theta, 0.8),
	}
}

// in returns the line in air of dry pressure p and vapour pressure e in hPa, for
// theta = 300/T. The width includes the Doppler broadening of water vapour.
func (l waterLine) in(p, e, theta float64) line {
	width := l.b3 * 1e-4 * (p*math.Pow(theta, l.b4) + l.b5*e*math.Pow(theta, l.b6))
	doppler := 2.1316e-12 * l.frequencyGHz * l.frequencyGHz / theta
	return line{
		frequencyGHz: l.frequencyGHz,
		strength:     l.b1 * 1e-1 * e * math.Pow(theta, 3.5) * math.Exp(l.b2*(1-theta)),
		width:        0.535*width + math.Sqrt(0.217*width*width+doppler),
	}
}

// Specific returns the specific attenuation at a frequency in GHz. The error wraps
// a validity.RangeError outside 1 GHz to 1000 GHz.
//
//	gamma = 0.182 f N''
//
// Source: P.676-13 Annex 1.
func (s *Spectrum) Specific(frequencyGHz float64) (Specific, error) {
	if err := validity.Between("frequency", frequencyGHz, MinFrequencyGHz, MaxFrequencyGHz, "GHz"); err != nil {
		return Specific{}, err
	}
	f := frequencyGHz
	return Specific{
		OxygenDB: 0.182 * f * (refractivity(s.oxygen[:], f) + s.continuum(f)),
		VapourDB: 0.182 * f * refractivity(s.water[:], f),
	}, nil
}

// refractivity sums strength times shape over the lines: the imaginary part of the
// refractivity.
func refractivity(lines []line, f float64) float64 {
	var sum float64
	for i := range lines {
		l := &lines[i]
		below, above := l.frequencyGHz-f, l.frequencyGHz+f
		width2 := l.width * l.width
		shape := (l.width-l.overlap*below)/(below*below+width2) +
			(l.width-l.overlap*above)/(above*above+width2)
		sum += l.strength * f / l.frequencyGHz * shape
	}
	return sum
}

// continuum is the dry continuum: the Debye spectrum of oxygen and the nitrogen
// that pressure makes absorb.
func (s *Spectrum) continuum(f float64) float64 {
	ratio := f / s.debye
	return f * (s.debyeStrength/(s.debye*(1+ratio*ratio)) + s.pressureTerm/(1+1.9e-5*f*math.Sqrt(f)))
}
