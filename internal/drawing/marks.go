package drawing

const calloutHeight = 56.0

// callout draws one box of words.
func (s *sheet) callout(f callout, top float64) {
	look := `fill="` + paper + `" stroke="` + ink + `" stroke-width="2"`
	if f.alarming {
		look = `fill="` + alarm + `"`
	}
	s.rect(f.centre-f.width/2, top, f.width, calloutHeight, look)
	words := calloutFace(f)
	s.text(f.centre, top+23, words, f.first)
	s.text(f.centre, top+48, words, f.then)
}

// leader joins a box to its place, where a ring marks it.
func (s *sheet) leader(f callout, boxBottom float64) {
	v := &s.view
	k := v.drawn.K
	if f.k == v.second.K {
		k = f.k // its ground is drawn too
	}
	x, y := v.x(f.atM), v.y(f.topM+v.bulgeAt(f.atM, k))
	colour := ink
	if f.alarming {
		colour = alarm
	}
	s.path(`fill="none" stroke="`+paper+`" stroke-width="4"`, false, []point{{f.centre, boxBottom}, {x, y}})
	s.path(`fill="none" stroke="`+colour+`" stroke-width="1.5"`, false, []point{{f.centre, boxBottom}, {x, y}})
	s.circle(x, y, 7, `fill="`+paper+`" stroke="`+colour+`" stroke-width="3"`)
}

// stretches draws a bar along the bottom under every obstruction.
func (s *sheet) stretches() {
	v := &s.view
	const least = 5.0
	var spans []span
	for _, o := range byBeginning(s.a.Judgement.Obstructions) {
		from, to := v.x(o.FromM), v.x(o.ToM)
		if lack := least - (to - from); lack > 0 {
			from, to = from-lack/2, to+lack/2
		}
		spans = append(spans, span{from, to})
	}
	for _, bar := range joinSpans(spans, 2) {
		s.rect(bar.from, v.plot.bottom-10, bar.to-bar.from, 10, `fill="`+alarm+`"`)
	}
}

// moreCallouts says how many obstructions are not named.
func (s *sheet) moreCallouts(chosen []callout) string {
	named, all := 0, len(grouped(s.a.Judgement.Obstructions))
	for _, f := range chosen {
		if f.alarming {
			named++
		}
	}
	switch rest := all - named; rest {
	case 0:
		return ""
	case 1:
		return "and 1 more place that falls short by less"
	default:
		return "and " + fixed(float64(rest), 0) + " more places that fall short by less"
	}
}
