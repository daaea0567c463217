package radio

import (
	"fmt"
	"math"
)

// Aim is where both antennas point.
type Aim struct{ A, B EndAim }

// EndAim is where one antenna points, what it covers, and what an error costs. Angles are
// in degrees; azimuths are NaN where the ends are not located.
type EndAim struct {
	// AzimuthDeg is to the far end, from true north. MagneticAzimuthDeg is for the caller
	// to fill in, who knows magnetic north; NaN until then.
	AzimuthDeg, MagneticAzimuthDeg float64
	// TiltDeg is the elevation of the far end, up positive.
	TiltDeg float64
	// AimAzimuthDeg and AimTiltDeg are where the antenna points.
	AimAzimuthDeg, AimTiltDeg float64
	// OffAzimuthDeg and OffElevationDeg are where the far end lies from the axis:
	// clockwise and up positive.
	OffAzimuthDeg, OffElevationDeg float64
	// LossDB is what the gain towards the far end lacks against the axis; NaN if unknown.
	LossDB float64
	// Covered is true where the far end lies inside the half-power beam in both planes.
	// MissAzimuthDeg and MissElevationDeg are how far outside it lies; 0 inside.
	Covered                          bool
	MissAzimuthDeg, MissElevationDeg float64
	// WidthM and HeightM are the size of the half-power beam at the far end, 2 d
	// tan(bw/2); +Inf for a beam of 180 degrees and more.
	WidthM, HeightM float64
	// HalfPowerAzimuthDeg and HalfPowerElevationDeg are the offsets that cost 3 dB.
	HalfPowerAzimuthDeg, HalfPowerElevationDeg float64
	// OneDegreeAzimuthDB and OneDegreeElevationDB are what the first degree off the axis
	// costs: 12 (1/bw)^2 (P.530-19 section 6.1.2) where that lies within the beamwidth bw,
	// else by the pattern; NaN if unknown.
	OneDegreeAzimuthDB, OneDegreeElevationDB float64
	// Sway1DBDeg and Sway3DBDeg are how far the mast may twist or lean, either way, from a
	// perfect aim before it costs 1 dB and 3 dB at this end, in the narrower plane.
	Sway1DBDeg, Sway3DBDeg float64
}

// aim works out both ends' aims.
func (j *judge) aim() {
	path, l := &j.link.Path, j.link.LengthM
	j.a = end{Terminal: &j.link.A, name: "A"}
	j.b = end{Terminal: &j.link.B, name: "B"}
	azimuthA, azimuthB := path.AzimuthADeg, path.AzimuthBDeg
	if !path.Located {
		azimuthA, azimuthB = math.NaN(), math.NaN()
	}
	j.report.Aim.A = j.endAim(&j.a, azimuthA, path.TiltADeg, l)
	j.report.Aim.B = j.endAim(&j.b, azimuthB, path.TiltBDeg, l)
}

// endAim works out one end's aim, and leaves in the end what the budget needs.
func (j *judge) endAim(e *end, azimuthDeg, tiltDeg, lengthM float64) EndAim {
	antenna := &e.Antenna
	aim := EndAim{
		AzimuthDeg: azimuthDeg, MagneticAzimuthDeg: math.NaN(), TiltDeg: tiltDeg,
		AimAzimuthDeg: azimuthDeg, AimTiltDeg: tiltDeg,
		HalfPowerAzimuthDeg:   antenna.AzimuthBeamwidthDeg / 2,
		HalfPowerElevationDeg: antenna.ElevationBeamwidthDeg / 2,
		WidthM:                beamWidthM(lengthM, antenna.AzimuthBeamwidthDeg),
		HeightM:               beamWidthM(lengthM, antenna.ElevationBeamwidthDeg),
	}
	if !math.IsNaN(e.AimAzimuthDeg) {
		aim.AimAzimuthDeg = e.AimAzimuthDeg
		aim.OffAzimuthDeg = turnDeg(azimuthDeg - e.AimAzimuthDeg)
	}
	if !math.IsNaN(e.AimTiltDeg) {
		aim.AimTiltDeg = e.AimTiltDeg
		aim.OffElevationDeg = tiltDeg - e.AimTiltDeg
	}
	aim.cover()
	e.azimuthOffDeg, e.elevationOffDeg = aim.OffAzimuthDeg, aim.OffElevationDeg
	e.mispointingDB = j.offAxisDB(antenna, aim.OffAzimuthDeg, aim.OffElevationDeg)
	aim.LossDB = 0 - e.mispointingDB // not -0
	aim.OneDegreeAzimuthDB = j.oneDegreeDB(antenna, antenna.AzimuthBeamwidthDeg, 1, 0)
	aim.OneDegreeElevationDB = j.oneDegreeDB(antenna, antenna.ElevationBeamwidthDeg, 0, 1)
	narrow := min(antenna.AzimuthBeamwidthDeg, antenna.ElevationBeamwidthDeg)
	aim.Sway1DBDeg, aim.Sway3DBDeg = swayDeg(narrow, 1), swayDeg(narrow, 3)
	return aim
}

// cover judges whether the half-power beam covers the far end.
func (a *EndAim) cover() {
	a.MissAzimuthDeg = max(0, math.Abs(a.OffAzimuthDeg)-a.HalfPowerAzimuthDeg)
	a.MissElevationDeg = max(0, math.Abs(a.OffElevationDeg)-a.HalfPowerElevationDeg)
	a.Covered = a.MissAzimuthDeg == 0 && a.MissElevationDeg == 0
}

// offAxisDB returns the gain at an offset less that on the axis, NaN if unknown. On the
// axis no pattern is needed.
func (j *judge) offAxisDB(antenna *Antenna, azimuthDeg, elevationDeg float64) float64 {
	if azimuthDeg == 0 && elevationDeg == 0 {
		return 0
	}
	beam, err := j.tools.beam(antenna, j.link.FrequencyGHz)
	if err != nil {
		j.report.miss(MissingPattern, fmt.Sprintf("The gain of %s off its axis is unknown: %v.", antenna.Name, err))
		return math.NaN()
	}
	return beam.GainDBI(azimuthDeg, elevationDeg) - antenna.GainDBI
}

// oneDegreeDB returns what one degree off the axis costs in the plane of the beamwidth.
func (j *judge) oneDegreeDB(antenna *Antenna, beamwidthDeg, azimuthDeg, elevationDeg float64) float64 {
	if beamwidthDeg >= 1 {
		return parabolaDB(beamwidthDeg, 1)
	}
	return -j.offAxisDB(antenna, azimuthDeg, elevationDeg)
}

// parabolaDB is the loss of a main lobe off its axis: 12 (theta/alpha)^2, alpha the
// half-power beamwidth.
//
// Source: ITU-R P.530-19 section 6.1.2, antenna discrimination.
func parabolaDB(beamwidthDeg, offDeg float64) float64 {
	if beamwidthDeg >= 360 {
		return 0
	}
	ratio := offDeg / beamwidthDeg
	return 12 * ratio * ratio
}

// swayDeg is [parabolaDB] solved for the angle.
func swayDeg(beamwidthDeg, lossDB float64) float64 {
	return beamwidthDeg * math.Sqrt(lossDB/12)
}

// beamWidthM is the width of a beam at a distance, 2 d tan(bw/2).
func beamWidthM(distanceM, beamwidthDeg float64) float64 {
	if beamwidthDeg >= 180 {
		return math.Inf(1)
	}
	return 2 * distanceM * math.Tan(beamwidthDeg/2*math.Pi/180)
}

// turnDeg brings a difference of azimuths to -180 to 180.
func turnDeg(deg float64) float64 { return math.Remainder(deg, 360) }
