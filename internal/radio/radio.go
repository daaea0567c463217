package radio

import "slices"

// Radio describes one model of radio.
type Radio struct {
	// Name is unique in a register, 1 to 100 characters.
	Name string `json:"name"`
	// MinGHz and MaxGHz are the range of frequencies that it tunes.
	MinGHz float64 `json:"min_ghz"`
	MaxGHz float64 `json:"max_ghz"`
	// MinPowerDBM to MaxPowerDBM in steps of PowerStepDB is the transmit power
	// that can be set.
	MinPowerDBM float64 `json:"min_power_dbm"`
	MaxPowerDBM float64 `json:"max_power_dbm"`
	PowerStepDB float64 `json:"power_step_db"`
	// MaxInputDBM is the highest level that the receiver takes without
	// overload.
	MaxInputDBM float64 `json:"max_input_dbm"`
	// LossDB is what is lost inside it, between power meter and antenna port,
	// on each of transmit and receive.
	LossDB float64 `json:"loss_db,omitzero"`
	// Modulations are its working points, most robust first: threshold and
	// capacity both rise.
	Modulations []Modulation `json:"modulations"`
}

// Modulation is one working point of a radio.
type Modulation struct {
	Name         string  `json:"name"`
	ThresholdDBM float64 `json:"threshold_dbm"` // lowest usable received level
	CapacityMbps float64 `json:"capacity_mbps"`
	BandwidthMHz float64 `json:"bandwidth_mhz"`
	// MaxPowerDBM is the most power in it; nil is the radio's own.
	MaxPowerDBM *float64 `json:"max_power_dbm,omitempty"`
}

// Covers reports whether the radio tunes a frequency.
func (r Radio) Covers(frequencyGHz float64) bool {
	return frequencyGHz >= r.MinGHz && frequencyGHz <= r.MaxGHz
}

// ModulationAt returns the fastest modulation that works at a received level at the
// receiver in dBm: the last whose threshold the level reaches. It is false where none
// does.
func (r Radio) ModulationAt(levelDBM float64) (Modulation, bool) {
	for _, m := range slices.Backward(r.Modulations) {
		if levelDBM >= m.ThresholdDBM {
			return m, true
		}
	}
	return Modulation{}, false
}
