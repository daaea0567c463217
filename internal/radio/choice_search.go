package radio

import "math"

// search looks for the least that does.
type search struct {
	j *judge
	// there is from A to B, back from B to A.
	there, back way
}

// way is one direction, its antennas aside.
type way struct {
	from         *Radio
	capDBM       float64 // the most power in the target's modulation
	lossDB       float64 // all that is lost but polarisation, which depends on the antennas
	thresholdDBM float64
	maxInputDBM  float64
	need         *need
}

// newSearch prepares both directions; false if the level cannot be told, or no modulation
// does.
func (j *judge) newSearch() (*search, bool) {
	a, b := &j.link.A, &j.link.B
	s := &search{j: j}
	var there, back bool
	s.there, there = j.newWay(a, b, &j.fadingA)
	s.back, back = j.newWay(b, a, &j.fadingB)
	if a.Polarisation == b.Polarisation {
		s.back.need = s.there.need // the same fading: what one learns the other knows
	}
	return s, there && back && !math.IsNaN(j.loss.totalDB())
}

func (j *judge) newWay(from, to *Terminal, f *fading) (way, bool) {
	i := j.target(&from.Radio, &to.Radio)
	if i < 0 {
		return way{}, false
	}
	m := &to.Radio.Modulations[i]
	return way{
		from: &from.Radio, capDBM: from.Radio.mostPowerDBM(m.Name, i),
		lossDB:       from.lossDB() + j.loss.totalDB() + to.lossDB(),
		thresholdDBM: m.ThresholdDBM, maxInputDBM: to.Radio.MaxInputDBM,
		need: newNeed(j.link.Target, f),
	}, true
}

// fits reports whether a candidate can stand at the ends named.
func (s *search) fits(c *Antenna, atA, atB bool) bool {
	link := s.j.link
	return c.Covers(link.FrequencyGHz) &&
		(!atA || c.Supports(link.A.Polarisation)) && (!atB || c.Supports(link.B.Polarisation))
}

// least returns the first option that a candidate gives.
func (s *search) least(candidates []Antenna, equip func(*Antenna) *Option) *Option {
	for i := range candidates {
		if option := equip(&candidates[i]); option != nil {
			return option
		}
	}
	return nil
}

func (s *search) equipIf(fits bool, a, b *Antenna) *Option {
	if !fits {
		return nil
	}
	return s.equip(a, b)
}

// mostAttenuatorDB bounds the attenuators that are thought of, in steps of a decibel:
// common practice, no source.
const mostAttenuatorDB = 60

// equip returns the antennas with the least power, and the least attenuator that they then
// need; nil if they do not do.
func (s *search) equip(a, b *Antenna) *Option {
	there, back := s.gainsDB(a, b)
	for attenuator := 0.0; attenuator <= mostAttenuatorDB; attenuator++ {
		powerA, overA, ok := s.there.least(there - attenuator)
		if !ok {
			return nil
		}
		powerB, overB, ok := s.back.least(back - attenuator)
		if !ok {
			return nil
		}
		if over := max(overA, overB); over > 0 {
			// No less than the excess can do; the loop adds the last step.
			attenuator = max(attenuator, attenuator+math.Ceil(over)-1)
			continue
		}
		return s.option(a, b, powerA, powerB, attenuator)
	}
	return nil
}

// gainsDB returns the level that each direction receives from 0 dBm.
func (s *search) gainsDB(a, b *Antenna) (there, back float64) {
	link := s.j.link
	gains := a.GainDBI + b.GainDBI
	there = gains - s.there.lossDB - PolarisationLossDB(link.A.Polarisation, *a, link.B.Polarisation, *b)
	back = gains - s.back.lossDB - PolarisationLossDB(link.B.Polarisation, *b, link.A.Polarisation, *a)
	return there, back
}

// least returns the least power that meets the need, and by how much it then
// overloads the receiver, 0 if it does not. It is false if no power does.
func (w *way) least(gainDB float64) (powerDBM, overDB float64, ok bool) {
	met := func(power float64) bool { return w.need.met(power + gainDB - w.thresholdDBM) }
	low, high := 0, w.from.powerIntervals()
	for high > 0 && w.from.powerAt(high) > w.capDBM+roundingDB {
		high = w.stepAtMost(high)
	}
	if !met(w.from.powerAt(high)) {
		return 0, 0, false
	}
	for low < high {
		middle := (low + high) / 2
		if met(w.from.powerAt(middle)) {
			high = middle
		} else {
			low = middle + 1
		}
	}
	power := w.from.powerAt(low)
	return power, max(0, power+gainDB-w.maxInputDBM), true
}

// stepAtMost returns the last power step below high that the modulation allows.
func (w *way) stepAtMost(high int) int {
	if !(w.from.PowerStepDB > 0) {
		return high - 1
	}
	step := int(math.Floor((w.capDBM-w.from.MinPowerDBM)/w.from.PowerStepDB + roundingDB))
	return max(0, min(step, high-1))
}

// option writes an option out. The attenuator goes where more power is sent, to
// make less noise there.
func (s *search) option(a, b *Antenna, powerA, powerB, attenuator float64) *Option {
	link := s.j.link
	there, back := s.gainsDB(a, b)
	levelB, levelA := powerA+there-attenuator, powerB+back-attenuator
	o := &Option{
		A: EndOption{
			Antenna: *a, PowerDBM: powerA, EIRPDBM: powerA - link.A.lossDB() + a.GainDBI,
			ReceivedDBM: levelA, MarginDB: levelA - s.back.thresholdDBM,
		},
		B: EndOption{
			Antenna: *b, PowerDBM: powerB, EIRPDBM: powerB - link.B.lossDB() + b.GainDBI,
			ReceivedDBM: levelB, MarginDB: levelB - s.there.thresholdDBM,
		},
	}
	end := &o.A
	if o.B.EIRPDBM > o.A.EIRPDBM {
		end = &o.B
	}
	end.AttenuatorDB = attenuator
	end.EIRPDBM -= attenuator
	return o
}
