package profile

import "math"

const (
	// raiseSteps is how many steps of a raise make a metre.
	raiseSteps = 100
	// stepRounding keeps a cap of whole steps one.
	stepRounding = 1e-6
)

// raiseFor is the least raise through the lever, in metres up to capM and to the
// centimetre upward, with which the confidence reaches probability, between 0
// and 1. It is 0 where it is reached already, NaN where the cap is too low. The
// confidence with the raise has been computed and reaches the probability, and
// that with a centimetre less does not.
//
// The raise lies between two that are known in closed form: without the one, some
// sample alone is too likely to fail; with the other, the sum of the samples'
// probabilities to fail, which no correlation exceeds (Boole's inequality), is
// small enough.
func (c *errorChain) raiseFor(probability, capM float64, by lever, ws *confidenceScratch) float64 {
	if c.confidence(ws) >= probability {
		return 0
	}
	most := math.Floor(capM*raiseSteps + stepRounding)
	fails, holds := c.raiseBounds(probability, by)
	fails, holds = max(math.Ceil(fails*raiseSteps)-1, 0), math.Ceil(holds*raiseSteps)
	if !(fails < most) {
		return math.NaN()
	}
	s := raiseSearch{probability: probability, fails: fails, holds: min(max(holds, fails+1), most)}
	s.confidence = func(steps float64) float64 {
		return c.confidenceAfter(lift{steps / raiseSteps, by}, ws)
	}
	if !s.open(most) {
		return math.NaN()
	}
	return s.close() / raiseSteps
}

// raiseBounds gives a raise below which the confidence is less than
// probability, and one from which on it is at least that.
func (c *errorChain) raiseBounds(probability float64, by lever) (fails, holds float64) {
	judged := 0
	for _, m := range c.marginM {
		if !math.IsNaN(m) {
			judged++
		}
	}
	one, all := normalQuantile(probability), -normalQuantile((1-probability)/float64(judged))
	onA, onB, endsAlike := c.ends()
	for i, m := range c.marginM {
		if math.IsNaN(m) {
			continue
		}
		s := c.doubt(i, i <= onA, i >= onB, endsAlike)
		perMetre := 1 / by(s.distanceM/c.lengthM)
		fails = max(fails, (one*s.sigmaM-m)*perMetre)
		holds = max(holds, (all*s.sigmaM-m)*perMetre)
	}
	return fails, holds
}

// raiseSearch closes in on the least raise, counted in steps.
type raiseSearch struct {
	confidence   func(steps float64) float64
	probability  float64
	fails, holds float64
	// atFails and atHolds are the confidences there less the probability, in
	// normal quantiles, which a raise moves almost evenly; NaN if not computed.
	atFails, atHolds float64
}

// quantileAt is the confidence at steps less the probability, in normal
// quantiles.
func (s *raiseSearch) quantileAt(steps float64) float64 {
	const certain = 1 - 1e-12
	got := min(max(s.confidence(steps), 1-certain), certain)
	if got == s.probability {
		return 0
	}
	return normalQuantile(got) - normalQuantile(s.probability)
}

// try computes the confidence at steps and moves the bound on its side.
func (s *raiseSearch) try(steps float64) (holds bool) {
	at := s.quantileAt(steps)
	if at >= 0 {
		s.holds, s.atHolds = steps, at
	} else {
		s.fails, s.atFails = steps, at
	}
	return at >= 0
}

// open makes sure that the upper bound holds, for the confidence is an estimate,
// and is false where nothing up to most does.
func (s *raiseSearch) open(most float64) bool {
	if s.try(s.fails + 1) {
		return true
	}
	for reach := 1.0; !s.try(s.holds); reach *= 2 {
		if s.holds >= most {
			return false
		}
		s.holds = min(s.holds+reach, most)
	}
	return true
}

// close narrows the bounds to one step: by a straight line between them, and by
// halving where that has moved the same bound twice.
func (s *raiseSearch) close() float64 {
	for same, last := 0, false; s.holds-s.fails > 1; {
		next := s.fails + math.Ceil((s.holds-s.fails)*s.atFails/(s.atFails-s.atHolds))
		if same >= 2 {
			next, same = math.Floor((s.fails+s.holds)/2), 0
		}
		holds := s.try(min(max(next, s.fails+1), s.holds-1))
		if same++; holds != last {
			same, last = 1, holds
		}
	}
	return s.holds
}
