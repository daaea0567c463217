package api

import (
	"fmt"
	"slices"
	"strings"

	"github.com/getkin/kin-openapi/openapi3"
)

// unknownField says that a field is not known, and which one was meant if it
// differs only by its unit, its end or a slip of the pen.
func unknownField(name string, schema *openapi3.Schema) string {
	best, least := "", 3
	for _, known := range sortedNames(schema.Properties) {
		distance := editDistance(name, known)
		if stem(known) == stem(name) || len(name) > 2 && strings.HasPrefix(known, name) {
			distance = 1
		}
		if distance < least && distance < len(name) {
			best, least = known, distance
		}
	}
	if best == "" {
		return "is not a field here; there are " + strings.Join(sortedNames(schema.Properties), ", ")
	}
	return fmt.Sprintf("is not a field here; %s is", best)
}

func sortedNames(properties openapi3.Schemas) []string {
	names := make([]string, 0, len(properties))
	for name := range properties {
		names = append(names, name)
	}
	slices.Sort(names)
	return names
}

// stem is a field's name without its unit: frequency_ghz and frequency_mhz
// share one.
func stem(name string) string {
	if cut := strings.LastIndexByte(name, '_'); cut > 0 {
		return name[:cut]
	}
	return name
}

// editDistance counts the insertions, deletions and replacements between two
// short words (V. I. Levenshtein, 1966).
func editDistance(a, b string) int {
	row := make([]int, len(b)+1)
	for j := range row {
		row[j] = j
	}
	for i := range len(a) {
		diagonal := row[0]
		row[0] = i + 1
		for j := range len(b) {
			cost := 1
			if a[i] == b[j] {
				cost = 0
			}
			diagonal, row[j+1] = row[j+1], min(row[j+1]+1, row[j]+1, diagonal+cost)
		}
	}
	return row[len(b)]
}

func typeWords(schema *openapi3.Schema) string {
	switch {
	case schema.Type.Is(openapi3.TypeNumber):
		return "a number, without quotes or unit"
	case schema.Type.Is(openapi3.TypeString):
		return "text in quotes"
	case schema.Type.Is(openapi3.TypeArray):
		return "a list"
	case schema.Type.Is(openapi3.TypeObject):
		return "an object"
	case schema.Type.Is(openapi3.TypeBoolean):
		return "true or false"
	}
	return fmt.Sprintf("of type %v", schema.Type.Slice())
}

func enumWords(schema *openapi3.Schema) string {
	words := make([]string, len(schema.Enum))
	for i, v := range schema.Enum {
		words[i] = fmt.Sprint(v)
	}
	return strings.Join(words, ", ")
}

func rangeWords(schema *openapi3.Schema) string {
	switch {
	case schema.Min != nil && schema.Max != nil:
		return fmt.Sprintf("%v to %v", *schema.Min, *schema.Max)
	case schema.Min != nil:
		return fmt.Sprintf("%v or more", *schema.Min)
	case schema.Max != nil:
		return fmt.Sprintf("%v or less", *schema.Max)
	}
	return "in its range"
}

// unitHint recognises a frequency that was given in MHz.
func unitHint(pointer string, value any) string {
	if f, ok := value.(float64); ok && strings.HasSuffix(pointer, "frequency_ghz") && f >= 400 && f <= 100_000 {
		return fmt.Sprintf(" GHz: %v MHz would be %v", f, f/1000)
	}
	return ""
}

func countWords(most *uint64) string {
	if most == nil {
		return "any number"
	}
	return fmt.Sprint(*most)
}
