package catalogue

import (
	"bytes"
	"errors"
	"io"
	"strings"
	"unicode/utf8"

	"go.yaml.in/yaml/v4"
	"go.yaml.in/yaml/v4/plugin/loaderlimits"
)

const (
	// maxMarks bounds the values in a file before it is parsed: each needs a
	// line break, comma or colon, and memory for each is 200 bytes and more.
	maxMarks = 200_000
	// maxLine is how many bytes a line may have. The parser's time on a list in one
	// line grows with the square of its length: 18 s for 4 MiB of "a,".
	maxLine = 16 << 10
	// maxDepth is how deep values may lie within others; ours lie 5 deep.
	maxDepth = 20
)

// document parses the content to its one value.
func (r *reader) document(content []byte) (entry, bool) {
	if problem := unfit(content); problem != "" {
		r.fault(0, "", "%s", problem)
		return entry{}, false
	}
	loader, err := yaml.NewLoader(bytes.NewReader(content),
		yaml.WithPlugin(loaderlimits.New(loaderlimits.DepthValue(maxDepth))))
	if err != nil {
		r.fault(0, "", "the YAML parser did not start: %v", err)
		return entry{}, false
	}
	var document, another yaml.Node
	if err := loader.Load(&document); err != nil {
		r.syntax(err)
		return entry{}, false
	}
	if err := loader.Load(&another); !errors.Is(err, io.EOF) {
		r.notAlone(err, another.Line)
		return entry{}, false
	}
	if len(document.Content) != 1 {
		r.fault(0, "", "the file is empty; it must list sources")
		return entry{}, false
	}
	root := document.Content[0]
	return entry{r: r, line: root.Line, node: root}, true
}

// unfit says why content is not worth parsing, or is empty.
func unfit(content []byte) string {
	if len(content) > MaxBytes {
		return "the file is larger than 4 MiB"
	}
	if !utf8.Valid(content) {
		return "the file is not UTF-8 text"
	}
	marks, line := 0, 0
	for _, b := range content {
		line++
		switch b {
		case '\n', '\r':
			line = 0
			marks++
		case ',', ':':
			marks++
		}
		if line > maxLine {
			return "the file has a line of more than 16384 bytes; give each entry of a list a line"
		}
	}
	if marks > maxMarks {
		return "the file has more than 200000 lines, commas and colons; name folders or tiles instead of many files"
	}
	return ""
}

// syntax tells of a file that is not YAML.
func (r *reader) syntax(err error) {
	if errors.Is(err, io.EOF) {
		r.fault(0, "", "the file is empty; it must list sources")
		return
	}
	at, ok := errors.AsType[*yaml.LoadError](err)
	if !ok {
		r.fault(0, "", "the file is not YAML: %v", err)
		return
	}
	r.fault(max(at.Mark.Line, at.ContextMark.Line), "", "this is not YAML: %s", strings.TrimPrefix(at.Message, "yaml: "))
}

// notAlone tells of what follows the first document.
func (r *reader) notAlone(err error, line int) {
	if err != nil {
		r.syntax(err)
		return
	}
	r.fault(line, "", "a second document begins here; a catalogue is one")
}
