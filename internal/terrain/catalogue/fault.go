package catalogue

import (
	"fmt"
	"slices"
	"strconv"
	"strings"
)

// Fault is one thing wrong with a catalogue.
type Fault struct {
	// File is the base name of the catalogue.
	File string
	// Line counts from 1; 0 where the fault has none.
	Line int
	// Key leads to the value, such as "sources[1].kind"; empty where the file as
	// a whole is at fault.
	Key string
	// Detail goes on from the key: what is wrong, and what would be right.
	Detail string
}

// String is the fault as a line for the operator.
func (f Fault) String() string {
	var b strings.Builder
	b.WriteString(f.File)
	if f.Line > 0 {
		fmt.Fprintf(&b, " line %d", f.Line)
	}
	b.WriteString(": ")
	if f.Key != "" {
		b.WriteString(f.Key + " ")
	}
	b.WriteString(f.Detail)
	return b.String()
}

// FaultsError is all that is wrong with a catalogue, by line. It is never empty.
type FaultsError []Fault

// Error is a line for each fault.
func (e FaultsError) Error() string {
	lines := make([]string, len(e))
	for i, f := range e {
		lines[i] = f.String()
	}
	return strings.Join(lines, "\n")
}

// maxFaults is where telling of faults stops: nobody reads on.
const maxFaults = 1000

// reader reads one catalogue and gathers what is wrong with it.
type reader struct {
	file   string // base name
	folder string // absolute; relative paths start here
	disk   bool   // whether to look at the disk
	roots  roots
	faults FaultsError
	untold int
}

func (r *reader) fault(line int, key, format string, args ...any) {
	if len(r.faults) >= maxFaults {
		r.untold++
		return
	}
	r.faults = append(r.faults, Fault{File: r.file, Line: line, Key: key, Detail: fmt.Sprintf(format, args...)})
}

// err is the faults by line, or nil.
func (r *reader) err() error {
	if len(r.faults) == 0 {
		return nil
	}
	slices.SortStableFunc(r.faults, func(a, b Fault) int { return a.Line - b.Line })
	if r.untold > 0 {
		r.faults = append(r.faults, Fault{File: r.file, Detail: fmt.Sprintf("and %d faults more", r.untold)})
	}
	return r.faults
}

// shown is text from the file, fit for one line of a message.
func shown(text string) string {
	const most = 120
	if letters := []rune(text); len(letters) > most {
		text = string(letters[:most]) + "..."
	}
	return strconv.Quote(text)
}

// listed writes "a, b and c".
func listed(words []string) string {
	if len(words) < 2 {
		return strings.Join(words, "")
	}
	end := len(words) - 1
	return strings.Join(words[:end], ", ") + " and " + words[end]
}
