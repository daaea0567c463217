package radio

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"strings"
)

// The bounds of what is read from a file.
const (
	maxFileBytes   = 8 << 20
	maxFileEntries = 2000
)

// LineError is what is wrong with a file, and where.
type LineError struct {
	Line    int    // from 1; the line where the entry begins if no nearer one is known
	Pointer string // to the field, as in [Fault]; empty for the file as a whole
	Detail  string // what is wrong and what would be right
}

// Error is the line, the field and the detail.
func (e *LineError) Error() string {
	if e.Pointer == "" {
		return fmt.Sprintf("line %d: %s", e.Line, e.Detail)
	}
	return fmt.Sprintf("line %d: %s: %s", e.Line, e.Pointer, e.Detail)
}

// ParseAntennasJSON reads a list of antennas: a JSON array of objects with the fields
// of [Antenna]. Each is validated, and no two may share a name. The error joins a
// [LineError] for each thing wrong with the first antenna that cannot be used; its
// pointer begins with the number of the antenna in the list, from 0.
func ParseAntennasJSON(r io.Reader) ([]Antenna, error) {
	return parseList(r, antennaShape(), "antennas", func(a Antenna) (string, []Fault) { return a.Name, a.Validate() })
}

// ParseRadiosJSON reads a list of radios, as [ParseAntennasJSON] does antennas.
func ParseRadiosJSON(r io.Reader) ([]Radio, error) {
	return parseList(r, radioShape(), "radios", func(r Radio) (string, []Fault) { return r.Name, r.Validate() })
}

// parseList reads and validates a list. A field that is left out must not pass for a
// zero, and a misspelt one not for one left out, so the shape is checked first.
func parseList[T any](r io.Reader, s shape, what string, validate func(T) (string, []Fault)) ([]T, error) {
	text, err := readFile(r)
	if err != nil {
		return nil, err
	}
	entries, err := splitList(text, what)
	if err != nil {
		return nil, err
	}
	list, lines := make([]T, 0, len(entries)), map[string]int{}
	for i, e := range entries {
		line := lineAt(text, e.offset)
		entry, err := parseEntry[T](text, e, s, index(i))
		if err != nil {
			return nil, err
		}
		name, found := validate(entry)
		if first, ok := lines[name]; ok {
			found = append(found, Fault{"name", fmt.Sprintf("%.100q is that of the entry at line %d as well; give each its own", name, first)})
		}
		if len(found) > 0 {
			return nil, lineErrors(found, line, index(i))
		}
		list, lines[name] = append(list, entry), line
	}
	return list, nil
}

func lineErrors(found []Fault, line int, pointer string) error {
	all := make([]error, len(found))
	for i, f := range found {
		all[i] = &LineError{Line: line, Pointer: pointer + "/" + f.Pointer, Detail: f.Detail}
	}
	return errors.Join(all...)
}

// readFile reads all, within bounds, and drops a byte order mark.
func readFile(r io.Reader) ([]byte, error) {
	text, err := io.ReadAll(io.LimitReader(r, maxFileBytes+1))
	if err != nil {
		return nil, fmt.Errorf("reading the file: %w", err)
	}
	if len(text) > maxFileBytes {
		return nil, &LineError{Line: 1, Detail: fmt.Sprintf("the file is larger than %d MiB", maxFileBytes>>20)}
	}
	return bytes.TrimPrefix(text, []byte("\ufeff")), nil
}

// entry is one object of a list and where it begins.
type entry struct {
	raw    json.RawMessage
	offset int
}

func splitList(text []byte, what string) ([]entry, error) {
	var raw []json.RawMessage
	if err := json.Unmarshal(text, &raw); err != nil {
		return nil, jsonError(text, 0, "", err, "a list of "+what+" in square brackets")
	}
	switch {
	case raw == nil:
		return nil, &LineError{Line: 1, Detail: "the file is null; give a list of " + what + " in square brackets"}
	case len(raw) > maxFileEntries:
		return nil, &LineError{Line: 1, Detail: fmt.Sprintf("the file has %d %s; give at most %d", len(raw), what, maxFileEntries)}
	}
	entries, from := make([]entry, len(raw)), 0
	for i, part := range raw {
		// The parts stand in the text as they are and in this order, so the next
		// place that reads the same is theirs or another's that reads the same.
		from += max(bytes.Index(text[from:], part), 0)
		entries[i] = entry{part, from}
		from += len(part)
	}
	return entries, nil
}

func parseEntry[T any](text []byte, e entry, s shape, pointer string) (T, error) {
	var value T
	if at, detail := s.check(e.raw, pointer); detail != "" {
		return value, &LineError{Line: lineAt(text, e.offset), Pointer: at, Detail: detail}
	}
	if err := json.Unmarshal(e.raw, &value); err != nil {
		return value, jsonError(text, e.offset, pointer+"/", err, "another kind of value")
	}
	return value, nil
}

// jsonError says where in the text an error of the decoder is, which counted from an
// offset, and what would be right.
func jsonError(text []byte, offset int, pointer string, err error, want string) error {
	var syntax *json.SyntaxError
	var kind *json.UnmarshalTypeError
	switch {
	case errors.As(err, &syntax):
		return &LineError{Line: lineAt(text, offset+int(syntax.Offset)), Detail: "is not JSON: " + syntax.Error()}
	case errors.As(err, &kind):
		field := strings.TrimSuffix(pointer+strings.ReplaceAll(kind.Field, ".", "/"), "/")
		if name, ok := kindNames()[kind.Type.Kind().String()]; ok {
			want = name
		}
		return &LineError{
			Line: lineAt(text, offset+int(kind.Offset)), Pointer: field,
			Detail: "holds a " + kind.Value + "; give " + want,
		}
	}
	return &LineError{Line: lineAt(text, offset), Detail: err.Error()}
}

func kindNames() map[string]string {
	return map[string]string{"float64": "a number", "string": "text in quotes"}
}

// lineAt counts lines from 1.
func lineAt(text []byte, offset int) int {
	return 1 + bytes.Count(text[:min(max(offset, 0), len(text))], []byte("\n"))
}
