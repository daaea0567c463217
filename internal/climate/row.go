package climate

import (
	"bytes"
	"errors"
	"fmt"
	"strconv"
)

const (
	blanks     = " \t\r"
	delimiters = ",;"
	// decimal are the characters of a decimal number: the standard parser would also
	// take NaN, infinities and hexadecimal.
	decimal = "0123456789+-.eE"
)

// parseRow reads one line of a map into row, which it must fill exactly. Values are
// separated by blanks, or by one comma or semicolon with blanks around; one at the end is
// let pass. The error is a clause that goes on after the number of the line.
func parseRow(line []byte, row []float32) error {
	count := 0
	for rest := bytes.TrimLeft(line, blanks); len(rest) > 0; count++ {
		var text []byte
		text, rest = nextValue(rest)
		if count >= len(row) {
			continue
		}
		value, err := parseValue(text)
		if err != nil {
			return fmt.Errorf("value %d %w", count+1, err)
		}
		row[count] = value
	}
	if count != len(row) {
		return fmt.Errorf("has %d values; this map has %d in each line", count, len(row))
	}
	return nil
}

// nextValue cuts the first value and the separator after it.
func nextValue(line []byte) (value, rest []byte) {
	end := bytes.IndexAny(line, blanks+delimiters)
	if end < 0 {
		return line, nil
	}
	rest = bytes.TrimLeft(line[end:], blanks)
	if len(rest) > 0 && bytes.IndexByte([]byte(delimiters), rest[0]) >= 0 {
		rest = bytes.TrimLeft(rest[1:], blanks)
	}
	return line[:end], rest
}

// parseValue reads one decimal number.
func parseValue(text []byte) (float32, error) {
	if len(text) == 0 {
		return 0, errors.New("is empty; a map has no gaps")
	}
	if len(bytes.Trim(text, decimal)) == 0 {
		if value, err := strconv.ParseFloat(string(text), 32); err == nil {
			return float32(value), nil
		}
	}
	return 0, fmt.Errorf("is %.24q; it must be a decimal number, such as -3.25", text)
}
