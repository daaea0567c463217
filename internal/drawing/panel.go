package drawing

import "math"

// The panel's measures.
const (
	plotLeft     = 134.0
	plotRight    = 940.0
	plotHeight   = 306.0
	labelsTall   = 54.0 // the row of the masts' labels
	calloutsTall = 80.0 // the row of the callouts and their leaders' room
)

// panel draws the profile, the strip of clearances under it, and the legend.
func (s *sheet) panel() {
	top := s.y + 22
	s.view.plot = box{left: plotLeft, right: plotRight}
	chosen := s.chooseCallouts()
	s.view.plot.top = top + labelsTall
	if len(chosen) > 0 {
		s.view.plot.top += calloutsTall
	}
	s.view.plot.bottom = s.view.plot.top + plotHeight
	s.group("Profile of the path", func() {
		s.grid()
		s.zoneFill()
		s.terrain()
		s.intrusion()
		s.secondTerrain()
		s.voids()
		s.zoneOutline()
		s.own()
		s.masts(top)
		s.callouts(chosen, top+labelsTall)
		s.distanceAxis()
	})
	s.y = s.view.plot.bottom + 34
	if more := s.moreCallouts(chosen); more != "" {
		s.y += 30
		s.text(plotLeft-14, s.y, face{size: 20, bold: true, fill: alarm}, more)
	}
	s.strip()
	s.legend()
}

// grid draws lines of equal height above sea level, bent as the earth is here,
// with their values at the left.
func (s *sheet) grid() {
	v := &s.view
	if v.blank {
		return // figures beside it would be made up
	}
	step := roundStep((v.high - v.low) / 7)
	decimals := decimalsFor(step)
	var curves [][]point
	for _, height := range v.levels(step) {
		curves = append(curves, v.level(height)...)
		if height >= v.low {
			s.text(plotLeft-20, v.y(height)+7, face{size: 20, fill: quiet, anchor: atEnd}, fixed(height, decimals))
		}
	}
	s.path(`fill="none" stroke="`+faint+`" stroke-width="1"`, false, curves...)
	s.upright(marginLeft+14, (v.plot.top+v.plot.bottom)/2, face{size: 20, fill: quiet, anchor: atMiddle}, "metres above "+seaLevel(&v.a.Profile))
}

// levels are the heights that get a line. Those below the plot at its ends
// rise into it; those that would leave it at the top are left out if enough
// stay.
func (v *view) levels(step float64) []float64 {
	bulge, low, high := v.bulge(v.lengthM/2), v.low, v.high
	if len(ticks(low, high-bulge, step)) >= 3 {
		high -= bulge
	}
	if bulge < high-low {
		low -= bulge
	}
	return ticks(low, high, step)
}

// level is the part of one height's curve inside the plot.
func (v *view) level(height float64) [][]point {
	if bend := v.y(height) - v.y(height+v.bulge(v.lengthM/2)); bend < 0.7 {
		if height < v.low {
			return nil
		}
		return [][]point{{{v.plot.left - 14, v.y(height)}, {v.plot.right + 14, v.y(height)}}}
	}
	var out [][]point
	var run []point
	for i := range curveSteps + 1 {
		d := v.lengthM * float64(i) / curveSteps
		h := height + v.bulge(d)
		if h < v.low || h > v.high {
			if len(run) > 1 {
				out = append(out, run)
			}
			run = nil
			continue
		}
		run = append(run, point{v.x(d), v.y(h)})
	}
	if len(run) > 1 {
		out = append(out, run)
	}
	return out
}

// distanceAxis draws the ground of the plot, round distances from A, and the
// path length at B.
func (s *sheet) distanceAxis() {
	v := &s.view
	bottom := v.plot.bottom
	s.line(v.plot.left-14, bottom, v.plot.right+14, bottom, `stroke="`+ink+`" stroke-width="2"`)
	unit, name := 1000.0, "km"
	if v.lengthM < 1000 {
		unit, name = 1, "m"
	}
	f := face{size: 20, fill: quiet, anchor: atMiddle}
	step := roundStep(v.lengthM / unit / 7)
	decimals := decimalsFor(step)
	last := distance(v.lengthM)
	lastFace := face{size: 20, bold: true, anchor: atEnd}
	free := v.plot.right + 18 - textWidth(last, lastFace) - 14
	for _, t := range ticks(0, v.lengthM/unit, step) {
		x := v.x(min(t*unit, v.lengthM))
		label := fixed(t, decimals)
		if t == 0 {
			label = "0 " + name
		}
		if x+textWidth(label, f)/2 < free {
			s.line(x, bottom, x, bottom+8, `stroke="`+ink+`" stroke-width="2"`)
			s.text(x, bottom+31, f, label)
		}
	}
	s.line(v.plot.right, bottom, v.plot.right, bottom+8, `stroke="`+ink+`" stroke-width="2"`)
	s.text(v.plot.right+18, bottom+31, lastFace, last)
}

// exaggeration is how many times larger heights are drawn than distances.
func (v *view) exaggeration() string {
	times := (v.plot.height() / (v.high - v.low)) / (v.plot.width() / v.lengthM)
	switch {
	case times >= 10:
		digits := math.Pow10(int(math.Log10(times)) - 1)
		return fixed(math.Round(times/digits)*digits, 0)
	case times >= 0.1:
		return fixed(times, 1)
	}
	return fixed(times, 3)
}
