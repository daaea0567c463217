package intake

import (
	"errors"
	"fmt"
	"io"
	"iter"
)

// Candidates reads a list of candidates, row by row and in order. Needed are id,
// lon and lat; antenna_height_m and height_above may come from how, and name may
// be empty. Every row but a blank one is yielded, as a candidate or as the
// problem with it. A second candidate with an id is a problem that names the
// first; a second one at exactly the same place is a candidate with a warning.
//
// An error is yielded last, with a Row that holds only the line: a *ListError, a
// *TooManyRowsError, an error about how, or the wrapped failure of r. The rows
// before it stand.
//
// The sequence reads r and can be ranged over once, from one goroutine. What it
// yields may be kept.
func Candidates(r io.Reader, format Format, how Options) iter.Seq2[Row, error] {
	return func(yield func(Row, error) bool) {
		how, err := how.withDefaults()
		if err != nil {
			yield(Row{}, err)
			return
		}
		from, err := open(r, format, how, candidateNeeds())
		if err != nil {
			yield(Row{}, err)
			return
		}
		known := newSeen()
		rec := new(record)
		for {
			err := from.next(rec)
			if errors.Is(err, io.EOF) {
				return
			}
			if err != nil {
				yield(Row{Line: rec.line}, err)
				return
			}
			if !yield(candidateRow(rec, format, how, known), nil) {
				return
			}
		}
	}
}

// candidateRow judges one row of a list.
func candidateRow(rec *record, format Format, how Options, known *seen) Row {
	row := Row{Line: rec.line}
	in := reading{record: rec}
	if rec.problem == nil {
		row.Candidate = in.candidate(how)
	}
	if rec.problem == nil {
		if earlier := known.id(row.Candidate.ID, rec.line); earlier > 0 {
			in.fail(colID, "is that of %s already; every candidate needs its own", format.row(earlier))
		}
	}
	if row.Problem, row.Warnings = rec.problem, rec.warnings; row.Problem != nil {
		row.Candidate = Candidate{}
		return row
	}
	c := row.Candidate
	if earlier := known.place(c.Point(), rec.line); earlier > 0 {
		row.Warnings = append(row.Warnings, Warning{
			Line: rec.line, ID: c.ID, Field: colLon.String(),
			Detail: fmt.Sprintf("and lat are the place of %s as well", format.row(earlier)),
		})
	}
	if w, swapped := swapWarning(rec.line, c.ID, c.Point(), how.Inside); swapped {
		row.Warnings = append(row.Warnings, w)
	}
	return row
}

func (r *reading) candidate(how Options) Candidate {
	r.id = r.text(colID)
	r.need(candidateNeeds())
	place := r.place()
	c := Candidate{ID: r.id, Lon: place.Lon(), Lat: place.Lat()}
	c.AntennaHeightM, c.HeightAbove = r.height(how.AntennaHeightM, how.HeightAbove)
	r.cells[colName] = oneLine(r.cells[colName])
	c.Name = r.text(colName)
	return c
}
