package drawing

import "math"

const voidLook = `fill="none" stroke="` + quiet + `" stroke-width="1.5"`

// voids hatches the stretches without a height, from the last known sample to
// the next, and names those wide enough.
func (s *sheet) voids() {
	v := &s.view
	for _, gap := range v.voidSpans() {
		s.rect(gap.from, v.plot.top, gap.to-gap.from, v.plot.height(), `fill="`+paper+`" fill-opacity="0.75" stroke="`+quiet+`" stroke-width="1"`)
		s.path(voidLook, false, hatch(box{gap.from, gap.to, v.plot.top, v.plot.bottom}, 14)...)
		s.stretchLabel(gap, "no data")
	}
}

// stretchLabel names a stretch of the plot, upright if need be, where it is wide
// enough.
func (s *sheet) stretchLabel(gap span, label string) {
	const tall = 28.0
	v := &s.view
	f := face{size: 20, bold: true, anchor: atMiddle}
	x, wide := (gap.from+gap.to)/2, textWidth(label, f)+12
	switch width := gap.to - gap.from; {
	case width > wide+8:
		s.rect(x-wide/2, v.plot.bottom-56, wide, tall, `fill="`+paper+`"`)
		s.text(x, v.plot.bottom-35, f, label)
	case width > tall+8:
		middle := v.plot.bottom - 20 - wide/2
		s.rect(x-tall/2, middle-wide/2, tall, wide, `fill="`+paper+`"`)
		s.upright(x+7, middle, f, label)
	}
}

// voidSpans are the stretches without a height, wide enough to be seen.
func (v *view) voidSpans() []span {
	const narrowest, gap = 4.0, 6.0
	var spans []span
	distances, n := v.a.Profile.DistanceM, len(v.ground)
	for i := 0; i < n; i++ {
		if !math.IsNaN(v.ground[i]) {
			continue
		}
		from := v.x(distances[max(0, i-1)])
		for i < n && math.IsNaN(v.ground[i]) {
			i++
		}
		to := v.x(distances[min(i, n-1)])
		if lack := narrowest - (to - from); lack > 0 {
			from, to = max(v.plot.left, from-lack/2), min(v.plot.right, to+lack/2)
		}
		spans = append(spans, span{from, to})
	}
	return joinSpans(spans, gap)
}

// hatch fills a box with rising strokes.
func hatch(b box, apart float64) [][]point {
	var out [][]point
	if b.width() < apart {
		apart *= 2 // a sliver needs fewer
	}
	for c := b.left + b.top + apart; c < b.right+b.bottom; c += apart {
		// The stroke is where x + y = c.
		from := point{max(b.left, c-b.bottom), min(b.bottom, c-b.left)}
		to := point{min(b.right, c-b.top), max(b.top, c-b.right)}
		if to.x-from.x > 0.5 {
			out = append(out, []point{from, to})
		}
	}
	return out
}
