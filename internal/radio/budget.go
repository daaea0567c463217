package radio

import (
	"math"

	"ridgehop/internal/itu/p525"
)

// Budget is one direction of the link.
type Budget struct {
	// Lines add up to ReceivedDBM exactly, in their order. Empty where the level is
	// unknown.
	Lines []Line
	// ReceivedDBM is the median level at the receiver, behind all losses.
	ReceivedDBM float64
	// EIRPDBM is on the axis of the transmit antenna, and ConductedDBM the power that
	// enters it.
	EIRPDBM, ConductedDBM float64
	// Margins are those of the receiver's modulations, most robust first.
	Margins []Margin
	// Best names the modulation of most capacity whose margin is that of the target;
	// empty if there is none.
	Best string
	// Target names the least modulation that carries the target's capacity; empty if
	// there is none. TargetMarginDB is its margin: the fade margin of the direction.
	Target         string
	TargetMarginDB float64
	Overload       Overload
}

// Margin is what a modulation has to spare.
type Margin struct {
	Modulation                 string
	CapacityMbps, BandwidthMHz float64
	// ThresholdDBM is the receiver's. LevelDBM is what arrives when the transmitter
	// turns down to the most that it sends in this modulation.
	ThresholdDBM, LevelDBM float64
	// MarginDB is the level above the threshold; NaN if unknown, or if the transmitter
	// does not have the modulation.
	MarginDB float64
	// Usable is true from 0 dB on.
	Usable bool
}

// path works out what is lost between the antennas.
func (j *judge) path() {
	link := j.link
	j.loss = pathLoss{
		freeSpaceDB:   p525.FreeSpaceLossDB(link.FrequencyGHz, link.lengthKM()),
		diffractionDB: link.Path.DiffractionDB,
	}
	specific, err := j.tools.gasDB(link.Climate.atmosphere(), link.FrequencyGHz)
	if err != nil {
		j.report.miss(MissingGas, "The attenuation of the gases is taken as 0 dB: "+err.Error()+".")
	}
	j.loss.gasDB = specific * link.lengthKM()
	if math.IsNaN(link.Path.DiffractionDB) {
		j.report.miss(MissingDiffraction,
			"The diffraction loss of the path is unknown, so no received level can be given.")
	}
}

// budget adds up one direction.
func (j *judge) budget(from, to *end) Budget {
	conducted := from.powerDBM() - from.lossDB() - from.AttenuatorDB
	budget := Budget{
		ReceivedDBM:    math.NaN(),
		ConductedDBM:   conducted,
		EIRPDBM:        conducted + from.Antenna.GainDBI,
		TargetMarginDB: math.NaN(),
	}
	lines := j.lines(from, to)
	if level := sum(lines); !math.IsNaN(level) {
		budget.Lines, budget.ReceivedDBM = lines, level
	}
	j.margins(&budget, from, to)
	return budget
}

// margins compares the level with every threshold of the receiver.
func (j *judge) margins(budget *Budget, from, to *end) {
	modulations := to.Radio.Modulations
	budget.Margins = make([]Margin, len(modulations))
	for i := range modulations {
		m := &modulations[i]
		down := max(0, from.powerDBM()-from.Radio.mostPowerDBM(m.Name, i))
		level := budget.ReceivedDBM - down
		margin := Margin{
			Modulation: m.Name, CapacityMbps: m.CapacityMbps, BandwidthMHz: m.BandwidthMHz,
			ThresholdDBM: m.ThresholdDBM, LevelDBM: level, MarginDB: level - m.ThresholdDBM,
		}
		margin.Usable = margin.MarginDB >= 0
		budget.Margins[i] = margin
		if margin.MarginDB >= j.link.Target.MarginDB {
			budget.Best = m.Name
		}
	}
	if i := j.target(&from.Radio, &to.Radio); i >= 0 {
		budget.Target, budget.TargetMarginDB = modulations[i].Name, budget.Margins[i].MarginDB
	}
}

// target returns the index, in the receiver's table, of the least modulation that both
// radios have and that carries the target's capacity; -1 if there is none.
func (j *judge) target(from, to *Radio) int {
	for i := range to.Modulations {
		m := &to.Modulations[i]
		if m.CapacityMbps >= j.link.Target.CapacityMbps && !math.IsNaN(from.mostPowerDBM(m.Name, i)) {
			return i
		}
	}
	return -1
}

// mostPowerDBM returns the most power in dBm that the radio sends in a modulation, NaN if
// it does not have it. The modulation is sought by name, first at the index at which the
// far radio has it.
func (r *Radio) mostPowerDBM(name string, index int) float64 {
	if index >= len(r.Modulations) || r.Modulations[index].Name != name {
		index = -1
		for i := range r.Modulations {
			if r.Modulations[i].Name == name {
				index = i
			}
		}
	}
	switch {
	case index < 0:
		return math.NaN()
	case r.Modulations[index].MaxPowerDBM == nil:
		return r.MaxPowerDBM
	}
	return min(*r.Modulations[index].MaxPowerDBM, r.MaxPowerDBM)
}
