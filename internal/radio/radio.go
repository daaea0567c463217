package radio

// Radio describes one model of radio.
type Radio struct {
	// Name is unique in a register, 1 to 100 characters.
	Name string
	// MinGHz and MaxGHz are the range of frequencies that it tunes.
	MinGHz, MaxGHz float64
	// MinPowerDBM to MaxPowerDBM in steps of PowerStepDB is the transmit power
	// that can be set.
	MinPowerDBM, MaxPowerDBM, PowerStepDB float64
	// MaxInputDBM is the highest level that the receiver takes without
	// overload.
	MaxInputDBM float64
	// LossDB is what is lost inside it, between power meter and antenna port,
	// on each of transmit and receive.
	LossDB float64
	// Modulations are its working points, most robust first: threshold and
	// capacity both rise.
	Modulations []Modulation
}

// Modulation is one working point of a radio.
type Modulation struct {
	Name         string
	ThresholdDBM float64 // lowest usable received level
	CapacityMbps float64
	BandwidthMHz float64
	MaxPowerDBM  float64 // the most power in it; 0 is the radio's own
}
