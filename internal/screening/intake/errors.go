package intake

import (
	"errors"
	"fmt"
	"io"
)

// ListError means that a list cannot be read, or not to its end, because of how
// it is written. The text says where, and what would be right.
type ListError struct {
	// Line is where it was noticed, from 1; in GeoJSON the number of the
	// feature. 0 is the list as a whole.
	Line   int
	Detail string
}

func (e *ListError) Error() string { return e.Detail }

// TooManyRowsError means that a list has more rows than are read. What comes
// after the limit is left unread.
type TooManyRowsError struct {
	Limit int
	// Line is that of the first row over the limit; in GeoJSON the number of
	// its feature.
	Line int
}

func (e *TooManyRowsError) Error() string {
	return fmt.Sprintf("the list has more than %d rows, the limit: split it into several", e.Limit)
}

// unreadable is the error of a list at a row, 0 for the whole.
func unreadable(f Format, row int, format string, args ...any) error {
	detail := fmt.Sprintf(format, args...)
	if row > 0 {
		detail = f.row(row) + " " + detail
	}
	return &ListError{Line: row, Detail: detail}
}

// broken is the error of a reader that failed at a row, or of JSON that ends too
// early, which is io.EOF.
func broken(f Format, row int, err error) error {
	if errors.Is(err, io.EOF) {
		return &ListError{Line: row, Detail: "the list ends before its JSON is complete: it was cut off"}
	}
	return fmt.Errorf("reading %s: %w", f.row(row), err)
}
