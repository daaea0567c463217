package climate

import (
	"encoding/json"
	"maps"
	"math"
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"
)

// object returns the fields of an object, none if it is something else. With known
// names, others are refused.
func (f *findings) object(at string, value any, known ...string) map[string]any {
	fields, ok := value.(map[string]any)
	if !ok {
		f.add(at, "is %s; it must be an object", describe(value))
		return nil
	}
	if len(known) == 0 {
		return fields
	}
	for _, key := range slices.Sorted(maps.Keys(fields)) {
		if !slices.Contains(known, key) {
			f.add(pointer(at, key), "is not known; the fields here are %s", strings.Join(known, ", "))
		}
	}
	return fields
}

// list returns the items of a list, none if it is something else.
func (f *findings) list(at string, value any) []any {
	items, ok := value.([]any)
	if !ok {
		f.add(at, "is %s; it must be a list", describe(value))
	}
	return items
}

// within returns a number in bounds, otherwise NaN.
func (f *findings) within(at string, value any, b bounds) float64 {
	n, ok := number(value)
	if !ok || !b.holds(n) {
		f.add(at, "is %s; it must be a number of %g to %g%s", describe(value), b.low, b.high, b.unit)
		return math.NaN()
	}
	return n
}

func (f *findings) boolean(at string, value any) bool {
	b, ok := value.(bool)
	if !ok {
		f.add(at, "is %s; it must be true or false", describe(value))
	}
	return b
}

// text returns a text of a bounded number of characters, none of them a control.
func (f *findings) text(at string, value any, most int) string {
	s, ok := value.(string)
	switch {
	case !ok:
		f.add(at, "is %s; it must be a text", describe(value))
	case utf8.RuneCountInString(s) > most:
		f.add(at, "has %d characters; at most %d are kept", utf8.RuneCountInString(s), most)
	case strings.ContainsFunc(s, unicode.IsControl):
		f.add(at, "holds control characters; plain text is kept")
	}
	return s
}

// number returns a number that a double can hold.
func number(value any) (float64, bool) {
	n, ok := value.(json.Number)
	if !ok {
		return math.NaN(), false
	}
	result, err := n.Float64()
	return result, err == nil
}
