package drawing

import (
	"strings"
	"unicode"
	"unicode/utf8"
)

// textWidth estimates how wide s is drawn, after the widest of the common sans
// serif fonts: a text that fits by this estimate fits everywhere.
func textWidth(s string, f face) float64 {
	width := 0.0
	for _, r := range s {
		width += runeWidth(r)
	}
	if f.bold {
		width *= 1.1
	}
	return width * f.size
}

// runeWidth is the width of a character in ems.
func runeWidth(r rune) float64 {
	switch {
	case r >= 'a' && r <= 'z':
		return letterWidth(r)
	case r >= '0' && r <= '9', r == '+', r == '=':
		return 0.64
	case r == 'I' || r == 'J' || strings.ContainsRune(" \u00a0.,:;'|!()[]-/\"", r):
		return 0.36
	case strings.ContainsRune("mwMW%@", r):
		return 0.98
	case unicode.IsUpper(r):
		return 0.74
	case attached(r):
		return 0
	case r >= 0x1100 && r < 0xfb00:
		return 1.05 // East Asian, mostly
	case r >= 0x1f000:
		return 1.35 // pictures
	}
	return 0.66
}

func letterWidth(r rune) float64 {
	switch r {
	case 'i', 'j', 'l':
		return 0.28
	case 'f', 'r', 't':
		return 0.41
	case 'm', 'w':
		return 0.98
	}
	return 0.62
}

// attached says that r is drawn on or joined to the character before it.
func attached(r rune) bool {
	return r >= 0x300 && (unicode.In(r, unicode.Mn, unicode.Me, unicode.Cf) || (r >= 0x1f3fb && r <= 0x1f3ff))
}

const (
	ellipsis = "…"
	joiner   = '\u200d' // holds two pictures together
	// rightMark keeps the ellipsis of a right-to-left name at its end, the left.
	rightMark = "\u200f"
)

// shorten cuts s to the room and marks the cut with an ellipsis. It cuts
// between characters as they are seen.
func shorten(s string, f face, room float64) string {
	if textWidth(s, f) <= room {
		return s
	}
	kept := strings.TrimRight(s[:cutAt(s, f, room-textWidth(ellipsis, f))], " ")
	if last, _ := utf8.DecodeLastRuneInString(kept); rightToLeft(last) {
		return kept + ellipsis + rightMark
	}
	return kept + ellipsis
}

// cutAt is how many bytes of s, which is wider than room, fit into it, between
// characters as they are seen.
func cutAt(s string, f face, room float64) int {
	cut, width, previous := 0, 0.0, rune(0)
	for i, r := range s {
		if !attached(r) && previous != joiner {
			cut = i
		}
		width += textWidth(string(r), f)
		if width > room {
			break
		}
		previous = r
	}
	return cut
}

// rightToLeft says that r belongs to a script written from right to left.
func rightToLeft(r rune) bool {
	return (r >= 0x590 && r <= 0x8ff) || (r >= 0xfb1d && r <= 0xfdff) || (r >= 0xfe70 && r <= 0xfefc)
}

// wrap breaks s into lines no wider than room, at spaces. A word wider than
// that is cut.
func wrap(s string, f face, room float64) []string {
	return flow(s, f, room, func(word string) []string { return []string{shorten(word, f, room)} })
}

// wrapWhole is wrap for what must not be cut: a word too wide goes on in the
// next line.
func wrapWhole(s string, f face, room float64) []string {
	return flow(s, f, room, func(word string) []string { return pieces(word, f, room) })
}

// pieces breaks a word into parts no wider than room, if it must be.
func pieces(word string, f face, room float64) []string {
	var out []string
	for textWidth(word, f) > room {
		cut := cutAt(word, f, room)
		if cut == 0 { // one chain of joined characters, or no room for any
			cut = max(strings.IndexFunc(word, tooWide(f, room)), firstRune(word))
		}
		out, word = append(out, word[:cut]), word[cut:]
	}
	return append(out, word)
}

// tooWide says of the runes of a text, one after the other, which is the first
// that finds no room.
func tooWide(f face, room float64) func(rune) bool {
	width := 0.0
	return func(r rune) bool {
		width += textWidth(string(r), f)
		return width > room
	}
}

func firstRune(s string) int {
	_, size := utf8.DecodeRuneInString(s)
	return size
}

// flow fills lines with the parts of the words of s.
func flow(s string, f face, room float64, parts func(word string) []string) []string {
	var lines []string
	line, width := "", 0.0
	space := textWidth(" ", f)
	for word := range strings.SplitSeq(s, " ") {
		if word == "" {
			continue
		}
		for _, part := range parts(word) {
			wide := textWidth(part, f)
			if line != "" && width+space+wide <= room {
				line, width = line+" "+part, width+space+wide
				continue
			}
			if line != "" {
				lines = append(lines, line)
			}
			line, width = part, wide
		}
	}
	if line != "" {
		lines = append(lines, line)
	}
	return lines
}
