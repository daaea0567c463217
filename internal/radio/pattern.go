package radio

import (
	"cmp"
	"errors"
	"fmt"
	"math"

	"ridgehop/internal/itu/f1245"
	"ridgehop/internal/itu/f1336"
	"ridgehop/internal/itu/f699"
	"ridgehop/internal/itu/p525"
	"ridgehop/internal/itu/validity"
)

// The range of the omnidirectional reference pattern in GHz, from the title of
// F.1336-4 and -5: "from 400 MHz to about 70 GHz".
const minOmniGHz, maxOmniGHz = 0.4, 70.0

// NewPattern returns the gain of an antenna off its axis at a frequency:
//
//   - f699 and f1245 are round: the gain depends on the true angle off the axis;
//   - f1336_omni depends on the elevation alone;
//   - f1336_sector has a cut in each plane;
//   - tables give a cut in each plane, whose relative gains are added.
//
// It is the gain of the axis at no offset, and never above it. The reference
// patterns are envelopes of the peaks of the side lobes, but for f1245, which is
// their mean.
//
// The error wraps a validity.RangeError where a reference pattern does not hold,
// and is of another kind where the antenna names none and brings no tables. It
// does not ask whether the antenna is made for the frequency: see
// [Antenna.Covers].
func NewPattern(a Antenna, frequencyGHz float64) (Pattern, error) {
	switch a.Pattern.Reference {
	case F699:
		cut, err := f699.Antenna{
			GainDBI: a.GainDBI, DiameterWavelengths: a.wavelengths(frequencyGHz), FrequencyGHz: frequencyGHz,
		}.Pattern()
		return pattern(round[f699.Pattern]{cut, a.GainDBI}, err)
	case F1245:
		cut, err := f1245.Antenna{
			GainDBI: a.GainDBI, DiameterWavelengths: a.wavelengths(frequencyGHz), FrequencyGHz: frequencyGHz,
		}.Pattern()
		return pattern(round[f1245.Pattern]{cut, a.GainDBI}, err)
	case F1336Omni:
		cut, err := f1336.Omni{GainDBI: a.GainDBI, BeamwidthDeg: a.ElevationBeamwidthDeg, K: f1336.TypicalK}.Pattern()
		return pattern(omni{cut}, cmp.Or(validity.Between("frequency", frequencyGHz, minOmniGHz, maxOmniGHz, "GHz"), err))
	case F1336Sector:
		cut, err := f1336.Sector{
			GainDBI: a.GainDBI, AzimuthDeg: a.AzimuthBeamwidthDeg, ElevationDeg: a.ElevationBeamwidthDeg,
			FrequencyGHz: frequencyGHz, SideLobes: f1336.TypicalSideLobes(),
		}.Pattern()
		return pattern(sector{cut}, err)
	case "":
		return newTables(a)
	}
	return nil, fmt.Errorf("unknown reference pattern %.40q", a.Pattern.Reference)
}

// pattern withholds a pattern that was not made.
func pattern(p Pattern, err error) (Pattern, error) {
	if err != nil {
		return nil, err
	}
	return p, nil
}

var errNoPattern = errors.New("a pattern needs a reference, or tables for both azimuth and elevation")

// wavelengths is the diameter over the wavelength: from the diameter, else from the
// gain as F.699 does for an antenna of unknown size.
func (a Antenna) wavelengths(frequencyGHz float64) float64 {
	if a.DiameterM > 0 {
		return a.DiameterM / p525.Wavelength(frequencyGHz)
	}
	return f699.DiameterWavelengths(a.GainDBI)
}

// round is a pattern that depends on the angle off the axis alone.
type round[C interface {
	GainDBI(offAxisDeg float64) float64
}] struct {
	cut     C
	gainDBI float64
}

// GainDBI is bounded by the gain of the axis: for antennas below two wavelengths
// the printed level behind them comes near it.
func (p round[C]) GainDBI(azimuthDeg, elevationDeg float64) float64 {
	return min(p.cut.GainDBI(offAxisDeg(azimuthDeg, elevationDeg)), p.gainDBI)
}

// offAxisDeg is the true angle between the axis and a direction, given as offsets
// from the axis: the great-circle angle by the haversine, exact for small ones.
func offAxisDeg(azimuthDeg, elevationDeg float64) float64 {
	if azimuthDeg == 0 {
		return math.Abs(elevationDeg)
	}
	azimuth, elevation := azimuthDeg*math.Pi/180, elevationDeg*math.Pi/180
	up, across := math.Sin(elevation/2), math.Sin(azimuth/2)
	h := up*up + math.Cos(elevation)*across*across
	return 2 * math.Asin(math.Sqrt(min(max(h, 0), 1))) * 180 / math.Pi
}

// omni is a pattern that depends on the elevation alone.
type omni struct{ cut f1336.OmniPattern }

// GainDBI is the same all around.
func (p omni) GainDBI(_, elevationDeg float64) float64 { return p.cut.GainDBI(elevationDeg) }

// sector is a pattern with a cut in each plane.
type sector struct{ cut f1336.SectorPattern }

// GainDBI is that of the two cuts.
func (p sector) GainDBI(azimuthDeg, elevationDeg float64) float64 {
	return p.cut.GainDBI(wrap(azimuthDeg), elevationDeg)
}

// wrap brings an azimuth to -180 to 180 degrees.
func wrap(azimuthDeg float64) float64 {
	if azimuthDeg >= -180 && azimuthDeg <= 180 {
		return azimuthDeg
	}
	return math.Remainder(azimuthDeg, 360)
}
