package intake

import (
	"bytes"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"
)

// shown40 quotes text for a message where it would not read well, and cuts it.
func shown40(text string) string {
	const most = 40
	if utf8.RuneCountInString(text) > most {
		runes := []rune(text)
		text = string(runes[:most]) + "…"
	}
	if text == "" || strings.ContainsFunc(text, unprintable) {
		return strconv.Quote(text)
	}
	return text
}

// unprintable characters have no place in an id or a name.
func unprintable(r rune) bool {
	return unicode.IsControl(r) || r == utf8.RuneError || r == 0xfffe || r == 0xffff
}

// plainASCII says that text needs no closer look.
func plainASCII(text []byte) bool {
	for _, c := range text {
		if c < ' ' || c >= 0x7f {
			return false
		}
	}
	return true
}

// textFault says why text cannot stand as an id or a name; empty where it can.
func textFault(text []byte) string {
	if plainASCII(text) && len(text) <= MaxTextRunes {
		return ""
	}
	switch n := utf8.RuneCount(text); {
	case !utf8.Valid(text):
		return "is not UTF-8: save the list as UTF-8"
	case bytes.ContainsFunc(text, unprintable):
		return "holds control characters; plain text is kept"
	case n > MaxTextRunes:
		return "has " + strconv.Itoa(n) + " characters; at most " + strconv.Itoa(MaxTextRunes) + " are kept"
	}
	return ""
}

// oneLine puts a text that a spreadsheet broke into lines back on one.
func oneLine(text []byte) []byte {
	if !bytes.ContainsAny(text, "\r\n\t") {
		return text
	}
	return bytes.Join(bytes.Fields(text), []byte(" "))
}
