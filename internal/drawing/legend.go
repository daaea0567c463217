package drawing

// legendEntry is one line of the key: a sample of the look, and words.
type legendEntry struct {
	words string
	draw  func(x, y float64) // within legendSample units to the right and 20 up
}

const legendSample = 38.0

// legend explains what is on the profile, and only that.
func (s *sheet) legend() {
	const sample, apart, leading = legendSample, 24.0, 31.0
	f := face{size: 20}
	x := marginLeft
	s.y += 34
	s.group("Key", func() {
		for _, e := range s.legendEntries() {
			wide := sample + 8 + textWidth(e.words, f)
			if x > marginLeft && x+wide > marginRight {
				x, s.y = marginLeft, s.y+leading
			}
			e.draw(x, s.y)
			s.text(x+sample+8, s.y, f, e.words)
			x += wide + apart
		}
	})
	if s.view.blank {
		return
	}
	remark := "Heights are drawn " + s.view.exaggeration() + " times as large as distances, over an earth bent for " + kFactor(s.view.drawn.K) + "."
	s.y += 31
	s.text(marginLeft, s.y, face{size: 20, fill: quiet}, remark)
}

func (s *sheet) legendEntries() []legendEntry {
	v := &s.view
	area := func(look string) func(x, y float64) {
		return func(x, y float64) { s.rect(x, y-16, legendSample, 19, look) }
	}
	stroke := func(look string) func(x, y float64) {
		return func(x, y float64) { s.line(x, y-7, x+legendSample, y-7, look) }
	}
	var entries []legendEntry
	if v.a.Judgement.VoidShare < 1 {
		entries = append(entries, legendEntry{"ground", area(`fill="` + earth + `" stroke="` + earthInk + `" stroke-width="2"`)})
	}
	if v.covered {
		entries = append(entries, legendEntry{"cover", s.coverSample})
	}
	if v.known() {
		entries = append(entries, legendEntry{"line between antennas", stroke(lineLook)},
			legendEntry{"first Fresnel zone", stroke(outlineLook)})
		if v.drawn.F1Fraction > 0 {
			entries = append(entries, legendEntry{"keep free: " + fraction(v.drawn.F1Fraction), stroke(requiredLook)})
		}
	}
	if len(v.a.Judgement.Obstructions) > 0 {
		entries = append(entries, legendEntry{"in the way", area(alarmLook)})
	}
	if v.second.K != 0 {
		what := "ground"
		if v.covered {
			what = "ground and cover"
		}
		entries = append(entries, legendEntry{what + " at " + kFactor(v.second.K), stroke(secondLook)})
	}
	if v.a.Profile.OwnAM > 0 || v.a.Profile.OwnBM > 0 {
		entries = append(entries, legendEntry{"own building, not judged", s.ownSample})
	}
	if v.a.Judgement.VoidShare > 0 {
		entries = append(entries, legendEntry{"no data", s.voidSample})
	}
	return entries
}

func (s *sheet) coverSample(x, y float64) {
	s.rect(x, y-16, legendSample, 19, `fill="`+leaf+`" stroke="`+leafInk+`" stroke-width="1.5"`)
	var strokes [][]point
	for at := x + 6; at < x+legendSample; at += 7 {
		strokes = append(strokes, []point{{at, y + 3}, {at, y - 16}})
	}
	s.path(`fill="none" stroke="`+leafInk+`" stroke-width="1.5"`, false, strokes...)
}

func (s *sheet) voidSample(x, y float64) {
	s.rect(x, y-16, legendSample, 19, `fill="`+paper+`" stroke="`+quiet+`" stroke-width="1"`)
	s.path(voidLook, false, hatch(box{x, x + legendSample, y - 16, y + 3}, 10)...)
}
