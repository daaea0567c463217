package drawing

// ownEdgeM absorbs what a kept distance is rounded by, where an antenna's own
// stretch ends at a sample. Walls are a millimetre thick.
const ownEdgeM = 0.5e-3

// judged is the range of samples, both included, that are judged: those
// between the ends, less what the antennas themselves stand on. There is none
// if first > last.
func (v *view) judged() (first, last int) {
	p := &v.a.Profile
	first, last = 1, len(p.DistanceM)-2
	for p.OwnAM > 0 && first <= last && p.DistanceM[first] <= p.OwnAM+ownEdgeM {
		first++
	}
	for p.OwnBM > 0 && last >= first && p.DistanceM[last] >= v.lengthM-p.OwnBM-ownEdgeM {
		last--
	}
	return first, last
}

// ownSpans are the stretches of what the antennas stand on, wide enough to be
// seen.
func (v *view) ownSpans() []span {
	const narrowest = 7.0
	p, plot := &v.a.Profile, v.plot
	var spans []span
	if p.OwnAM > 0 {
		spans = append(spans, span{plot.left, min(plot.right, max(v.x(p.OwnAM), plot.left+narrowest))})
	}
	if p.OwnBM > 0 {
		spans = append(spans, span{max(plot.left, min(v.x(v.lengthM-p.OwnBM), plot.right-narrowest)), plot.right})
	}
	return joinSpans(spans, 0)
}

const ownLook = `fill="` + paper + `" stroke="` + ink + `" stroke-width="1.5"`

// own marks what is drawn but not judged: an open bar along the bottom, where
// an obstruction has a full one.
func (s *sheet) own() {
	const tall = 10.0
	v := &s.view
	for _, at := range v.ownSpans() {
		s.rect(at.from, v.plot.bottom-tall, at.to-at.from, tall, ownLook)
		s.stretchLabel(at, "not judged")
	}
}

func (s *sheet) ownSample(x, y float64) { s.rect(x, y-12, legendSample, 10, ownLook) }
