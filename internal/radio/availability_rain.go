package radio

import (
	"math"

	"ridgehop/internal/itu/p530"
)

// leastRainGHz is below which rain need not be counted: P.530-19 section 2.4 says about
// 5 GHz.
const leastRainGHz = 5.0

// rainState is what is known of rain.
type rainState int

const (
	rainUnknown rainState = iota
	rainLeftOut
	rainKnown
)

// rain returns the distribution of rain attenuation in a polarisation.
func (j *judge) rain(polarisation Polarisation) (p530.Rain, rainState) {
	a := &j.report.Availability
	switch {
	case j.link.FrequencyGHz < leastRainGHz:
		a.Rain = LeftOut
		return p530.Rain{}, rainLeftOut
	case math.IsNaN(j.link.Climate.RainRateMMH):
		j.report.miss(MissingRainInput,
			"No availability by rain: it needs the rain rate exceeded for 0.01 % of the year.")
		return p530.Rain{}, rainUnknown
	}
	rain, err := j.rainPath(polarisation).Rain()
	if err != nil {
		j.report.miss(MissingRainValidity, "No availability by rain: "+err.Error()+".")
		return p530.Rain{}, rainUnknown
	}
	a.Rain = RainP530
	return rain, rainKnown
}

func (j *judge) rainPath(polarisation Polarisation) p530.RainPath {
	path := p530.RainPath{
		DistanceKM: j.link.lengthKM(), FrequencyGHz: j.link.FrequencyGHz,
		TiltDeg: tiltDeg(polarisation), RainRateMMH: j.link.Climate.RainRateMMH,
	}
	if rainEdition(j.link.Climate.RainEdition) == 17 {
		path.Edition = p530.RainEdition17
	}
	return path
}

func rainEdition(edition int) int {
	if edition == 0 {
		return 19
	}
	return edition
}

// tiltDeg is the tilt of a polarisation from the horizontal in degrees.
func tiltDeg(p Polarisation) float64 {
	switch p {
	case Horizontal:
		return 0
	case Slant:
		return 45
	}
	return 90
}

// referenceDB is A0.01 in dB, NaN if unknown.
func (f *fading) referenceDB() float64 {
	switch f.rainState {
	case rainKnown:
		return f.rain.ReferenceDB
	case rainLeftOut:
		return 0
	}
	return math.NaN()
}
