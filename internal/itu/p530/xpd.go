package p530

import (
	"cmp"
	"math"

	"ridgehop/internal/itu/validity"
)

// OneAntennaFactor is kXP when one transmit antenna sends both polarisations.
const OneAntennaFactor = 0.7

// TwoAntennaFactor returns kXP when two transmit antennas, separationM apart
// vertically, send the two polarisations: 1 - 0.3 exp(-4e-6 (s/lambda)^2). Both in m, the
// wavelength positive.
//
// Source: P.530-19 section 4.1.
func TwoAntennaFactor(separationM, wavelengthM float64) float64 {
	ratio := separationM / wavelengthM
	return 1 - 0.3*math.Exp(-4e-6*ratio*ratio)
}

// MultipathActivity returns the multipath activity parameter eta, 0 to 1:
//
//	eta = 1 - exp(-0.2 P0^0.75), P0 = p0/100
//
// for a multipath occurrence factor in percent of the worst month, which must not be
// negative.
//
// Source: P.530-19 eq (102).
func MultipathActivity(occurrencePercent float64) float64 {
	return -math.Expm1(-0.2 * math.Pow(occurrencePercent/100, 0.75))
}

// ClearAirXPD is a link that uses both polarisations, in clear air.
type ClearAirXPD struct {
	// OccurrencePercent is the multipath occurrence factor p0 in percent of the worst
	// month (not of the year), above 0 and up to 2000.
	OccurrencePercent float64
	// AntennaDB is the guaranteed cross-polar discrimination of the antennas in dB,
	// the smaller of the two, positive.
	AntennaDB float64
	// Factor is kXP, 0.7 to 1: [OneAntennaFactor] or [TwoAntennaFactor].
	Factor float64
	// CarrierToInterferenceDB is the ratio C0/I in dB at the reference bit error rate.
	CarrierToInterferenceDB float64
	// CancellerDB is the improvement by a cross-polar interference canceller in dB, 0
	// without one.
	CancellerDB float64
}

// ClearAirOutage is the effect of clear-air depolarisation.
type ClearAirOutage struct {
	// Activity is eta.
	Activity float64
	// QDB is Q, and CDB is C = XPD0 + Q, in dB.
	QDB, CDB float64
	// Outage is the probability of outage in the worst month, 0 to 1.
	Outage float64
}

// Outage returns the outage by clear-air depolarisation in the worst month. The error
// wraps a validity.RangeError.
//
// Source: P.530-19 section 4.1.
func (x ClearAirXPD) Outage() (ClearAirOutage, error) {
	if err := cmp.Or(
		checkOccurrence(x.OccurrencePercent),
		validity.Above("cross-polar discrimination of the antennas", x.AntennaDB, 0, "dB"),
		validity.Between("kXP", x.Factor, OneAntennaFactor, 1, ""),
		validity.AtLeast("improvement by the canceller", x.CancellerDB, 0, "dB"),
	); err != nil {
		return ClearAirOutage{}, err
	}
	floor := 40.0
	if x.AntennaDB <= 35 {
		floor = x.AntennaDB + 5
	}
	p0 := x.OccurrencePercent / 100
	out := ClearAirOutage{Activity: MultipathActivity(x.OccurrencePercent)}
	out.QDB = -10 * math.Log10(x.Factor*out.Activity/p0)
	out.CDB = floor + out.QDB
	margin := out.CDB - x.CarrierToInterferenceDB + x.CancellerDB
	out.Outage = min(p0*math.Pow(10, -margin/10), 1)
	return out, nil
}

// The constants U0 of the relation between cross-polar discrimination and rain
// attenuation in dB (P.530-19 section 4.2.1).
const (
	// TypicalU0 is an average.
	TypicalU0 = 15.0
	// BoundU0 is a lower bound for all measurements.
	BoundU0 = 9.0
)

// RainXPD is a link that uses both polarisations, in rain.
type RainXPD struct {
	// ReferenceDB is the rain attenuation A0.01 in dB exceeded for 0.01 % of the year,
	// positive.
	ReferenceDB float64
	// FrequencyGHz is the frequency in GHz, 8 to 35.
	FrequencyGHz float64
	// U0 is [TypicalU0] or [BoundU0].
	U0 float64
	// CarrierToInterferenceDB is the ratio C0/I in dB at the reference bit error rate.
	CarrierToInterferenceDB float64
	// CancellerDB is the improvement by a cross-polar interference canceller in dB.
	CancellerDB float64
}

// RainXPDOutage is the effect of depolarisation in rain.
type RainXPDOutage struct {
	// EquivalentDB is the co-polar attenuation Ap in dB at which the discrimination is
	// used up.
	EquivalentDB float64
	// M and N are the parameters m and n; the Recommendation trusts n from -3 to 0.
	M, N float64
	// Outage is the probability of outage in the average year, 0 to 1.
	Outage float64
}

// DiscriminationDB returns the cross-polar discrimination in dB that is found along with
// a co-polar rain attenuation in dB, which must be positive:
//
//	XPD = U - V log10 CPA, U = U0 + 30 log10 f
//
// with V = 12.8 f^0.19 up to 20 GHz and 22.6 above. The error wraps a
// validity.RangeError outside 8 GHz to 35 GHz.
//
// Source: P.530-19 section 4.2.1.
func (x RainXPD) DiscriminationDB(copolarDB float64) (float64, error) {
	if err := cmp.Or(x.checkFrequency(), validity.Above("co-polar attenuation", copolarDB, 0, "dB")); err != nil {
		return 0, err
	}
	u, v := x.uv()
	return u - v*math.Log10(copolarDB), nil
}

// Outage returns the outage by depolarisation in rain in the average year. The
// error wraps a validity.RangeError when an input is out of range, or when the
// attenuation at which the discrimination is used up is so small that it is exceeded
// more than 1 % of the year.
//
// Source: P.530-19 section 4.2.2.
func (x RainXPD) Outage() (RainXPDOutage, error) {
	if err := cmp.Or(
		x.checkFrequency(),
		validity.Above("rain attenuation at 0.01 %", x.ReferenceDB, 0, "dB"),
		validity.AtLeast("improvement by the canceller", x.CancellerDB, 0, "dB"),
	); err != nil {
		return RainXPDOutage{}, err
	}
	u, v := x.uv()
	out := RainXPDOutage{EquivalentDB: math.Pow(10, (u-x.CarrierToInterferenceDB+x.CancellerDB)/v)}
	least := 0.12 * x.ReferenceDB
	if err := validity.AtLeast("equivalent co-polar attenuation", out.EquivalentDB, least, "dB"); err != nil {
		return RainXPDOutage{}, err
	}
	out.M = min(23.26*math.Log10(out.EquivalentDB/least), 40)
	out.N = (-12.7 + math.Sqrt(161.23-4*out.M)) / 2
	out.Outage = math.Pow(10, out.N-2)
	return out, nil
}

func (x RainXPD) uv() (u, v float64) {
	u = x.U0 + 30*math.Log10(x.FrequencyGHz)
	if x.FrequencyGHz <= 20 {
		return u, 12.8 * math.Pow(x.FrequencyGHz, 0.19)
	}
	return u, 22.6
}

func (x RainXPD) checkFrequency() error {
	return validity.Between("frequency", x.FrequencyGHz, 8, 35, "GHz")
}
