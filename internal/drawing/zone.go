package drawing

import (
	"math"
	"slices"
)

const (
	lineLook     = `stroke="` + ink + `" stroke-width="3"`
	outlineLook  = `fill="none" stroke="` + zoneInk + `" stroke-width="1.5"`
	requiredLook = `fill="none" stroke="` + zoneInk + `" stroke-width="2.5" stroke-dasharray="9 5"`
	alarmLook    = `fill="` + intruder + `" stroke="` + alarm + `" stroke-width="1.5" stroke-linejoin="round"`
)

// zoneFill tints what must be kept free, from the line down to the required
// part of the zone.
func (s *sheet) zoneFill() {
	v := &s.view
	if !v.known() || v.drawn.F1Fraction == 0 {
		return
	}
	s.path(`fill="`+zone+`"`, true, v.zoneEdge(-v.drawn.F1Fraction))
}

// zoneOutline draws the first Fresnel zone, the lower bound of what is
// required, and the line between the antennas.
func (s *sheet) zoneOutline() {
	v := &s.view
	if !v.known() {
		return
	}
	s.path(outlineLook, false, v.zoneEdge(1))
	if math.Abs(v.drawn.F1Fraction-1) > 0.005 {
		s.path(outlineLook, false, v.zoneEdge(-1))
	}
	if v.drawn.F1Fraction > 0 {
		s.path(requiredLook, false, v.zoneEdge(-v.drawn.F1Fraction))
	}
	s.line(v.plot.left, v.y(v.a.Link.AntennaAM), v.plot.right, v.y(v.a.Link.AntennaBM), lineLook)
}

// zoneEdge is so many first Fresnel radii above the line.
func (v *view) zoneEdge(radii float64) []point {
	distances := v.curve()
	out := make([]point, len(distances))
	for i, d := range distances {
		out[i] = point{v.x(d), v.y(v.lineAt(d) + radii*v.f1(d))}
	}
	return out
}

// intrusion fills whatever reaches into what must be kept free.
func (s *sheet) intrusion() {
	v := &s.view
	if !v.known() {
		return
	}
	tops := slices.Clone(v.top)
	first, last := v.judged()
	for i := range tops {
		if i < first || i > last {
			tops[i] = math.NaN() // the ends and what they stand on are not judged
		}
	}
	var shapes [][]point
	for _, run := range runs(thin(v.a.Profile.DistanceM, tops, allColumns), tops) {
		pairs := make([]pair, len(run))
		for at, i := range run {
			d := v.a.Profile.DistanceM[i]
			pairs[at] = pair{v.x(d), v.y(tops[i]), v.y(v.lineAt(d) - v.drawn.F1Fraction*v.f1(d))}
		}
		shapes = append(shapes, excess(pairs)...)
	}
	s.path(alarmLook, true, shapes...)
}
