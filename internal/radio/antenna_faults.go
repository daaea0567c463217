package radio

import (
	"fmt"
	"math"
	"strconv"
	"unicode"
	"unicode/utf8"
)

// Fault is one thing wrong with a description.
type Fault struct {
	// Pointer leads from the description to the field, by the names of JSON and
	// without a slash in front, such as "pattern/azimuth/3/angle_deg".
	Pointer string
	// Detail says what is wrong and what would be right, in one clause.
	Detail string
}

// String is the pointer and the detail.
func (f Fault) String() string { return f.Pointer + ": " + f.Detail }

// faults gathers what is wrong.
type faults []Fault

func (f *faults) add(pointer, format string, args ...any) {
	*f = append(*f, Fault{Pointer: pointer, Detail: fmt.Sprintf(format, args...)})
}

// between wants low <= value <= high, and answers whether it is so. NaN never is.
func (f *faults) between(pointer string, value, low, high float64, unit string) bool {
	if value >= low && value <= high {
		return true
	}
	f.add(pointer, "%s is not from %s to %s%s", figure(value), figure(low), figure(high), unit)
	return false
}

// positive wants 0 < value <= high, and answers whether it is so.
func (f *faults) positive(pointer string, value, high float64, unit string) bool {
	if value > 0 && value <= high {
		return true
	}
	f.add(pointer, "%s is not above 0 and at most %s%s", figure(value), figure(high), unit)
	return false
}

// maxNameLength is how many characters a name may have.
const maxNameLength = 100

func (f *faults) name(pointer, name string) {
	switch length := utf8.RuneCountInString(name); {
	case length == 0:
		f.add(pointer, "is empty; give 1 to %d characters", maxNameLength)
	case length > maxNameLength:
		f.add(pointer, "has %d characters; give 1 to %d", length, maxNameLength)
	case !utf8.ValidString(name):
		f.add(pointer, "is not valid UTF-8")
	case !printable(name):
		f.add(pointer, "holds a control or other unprintable character; give printable ones")
	case unicode.IsSpace(firstRune(name)) || unicode.IsSpace(lastRune(name)):
		f.add(pointer, "begins or ends with a space; leave it out")
	}
}

func printable(name string) bool {
	for _, r := range name {
		if !unicode.IsPrint(r) {
			return false
		}
	}
	return true
}

func firstRune(s string) rune { r, _ := utf8.DecodeRuneInString(s); return r }

func lastRune(s string) rune { r, _ := utf8.DecodeLastRuneInString(s); return r }

// The frequencies in GHz that any description may speak of.
const leastGHz, mostGHz = 0.03, 300.0

// frequencies checks a range of frequencies, and answers whether it is one.
func (f *faults) frequencies(minGHz, maxGHz float64) bool {
	low := f.between("min_ghz", minGHz, leastGHz, mostGHz, " GHz")
	high := f.between("max_ghz", maxGHz, leastGHz, mostGHz, " GHz")
	if low && high && minGHz > maxGHz {
		f.add("max_ghz", "%s is below min_ghz, which is %s", figure(maxGHz), figure(minGHz))
		return false
	}
	return low && high
}

// figure writes a number for a person: at most six digits.
func figure(value float64) string {
	if math.IsNaN(value) {
		return "not a number"
	}
	return strconv.FormatFloat(value, 'g', 6, 64)
}
