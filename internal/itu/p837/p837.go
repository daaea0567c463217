// Package p837 computes the rain rate that is exceeded for a percentage of the year
// from monthly climate normals, as in Recommendation ITU-R P.837-8 (09/2025) Annex 1. It
// is the route for a place without the Recommendation's digital map of the rain rate
// at 0.01 %, from which it differs by up to 0.3 mm/h when both start from the same
// climate.
//
// All functions are pure and all types are plain values: everything is safe for
// concurrent use.
package p837

import (
	"cmp"
	"math"

	"ridgehop/internal/itu/validity"
)

// The log-normal distribution of the rain rate while it rains: its deviation, and the
// distance of its median below the mean, half the deviation squared.
const (
	deviation   = 1.26
	medianShift = 0.7938
)

// The mean rain rate while it rains grows with the temperature above freezing; a month
// rains at most wettestPercent of its time.
const (
	coldRateMMH    = 0.5874
	ratePerDegree  = 0.0883
	freezingK      = 273.15
	wettestPercent = 70.0
)

// The calendar: February is a mean one.
const (
	daysInYear = 365.25
	hoursInDay = 24.0
)

// The search for the rain rate halves this interval until doubles have no more
// digits to give.
const (
	lightestSearchMMH = 1e-12
	heaviestSearchMMH = 1e6
	bisections        = 60
)

// Month is the climate normal of one calendar month.
type Month struct {
	// RainMM is the mean total rainfall of the month in mm, 0 to 5000.
	RainMM float64
	// TemperatureK is the mean temperature of the month in K, 180 to 330.
	TemperatureK float64
}

// Climate is the twelve months of a year, January first.
type Climate [12]Month

// RainPercent returns the percentage of an average year during which it rains, P0.
// The error wraps a validity.RangeError when a month is not a physical one.
//
// Source: P.837-8 Annex 1.
func (c Climate) RainPercent() (float64, error) {
	if err := c.validate(); err != nil {
		return 0, err
	}
	return c.exceededPercent(0), nil
}

// RateMMH returns the rain rate in mm/h, in the mean over a minute, that is exceeded for a
// percentage of an average year, above 0 and up to 100; 0 when it rains for less
// of the year than that. The error wraps a validity.RangeError when the percentage or a
// month is out of range.
//
// The rate solves sum of N P0 Q((ln R + 0.7938 - ln r)/1.26)/365.25 = p over the
// months, where N counts the days of a month, P0 is the percentage of it with rain, r the
// mean rate while it rains, and Q(x) = erfc(x/sqrt 2)/2.
//
// Source: P.837-8 Annex 1.
func (c Climate) RateMMH(annualPercent float64) (float64, error) {
	err := cmp.Or(validity.AboveUpTo("annual percentage", annualPercent, 0, 100, "%"), c.validate())
	if err != nil {
		return 0, err
	}
	if annualPercent >= c.exceededPercent(0) {
		return 0, nil
	}
	low, high := math.Log(lightestSearchMMH), math.Log(heaviestSearchMMH)
	for range bisections {
		middle := (low + high) / 2
		if c.exceededPercent(math.Exp(middle)) > annualPercent {
			low = middle
		} else {
			high = middle
		}
	}
	return math.Exp((low + high) / 2), nil
}

// exceededPercent is the percentage of the year during which it rains more than
// rateMMH.
func (c Climate) exceededPercent(rateMMH float64) float64 {
	var sum float64
	for i, month := range c {
		days := daysIn(i)
		percent, mean := month.rain(days)
		argument := (math.Log(rateMMH) + medianShift - math.Log(mean)) / deviation
		sum += days * percent * math.Erfc(argument/math.Sqrt2) / 2
	}
	return sum / daysInYear
}

// rain returns the percentage of the month during which it rains, and the mean rate
// in mm/h while it does. A month too wet for the percentage rains harder instead.
func (m Month) rain(days float64) (percent, meanMMH float64) {
	meanMMH = coldRateMMH
	if celsius := m.TemperatureK - freezingK; celsius >= 0 {
		meanMMH = coldRateMMH * math.Exp(ratePerDegree*celsius)
	}
	percent = 100 * m.RainMM / (hoursInDay * days * meanMMH)
	if percent > wettestPercent {
		percent = wettestPercent
		meanMMH = 100 / wettestPercent * m.RainMM / (hoursInDay * days)
	}
	return percent, meanMMH
}

// daysIn returns the days of the month, January being 0.
func daysIn(month int) float64 {
	switch month {
	case 1:
		return 28.25
	case 3, 5, 8, 10:
		return 30
	}
	return 31
}

// validate refuses months no place on earth has; the bounds are ours, wide enough for any
// climate.
func (c Climate) validate() error {
	for _, month := range c {
		err := cmp.Or(
			validity.Between("rainfall of a month", month.RainMM, 0, 5000, "mm"),
			validity.Between("mean temperature of a month", month.TemperatureK, 180, 330, "K"),
		)
		if err != nil {
			return err
		}
	}
	return nil
}
