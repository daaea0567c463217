package radio

// maxModulations is how many working points a radio may have.
const maxModulations = 64

// Validate returns what is wrong with the radio; nothing where it can be used.
func (r Radio) Validate() []Fault {
	var f faults
	f.name("name", r.Name)
	f.frequencies(r.MinGHz, r.MaxGHz)
	powered := r.validatePower(&f)
	input := f.between("max_input_dbm", r.MaxInputDBM, -80, 40, " dBm")
	f.between("loss_db", r.LossDB, 0, 50, " dB")
	switch {
	case len(r.Modulations) == 0:
		f.add("modulations", "is empty; give at least one, the most robust first")
		return f
	case len(r.Modulations) > maxModulations:
		f.add("modulations", "has %d entries; give at most %d", len(r.Modulations), maxModulations)
		return f
	}
	for i := range r.Modulations {
		r.validateModulation(&f, i, powered)
	}
	last := r.Modulations[len(r.Modulations)-1].ThresholdDBM
	if input && r.MaxInputDBM <= last {
		f.add("max_input_dbm", "%s is not above the highest threshold, which is %s dBm", figure(r.MaxInputDBM), figure(last))
	}
	return f
}

// The transmit powers in dBm that a radio may have.
const leastPowerDBM, mostPowerDBM = -60.0, 60.0

// validatePower answers whether the range of power is one.
func (r Radio) validatePower(f *faults) bool {
	low := f.between("min_power_dbm", r.MinPowerDBM, leastPowerDBM, mostPowerDBM, " dBm")
	high := f.between("max_power_dbm", r.MaxPowerDBM, leastPowerDBM, mostPowerDBM, " dBm")
	span := r.MaxPowerDBM - r.MinPowerDBM
	if low && high && span < 0 {
		f.add("max_power_dbm", "%s is below min_power_dbm, which is %s", figure(r.MaxPowerDBM), figure(r.MinPowerDBM))
		return false
	}
	switch {
	case !low || !high:
		return false
	case span == 0 && r.PowerStepDB == 0: // a fixed power has no steps
	case !(r.PowerStepDB > 0):
		f.add("power_step_db", "%s is not above 0 dB", figure(r.PowerStepDB))
	case span > 0 && r.PowerStepDB > span+roundingDB:
		f.add("power_step_db", "%s is wider than the range of power, which is %s dB", figure(r.PowerStepDB), figure(span))
	case span/r.PowerStepDB > maxPowerSteps:
		f.add("power_step_db", "%s makes more than %d steps", figure(r.PowerStepDB), maxPowerSteps)
	}
	return true
}

// validateModulation checks one modulation against the one before and, where the
// radio's power is sound, against that.
func (r Radio) validateModulation(f *faults, i int, powered bool) {
	m, at := r.Modulations[i], "modulations/"+index(i)+"/"
	f.name(at+"name", m.Name)
	threshold := f.between(at+"threshold_dbm", m.ThresholdDBM, -160, 0, " dBm")
	capacity := f.positive(at+"capacity_mbps", m.CapacityMbps, 1e6, " Mbit/s")
	f.positive(at+"bandwidth_mhz", m.BandwidthMHz, 2e4, " MHz")
	if powered && m.MaxPowerDBM != nil {
		f.between(at+"max_power_dbm", *m.MaxPowerDBM, r.MinPowerDBM, r.MaxPowerDBM, " dBm, the radio's own range")
	}
	for before, other := range r.Modulations[:i] {
		if other.Name == m.Name {
			f.add(at+"name", "is that of modulation %d as well; give each its own", before)
		}
	}
	if i == 0 {
		return
	}
	before := r.Modulations[i-1]
	if threshold && m.ThresholdDBM <= before.ThresholdDBM {
		f.add(at+"threshold_dbm", "%s does not rise from the %s before; give the most robust modulation first",
			figure(m.ThresholdDBM), figure(before.ThresholdDBM))
	}
	if capacity && m.CapacityMbps <= before.CapacityMbps {
		f.add(at+"capacity_mbps", "%s does not rise from the %s before, though the threshold should buy capacity",
			figure(m.CapacityMbps), figure(before.CapacityMbps))
	}
}
