package drawing

import "math"

const voidLook = `fill="none" stroke="` + quiet + `" stroke-width="1.5"`

// voids hatches the stretches without a height, from the last known sample to
// the next, and names those wide enough.
func (s *sheet) voids() {
	v := &s.view
	const label = "no data"
	f := face{size: 20, bold: true, anchor: atMiddle}
	for _, gap := range v.voidSpans() {
		s.rect(gap.from, v.plot.top, gap.to-gap.from, v.plot.height(), `fill="`+paper+`" fill-opacity="0.75" stroke="`+quiet+`" stroke-width="1"`)
		s.path(voidLook, false, hatch(box{gap.from, gap.to, v.plot.top, v.plot.bottom}, 14)...)
		wide := textWidth(label, f) + 12
		if gap.to-gap.from > wide+8 {
			x, y := (gap.from+gap.to)/2, v.plot.bottom-34
			s.rect(x-wide/2, y-22, wide, 30, `fill="`+paper+`"`)
			s.text(x, y, f, label)
		}
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
