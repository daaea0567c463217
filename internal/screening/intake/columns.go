package intake

import (
	"fmt"
	"slices"
	"strings"
)

// column is one of the columns that are read.
type column int

const (
	colID column = iota
	colName
	colLon
	colLat
	colHeight
	colAbove
	colFrequency
	colPolarisation
	colRange
	colRangeKM
	colAzimuth
	colWidth
	colTilt
	colAntenna
	colRadio
	columnCount
	unread column = -1
)

// columnNames are what each column may be called, the name that wins first. A
// list may have x and y of some grid beside lon and lat.
var columnNames = [columnCount][]string{
	colID:           {"id"},
	colName:         {"name"},
	colLon:          {"lon", "longitude", "lng", "x"},
	colLat:          {"lat", "latitude", "y"},
	colHeight:       {"antenna_height_m", "height_m", "height"},
	colAbove:        {"height_above"},
	colFrequency:    {"frequency_ghz"},
	colPolarisation: {"polarisation", "polarization"},
	colRange:        {"range_m"},
	colRangeKM:      {"range_km"},
	colAzimuth:      {"azimuth_deg", "azimuth"},
	colWidth:        {"width_deg", "beamwidth_deg"},
	colTilt:         {"tilt_deg"},
	colAntenna:      {"antenna"},
	colRadio:        {"radio"},
}

func (c column) String() string { return columnNames[c][0] }

// needs are the columns that a list cannot do without.
type needs []column

func candidateNeeds() needs { return needs{colID, colLon, colLat} }
func siteNeeds() needs      { return needs{colID, colLon, colLat, colHeight} }

// lookUp finds the column with a name, and how early the name stands among its
// names: the earlier one wins.
func lookUp(name []byte) (c column, rank int) {
	for c := range columnCount {
		for rank, known := range columnNames[c] {
			if sameName(name, known) {
				return c, rank
			}
		}
	}
	return unread, 0
}

// sameName compares a name in a list with a known one: letter case does not
// count, and a space or a hyphen may stand for an underscore.
func sameName(name []byte, known string) bool {
	if len(name) != len(known) {
		return false
	}
	for i := range name {
		c := name[i]
		switch {
		case c >= 'A' && c <= 'Z':
			c += 'a' - 'A'
		case c == ' ' || c == '-':
			c = '_'
		}
		if c != known[i] {
			return false
		}
	}
	return true
}

// missing describes the columns of n that were not found.
func (n needs) missing(found []column) string {
	var out []string
	for _, c := range n {
		if slices.Contains(found, c) {
			continue
		}
		text := c.String()
		if also := columnNames[c][1:]; len(also) > 0 {
			text += " (or " + strings.Join(also, ", ") + ")"
		}
		out = append(out, text)
	}
	return strings.Join(out, ", ")
}

// namedAtMost is how many names a message lists.
const namedAtMost = 10

// listed writes names for a message, the first ones of many.
func listed(names []string) string {
	shown := make([]string, 0, namedAtMost)
	for _, name := range names[:min(namedAtMost, len(names))] {
		shown = append(shown, shown40(name))
	}
	text := strings.Join(shown, ", ")
	if more := len(names) - namedAtMost; more > 0 {
		text += fmt.Sprintf(" and %d more", more)
	}
	return text
}

// record is one row as text, its cells trimmed. The cells are valid until the
// next one is read.
type record struct {
	line    int
	cells   [columnCount][]byte // empty where not stated
	problem *RowProblem         // why there are no cells
	// decimalComma says that numbers may be written with one.
	decimalComma bool
	warnings     []Warning
}

// reset makes the record that of a row of which nothing is known yet.
func (r *record) reset(line int) { *r = record{line: line} }

// refuse makes the record a problem of its row, or of one field of it.
func (r *record) refuse(field, format string, args ...any) {
	r.problem = &RowProblem{Line: r.line, Field: field, Detail: fmt.Sprintf(format, args...)}
}

// source yields the rows of one format, blank ones aside.
type source interface {
	// next reads one row. The error is io.EOF at the end; any other ends the
	// list as well.
	next(*record) error
}
