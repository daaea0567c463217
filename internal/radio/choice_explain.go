package radio

import (
	"fmt"
	"math"
)

// explain says why no candidate does.
func (c *Choice) explain(s *search, candidates []Antenna) {
	best := -1
	for i := range candidates {
		if s.fits(&candidates[i], true, true) && (best < 0 || candidates[i].GainDBI > candidates[best].GainDBI) {
			best = i
		}
	}
	if best < 0 {
		c.Missing = append(c.Missing, Statement{MissingCandidate,
			"No candidate antenna is made for the frequency and the polarisations of both ends."})
		return
	}
	there, back := s.gainsDB(&candidates[best], &candidates[best])
	short := max(s.there.shortDB(there), s.back.shortDB(back))
	switch {
	case math.IsInf(short, 1):
		c.ShortDB = short
		c.Missing = append(c.Missing, Statement{MissingAvailability, fmt.Sprintf(
			"No margin meets an availability of %.6g %%: what the formulas can vouch for ends below it.",
			s.j.link.Target.AvailabilityPercent)})
	case short > 0:
		c.ShortDB = short
		c.Missing = append(c.Missing, Statement{MissingPower, fmt.Sprintf(
			"The largest candidate, %s, lacks %.1f dB at full power.", candidates[best].Name, short)})
	default:
		c.Missing = append(c.Missing, Statement{MissingWindow,
			"Every candidate that meets the margin overloads a receiver: thresholds and highest input level leave no room."})
	}
}

// shortDB returns what the direction lacks at its full power.
func (w *way) shortDB(gainDB float64) float64 {
	return w.thresholdDBM + w.need.marginDB() - gainDB - w.from.PowerAtMost(w.capDBM)
}
