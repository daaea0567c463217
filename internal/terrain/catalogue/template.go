package catalogue

import (
	"errors"
	"fmt"
	"slices"
	"strings"
)

// Cell is a degree of the earth by its south-west corner, in whole degrees: Lon
// is -180 to 179, Lat -90 to 89.
type Cell struct{ Lon, Lat int }

// Bounds limit cells, in whole degrees: West < East within -180 to 180, South <
// North within -90 to 90.
type Bounds struct{ West, South, East, North int }

// Earth is the bounds of everything.
func Earth() Bounds { return Bounds{West: -180, South: -90, East: 180, North: 90} }

// Template names one raster for each cell of its bounds. Safe for concurrent use.
type Template struct {
	parts  []part
	cells  Bounds
	remote bool
}

// part is literal text, or the field of a cell.
type part struct {
	text  string
	field string
}

// fieldNames are what may stand in braces.
func fieldNames() []string {
	return []string{"ns", "lat", "ew", "lon", "ns:lower", "ew:lower"}
}

// NewTemplate makes a template of an absolute or remote path with {ns}, {lat},
// {ew} and {lon} in it: N or S, two digits, E or W, three digits, of the cell's
// south and west edges; {ns:lower} and {ew:lower} are n or s, e or w. All four
// must occur, once or more. Whether the path is allowed is not looked at.
func NewTemplate(path string, cells Bounds) (*Template, error) {
	parts, err := partsOf(path)
	if err != nil {
		return nil, err
	}
	return &Template{parts: parts, cells: cells, remote: Remote(path)}, nil
}

// partsOf cuts a path at its fields; errors go on from the word "it".
func partsOf(path string) ([]part, error) {
	var parts []part
	for path != "" {
		literal, rest, braced := strings.Cut(path, "{")
		if strings.Contains(literal, "}") {
			return nil, errors.New("it has a } without a { before it")
		}
		parts = append(parts, part{text: literal})
		if !braced {
			break
		}
		field, after, closed := strings.Cut(rest, "}")
		if !closed {
			return nil, errors.New("it has a { without a } after it")
		}
		if !slices.Contains(fieldNames(), field) {
			return nil, fmt.Errorf("it has the field {%s}; the fields are {%s}", field, strings.Join(fieldNames(), "}, {"))
		}
		parts = append(parts, part{field: field})
		path = after
	}
	return parts, complete(parts)
}

// complete wants all four fields: without one, several cells share a file.
func complete(parts []part) error {
	for _, need := range fieldNames()[:4] {
		has := func(p part) bool { return p.field == need || p.field == need+":lower" }
		if !slices.ContainsFunc(parts, has) {
			return fmt.Errorf("it lacks {%s}; {ns}, {lat}, {ew} and {lon} must all occur", need)
		}
	}
	return nil
}

// Path is where the raster of the cell lies: an absolute path on disk, or a
// remote one. It means nothing for a cell that is not on the earth.
func (t *Template) Path(c Cell) string {
	var b strings.Builder
	for _, p := range t.parts {
		b.WriteString(p.text)
		b.WriteString(c.field(p.field))
	}
	return b.String()
}

func (c Cell) field(name string) string {
	switch name {
	case "ns":
		return side(c.Lat, "N", "S")
	case "ns:lower":
		return side(c.Lat, "n", "s")
	case "lat":
		return fmt.Sprintf("%02d", max(c.Lat, -c.Lat))
	case "ew":
		return side(c.Lon, "E", "W")
	case "ew:lower":
		return side(c.Lon, "e", "w")
	case "lon":
		return fmt.Sprintf("%03d", max(c.Lon, -c.Lon))
	}
	return ""
}

func side(degrees int, positive, negative string) string {
	if degrees < 0 {
		return negative
	}
	return positive
}

// Cells bounds the cells that the source may have; not each need be there.
func (t *Template) Cells() Bounds { return t.cells }

// Covers reports whether the cell lies within the bounds.
func (t *Template) Covers(c Cell) bool {
	b := t.cells
	return c.Lon >= b.West && c.Lon < b.East && c.Lat >= b.South && c.Lat < b.North
}

// Remote reports whether the rasters lie on another machine.
func (t *Template) Remote() bool { return t.remote }
