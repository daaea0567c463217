package drawing

import (
	"math"

	"ridgehop/internal/assess"
)

// header draws the band at the top: the two ends, what joins them, and the
// verdict as a word and a sentence.
func (s *sheet) header() {
	const plateTop = 150.0
	f := face{size: 28}
	sentence := wrap(headline(s.a), f, marginRight-marginLeft-plateWidth-36)
	const leading = 36.0
	bottom := plateTop + math.Max(plateHeight, leading*float64(len(sentence))) + 34
	s.group("Verdict", func() {
		s.rect(0, 0, sheetWidth, bottom, `fill="`+band+`"`)
		s.line(0, bottom, sheetWidth, bottom, `stroke="`+ink+`" stroke-width="3"`)
		s.ends()
		s.plate(marginLeft, plateTop, s.a.Judgement.Verdict)
		first := plateTop + 29
		if room := plateHeight - leading*float64(len(sentence)); room > 0 {
			first += room / 2
		}
		s.lines(marginLeft+plateWidth+36, first, leading, f, sentence)
	})
	s.y = bottom
}

// ends names the two ends and, at the right, what joins them.
func (s *sheet) ends() {
	const room = 620.0
	s.badge(marginLeft+20, 54, 20, "A")
	s.name(marginLeft+54, 66, face{size: 32, bold: true}, endName(s.a.Request.A, "A"), room)
	s.badge(marginLeft+20, 106, 20, "B")
	s.name(marginLeft+54, 118, face{size: 32, bold: true}, endName(s.a.Request.B, "B"), room)
	s.text(marginRight, 68, face{size: 40, bold: true, anchor: atEnd}, distance(s.a.Link.Path.LengthM))
	s.text(marginRight, 114, face{size: 24, fill: quiet, anchor: atEnd}, radioWords(s.a))
}

func radioWords(a *assess.Assessment) string {
	return frequency(a.Link.FrequencyGHz) + ", " + string(a.Link.Polarisation)
}
