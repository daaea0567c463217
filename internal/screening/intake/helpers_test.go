package intake

import (
	"io"
	"iter"
	"strings"
	"testing"
	"testing/iotest"
)

// read collects a list of candidates, and the error that ends it.
func read(t *testing.T, text string, format Format, how Options) (rows []Row, err error) {
	t.Helper()
	return collect(t, Candidates(strings.NewReader(text), format, how))
}

func collect(t *testing.T, from iter.Seq2[Row, error]) (rows []Row, err error) {
	t.Helper()
	for row, failure := range from {
		if err != nil {
			t.Fatal("got a row after the error, want none")
		}
		if err = failure; err == nil {
			rows = append(rows, row)
		}
	}
	return rows, err
}

// problems writes the problems of rows as "line [id] field detail".
func problems(rows []Row) (out []RowProblem) {
	for _, row := range rows {
		if row.Problem != nil {
			out = append(out, *row.Problem)
		}
	}
	return out
}

func warnings(rows []Row) (out []Warning) {
	for _, row := range rows {
		out = append(out, row.Warnings...)
	}
	return out
}

func ids(rows []Row) (out []string) {
	for _, row := range rows {
		if row.Problem == nil {
			out = append(out, row.Candidate.ID)
		}
	}
	return out
}

// byByte hands out one byte at a time, so that every record crosses a read.
func byByte(text string) io.Reader { return iotest.OneByteReader(strings.NewReader(text)) }

// message is the text of an error, or nothing.
func message(err error) string {
	if err == nil {
		return ""
	}
	return err.Error()
}
