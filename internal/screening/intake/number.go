package intake

import (
	"bytes"
	"strconv"
)

// maxNumberBytes is more than any number has that someone measured.
const maxNumberBytes = 40

// number reads a plain decimal number: digits with at most one decimal sign, a
// sign and an exponent. The fault says what else it looks like.
func number(text []byte, decimalComma bool) (value float64, fault string) {
	var plain [maxNumberBytes]byte
	if len(text) > maxNumberBytes {
		return 0, "is too long for a number"
	}
	n := copy(plain[:], text)
	if decimalComma {
		if i := bytes.IndexByte(plain[:n], ','); i >= 0 && bytes.IndexByte(plain[:n], '.') < 0 {
			plain[i] = '.'
		}
	}
	if !isNumber(plain[:n]) {
		return 0, numberFault(text)
	}
	value, err := strconv.ParseFloat(string(plain[:n]), 64)
	if err != nil { // the form is right, so it is the size
		return 0, "is too large for a number"
	}
	return value, ""
}

// isNumber holds the grammar: [+-] digits [. digits] [e [+-] digits], with at
// least one digit before the exponent.
func isNumber(text []byte) bool {
	text = unsigned(text)
	whole, text := digits(text)
	fraction := 0
	if len(text) > 0 && text[0] == '.' {
		fraction, text = digits(text[1:])
	}
	if whole+fraction == 0 {
		return false
	}
	if len(text) == 0 {
		return true
	}
	if text[0] != 'e' && text[0] != 'E' {
		return false
	}
	exponent, rest := digits(unsigned(text[1:]))
	return exponent > 0 && len(rest) == 0
}

func unsigned(text []byte) []byte {
	if len(text) > 0 && (text[0] == '+' || text[0] == '-') {
		return text[1:]
	}
	return text
}

// digits counts the digits that text begins with, and returns what follows.
func digits(text []byte) (n int, rest []byte) {
	for n < len(text) && text[n] >= '0' && text[n] <= '9' {
		n++
	}
	return n, text[n:]
}

// numberFault says why text is no plain number.
func numberFault(text []byte) string {
	lower := bytes.ToLower(unsigned(text))
	switch {
	case bytes.Equal(lower, []byte("nan")), bytes.HasPrefix(lower, []byte("inf")):
		return "is not finite; a number is needed, or nothing where it is not known"
	case bytes.HasPrefix(lower, []byte("0x")):
		return "is hexadecimal; write it as a decimal number like 52.5"
	case grouped(lower):
		return "holds a thousands separator, or a decimal comma where none is read; write it like 1234.5"
	}
	return "is not a number; write it like 52.5"
}

// grouped says that text is digits with other signs between them than one
// decimal point.
func grouped(text []byte) bool {
	trimmed := bytes.Trim(text, "0123456789")
	if len(text) == 0 || len(trimmed) == 0 || len(bytes.Trim(text, "0123456789.,'’ \u00a0\u202f_")) > 0 {
		return false
	}
	n, _ := digits(text)
	return n > 0
}
