// Package p838 computes the specific attenuation of rain as in Recommendation
// ITU-R P.838-3, from 1 GHz to 1000 GHz.
//
// All functions are pure and all types are plain values: everything is safe for
// concurrent use.
package p838

import (
	"math"

	"ridgehop/internal/itu/validity"
)

// The range of frequencies of the Recommendation, in GHz.
const (
	MinFrequencyGHz = 1.0
	MaxFrequencyGHz = 1000.0
)

// Coefficients are those of the power law gamma = k R^alpha.
type Coefficients struct {
	K, Alpha float64
}

// SpecificDB returns the specific attenuation in dB/km for a rain rate in mm/h that
// is not negative:
//
//	gamma = k R^alpha
//
// Source: P.838-3 eq (1).
func (c Coefficients) SpecificDB(rainRateMMH float64) float64 {
	return c.K * math.Pow(rainRateMMH, c.Alpha)
}

// Linear holds the coefficients for the two linear polarisations at one
// frequency.
type Linear struct {
	Horizontal, Vertical Coefficients
}

// At returns the coefficients for a frequency in GHz. The error wraps a
// validity.RangeError outside 1 GHz to 1000 GHz.
//
// Source: P.838-3 eqs (2) and (3), Tables 1 to 4.
func At(frequencyGHz float64) (Linear, error) {
	if err := validity.Between("frequency", frequencyGHz, MinFrequencyGHz, MaxFrequencyGHz, "GHz"); err != nil {
		return Linear{}, err
	}
	logF := math.Log10(frequencyGHz)
	return Linear{
		Horizontal: Coefficients{
			K:     math.Pow(10, kHorizontal().at(logF)),
			Alpha: alphaHorizontal().at(logF),
		},
		Vertical: Coefficients{
			K:     math.Pow(10, kVertical().at(logF)),
			Alpha: alphaVertical().at(logF),
		},
	}, nil
}

// Combined returns the coefficients for any linear or circular polarisation and
// any path: elevationDeg is the elevation angle of the path in degrees, tiltDeg the
// tilt of the polarisation from the horizontal in degrees (0 horizontal, 90 vertical,
// 45 slant and circular).
//
//	k = [kH + kV + (kH - kV) cos^2(elevation) cos(2 tilt)]/2, and k alpha likewise
//
// Source: P.838-3 eqs (4) and (5).
func (l Linear) Combined(elevationDeg, tiltDeg float64) Coefficients {
	h, v := l.Horizontal, l.Vertical
	cosine := math.Cos(elevationDeg * math.Pi / 180)
	weight := cosine * cosine * math.Cos(2*tiltDeg*math.Pi/180)
	k := (h.K + v.K + (h.K-v.K)*weight) / 2
	product := (h.K*h.Alpha + v.K*v.Alpha + (h.K*h.Alpha-v.K*v.Alpha)*weight) / 2
	return Coefficients{K: k, Alpha: product / k}
}

// bell is one term a exp(-((log f - b)/c)^2) of a curve.
type bell struct{ a, b, c float64 }

// curve is a sum of bells and a straight line in log f. A curve with four bells
// has a fifth of height zero.
type curve struct {
	bells         [5]bell
	slope, offset float64
}

func (c curve) at(logF float64) float64 {
	sum := c.slope*logF + c.offset
	for _, b := range c.bells {
		u := (logF - b.b) / b.c
		sum += b.a * math.Exp(-u*u)
	}
	return sum
}
