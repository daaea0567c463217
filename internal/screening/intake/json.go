package intake

import (
	"bytes"
	"encoding/json"
	"fmt"
)

// jsonSpace is what JSON may have between its signs (RFC 8259 section 2).
const jsonSpace = " \t\r\n"

// frame finds where a JSON value ends, without judging what is in it. It can be
// fed piece by piece.
type frame struct {
	depth             int
	begun, in, escape bool // in a string, after a backslash
	scalar            bool
}

// scan goes through text: n bytes of it belong to the value, which ends there
// if done.
func (f *frame) scan(text []byte) (n int, done bool) {
	for i, c := range text {
		switch {
		case f.escape:
			f.escape = false
		case f.in && c == '\\':
			f.escape = true
		case f.in && c != '"':
		case c == '"':
			f.in = !f.in
			if !f.in && f.depth == 0 {
				return i + 1, true
			}
		case f.scalar || !f.begun && bytes.IndexByte([]byte("{["), c) < 0:
			f.scalar = true
			if bytes.IndexByte([]byte(",:]}"+jsonSpace), c) >= 0 {
				return i, true
			}
		case c == '{' || c == '[':
			f.depth++
		case c == '}' || c == ']':
			f.depth--
			if f.depth == 0 {
				return i + 1, true
			}
		}
		f.begun = true
	}
	return len(text), false
}

// members calls each with the members of a JSON object, which must be valid, in
// order. The values are as written.
func members(object []byte, each func(name, value []byte)) {
	for rest := bytes.TrimLeft(object[1:], jsonSpace); rest[0] != '}'; {
		name, after := cutValue(rest)
		after = bytes.TrimLeft(after, jsonSpace)
		value, after := cutValue(bytes.TrimLeft(after[1:], jsonSpace))
		each(unquoted(name), value)
		rest = bytes.TrimLeft(bytes.TrimLeft(after, jsonSpace+","), jsonSpace)
	}
}

// cutValue splits valid JSON after its first value.
func cutValue(text []byte) (value, rest []byte) {
	var f frame
	n, _ := f.scan(text)
	return text[:n], text[n:]
}

// unquoted is the text of a valid JSON string.
func unquoted(value []byte) []byte {
	if bytes.IndexByte(value, '\\') < 0 {
		return value[1 : len(value)-1]
	}
	var text string
	if err := json.Unmarshal(value, &text); err != nil {
		return nil // not reached: it is valid
	}
	return []byte(text)
}

// cellText is the text of a valid JSON string or number, trimmed, and nothing
// for null; not ok for any other value.
func cellText(value []byte) (text []byte, ok bool) {
	switch value[0] {
	case '"':
		return bytes.TrimSpace(unquoted(value)), true
	case 'n':
		return nil, true
	case '{', '[', 't', 'f':
		return nil, false
	}
	return value, true
}

// jsonFault says why text is not a JSON object; empty where it is.
func jsonFault(text []byte) string {
	if !json.Valid(text) {
		var raw json.RawMessage
		return fmt.Sprintf("is not JSON: %v", json.Unmarshal(text, &raw))
	}
	if text[0] != '{' {
		return "is not a JSON object"
	}
	return ""
}

// unknownAtMost is how many names of members are remembered.
const unknownAtMost = 100

// unknown are the names of members that are not read, each of which is warned
// about once.
type unknown map[string]struct{}

func newUnknown() unknown { return unknown{} }

// note says whether a name is new.
func (u unknown) note(name []byte) bool {
	if _, found := u[string(name)]; found || len(u) == unknownAtMost {
		return false
	}
	u[string(name)] = struct{}{}
	return true
}

// cells collects the members of one object into a record.
type cells struct {
	*record
	unknown unknown
	ranks   [columnCount]int // of the name that filled a cell, from 1
	ignored []string
}

// put takes one member. The earlier of two names for a column wins.
func (c *cells) put(name, value []byte) {
	known, rank := lookUp(name)
	if known == unread || c.ranks[known] > 0 && c.ranks[known] < rank+1 {
		if c.unknown.note(name) {
			c.ignored = append(c.ignored, string(name))
		}
		return
	}
	text, ok := cellText(value)
	switch {
	case c.problem != nil: // the first one counts
	case c.ranks[known] == rank+1:
		c.refuse(known.String(), "is there twice")
	case !ok:
		c.refuse(known.String(), "is %s; text or a number is needed", shown40(string(value)))
	case len(text) > MaxFieldBytes:
		c.refuse(known.String(), "%s", tooLong(MaxFieldBytes))
	}
	c.cells[known], c.ranks[known] = text, rank+1
}

// finish names the row in its problem, and warns about what was not read.
func (c *cells) finish() {
	id := ""
	if text := c.cells[colID]; textFault(text) == "" {
		id = string(text)
	}
	if c.problem != nil {
		c.problem.ID = id
	}
	if len(c.ignored) > 0 {
		c.warnings = append(c.warnings, Warning{
			Line: c.line, ID: id, Detail: "has members that are not read: " + listed(c.ignored),
		})
	}
}
