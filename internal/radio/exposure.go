package radio

import (
	"math"

	"ridgehop/internal/itu/validity"
)

// Exposure is an informative figure: where, in the main beam, the power density has
// fallen to the level that ICNIRP gives for the public. It is no statement about safety or
// law, and counts neither other transmitters nor reflections. Nearer to a large dish than
// the far field the density is lower than the formula says, so the distance errs
// on the careful side.
type Exposure struct {
	// EIRPDBM is on the axis.
	EIRPDBM float64
	// PublicWM2 is the reference level in W/m2; NaN outside its range.
	PublicWM2 float64
	// DistanceM is from the antenna along the axis; NaN outside the range.
	DistanceM float64
	Source    string
}

const exposureSource = "ICNIRP Guidelines 2020 (Health Physics 118(5)), Table 5: public, whole body, mean over 30 min; distance in free space"

// The range of the reference level in MHz.
const leastExposureMHz, mostExposureMHz = 400.0, 300_000.0

// PublicReferenceWM2 returns the reference level of the power density for the public, for
// the whole body and in the mean over 30 minutes, in W/m2: f/200 (f in MHz) from 400 MHz,
// 10 from 2 GHz to 300 GHz. The error wraps a validity.RangeError outside 400 MHz to
// 300 GHz; below, the level is stated for fields rather than for a density.
//
// Source: ICNIRP Guidelines 2020, Table 5.
func PublicReferenceWM2(frequencyGHz float64) (float64, error) {
	mhz := frequencyGHz * 1000
	if err := validity.Between("frequency", mhz, leastExposureMHz, mostExposureMHz, "MHz"); err != nil {
		return 0, err
	}
	switch {
	case mhz <= 2000:
		return mhz / 200, nil
	}
	return 10, nil
}

// ExposureDistanceM returns the distance in m at which an EIRP in dBm has the power
// density wm2, positive, in free space:
//
//	d = sqrt(EIRP/(4 pi S))
func ExposureDistanceM(eirpDBM, wm2 float64) float64 {
	watts := math.Pow(10, (eirpDBM-30)/10)
	return math.Sqrt(watts / (4 * math.Pi * wm2))
}

// exposure works out one end.
func (j *judge) exposure(eirpDBM float64) Exposure {
	e := Exposure{EIRPDBM: eirpDBM, PublicWM2: math.NaN(), DistanceM: math.NaN(), Source: exposureSource}
	level, err := PublicReferenceWM2(j.link.FrequencyGHz)
	if err != nil {
		j.report.miss(MissingExposure, "No exposure distance: "+err.Error()+".")
		return e
	}
	e.PublicWM2, e.DistanceM = level, ExposureDistanceM(eirpDBM, level)
	return e
}

// The codes of the cautions.
const (
	CautionHeight    = "work_at_height"
	CautionLightning = "lightning"
	CautionWind      = "wind_load"
	CautionLicence   = "licence"
	CautionExposure  = "exposure"
)

// caution adds the cautions. They are short, and defer to local codes and to people who
// are licensed for the work.
func (j *judge) caution() {
	cautions := []Statement{
		{CautionHeight, "Roofs and masts are for trained people with fall protection, under local rules."},
		{CautionLightning, "Mast, antenna and cable need earthing and surge protection under the local electrical code."},
		{CautionLicence, "Frequency, power and antenna may need a licence; the local regulator decides."},
		{CautionExposure, "Switch off before working in the beam; local exposure rules decide, the distance here only informs."},
	}
	if j.windLoaded() {
		cautions = append(cautions, Statement{CautionWind,
			"The larger antenna catches more wind: have the mast and its fixing checked by somebody qualified."})
	}
	j.report.Cautions = cautions
}

// windLoaded reports whether an option catches more wind than the antennas entered, or
// than the least option.
func (j *judge) windLoaded() bool {
	choice, largest := &j.report.Choice, windAreaM2(&j.link.A.Antenna)
	for _, o := range []*Option{choice.Same, choice.Narrow} {
		if o != nil && windAreaM2(&o.A.Antenna) > largest {
			return true
		}
	}
	return choice.Same != nil && choice.Narrow != nil &&
		windAreaM2(&choice.Narrow.A.Antenna) > windAreaM2(&choice.Same.A.Antenna)
}

// windAreaM2 is the area that an antenna shows to the wind: as stated, else its disc.
func windAreaM2(a *Antenna) float64 {
	if a.WindAreaM2 > 0 {
		return a.WindAreaM2
	}
	return math.Pi / 4 * a.DiameterM * a.DiameterM
}
