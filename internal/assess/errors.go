package assess

import (
	"fmt"
	"strings"
)

// FieldError is one thing wrong with a request: the field, by JSON pointer
// (RFC 6901), and what would be right.
type FieldError struct {
	Pointer string
	Detail  string
}

// InvalidError means a request that cannot be judged as it stands.
type InvalidError struct {
	Fields []FieldError
}

func (e *InvalidError) Error() string {
	texts := make([]string, len(e.Fields))
	for i, f := range e.Fields {
		texts[i] = f.Pointer + " " + f.Detail
	}
	return strings.Join(texts, "; ")
}

// findings collects field errors.
type findings []FieldError

func (f *findings) add(pointer, format string, args ...any) {
	*f = append(*f, FieldError{Pointer: pointer, Detail: fmt.Sprintf(format, args...)})
}

// within checks that a number is finite and in a range.
func (f *findings) within(pointer string, value, low, high float64, unit string) {
	if !(value >= low && value <= high) {
		f.add(pointer, "is %g; it must be %g to %g%s", value, low, high, unit)
	}
}

// err is nil if nothing was found.
func (f findings) err() error {
	if len(f) == 0 {
		return nil
	}
	return &InvalidError{Fields: f}
}

// invalid is the error of one field.
func invalid(pointer, format string, args ...any) error {
	var f findings
	f.add(pointer, format, args...)
	return f.err()
}
