package catalogue

import (
	"fmt"
	"slices"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"go.yaml.in/yaml/v4"
)

// entry is a value of the file with the key that leads to it. Its methods give
// the value as what it should be; or tell the fault, and answer false or the zero
// value.
type entry struct {
	r    *reader
	key  string
	line int // where it begins: that of its key, if it has one
	node *yaml.Node
}

func (e entry) fault(format string, args ...any) {
	e.r.fault(e.line, e.key, format, args...)
}

// within names a key of the entry.
func (e entry) within(key string) string {
	if e.key == "" {
		return key
	}
	return e.key + "." + key
}

// plain wants a value that is written out.
func (e entry) plain() bool {
	switch {
	case e.node.Kind == yaml.AliasNode:
		e.fault("is the alias *%s; write the value out, as aliases are not read here", e.node.Value)
	case e.node.Anchor != "":
		e.fault("has the anchor &%s; leave it out, as aliases are not read here", e.node.Anchor)
	case e.node.Style&yaml.TaggedStyle != 0:
		e.fault("has the tag %s; leave it out", e.node.Tag)
	default:
		return true
	}
	return false
}

// scalar wants a single value that is not empty.
func (e entry) scalar() bool {
	switch {
	case !e.plain():
	case e.node.Kind == yaml.MappingNode:
		e.fault("holds keys; it must be a single value")
	case e.node.Kind == yaml.SequenceNode:
		e.fault("is a list; it must be a single value")
	case strings.TrimSpace(e.node.Value) == "" || e.node.ShortTag() == "!!null":
		e.fault("is empty; give it a value or leave it out")
	default:
		return true
	}
	return false
}

// text is the value as it is written, up to most characters of one line.
func (e entry) text(most int) string {
	if !e.scalar() {
		return ""
	}
	value := strings.TrimSpace(e.node.Value) // a folded text ends in a line break
	if length := utf8.RuneCountInString(value); length > most {
		e.fault("has %d characters; it must have 1 to %d", length, most)
		return ""
	}
	if strings.ContainsFunc(value, unicode.IsControl) {
		e.fault("holds a line break or another control character; write it as one line")
		return ""
	}
	return value
}

// name is the value as a name of ours.
func (e entry) name() (string, bool) {
	if !e.scalar() {
		return "", false
	}
	if !isName(e.node.Value) {
		e.fault("is %s; it must be 1 to 64 of a-z, 0-9, _ and -, beginning with a letter or digit", shown(e.node.Value))
		return "", false
	}
	return e.node.Value, true
}

func isName(text string) bool {
	const letters = "abcdefghijklmnopqrstuvwxyz0123456789"
	return len(text) >= 1 && len(text) <= 64 &&
		strings.Trim(text, letters+"_-") == "" && strings.Contains(letters, text[:1])
}

// positive is the value as a number above 0 and at most most.
func (e entry) positive(most float64, what string) float64 {
	if !e.scalar() {
		return 0
	}
	value, err := strconv.ParseFloat(e.node.Value, 64)
	if err != nil || !e.isNumber() || !(value > 0 && value <= most) {
		e.fault("is %s; it must be %s above 0 and at most %g", e.written(), what, most)
		return 0
	}
	return value
}

// whole is the value as a whole number from least to most.
func (e entry) whole(least, most int, what string) (int, bool) {
	if !e.scalar() {
		return 0, false
	}
	value, err := strconv.Atoi(e.node.Value)
	if err != nil || !e.isNumber() || value < least || value > most {
		e.fault("is %s; it must be %s from %d to %d", e.written(), what, least, most)
		return 0, false
	}
	return value, true
}

// isNumber refuses text in quotes, and the octal, hexadecimal and other numbers
// of which readers of YAML make different things.
func (e entry) isNumber() bool {
	tag, digits := e.node.ShortTag(), strings.TrimLeft(e.node.Value, "+-")
	octal := len(digits) > 1 && digits[0] == '0' && digits[1] >= '0' && digits[1] <= '9'
	return (tag == "!!int" || tag == "!!float") && !octal && strings.Trim(digits, "0123456789.eE+-") == ""
}

// written is the value with quotes if it is text.
func (e entry) written() string {
	if e.isNumber() {
		return e.node.Value
	}
	return shown(e.node.Value)
}

// list is the entries of a list of 1 to most.
func (e entry) list(most int) ([]entry, bool) {
	if !e.plain() {
		return nil, false
	}
	if e.node.Kind != yaml.SequenceNode {
		e.fault("is not a list; write [...], or a line with a dash for each")
		return nil, false
	}
	if n := len(e.node.Content); n == 0 || n > most {
		e.fault("has %d entries; it must have 1 to %d", n, most)
		return nil, false
	}
	entries := make([]entry, len(e.node.Content))
	for i, node := range e.node.Content {
		entries[i] = entry{r: e.r, key: fmt.Sprintf("%s[%d]", e.key, i), line: node.Line, node: node}
	}
	return entries, true
}

// fields are the values of a mapping by key.
type fields struct {
	entry
	order  []string
	values map[string]entry
}

// mapping is the entry's fields. Keys other than the known are faults; none
// known means that any may stand.
func (e entry) mapping(known ...string) (fields, bool) {
	f := fields{entry: e, values: map[string]entry{}}
	if !e.plain() {
		return f, false
	}
	if e.node.Kind != yaml.MappingNode {
		e.faultOfShape(known)
		return f, false
	}
	for i := 0; i+1 < len(e.node.Content); i += 2 {
		f.add(e.node.Content[i], e.node.Content[i+1], known)
	}
	return f, true
}

func (e entry) faultOfShape(known []string) {
	if e.key == "" {
		e.fault("the file must hold keys: %s", listed(known))
		return
	}
	e.fault("holds no keys; write key: value")
}

func (f *fields) add(key, value *yaml.Node, known []string) {
	if key.Kind != yaml.ScalarNode || key.Anchor != "" || key.Style&yaml.TaggedStyle != 0 {
		f.r.fault(key.Line, f.key, "has a key that is not plain text")
		return
	}
	name := key.Value
	if !isName(name) {
		name = shown(name)
	}
	full := f.within(name)
	if first, twice := f.values[name]; twice {
		f.r.fault(key.Line, full, "is given twice; the first is on line %d", first.line)
		return
	}
	if len(known) > 0 && !slices.Contains(known, name) {
		f.r.fault(key.Line, full, "is not known; the keys here are %s", listed(known))
		return
	}
	f.order = append(f.order, name)
	f.values[name] = entry{r: f.r, key: full, line: key.Line, node: value}
}

// get is the field of that name, if there is one.
func (f fields) get(name string) (entry, bool) {
	e, ok := f.values[name]
	return e, ok
}

// need is the field of that name; its absence is a fault.
func (f fields) need(name, what string) (entry, bool) {
	e, ok := f.values[name]
	if !ok {
		f.r.fault(f.line, f.within(name), "is missing; %s", what)
	}
	return e, ok
}
