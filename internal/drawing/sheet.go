package drawing

import (
	"errors"
	"fmt"
	"io"
	"strings"

	"ridgehop/internal/assess"
)

// ErrNotDrawable means an assessment without what a drawing needs: one that no
// service of package assess has made.
var ErrNotDrawable = errors.New("not an assessment that can be drawn")

// The sheet's measures, in units of its own.
const (
	sheetWidth  = 1000.0
	marginLeft  = 40.0
	marginRight = sheetWidth - marginLeft
	blockGap    = 28.0
)

// SVG writes the assessment as an SVG document. Nothing is written unless all
// of it can be drawn. The error is ErrNotDrawable or w's.
func SVG(w io.Writer, a *assess.Assessment) error {
	if err := drawable(a); err != nil {
		return err
	}
	s := newSheet(a)
	s.header()
	s.panel()
	s.raises()
	s.cards()
	s.radio()
	s.criteria()
	s.sources()
	s.cautions()
	s.footer()
	if s.err != nil {
		return s.err
	}
	s.raw("</svg>\n")
	for _, part := range [][]byte{s.head(), s.body} {
		if _, err := w.Write(part); err != nil {
			return fmt.Errorf("write drawing: %w", err)
		}
	}
	return nil
}

// drawable checks what the blocks take for granted.
func drawable(a *assess.Assessment) error {
	switch {
	case a == nil:
		return fmt.Errorf("%w: none given", ErrNotDrawable)
	case len(a.Profile.DistanceM) < 3 || len(a.Profile.GroundM) != len(a.Profile.DistanceM):
		return fmt.Errorf("%w: no profile", ErrNotDrawable)
	case !(a.Link.Path.LengthM > 0):
		return fmt.Errorf("%w: no path length", ErrNotDrawable)
	case len(a.Judgement.Clearance) == 0 || len(a.Judgement.Clearance) != len(a.Link.Criteria):
		return fmt.Errorf("%w: no criteria", ErrNotDrawable)
	}
	return nil
}

// sheet is one drawing in the making. Blocks draw from y down and leave y
// where the next begins.
type sheet struct {
	pen
	a    *assess.Assessment
	view view
	y    float64
}

func newSheet(a *assess.Assessment) *sheet {
	return &sheet{pen: pen{body: make([]byte, 0, 48<<10)}, a: a, view: newView(a)}
}

// head is the beginning of the root element, and its names. The height is only
// known when everything is drawn.
func (s *sheet) head() []byte {
	id := s.elementID()
	height := fixed(s.y, 0)
	head := pen{body: make([]byte, 0, 2048)}
	head.raw(`<svg xmlns="http://www.w3.org/2000/svg" width="1000" height="`, height, `" viewBox="0 0 1000 `, height,
		`" lang="en" xml:lang="en" role="img" aria-labelledby="`, id, `-title `, id, `-desc"`,
		` font-family="sans-serif" fill="`, ink, `">`, "\n")
	head.raw(`<title id="`, id, `-title">`)
	head.escaped(title(s.a))
	head.raw("</title>\n", `<desc id="`, id, `-desc">`)
	head.escaped(description(s.a))
	head.raw("</desc>\n", `<rect width="1000" height="`, height, `" fill="`, paper, `"/>`, "\n")
	return head.body
}

// elementID is the assessment's id where it is fit for an XML id, so that two
// drawings on one page do not share theirs.
func (s *sheet) elementID() string {
	fit := func(r rune) bool {
		return r == '_' || (r >= 'a' && r <= 'z') || (r >= 'A' && r <= 'Z') || (r >= '0' && r <= '9')
	}
	if s.a.ID == "" || strings.ContainsFunc(s.a.ID, func(r rune) bool { return !fit(r) }) {
		return "sheet"
	}
	return "s-" + s.a.ID
}

// heading opens a block: a rule, a title, and a remark at the right.
func (s *sheet) heading(title, remark string) {
	s.y += blockGap
	s.line(marginLeft, s.y, marginRight, s.y, `stroke="`+ink+`" stroke-width="2"`)
	s.y += 32
	s.text(marginLeft, s.y, face{size: 26, bold: true}, title)
	room := marginRight - marginLeft - textWidth(title, face{size: 26, bold: true}) - 20
	remarkFace := face{size: 20, fill: quiet, anchor: atEnd}
	s.text(marginRight, s.y, remarkFace, shorten(remark, remarkFace, room))
	s.y += 10
}
