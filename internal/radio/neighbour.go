package radio

import (
	"math"

	"ridgehop/internal/itu/p525"
)

// NeighbourReport is what one neighbour hears of the link: as it was entered, and with
// either choice. Levels are in free space, in the same polarisation.
type NeighbourReport struct {
	Name         string
	Polarisation Polarisation
	Given        Heard
	// Least and Narrow are with [Choice.Same] and [Choice.Narrow]; nil where there is no
	// such choice.
	Least, Narrow *Heard
}

// Heard is what a neighbour hears of both ends.
type Heard struct{ A, B HeardEnd }

// HeardEnd is what a neighbour hears of one end.
type HeardEnd struct {
	// InBeam is true where it lies inside the half-power beam in both planes.
	InBeam bool
	// GainDBI is the antenna's gain towards it: as it hears, so it is heard.
	GainDBI float64
	// LevelDBM is at its receiver, from the EIRP towards it, the free-space loss and the
	// gain of its own antenna; NaN if a pattern is unknown.
	LevelDBM float64
}

// neighbours fills in the report's neighbours.
func (j *judge) neighbours() {
	if len(j.link.Neighbours) == 0 {
		return
	}
	if !j.link.Path.Located {
		j.report.miss(MissingAzimuth, "The neighbours are left out: the ends of the link have no positions.")
		return
	}
	r := j.report
	r.Neighbours = make([]NeighbourReport, len(j.link.Neighbours))
	given := Option{
		A: EndOption{Antenna: j.link.A.Antenna, EIRPDBM: r.AToB.EIRPDBM},
		B: EndOption{Antenna: j.link.B.Antenna, EIRPDBM: r.BToA.EIRPDBM},
	}
	for i := range j.link.Neighbours {
		n := &j.link.Neighbours[i]
		r.Neighbours[i] = NeighbourReport{
			Name: n.Name, Polarisation: n.Polarisation,
			Given: Heard{
				A: j.heardEnd(&given.A, n.DistanceAM, n.GainDBI, j.offAxisA(n).from(&j.a)),
				B: j.heardEnd(&given.B, n.DistanceBM, n.GainDBI, j.offAxisB(n).from(&j.b)),
			},
			Least: j.heard(n, r.Choice.Same), Narrow: j.heard(n, r.Choice.Narrow),
		}
	}
}

// heard returns what a neighbour hears of an option, whose antennas are aimed at each
// other.
func (j *judge) heard(n *Neighbour, o *Option) *Heard {
	if o == nil {
		return nil
	}
	return &Heard{
		A: j.heardEnd(&o.A, n.DistanceAM, n.GainDBI, j.offAxisA(n)),
		B: j.heardEnd(&o.B, n.DistanceBM, n.GainDBI, j.offAxisB(n)),
	}
}

// heardEnd works out one end, off whose axis the neighbour lies.
func (j *judge) heardEnd(o *EndOption, distanceM, ownGainDBI float64, at offset) HeardEnd {
	gain := o.Antenna.GainDBI + j.offAxisDB(&o.Antenna, at.azimuthDeg, at.elevationDeg)
	return HeardEnd{
		InBeam:  at.inBeam(&o.Antenna),
		GainDBI: gain,
		LevelDBM: o.EIRPDBM - o.Antenna.GainDBI + gain + ownGainDBI -
			p525.FreeSpaceLossDB(j.link.FrequencyGHz, distanceM/1000),
	}
}

// offset is a direction against another, in degrees: clockwise and up positive.
type offset struct{ azimuthDeg, elevationDeg float64 }

// offAxisA returns where a neighbour lies from the far end as seen from A, which is the
// axis of an antenna that is aimed there.
func (j *judge) offAxisA(n *Neighbour) offset {
	path := &j.link.Path
	return offset{turnDeg(n.AzimuthADeg - path.AzimuthADeg), n.ElevationADeg - path.TiltADeg}
}

// offAxisB is offAxisA at the other end.
func (j *judge) offAxisB(n *Neighbour) offset {
	path := &j.link.Path
	return offset{turnDeg(n.AzimuthBDeg - path.AzimuthBDeg), n.ElevationBDeg - path.TiltBDeg}
}

// from returns the offset from the axis as it is aimed.
func (o offset) from(e *end) offset {
	return offset{turnDeg(o.azimuthDeg + e.azimuthOffDeg), o.elevationDeg + e.elevationOffDeg}
}

// inBeam reports whether the offset lies inside the half-power beam in both planes.
func (o offset) inBeam(antenna *Antenna) bool {
	return math.Abs(o.azimuthDeg) <= antenna.AzimuthBeamwidthDeg/2 &&
		math.Abs(o.elevationDeg) <= antenna.ElevationBeamwidthDeg/2
}
