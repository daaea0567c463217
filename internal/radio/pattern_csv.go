package radio

import (
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"math"
	"slices"
	"strconv"
	"strings"
)

// csvHeader is the first line of a pattern's CSV.
const csvHeader = "plane,angle_deg,gain_db"

// ParsePatternCSV reads the tables of a pattern:
//
//	plane,angle_deg,gain_db
//	azimuth,-180,-30
//	elevation,-90,-25
//
// Each row is one point of a [PatternSource], by rising angle within its plane; the
// planes may mix. A byte order mark, lines that end in CRLF, blank lines and spaces
// around the fields are of no account; there are no comments. The tables are
// validated. The error is or joins a [LineError].
func ParsePatternCSV(r io.Reader) (PatternSource, error) {
	text, err := readFile(r)
	if err != nil {
		return PatternSource{}, err
	}
	rows := csv.NewReader(strings.NewReader(string(text)))
	rows.FieldsPerRecord, rows.TrimLeadingSpace, rows.ReuseRecord = -1, true, true
	if err := csvHead(rows); err != nil {
		return PatternSource{}, err
	}
	read := csvTables{cuts: PatternSource{}.cuts()}
	for {
		fields, err := rows.Read()
		if errors.Is(err, io.EOF) {
			return read.finish()
		}
		if err != nil {
			return PatternSource{}, csvError(err)
		}
		line, _ := rows.FieldPos(0)
		if err := read.row(fields, line); err != nil {
			return PatternSource{}, err
		}
	}
}

func csvHead(rows *csv.Reader) error {
	fields, err := rows.Read()
	if errors.Is(err, io.EOF) {
		return &LineError{Line: 1, Detail: "the file is empty; begin with " + csvHeader}
	}
	if err != nil {
		return csvError(err)
	}
	trim(fields)
	if got := strings.Join(fields, ","); !strings.EqualFold(got, csvHeader) {
		line, _ := rows.FieldPos(0)
		return &LineError{Line: line, Detail: fmt.Sprintf("the header is %.100q; begin with %s", got, csvHeader)}
	}
	return nil
}

func csvError(err error) error {
	if parse, ok := errors.AsType[*csv.ParseError](err); ok {
		return &LineError{Line: parse.Line, Detail: "is not CSV: " + parse.Err.Error()}
	}
	return fmt.Errorf("reading the file: %w", err)
}

func trim(fields []string) {
	for i := range fields {
		fields[i] = strings.TrimSpace(fields[i])
	}
}

// csvTables gathers the rows of both planes, and the lines that they came from.
type csvTables struct {
	cuts  [2]cut
	lines [2][]int
	last  int
}

func (t *csvTables) row(fields []string, line int) error {
	trim(fields)
	t.last = line
	if len(fields) == 1 && fields[0] == "" {
		return nil
	}
	if len(fields) != 3 {
		return &LineError{Line: line, Detail: fmt.Sprintf("has %d fields; give 3 as in %s", len(fields), csvHeader)}
	}
	plane := slices.IndexFunc(t.cuts[:], func(c cut) bool { return strings.EqualFold(c.plane, fields[0]) })
	if plane < 0 {
		return &LineError{Line: line, Pointer: "plane", Detail: fmt.Sprintf("%.40q is not a plane; give azimuth or elevation", fields[0])}
	}
	angle, err := csvNumber(fields[1], line, "angle_deg")
	if err != nil {
		return err
	}
	gain, err := csvNumber(fields[2], line, "gain_db")
	if err != nil {
		return err
	}
	if len(t.lines[plane]) >= maxRows {
		return &LineError{Line: line, Detail: fmt.Sprintf("is row %d of %s; give at most %d", maxRows+1, t.cuts[plane].plane, maxRows)}
	}
	t.cuts[plane].points = append(t.cuts[plane].points, PatternPoint{AngleDeg: angle, GainDB: gain})
	t.lines[plane] = append(t.lines[plane], line)
	return nil
}

// csvNumber reads a plain decimal number; strconv would take hexadecimal as well.
func csvNumber(text string, line int, field string) (float64, error) {
	value, err := strconv.ParseFloat(text, 64)
	if err != nil || math.IsInf(value, 0) || strings.Trim(text, "0123456789+-.eE") != "" {
		return 0, &LineError{Line: line, Pointer: field, Detail: fmt.Sprintf("%.40q is not a number; give one such as -12.5", text)}
	}
	return value, nil
}

// finish validates the tables.
func (t *csvTables) finish() (PatternSource, error) {
	var all []error
	for i, c := range t.cuts {
		for _, f := range c.check() {
			if f.row < 0 {
				all = append(all, &LineError{Line: max(t.last, 1), Pointer: c.plane, Detail: f.detail})
			} else {
				all = append(all, &LineError{Line: t.lines[i][f.row], Pointer: f.field, Detail: f.detail})
			}
		}
	}
	if len(all) > 0 {
		return PatternSource{}, errors.Join(all...)
	}
	return PatternSource{Azimuth: t.cuts[0].points, Elevation: t.cuts[1].points}, nil
}
