package drawing

import "math"

// terrain draws cover and ground. Cover is drawn first, down to the bottom, and
// the ground over it. A void breaks both.
func (s *sheet) terrain() {
	v := &s.view
	distances := v.a.Profile.DistanceM
	if v.covered {
		s.path(`fill="`+leaf+`" stroke="`+leafInk+`" stroke-width="1.5" stroke-linejoin="round"`, true,
			v.areas(thin(distances, v.top, allColumns), v.top)...)
		s.coverHatch()
	}
	s.path(`fill="`+earth+`" stroke="`+earthInk+`" stroke-width="2" stroke-linejoin="round"`, true,
		v.areas(thin(distances, v.ground, allColumns), v.ground)...)
}

// areas are the outlines between the known heights and the plot's bottom.
func (v *view) areas(picked []int, heights []float64) [][]point {
	var out [][]point
	for _, run := range runs(picked, heights) {
		line := v.through(run, heights)
		first, last := line[0], line[len(line)-1]
		out = append(out, append(append([]point{{first.x, v.plot.bottom}}, line...), point{last.x, v.plot.bottom}))
	}
	return out
}

// through places samples on the plot. A lone one is made wide enough to be
// seen.
func (v *view) through(run []int, heights []float64) []point {
	line := make([]point, 0, len(run)+4)
	for _, i := range run {
		line = append(line, point{v.x(v.a.Profile.DistanceM[i]), v.y(heights[i])})
	}
	if len(line) == 1 {
		at := line[0]
		line = []point{{max(v.plot.left, at.x-1), at.y}, {min(v.plot.right, at.x+1), at.y}}
	}
	return line
}

// coverHatch strokes the cover upright, so that it is told from the ground
// without colour. Where many samples share a stroke it takes the one below it.
func (s *sheet) coverHatch() {
	const apart = 7.0
	v := &s.view
	distances := v.a.Profile.DistanceM
	var strokes [][]point
	next := v.plot.left + apart
	for i := range distances {
		x := v.x(distances[i])
		if x < next {
			continue
		}
		for ; next <= x; next += apart {
			if low, high, ok := v.between(i, next); ok && low-high > 1 {
				strokes = append(strokes, []point{{next, low}, {next, high}})
			}
		}
	}
	s.path(`fill="none" stroke="`+leafInk+`" stroke-width="1.5"`, false, strokes...)
}

// between is the ground and the top of the cover on the plot at x, which lies
// at or before sample i.
func (v *view) between(i int, x float64) (low, high float64, ok bool) {
	if i == 0 {
		return 0, 0, false
	}
	before, after := v.x(v.a.Profile.DistanceM[i-1]), v.x(v.a.Profile.DistanceM[i])
	t := (x - before) / (after - before)
	low = v.y(v.ground[i-1] + t*(v.ground[i]-v.ground[i-1]))
	high = v.y(v.top[i-1] + t*(v.top[i]-v.top[i-1]))
	return low, high, !math.IsNaN(low)
}

// secondTerrain is the top of the profile at the second k-factor.
func (s *sheet) secondTerrain() {
	v := &s.view
	if v.second.K == 0 {
		return
	}
	moved := make([]float64, len(v.top))
	for i, d := range v.a.Profile.DistanceM {
		moved[i] = v.top[i] - v.bulge(d) + v.bulgeAt(d, v.second.K)
	}
	var lines [][]point
	for _, run := range runs(thin(v.a.Profile.DistanceM, moved, fewColumns), moved) {
		lines = append(lines, v.through(run, moved))
	}
	s.path(secondLook, false, lines...)
}

const secondLook = `fill="none" stroke="` + earthInk + `" stroke-width="2" stroke-dasharray="2 5"`
