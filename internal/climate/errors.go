package climate

import (
	"fmt"
	"slices"
	"strings"
)

// FileError is what is wrong with a file of a folder of maps.
type FileError struct {
	// File is the name of the file inside the folder.
	File string
	// Line counts from 1; 0 means the file as a whole.
	Line int
	// Detail says what is wrong and what would be right.
	Detail string
}

// Error names the file, the line and what is wrong there.
func (e *FileError) Error() string {
	if e.Line == 0 {
		return e.File + " " + e.Detail
	}
	return fmt.Sprintf("%s line %d %s", e.File, e.Line, e.Detail)
}

// FieldError is one thing wrong with a settings file.
type FieldError struct {
	// Pointer is the JSON pointer (RFC 6901) of the field; empty for the whole document.
	Pointer string
	// Detail says what is wrong and what would be right.
	Detail string
}

// InvalidError is everything that is wrong with a settings file.
type InvalidError struct {
	Fields []FieldError
}

// Error lists the fields and what is wrong with them.
func (e *InvalidError) Error() string {
	texts := make([]string, len(e.Fields))
	for i, f := range e.Fields {
		place := f.Pointer
		if place == "" {
			place = "the document"
		}
		texts[i] = place + " " + f.Detail
	}
	return strings.Join(texts, "; ")
}

// mostFindings bounds how much is said about one file.
const mostFindings = 20

// findings collects field errors, the first mostFindings of them.
type findings []FieldError

func (f *findings) add(pointer, format string, args ...any) {
	if len(*f) < mostFindings {
		*f = append(*f, FieldError{Pointer: pointer, Detail: fmt.Sprintf(format, args...)})
	}
}

// err is nil if nothing was found.
func (f findings) err() error {
	if len(f) == 0 {
		return nil
	}
	return &InvalidError{Fields: slices.Clone(f)}
}

// invalid is the error of one field.
func invalid(pointer, format string, args ...any) error {
	var f findings
	f.add(pointer, format, args...)
	return f.err()
}
