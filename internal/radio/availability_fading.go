package radio

import (
	"math"

	"ridgehop/internal/itu/p530"
	"ridgehop/internal/itu/p841"
)

// fading is how often the wave that one end sends fades.
type fading struct {
	// occurrencePercent is p0; 0 where multipath is left out, NaN if unknown.
	occurrencePercent float64
	rain              p530.Rain
	rainState         rainState
	season            p841.Parameters
}

// prepareFading works out how the waves of both ends fade.
func (j *judge) prepareFading() {
	j.fadingA.occurrencePercent = j.occurrence()
	j.fadingA.season = p841.RainWet()
	if j.link.Climate.DryOrCold {
		j.fadingA.season = p841.RainDry()
	}
	j.fadingB = j.fadingA
	j.fadingA.rain, j.fadingA.rainState = j.rain(j.link.A.Polarisation)
	if j.link.B.Polarisation == j.link.A.Polarisation {
		j.fadingB = j.fadingA
		return
	}
	j.fadingB.rain, j.fadingB.rainState = j.rain(j.link.B.Polarisation)
}

// occurrence returns the multipath occurrence factor in percent.
func (j *judge) occurrence() float64 {
	link, a := j.link, &j.report.Availability
	path := p530.MultipathPath{
		DistanceKM: link.lengthKM(), FrequencyGHz: link.FrequencyGHz,
		TxM: link.Path.AntennaAM, RxM: link.Path.AntennaBM, TerrainM: link.Path.MeanTerrainM,
	}
	const leastGHzKM = 15 // P.530-19 section 2.3.1
	if path.DistanceKM <= p530.MinMultipathKM || path.FrequencyGHz*path.DistanceKM < leastGHzKM {
		a.Multipath = LeftOut
		return 0
	}
	var p0 float64
	var err error
	climate := &link.Climate
	switch {
	case !math.IsNaN(climate.LogK) && !math.IsNaN(climate.DN75):
		a.Multipath = MultipathMaps
		p0, err = path.Occurrence(climate.LogK, climate.DN75)
	case !math.IsNaN(climate.DN1):
		a.Multipath = MultipathQuick
		p0, err = path.QuickOccurrence(climate.DN1)
	default:
		j.report.miss(MissingMultipathInput,
			"No availability by multipath: it needs LogK and dN75, or dN1, of the place.")
		return math.NaN()
	}
	if err == nil {
		// The distribution of all fades has a range of its own.
		_, err = p530.FadePercent(p0, 0)
	}
	if err != nil {
		a.Multipath = ""
		j.report.miss(MissingMultipathValidity, "No availability by multipath: "+err.Error()+".")
		return math.NaN()
	}
	return p0
}
