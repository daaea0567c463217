package climate

import (
	"fmt"
	"time"

	"ridgehop/internal/itu/p837"
)

// zeroCelsiusK is 0 °C in K, by definition of the scale.
const zeroCelsiusK = 273.15

// exceededPercent is the percentage of the year that R0.01 is named after.
const exceededPercent = 0.01

// Normal is the climate normal of one calendar month: usually the mean over 30 years.
type Normal struct {
	// RainMM is the mean total rainfall of the month in mm, 0 to 5000.
	RainMM float64
	// TemperatureC is the mean temperature of the month, day and night, in °C, -90 to 50.
	TemperatureC float64
}

// rainBounds and temperatureBounds lie inside those of p837. They are common practice,
// no source: wider than any climate, and they catch temperatures in kelvins.
func rainBounds() bounds        { return bounds{0, 5000, " mm"} }
func temperatureBounds() bounds { return bounds{-90, 50, " °C"} }

// FromNormals returns the rain rate in mm/h that is exceeded for 0.01 % of an average year,
// from twelve months, January first; 0 where it rains for less of the year than that. The
// error is an [InvalidError] that names each wrong month, by pointers such as
// /5/rain_mm for June.
//
// Source: P.837-8 Annex 1.
func FromNormals(months [12]Normal) (rainRateMMH float64, err error) {
	var found findings
	for i, n := range months {
		found.normal(i, fmt.Sprintf("/%d", i), n)
	}
	if err := found.err(); err != nil {
		return 0, err
	}
	return rateOf(months)
}

// normal looks at one month.
func (f *findings) normal(month int, at string, n Normal) {
	name := time.Month(month + 1)
	if b := rainBounds(); !b.holds(n.RainMM) {
		f.add(at+"/rain_mm", "of %v is %g; it must be %g to %g%s", name, n.RainMM, b.low, b.high, b.unit)
	}
	if b := temperatureBounds(); !b.holds(n.TemperatureC) {
		f.add(at+"/temperature_c", "of %v is %g; it must be %g to %g%s", name, n.TemperatureC, b.low, b.high, b.unit)
	}
}

// rateOf asks p837.
func rateOf(months [12]Normal) (float64, error) {
	var climate p837.Climate
	for i, n := range months {
		climate[i] = p837.Month{RainMM: n.RainMM, TemperatureK: n.TemperatureC + zeroCelsiusK}
	}
	return climate.RateMMH(exceededPercent)
}
