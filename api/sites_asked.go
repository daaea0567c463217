package api

import "ridgehop/internal/screening/intake"

// asked is the site that a request states. What it leaves out and the register
// fills in is zero.
func asked(r SiteRequest) intake.Site {
	s := intake.Site{
		ID: r.Id, Name: orZero(r.Name), Lon: r.Lon, Lat: r.Lat, AntennaHeightM: r.AntennaHeightM,
		HeightAbove: intake.HeightAbove(orZero(r.HeightAbove)), FrequencyGHz: orZero(r.FrequencyGhz),
		Polarisation: intake.Polarisation(orZero(r.Polarisation)), RangeM: orZero(r.RangeM),
	}
	for _, one := range orZero(r.Sectors) {
		width := 360.0
		if one.WidthDeg != nil {
			width = *one.WidthDeg
		}
		s.Sectors = append(s.Sectors, intake.Sector{
			AzimuthDeg: one.AzimuthDeg, WidthDeg: width, TiltDeg: orZero(one.TiltDeg), Antenna: orZero(one.Antenna), Radio: orZero(one.Radio),
		})
	}
	return s
}

// orZero is the value pointed to; zero where there is none.
func orZero[T any](p *T) (zero T) {
	if p == nil {
		return zero
	}
	return *p
}
