package radio

import "math"

// roundingDB absorbs the rounding of sums of steps such as 0.1 dB.
const roundingDB = 1e-9

// PowerSteps returns every transmit power that can be set, in dBm, rising from the
// least to the most. The most is always among them, also where the steps do not meet
// it.
func (r Radio) PowerSteps() []float64 {
	steps := make([]float64, 0, r.powerIntervals()+1)
	for i := range r.powerIntervals() {
		steps = append(steps, r.powerAt(i))
	}
	return append(steps, r.MaxPowerDBM)
}

// NearestPower returns the transmit power that can be set nearest to one wanted, both
// in dBm; of two as near, the lower.
func (r Radio) NearestPower(wantedDBM float64) float64 {
	above := r.PowerAtLeast(wantedDBM)
	below := r.PowerAtMost(wantedDBM)
	if above-wantedDBM < wantedDBM-below-roundingDB || wantedDBM <= r.MinPowerDBM {
		return above
	}
	return below
}

// PowerAtLeast returns the least transmit power that can be set and is not below the
// one wanted, both in dBm; the most that the radio has where that is not enough, or
// where the wanted power is NaN.
func (r Radio) PowerAtLeast(wantedDBM float64) float64 {
	if wantedDBM <= r.MinPowerDBM {
		return r.MinPowerDBM
	}
	if !(wantedDBM < r.MaxPowerDBM) || r.powerIntervals() < 2 {
		return r.MaxPowerDBM
	}
	step := math.Ceil((wantedDBM-r.MinPowerDBM)/r.PowerStepDB - roundingDB)
	return r.powerAt(int(step))
}

// PowerAtMost returns the highest transmit power that can be set and is not above the
// one wanted, both in dBm; the least that the radio has where even that is above, or
// where the wanted power is NaN.
func (r Radio) PowerAtMost(wantedDBM float64) float64 {
	if wantedDBM >= r.MaxPowerDBM {
		return r.MaxPowerDBM
	}
	if !(wantedDBM > r.MinPowerDBM) || r.powerIntervals() < 2 {
		return r.MinPowerDBM
	}
	step := math.Floor((wantedDBM-r.MinPowerDBM)/r.PowerStepDB + roundingDB)
	return r.powerAt(int(step))
}

// powerAt is the power after a number of steps from the least.
func (r Radio) powerAt(step int) float64 {
	return min(r.MinPowerDBM+float64(step)*r.PowerStepDB, r.MaxPowerDBM)
}

// powerIntervals is how many steps lead from the least power to the most, the last
// perhaps a shorter one.
func (r Radio) powerIntervals() int {
	span := r.MaxPowerDBM - r.MinPowerDBM
	switch {
	case !(span > 0):
		return 0
	case !(r.PowerStepDB > 0) || r.PowerStepDB >= span:
		return 1
	}
	return int(min(math.Ceil(span/r.PowerStepDB-roundingDB), maxPowerSteps))
}

// maxPowerSteps bounds the steps of a radio that was not validated.
const maxPowerSteps = 1000
