package assess

import (
	"math"
	"time"

	"github.com/paulmach/orb"

	"ridgehop/internal/geodesy"
	"ridgehop/internal/radio"
)

// findMagneticNorth fills in the magnetic azimuths on the date stated.
func (a *Assessment) findMagneticNorth() error {
	r := a.Request.Radio
	if r.Date == "" || !a.Link.Path.Located {
		return nil
	}
	date, err := time.Parse(time.DateOnly, r.Date)
	if err != nil {
		return invalid("/radio/date", "is %q; a day is written like 2026-12-01", r.Date)
	}
	aim := &a.Radio.Report.Aim
	err = turn(a.Link.Path.A, a.Link.AntennaAM, date, &aim.A, &a.Radio.DeclinationADeg)
	if err == nil {
		err = turn(a.Link.Path.B, a.Link.AntennaBM, date, &aim.B, &a.Radio.DeclinationBDeg)
	}
	return err
}

// turn counts one end's azimuth from magnetic north. Where the field is too
// weak for a compass there is none.
func turn(place orb.Point, heightM float64, date time.Time, aim *radio.EndAim, declination *float64) error {
	field, err := geodesy.Magnetic(place, heightM, date)
	if err != nil {
		return invalid("/radio/date", "%v", err)
	}
	*declination = field.DeclinationDeg
	if !field.Blackout() && !math.IsNaN(aim.AzimuthDeg) {
		aim.MagneticAzimuthDeg = field.ToMagnetic(aim.AzimuthDeg)
	}
	return nil
}
