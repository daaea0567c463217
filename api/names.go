package api

import (
	"bytes"
	"encoding/json"
)

// repeatedName is the first member name that stands twice in one object of a
// JSON document; empty if there is none, or if the document does not hold
// together, which the decoder then says. RFC 8259 leaves open which of the two
// would count, and a caller means at most one.
func repeatedName(body []byte) string {
	decoder := json.NewDecoder(bytes.NewReader(body))
	var open []map[string]bool // nil is a list
	name := true               // in an object, whether a name comes next
	for {
		token, err := decoder.Token()
		if err != nil {
			return ""
		}
		top := len(open) - 1
		inObject := top >= 0 && open[top] != nil
		switch t := token.(type) {
		case json.Delim:
			switch t {
			case '{':
				open, name = append(open, map[string]bool{}), true
			case '[':
				open = append(open, nil)
			default:
				open, name = open[:top], true
			}
			continue
		case string:
			if inObject && name {
				if open[top][t] {
					return t
				}
				open[top][t], name = true, false
				continue
			}
		}
		name = true
	}
}
