package radio

import "fmt"

// What a table must be. The step keeps a table from hiding a lobe in a gap, the rows
// keep it to a tenth of a degree: common practice, no source.
const (
	maxRows     = 4000
	maxStepDeg  = 15.0
	flatDB      = 0.5   // a wider step is a shelf where the gain changes no more
	leastGainDB = -200. // lower is a mistake
	axisDB      = 0.1   // how near to 0 the gain on the axis must be
	seamDB      = 1.0   // how near the gains at -180 and 180 degrees must be
)

// cut is one table of a pattern.
type cut struct {
	plane    string
	limitDeg float64 // it reaches from minus this to this
	points   []PatternPoint
}

func (s PatternSource) cuts() [2]cut {
	return [...]cut{
		{plane: "azimuth", limitDeg: 180, points: s.Azimuth},
		{plane: "elevation", limitDeg: 90, points: s.Elevation},
	}
}

// tableFault is what is wrong with a table: with one field of a row, or with the whole
// where row is negative.
type tableFault struct {
	row           int
	field, detail string
}

func (f tableFault) pointer(plane string) string {
	if f.row < 0 {
		return "pattern/" + plane
	}
	return "pattern/" + plane + "/" + index(f.row) + "/" + f.field
}

// check returns the first thing wrong with each row, or else with the whole.
func (c cut) check() []tableFault {
	switch {
	case len(c.points) == 0:
		return c.whole("is missing; give rows from %g to %g degrees", -c.limitDeg, c.limitDeg)
	case len(c.points) > maxRows:
		return c.whole("has %d rows; give at most %d", len(c.points), maxRows)
	}
	var found []tableFault
	for i := range c.points {
		if field, detail := c.row(i); detail != "" {
			found = append(found, tableFault{i, field, detail})
		}
		if len(found) == maxFaults {
			return found
		}
	}
	if len(found) > 0 {
		return found
	}
	return c.ends()
}

// maxFaults is how many faults of one table are reported: more say the same.
const maxFaults = 10

func (c cut) whole(format string, args ...any) []tableFault {
	return []tableFault{{row: -1, detail: fmt.Sprintf(format, args...)}}
}

// row checks one row against its own bounds and the row before.
func (c cut) row(i int) (field, detail string) {
	p := c.points[i]
	if !(p.AngleDeg >= -c.limitDeg && p.AngleDeg <= c.limitDeg) {
		return "angle_deg", fmt.Sprintf("%s is not from %g to %g degrees", figure(p.AngleDeg), -c.limitDeg, c.limitDeg)
	}
	if !(p.GainDB >= leastGainDB && p.GainDB <= 0) {
		return "gain_db", fmt.Sprintf("%s is not from %g to 0 dB; give the gain relative to the axis", figure(p.GainDB), leastGainDB)
	}
	if i == 0 {
		return "", ""
	}
	before := c.points[i-1]
	step := p.AngleDeg - before.AngleDeg
	if step <= 0 {
		return "angle_deg", fmt.Sprintf("%s does not rise from the %s of the row before; give rows by rising angle",
			figure(p.AngleDeg), figure(before.AngleDeg))
	}
	change := max(p.GainDB-before.GainDB, before.GainDB-p.GainDB)
	if step > maxStepDeg && change > flatDB {
		return "angle_deg", fmt.Sprintf("leaves a gap of %s degrees after %s, in which the gain changes by %s dB; give a row at least every %g degrees",
			figure(step), figure(before.AngleDeg), figure(change), maxStepDeg)
	}
	return "", ""
}

// ends checks the reach of a table whose rows are sound, its seam and its axis.
func (c cut) ends() []tableFault {
	first, last := c.points[0], c.points[len(c.points)-1]
	if first.AngleDeg != -c.limitDeg || last.AngleDeg != c.limitDeg {
		return c.whole("reaches from %s to %s degrees; give rows from %g to %g",
			figure(first.AngleDeg), figure(last.AngleDeg), -c.limitDeg, c.limitDeg)
	}
	seam := max(first.GainDB-last.GainDB, last.GainDB-first.GainDB)
	if c.limitDeg == 180 && seam > seamDB {
		return c.whole("has %s dB at -180 and %s dB at 180 degrees, which are the same direction",
			figure(first.GainDB), figure(last.GainDB))
	}
	if axis := at(c.points, 0); axis < -axisDB {
		return c.whole("has %s dB at 0 degrees; give the gain relative to the axis, so that it is 0 there", figure(axis))
	}
	return nil
}

// How far below the axis a table may be at half the beamwidth, where it should be 3 dB:
// common practice, no source.
const leastEdgeDB, mostEdgeDB = 1.0, 6.0

// beam tells how the table contradicts a half-power beamwidth; empty if it does not.
func (c cut) beam(widthDeg float64) string {
	edge := -(at(c.points, -widthDeg/2) + at(c.points, widthDeg/2)) / 2
	if edge >= leastEdgeDB && edge <= mostEdgeDB {
		return ""
	}
	return fmt.Sprintf("%s degrees contradicts the table, which is %.1f dB below the axis at half of it; give the half-power (-3 dB) beamwidth",
		figure(widthDeg), edge)
}
