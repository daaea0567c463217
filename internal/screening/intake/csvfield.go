package intake

import (
	"bytes"
	"strings"
)

// formulaStarts are what makes a spreadsheet take a cell for a formula, or drop
// what stands before one. Common practice, no source.
const formulaStarts = "=+-@\t\r\n"

// CSVField writes text as one field of a CSV: quoted by RFC 4180 section 2 where
// it holds a separator, a quote or a line break, and never as a formula. Text
// that begins with = + - @, a tab or a line break gets an apostrophe in front,
// unless it is a plain number like -3.5: a spreadsheet would otherwise compute
// it, and a name that somebody else chose may do harm there.
//
// The readers of CSV here take that apostrophe away again. So that nothing else
// is taken, text that has an apostrophe there already gets a second one. A text
// on one line, without control characters and without spaces around it,
// therefore reads back as it was; other programs see the apostrophe.
// Safe for concurrent use.
func CSVField(text string) string {
	if defusable([]byte(text)) && !isNumber([]byte(text)) {
		text = "'" + text
	}
	if !strings.ContainsAny(text, ",;\t\"\r\n") && !strings.HasPrefix(text, " ") && !strings.HasSuffix(text, " ") {
		return text
	}
	return `"` + strings.ReplaceAll(text, `"`, `""`) + `"`
}

// defusable says that text begins like a formula, apostrophes aside.
func defusable(text []byte) bool {
	text = bytes.TrimLeft(text, "'")
	return len(text) > 0 && strings.IndexByte(formulaStarts, text[0]) >= 0
}

// undefused takes away the apostrophe that CSVField put.
func undefused(text []byte) []byte {
	if len(text) > 1 && text[0] == '\'' && defusable(text) {
		return text[1:]
	}
	return text
}
