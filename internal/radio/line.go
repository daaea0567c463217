package radio

// Line is one line of a budget.
type Line struct {
	Code string
	// ValueDB has the sign with which it is added: a loss is negative.
	ValueDB float64
	Unit    Unit
	// Source says where the value comes from: a Recommendation, or as given.
	Source string
}

// Unit is that of a line.
type Unit string

// The units of the lines.
const (
	DBM Unit = "dbm"
	DB  Unit = "db"
	DBI Unit = "dbi"
)

// The codes of the lines, in the order in which they are added.
const (
	LineTransmitPower       = "transmit_power"
	LineTransmitRadioLoss   = "transmit_radio_loss"
	LineTransmitAttenuator  = "transmit_attenuator"
	LineTransmitFeederLoss  = "transmit_feeder_loss"
	LineTransmitOtherLoss   = "transmit_other_loss"
	LineTransmitGain        = "transmit_antenna_gain"
	LineTransmitMispointing = "transmit_mispointing"
	LineFreeSpace           = "free_space"
	LineGas                 = "gas"
	LineDiffraction         = "diffraction"
	LinePolarisation        = "polarisation"
	LineReceiveGain         = "receive_antenna_gain"
	LineReceiveMispointing  = "receive_mispointing"
	LineReceiveFeederLoss   = "receive_feeder_loss"
	LineReceiveOtherLoss    = "receive_other_loss"
	LineReceiveAttenuator   = "receive_attenuator"
	LineReceiveRadioLoss    = "receive_radio_loss"
)

// The sources of the lines.
const (
	asGiven           = "as given"
	freeSpaceSource   = "ITU-R P.525-5, free-space basic transmission loss, with the exact speed of light"
	gasSource         = "ITU-R P.676-13 Annex 1, line by line, times the path length (ITU-R P.530-19 eq 1)"
	slightGasSource   = gasSource + "; negligible below about 10 GHz"
	diffractionSource = "of the path, at the median k-factor (ITU-R P.526-16)"
	polarisationLoss  = "-20 log cos of the angle between the polarisations, bounded by the cross-polar " +
		"discrimination of the antennas (geometry; ITU-R F.1245-3 Annex 2 for the bound)"
)

// patternSource says where the gain off the axis comes from.
func patternSource(a *Antenna) string {
	switch a.Pattern.Reference {
	case F699:
		return "pattern of ITU-R F.699-8, as aimed"
	case F1245:
		return "pattern of ITU-R F.1245-3, as aimed"
	case F1336Omni:
		return "pattern of ITU-R F.1336-5 recommends 2, as aimed"
	case F1336Sector:
		return "pattern of ITU-R F.1336-5 recommends 3, as aimed"
	}
	return "pattern as given, as aimed"
}

// gasLineSource says what to think of the gases at a frequency.
func gasLineSource(frequencyGHz float64) string {
	if frequencyGHz < 10 {
		return slightGasSource
	}
	return gasSource
}

// lines returns the lines of one direction, in the order in which they are added.
func (j *judge) lines(from, to *end) []Line {
	polarisationDB := PolarisationLossDB(from.Polarisation, from.Antenna, to.Polarisation, to.Antenna)
	return []Line{
		{LineTransmitPower, from.powerDBM(), DBM, asGiven},
		{LineTransmitRadioLoss, -from.Radio.LossDB, DB, asGiven},
		{LineTransmitAttenuator, -from.AttenuatorDB, DB, asGiven},
		{LineTransmitFeederLoss, -from.FeederLossDB, DB, asGiven},
		{LineTransmitOtherLoss, -from.OtherLossDB, DB, asGiven},
		{LineTransmitGain, from.Antenna.GainDBI, DBI, asGiven},
		{LineTransmitMispointing, from.mispointingDB, DB, patternSource(&from.Antenna)},
		{LineFreeSpace, -j.loss.freeSpaceDB, DB, freeSpaceSource},
		{LineGas, -j.loss.gasDB, DB, gasLineSource(j.link.FrequencyGHz)},
		{LineDiffraction, -j.loss.diffractionDB, DB, diffractionSource},
		{LinePolarisation, -polarisationDB, DB, polarisationLoss},
		{LineReceiveGain, to.Antenna.GainDBI, DBI, asGiven},
		{LineReceiveMispointing, to.mispointingDB, DB, patternSource(&to.Antenna)},
		{LineReceiveFeederLoss, -to.FeederLossDB, DB, asGiven},
		{LineReceiveOtherLoss, -to.OtherLossDB, DB, asGiven},
		{LineReceiveAttenuator, -to.AttenuatorDB, DB, asGiven},
		{LineReceiveRadioLoss, -to.Radio.LossDB, DB, asGiven},
	}
}

// sum adds the lines in their order.
func sum(lines []Line) float64 {
	var level float64
	for i := range lines {
		level += lines[i].ValueDB
	}
	return level
}
