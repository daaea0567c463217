package drawing

import (
	"bytes"
	"encoding/xml"
	"errors"
	"io"
	"math"
	"slices"
	"strconv"
	"strings"
)

// maxBytes is the size that no drawing exceeds.
const maxBytes = 150_000

// tester is what testing and rapid have in common.
type tester interface {
	Helper()
	Errorf(format string, args ...any)
	Fatalf(format string, args ...any)
}

// words is a text of a drawing, and the room that it takes by the estimate
// that the layout goes by.
type words struct {
	text                     string
	left, right, top, bottom float64
}

// walked is what a test wants to know of a drawing.
type walked struct {
	title, desc string
	texts       []words
	width       float64
	height      float64
}

// walker goes through the XML of a drawing.
type walker struct {
	t     tester
	ids   []string
	out   walked
	stack []xml.StartElement
	root  xml.StartElement
}

// walk asserts what holds for every drawing, and returns what it holds.
func walk(t tester, svg []byte) walked {
	t.Helper()
	if len(svg) > maxBytes {
		t.Errorf("got %d bytes, want at most %d", len(svg), maxBytes)
	}
	w := &walker{t: t}
	decoder := xml.NewDecoder(bytes.NewReader(svg))
	for {
		token, err := decoder.Token()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			t.Fatalf("not well-formed: %v", err)
		}
		w.token(token)
	}
	w.checkRoot()
	w.checkLayout()
	return w.out
}

func (w *walker) token(token xml.Token) {
	switch token := token.(type) {
	case xml.StartElement:
		w.start(token.Copy())
	case xml.EndElement:
		w.stack = w.stack[:len(w.stack)-1]
	case xml.CharData:
		w.characters(string(token))
	case xml.Comment, xml.ProcInst, xml.Directive:
		w.t.Errorf("got %T, want elements and text only", token)
	}
}

func (w *walker) start(e xml.StartElement) {
	known := []string{"svg", "title", "desc", "g", "rect", "line", "circle", "path", "text"}
	if !slices.Contains(known, e.Name.Local) {
		w.t.Errorf("got element %q, want one of %v", e.Name.Local, known)
	}
	for _, a := range e.Attr {
		name := strings.ToLower(a.Name.Local)
		if strings.HasPrefix(name, "on") || name == "href" || name == "style" || name == "src" {
			w.t.Errorf("got attribute %s in %s", a.Name.Local, e.Name.Local)
		}
		if strings.Contains(a.Value, "url(") || strings.Contains(a.Value, "javascript:") {
			w.t.Errorf("got attribute %s=%q: a reference", a.Name.Local, a.Value)
		}
		if name != "aria-label" {
			w.finite(a.Value)
		}
		if name == "id" {
			if slices.Contains(w.ids, a.Value) {
				w.t.Errorf("got id %q twice", a.Value)
			}
			w.ids = append(w.ids, a.Value)
		}
	}
	if len(w.stack) == 0 {
		w.root = e
	}
	w.stack = append(w.stack, e)
}

func (w *walker) finite(s string) {
	for _, word := range []string{"NaN", "Inf", "e+"} {
		if strings.Contains(s, word) {
			w.t.Errorf("got %q: no figure", s)
		}
	}
}

func (w *walker) characters(s string) {
	if len(w.stack) == 0 || strings.TrimSpace(s) == "" {
		return
	}
	e := w.stack[len(w.stack)-1]
	switch e.Name.Local {
	case "title":
		if len(w.stack) == 2 {
			w.out.title += s
		}
	case "desc":
		w.out.desc += s
		w.finite(s)
	case "text":
		w.words(e, s)
	default:
		w.t.Errorf("got text %q in %s", s, e.Name.Local)
	}
}

// words notes where a text stands. A turned one is left out.
func (w *walker) words(e xml.StartElement, s string) {
	parent := w.stack[len(w.stack)-2]
	if value(parent, "transform") != "" {
		return
	}
	f := face{size: figure(w.t, e, "font-size"), bold: value(e, "font-weight") != ""}
	x, y, wide := figure(w.t, e, "x"), figure(w.t, e, "y"), textWidth(s, f)
	switch value(e, "text-anchor") {
	case atMiddle:
		x -= wide / 2
	case atEnd:
		x -= wide
	}
	if f.size < 20 {
		w.t.Errorf("got text %q of size %g, want at least 20", s, f.size)
	}
	w.out.texts = append(w.out.texts, words{s, x, x + wide, y - 0.72*f.size, y + 0.2*f.size})
}

func value(e xml.StartElement, name string) string {
	for _, a := range e.Attr {
		if a.Name.Local == name {
			return a.Value
		}
	}
	return ""
}

func figure(t tester, e xml.StartElement, name string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(value(e, name), 64)
	if err != nil || math.IsNaN(v) || math.IsInf(v, 0) {
		t.Errorf("got %s=%q in %s, want a number", name, value(e, name), e.Name.Local)
	}
	return v
}

func (w *walker) checkRoot() {
	w.t.Helper()
	if got := value(w.root, "role"); got != "img" {
		w.t.Errorf("got role %q, want img", got)
	}
	if got := value(w.root, "lang"); got != "en" {
		w.t.Errorf("got lang %q, want en", got)
	}
	for label := range strings.FieldsSeq(value(w.root, "aria-labelledby")) {
		if !slices.Contains(w.ids, label) {
			w.t.Errorf("got label %q without its element", label)
		}
	}
	if w.out.title == "" || w.out.desc == "" {
		w.t.Errorf("got title %q and desc %q, want both", w.out.title, w.out.desc)
	}
	w.out.width, w.out.height = figure(w.t, w.root, "width"), figure(w.t, w.root, "height")
}

// checkLayout asserts that every text lies on the sheet and none on another.
func (w *walker) checkLayout() {
	w.t.Helper()
	for i, a := range w.out.texts {
		if a.left < 0 || a.right > w.out.width || a.top < 0 || a.bottom > w.out.height {
			w.t.Errorf("text %q leaves the sheet: %.0f to %.0f across, %.0f to %.0f down", a.text, a.left, a.right, a.top, a.bottom)
		}
		for _, b := range w.out.texts[:i] {
			if a.left < b.right && b.left < a.right && a.top < b.bottom && b.top < a.bottom {
				w.t.Errorf("text %q at %.0f,%.0f lies on %q at %.0f,%.0f", a.text, a.left, a.bottom, b.text, b.left, b.bottom)
			}
		}
	}
}

func parsed(t tester, s string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatalf("got %q, want a number", s)
	}
	return v
}
