package drawing

import "ridgehop/internal/assess"

// header draws the band at the top: the two ends, what joins them, and the
// verdict as a word and a sentence.
func (s *sheet) header() {
	const plateTop, gap, leading = 130.0, 30.0, 35.0
	f := face{size: 27}
	sentence := wrap(headline(s.a), f, marginRight-marginLeft-plateWidth-gap)
	tall := max(plateHeight, leading*float64(len(sentence)))
	bottom := plateTop + tall + 28
	s.group("Verdict", func() {
		s.rect(0, 0, sheetWidth, bottom, `fill="`+band+`"`)
		s.line(0, bottom, sheetWidth, bottom, `stroke="`+ink+`" stroke-width="3"`)
		s.names()
		s.plate(marginLeft, plateTop+(tall-plateHeight)/2, s.a.Judgement.Verdict)
		first := plateTop + 26 + (tall-leading*float64(len(sentence)))/2
		s.lines(marginLeft+plateWidth+gap, first, leading, f, sentence)
	})
	s.y = bottom
}

// names names the two ends and, at the right, says what joins them.
func (s *sheet) names() {
	s.nameRow(48, endName(s.a.Request.A, "A"), "A", distance(s.a.Link.Path.LengthM), face{size: 40, bold: true, anchor: atEnd})
	s.nameRow(96, endName(s.a.Request.B, "B"), "B", radioWords(s.a), face{size: 24, fill: quiet, anchor: atEnd})
}

func (s *sheet) nameRow(middle float64, name, letter, aside string, asideFace face) {
	const left = marginLeft + 54
	s.badge(marginLeft+20, middle, 20, letter)
	s.name(left, middle+12, face{size: 32, bold: true}, name, marginRight-textWidth(aside, asideFace)-24-left)
	s.text(marginRight, middle+12, asideFace, aside)
}

func radioWords(a *assess.Assessment) string {
	return frequency(a.Link.FrequencyGHz) + ", " + string(a.Link.Polarisation)
}
