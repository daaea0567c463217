package intake

import (
	"bytes"
	"fmt"
	"io"
	"math"

	"github.com/paulmach/orb"
)

// rows are the rows of a list in any format, up to the limit.
type rows struct {
	source
	left, limit int
}

// open begins to read a list that needs certain columns.
func open(r io.Reader, format Format, how Options, n needs) (*rows, error) {
	w := newWindow(r)
	if err := w.preamble(format); err != nil {
		return nil, err
	}
	from := &rows{left: how.MaxRows, limit: how.MaxRows}
	switch format {
	case CSV:
		c, err := newCSVRows(w, n)
		if err != nil {
			return nil, err
		}
		from.source = c
	case GeoJSON:
		from.source = &features{w: w, unknown: newUnknown()}
	case NDJSON:
		from.source = &objects{w: w, unknown: newUnknown()}
	default:
		return nil, fmt.Errorf("format is %q; it must be %s, %s or %s", format, CSV, GeoJSON, NDJSON)
	}
	return from, nil
}

func (r *rows) next(rec *record) error {
	if err := r.source.next(rec); err != nil {
		return err
	}
	if r.left == 0 {
		return &TooManyRowsError{Limit: r.limit, Line: rec.line}
	}
	r.left--
	return nil
}

// reading takes the values out of a record, and keeps the first fault.
type reading struct {
	*record
	id string
}

func (r *reading) fail(c column, format string, args ...any) {
	if r.problem == nil {
		r.refuse(c.String(), format, args...)
		r.problem.ID = r.id
	}
}

// number reads a number between limits; otherwise where the cell is empty.
func (r *reading) number(c column, low, high float64, unit string, otherwise float64) float64 {
	cell := r.cells[c]
	if len(cell) == 0 {
		return otherwise
	}
	value, fault := number(cell, r.decimalComma)
	switch {
	case fault != "":
		r.fail(c, "is %s, which %s", shown40(string(cell)), fault)
	case !(value >= low && value <= high):
		r.fail(c, "is %g; it must be %g to %g%s", value, low, high, unit)
	}
	return value
}

// need reports an empty cell that a row cannot do without.
func (r *reading) need(n needs) {
	for _, c := range n {
		if len(r.cells[c]) == 0 {
			r.fail(c, "is missing")
		}
	}
}

// text reads an id, a name or the like.
func (r *reading) text(c column) string {
	cell := r.cells[c]
	if len(cell) == 0 {
		return ""
	}
	if fault := textFault(cell); fault != "" {
		r.fail(c, "%s", fault)
		return ""
	}
	return string(cell)
}

// place reads the coordinates.
func (r *reading) place() orb.Point {
	lon := r.number(colLon, -180, 180, " degrees east", 0)
	lat := r.number(colLat, -90, 90, " degrees north", 0)
	if math.Abs(lat) > 90 && math.Abs(lat) <= 180 && math.Abs(lon) <= 90 && r.problem.Field == colLat.String() {
		r.problem.Detail += "; longitude and latitude may be swapped"
	}
	return orb.Point{lon + 0, lat + 0} // no negative zero: it is the same place
}

// height reads what an antenna stands on, and how high.
func (r *reading) height(metres float64, above HeightAbove) (float64, HeightAbove) {
	if cell := r.cells[colAbove]; len(cell) > 0 {
		stated, known := heightAbove(cell)
		if !known {
			r.fail(colAbove, "is %s; it must be ground, roof or sea_level", shown40(string(cell)))
		}
		above = stated
	}
	low, high, unit := heightRange(above)
	if len(r.cells[colHeight]) == 0 && !(metres >= low && metres <= high) {
		r.fail(colHeight, "is missing, and the %g m for rows without is not %g to %g%s", metres, low, high, unit)
	}
	return r.number(colHeight, low, high, unit, metres), above
}

// heightAbove knows the words of HeightAbove.
func heightAbove(word []byte) (HeightAbove, bool) {
	for _, known := range [...]HeightAbove{Ground, Roof, SeaLevel} {
		if sameName(word, string(known)) {
			return known, true
		}
	}
	return Ground, false
}

// heightRange is which antenna heights there may be.
func heightRange(above HeightAbove) (low, high float64, unit string) {
	switch above {
	case SeaLevel:
		return MinSeaLevelM, MaxSeaLevelM, " m above sea level"
	case Roof:
		return 0, MaxAntennaHeightM, " m above roof"
	case Ground:
	}
	return 0, MaxAntennaHeightM, " m above ground"
}

// polarisation reads one of three words, or none.
func (r *reading) polarisation() Polarisation {
	cell := r.cells[colPolarisation]
	if len(cell) == 0 {
		return ""
	}
	for _, known := range [...]Polarisation{Vertical, Horizontal, Slant} {
		if bytes.EqualFold(cell, []byte(known)) {
			return known
		}
	}
	r.fail(colPolarisation, "is %s; it must be vertical, horizontal or slant", shown40(string(cell)))
	return ""
}
