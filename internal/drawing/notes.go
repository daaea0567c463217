package drawing

// cautions lists what whoever acts on the sheet should know.
func (s *sheet) cautions() {
	if len(s.a.Cautions) == 0 {
		return
	}
	f := face{size: 20}
	s.group("Cautions", func() {
		s.heading("Before anyone acts on this", "")
		s.y += 4
		for _, c := range s.a.Cautions {
			s.y += 28
			s.line(marginLeft, s.y-7, marginLeft+14, s.y-7, `stroke="`+ink+`" stroke-width="3"`)
			s.y = s.lines(marginLeft+28, s.y, 27, f, wrapWhole(plain(c.Detail), f, marginRight-marginLeft-28)) - 22
		}
		s.y -= 5
	})
}

// footer names the assessment, so that the sheet can be traced and repeated.
func (s *sheet) footer() {
	s.y += blockGap
	s.line(marginLeft, s.y, marginRight, s.y, `stroke="`+faint+`" stroke-width="1.5"`)
	s.y += 30
	f := face{size: 20, fill: quiet}
	s.name(marginLeft, s.y, f, "Assessment "+plain(s.a.ID), 640)
	s.text(marginRight, s.y, face{size: 20, fill: quiet, anchor: atEnd}, "ridgehop engine "+shorten(plain(s.a.Engine), f, 90))
	s.y += 30
}
