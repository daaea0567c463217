package geodesy

import (
	"errors"
	"fmt"
	"math"
	"time"

	"github.com/paulmach/orb"
)

// ErrMagneticDate means a date for which the magnetic model does not hold.
var ErrMagneticDate = errors.New("outside the World Magnetic Model 2025, which holds from 2025-01-01 to 2030-01-01 UTC")

// ErrMagneticHeight means a height at which the magnetic model does not hold.
var ErrMagneticHeight = errors.New("outside the World Magnetic Model 2025, which holds from -1 km to 850 km above the ellipsoid")

// Limits of the model and its zones of weak horizontal field. Source: NOAA NCEI
// and British Geological Survey, The World Magnetic Model for 2025-2030.
const (
	magneticMinHeightM = -1e3
	magneticMaxHeightM = 850e3
	cautionZoneNT      = 6000
	blackoutZoneNT     = 2000
)

// MagneticField is the main magnetic field of the earth at one place and time:
// what a compass shows far from iron, without the magnetism of local rocks and
// without magnetic storms.
type MagneticField struct {
	// DeclinationDeg is the angle in degrees from true north to magnetic north,
	// positive to the east: -180 to 180. At a pole of rotation it counts from
	// the meridian of the longitude given, as azimuths there do.
	DeclinationDeg float64
	// InclinationDeg is the angle in degrees from the horizontal to the field,
	// positive downwards: -90 to 90.
	InclinationDeg float64
	// HorizontalNT is the strength of the horizontal part in nanotesla.
	HorizontalNT float64
	// NorthNT, EastNT and VerticalNT are the parts towards true north, towards
	// east and downwards, in nanotesla.
	NorthNT, EastNT, VerticalNT float64
	// TotalNT is the strength of the field in nanotesla.
	TotalNT float64
}

// Magnetic is the field of the World Magnetic Model 2025 at p, heightM metres
// above the WGS 84 ellipsoid, at the instant date. A height above mean sea level
// does as well: the two differ by 0.11 km at most, and 1 km of height turns the
// declination by at most 0.028 degrees where the field is not
// [MagneticField.Weak], 0.017 degrees within 60 degrees of the equator (measured
// on a grid of 1 degree).
//
// The model's own standard error of the declination, in degrees, is
//
//	sqrt(0.26² + (5417/H)²), H the horizontal strength in nanotesla
//
// that is 0.29 to 0.65 degrees within 45 degrees of the equator. Longitudes may be
// any finite number of degrees. A point that is no place on earth is [ErrPoint],
// a height outside -1 km to 850 km [ErrMagneticHeight], a date before 2025-01-01
// or after 2030-01-01, 00:00 UTC, [ErrMagneticDate].
func Magnetic(p orb.Point, heightM float64, date time.Time) (MagneticField, error) {
	if err := checkPoint(p); err != nil {
		return MagneticField{}, err
	}
	if !(heightM >= magneticMinHeightM && heightM <= magneticMaxHeightM) {
		return MagneticField{}, fmt.Errorf("%w: height %g m", ErrMagneticHeight, heightM)
	}
	year := decimalYear(date)
	if year < magneticEpoch || year > magneticExpiry {
		return MagneticField{}, fmt.Errorf("%w: date %s", ErrMagneticDate, date.UTC().Format(time.RFC3339))
	}
	g := newGeocentric(p.Lat(), heightM)
	lon := math.Remainder(p.Lon(), 360) * math.Pi / 180
	return newMagneticField(g.toGeodetic(g.field(lon, year-magneticEpoch))), nil
}

// newMagneticField derives the angles and strengths from the three parts.
func newMagneticField(v vector) MagneticField {
	horizontal := math.Hypot(v.north, v.east)
	return MagneticField{
		DeclinationDeg: math.Atan2(v.east, v.north) * 180 / math.Pi,
		InclinationDeg: math.Atan2(v.down, horizontal) * 180 / math.Pi,
		HorizontalNT:   horizontal,
		NorthNT:        v.north,
		EastNT:         v.east,
		VerticalNT:     v.down,
		TotalNT:        math.Hypot(horizontal, v.down),
	}
}

// Weak reports whether the horizontal field is below 6000 nT: the model's
// caution and blackout zones around the magnetic poles, where a compass is
// unreliable.
func (f MagneticField) Weak() bool { return f.HorizontalNT < cautionZoneNT }

// Blackout reports whether the horizontal field is below 2000 nT: the model's
// blackout zone, where a compass is of no use. Such a field is [MagneticField.Weak] too.
func (f MagneticField) Blackout() bool { return f.HorizontalNT < blackoutZoneNT }

// ToMagnetic is the magnetic azimuth of a true azimuth, both in degrees
// clockwise from their north; the result lies in 0 <= azimuth < 360.
//
//	magnetic = true - declination
func (f MagneticField) ToMagnetic(trueAzimuthDeg float64) float64 {
	return compass(trueAzimuthDeg - f.DeclinationDeg)
}

// decimalYear is the calendar year of an instant in UTC plus the part of that
// year that has passed, in years of 365 or 366 days.
func decimalYear(date time.Time) float64 {
	date = date.UTC()
	start := time.Date(date.Year(), time.January, 1, 0, 0, 0, 0, time.UTC)
	end := time.Date(date.Year()+1, time.January, 1, 0, 0, 0, 0, time.UTC)
	return float64(date.Year()) + float64(date.Sub(start))/float64(end.Sub(start))
}
