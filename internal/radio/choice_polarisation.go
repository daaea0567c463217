package radio

import "math"

// PolarisationAdvice is which polarisation suits rain, and which the neighbours.
type PolarisationAdvice struct {
	// RainVerticalDB and RainHorizontalDB are the rain attenuation exceeded for 0.01 % of
	// the year; NaN if unknown.
	RainVerticalDB, RainHorizontalDB float64
	// Rain is the polarisation that fades less in rain; empty where it does not matter or
	// is unknown.
	Rain Polarisation
	// VerticalNeighbours and HorizontalNeighbours count the neighbours inside the
	// half-power beam of either antenna as entered, by the polarisation that they use;
	// UnknownNeighbours are those of another or an unknown one.
	VerticalNeighbours, HorizontalNeighbours, UnknownNeighbours int
	// Neighbours is the polarisation that fewer of them use; empty where it does not
	// matter.
	Neighbours Polarisation
	// Advice is vertical, horizontal or both: "both" where the antennas at both ends have
	// both and no neighbour lies in a beam, so that two streams can be sent if the radios
	// do that.
	Advice string
	Detail string
}

// rainMattersDB is from which difference on rain decides: common practice, no source.
const rainMattersDB = 0.1

// bothPolarisations is the advice to use two at once.
const bothPolarisations = "both"

// advise works out the advice.
func (j *judge) advise() PolarisationAdvice {
	advice := PolarisationAdvice{
		RainVerticalDB: j.rainReferenceDB(Vertical), RainHorizontalDB: j.rainReferenceDB(Horizontal),
	}
	switch difference := advice.RainHorizontalDB - advice.RainVerticalDB; {
	case difference >= rainMattersDB:
		advice.Rain = Vertical
	case difference <= -rainMattersDB:
		advice.Rain = Horizontal
	}
	j.countNeighbours(&advice)
	a, b := &j.link.A.Antenna, &j.link.B.Antenna
	dual := a.Supports(Vertical) && a.Supports(Horizontal) && b.Supports(Vertical) && b.Supports(Horizontal)
	crowd := advice.VerticalNeighbours + advice.HorizontalNeighbours + advice.UnknownNeighbours
	switch {
	case advice.Neighbours != "":
		advice.Advice = string(advice.Neighbours)
		advice.Detail = "Fewer neighbours in the beam use this polarisation; the crossed one discriminates by about 20 to 30 dB (common practice, no source)."
	case crowd == 0 && dual:
		advice.Advice = bothPolarisations
		advice.Detail = "No known neighbour lies in the beam and both antennas have both: two streams are possible if the radios send them; a single one fades least in rain if vertical."
	case advice.Rain == Horizontal:
		advice.Advice = string(Horizontal)
		advice.Detail = "It fades less in rain on this path."
	default:
		advice.Advice = string(Vertical)
		advice.Detail = "Vertical fades no more in rain than horizontal (ITU-R P.838-3), and no neighbour speaks against it."
	}
	return advice
}

// rainReferenceDB returns the rain attenuation exceeded for 0.01 % of the year, taken from
// the link's own where that has the polarisation.
func (j *judge) rainReferenceDB(p Polarisation) float64 {
	switch {
	case p == j.link.A.Polarisation:
		return j.fadingA.referenceDB()
	case p == j.link.B.Polarisation:
		return j.fadingB.referenceDB()
	case j.fadingA.rainState != rainKnown:
		return j.fadingA.referenceDB()
	}
	rain, err := j.rainPath(p).Rain()
	if err != nil {
		return math.NaN()
	}
	return rain.ReferenceDB
}

// countNeighbours counts who uses what inside the beams as entered.
func (j *judge) countNeighbours(advice *PolarisationAdvice) {
	if !j.link.Path.Located {
		return
	}
	for i := range j.link.Neighbours {
		n := &j.link.Neighbours[i]
		if !j.offAxisA(n).from(&j.a).inBeam(&j.link.A.Antenna) && !j.offAxisB(n).from(&j.b).inBeam(&j.link.B.Antenna) {
			continue
		}
		switch n.Polarisation {
		case Vertical:
			advice.VerticalNeighbours++
		case Horizontal:
			advice.HorizontalNeighbours++
		default:
			advice.UnknownNeighbours++
		}
	}
	switch {
	case advice.VerticalNeighbours > advice.HorizontalNeighbours:
		advice.Neighbours = Horizontal
	case advice.HorizontalNeighbours > advice.VerticalNeighbours:
		advice.Neighbours = Vertical
	}
}
