package radio

import (
	"math"

	"ridgehop/internal/itu/p676"
)

// Link is what the radio half is asked: a judged path, and what stands at its
// ends.
type Link struct {
	FrequencyGHz float64
	LengthM      float64
	Path         PathFigures
	A, B         Terminal
	// Target is what must be met; zero values ask for a working link alone.
	Target Target
	// Climate is what is known of the weather and air; unknown parts leave
	// their answers out and say so.
	Climate Climate
	// Limits are the operator's own.
	Limits []Limit
	// Neighbours are other sites that the link might disturb.
	Neighbours []Neighbour
	// Candidates are the antennas among which the choice looks, in the order from
	// least to most. Nil is the catalogue; empty but not nil asks for no choice.
	Candidates []Antenna
}

// PathFigures are what the judge of the path found.
type PathFigures struct {
	Located                  bool    // azimuths are known
	AzimuthADeg, AzimuthBDeg float64 // true, from each end to the other
	TiltADeg, TiltBDeg       float64 // elevation of the far antenna, up positive, at k 4/3
	AntennaAM, AntennaBM     float64 // above mean sea level
	GroundAM, GroundBM       float64
	MeanTerrainM             float64 // of the profile, above mean sea level
	DiffractionDB            float64 // at the median k; NaN if unknown
}

// Terminal is one end: a radio, an antenna and how it is set up.
type Terminal struct {
	Radio   Radio
	Antenna Antenna
	// Polarisation in which it is used.
	Polarisation Polarisation
	// AimAzimuthDeg and AimTiltDeg are where the antenna points: true azimuth,
	// and elevation with up positive; NaN is at the far end.
	AimAzimuthDeg, AimTiltDeg float64
	// PowerDBM is the transmit power; NaN is the radio's most.
	PowerDBM float64
	// FeederLossDB is lost between radio and antenna; OtherLossDB is anything
	// else that the caller counts.
	FeederLossDB, OtherLossDB float64
	// AttenuatorDB is put before the receiver and transmitter.
	AttenuatorDB float64
}

// Target is what the link must meet in both directions.
type Target struct {
	CapacityMbps float64 // the least modulation of this capacity must work; 0 is the most robust one
	MarginDB     float64 // to that modulation's threshold
	// AvailabilityPercent of the year, both directions; 0 asks for none.
	AvailabilityPercent float64
}

// Climate is what is known of rain and clear-air fading. NaN is unknown.
type Climate struct {
	LogK, DN75   float64 // of the P.530-19 multipath method
	DN1          float64 // of the quick method, N units/km
	RainRateMMH  float64 // exceeded 0.01 % of the average year
	RainEdition  int     // of P.530: 17 or 19; 0 is 19
	DryOrCold    bool    // which of P.841's two rain climates
	TemperatureK float64 // of the air; NaN is 288.15
	PressureHPA  float64 // of dry air; NaN is 1013.25
	VapourGM3    float64 // water vapour density; NaN is 7.5
}

// Limit is a power limit that the operator entered. It only warns.
type Limit struct {
	MinGHz, MaxGHz float64
	MaxEIRPDBM     float64 // NaN is none
	// MaxConductedDBM is of the power that enters the antenna; NaN is none.
	MaxConductedDBM float64
	Note            string
	Date            string
}

// Neighbour is a site that may hear the link.
type Neighbour struct {
	Name          string
	DistanceAM    float64 // from A
	AzimuthADeg   float64 // from A, true
	ElevationADeg float64 // from A, up positive
	DistanceBM    float64
	AzimuthBDeg   float64
	ElevationBDeg float64
	GainDBI       float64      // of its antenna towards the link; 0 if not known
	Polarisation  Polarisation // empty if not known
}

// UnknownClimate returns the climate of which nothing is known: an answer that needs
// one of its figures is left out. Fill in what is known.
func UnknownClimate() Climate {
	unknown := math.NaN()
	return Climate{
		LogK: unknown, DN75: unknown, DN1: unknown, RainRateMMH: unknown,
		TemperatureK: unknown, PressureHPA: unknown, VapourGM3: unknown,
	}
}

// atmosphere is the air along the path, with the standard's figures for what is unknown.
func (c Climate) atmosphere() p676.Atmosphere {
	air := p676.Standard()
	if !math.IsNaN(c.PressureHPA) {
		air.DryPressureHPA = c.PressureHPA
	}
	if !math.IsNaN(c.TemperatureK) {
		air.TemperatureK = c.TemperatureK
	}
	if !math.IsNaN(c.VapourGM3) {
		air.VapourDensityGM3 = c.VapourGM3
	}
	return air
}

// lengthKM is the path length in km.
func (l *Link) lengthKM() float64 { return l.LengthM / 1000 }

// powerDBM is the transmit power in dBm.
func (t *Terminal) powerDBM() float64 {
	if math.IsNaN(t.PowerDBM) {
		return t.Radio.MaxPowerDBM
	}
	return t.PowerDBM
}

// lossDB is what is lost in dB between the radio's power meter and the antenna, the
// attenuator aside.
func (t *Terminal) lossDB() float64 {
	return t.Radio.LossDB + t.FeederLossDB + t.OtherLossDB
}
