package radio

import "math"

// need is the margin that a direction must have: that of the target, and enough for its
// availability. It learns where that is as it is asked, so that few margins are computed.
type need struct {
	fading *fading
	// leastDB is the target's margin.
	leastDB float64
	// outagePercent is what may be lost in a year; NaN asks for none.
	outagePercent float64
	// shortDB is the highest margin known not to do, enoughDB the lowest known to do.
	shortDB, enoughDB float64
}

// newNeed returns the need of the direction with the fading. Where the target asks for no
// availability, or none can be told, the margin alone counts.
func newNeed(target Target, f *fading) *need {
	n := &need{
		fading: f, leastDB: target.MarginDB, outagePercent: math.NaN(),
		shortDB: math.Inf(-1), enoughDB: math.Inf(1),
	}
	if target.AvailabilityPercent > 0 && f.known() {
		n.outagePercent = 100 - target.AvailabilityPercent
	}
	return n
}

// roundingPercent absorbs the rounding of 100 - 99.999.
const roundingPercent = 1e-9

// met reports whether a margin does.
func (n *need) met(marginDB float64) bool {
	switch {
	case !(marginDB >= n.leastDB) || marginDB <= n.shortDB:
		return false
	case marginDB >= n.enoughDB || math.IsNaN(n.outagePercent):
		return true
	}
	if outage, bound := n.fading.annual(marginDB); bound != AtLeast && outage <= n.outagePercent+roundingPercent {
		n.enoughDB = marginDB
		return true
	}
	n.shortDB = marginDB
	return false
}

// The search for the least margin: no more than the highest is thought of, to the
// nearest hundredth.
const (
	highestMarginDB = 200.0
	marginStepDB    = 0.01
)

// marginDB returns the least margin that does, +Inf if none does.
func (n *need) marginDB() float64 {
	if n.met(n.leastDB) {
		return n.leastDB
	}
	if !n.met(highestMarginDB) {
		return math.Inf(1)
	}
	low, high := max(n.leastDB, n.shortDB), n.enoughDB
	for high-low > marginStepDB {
		middle := (low + high) / 2
		if n.met(middle) {
			high = middle
		} else {
			low = middle
		}
	}
	return high
}
