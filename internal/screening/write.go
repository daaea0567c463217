package screening

import (
	"bytes"
	"encoding/json"
	"fmt"
	"io"

	"ridgehop/internal/screening/intake"
)

// Writer writes results as a list.
//
//   - CSV has one row a candidate: the best site in columns of the names that
//     Choice has in JSON, the next two in the same columns after second_ and
//     third_. Lines end as RFC 4180 has it, and no cell is a formula.
//   - NDJSON has one object a candidate, and on the last line {"summary": ...},
//     without which the list is not complete.
//   - GeoJSON has one feature a candidate, with the summary beside the features.
//
// Masts are rounded up to a centimetre, confidences and margins down to a
// thousandth, so that no rounding promises anything. Not safe for concurrent use.
type Writer struct {
	w      io.Writer
	format intake.Format
	rows   int
	line   bytes.Buffer
	json   *json.Encoder // into line
}

// NewWriter writes to w. Where it already holds the results of some rows, they
// are gone on from; otherwise what comes before the first row is written with it.
func NewWriter(w io.Writer, format intake.Format, already int) (*Writer, error) {
	switch format {
	case intake.CSV, intake.NDJSON, intake.GeoJSON:
	default:
		return nil, fmt.Errorf("format is %q; it must be %s, %s or %s", format, intake.CSV, intake.NDJSON, intake.GeoJSON)
	}
	out := &Writer{w: w, format: format, rows: already}
	out.json = json.NewEncoder(&out.line)
	out.json.SetEscapeHTML(false)
	return out, nil
}

// Put writes one result, in one piece. The error is that of w.
func (w *Writer) Put(r *Result) error {
	w.line.Reset()
	w.head()
	w.rows++
	switch w.format {
	case intake.CSV:
		w.csvRow(r)
	case intake.GeoJSON:
		if err := w.json.Encode(featureOf(r)); err != nil {
			return err
		}
		w.line.Truncate(w.line.Len() - 1) // the line end follows the comma
	case intake.NDJSON:
		if err := w.json.Encode(rowOf(r)); err != nil {
			return err
		}
	}
	_, err := w.line.WriteTo(w.w)
	return err
}

// head is what stands between the rows before and the next one.
func (w *Writer) head() {
	first := w.rows == 0
	switch {
	case w.format == intake.CSV && first:
		w.csvHeader()
	case w.format == intake.GeoJSON && first:
		w.line.WriteString(`{"type":"FeatureCollection","features":[` + "\n")
	case w.format == intake.GeoJSON:
		w.line.WriteString(",\n")
	}
}

// Close writes what follows the last row. It does not close w.
func (w *Writer) Close(s Summary) error {
	w.line.Reset()
	if w.rows == 0 {
		w.head()
	}
	switch w.format {
	case intake.GeoJSON:
		w.line.WriteString("\n],\"summary\":")
		if err := w.json.Encode(s); err != nil {
			return err
		}
		w.line.Truncate(w.line.Len() - 1)
		w.line.WriteString("}\n")
	case intake.NDJSON:
		if err := w.json.Encode(map[string]Summary{"summary": s}); err != nil {
			return err
		}
	case intake.CSV:
	}
	_, err := w.line.WriteTo(w.w)
	return err
}
