package drawing

import "math"

// The strip's measures.
const (
	stripHeight = 104.0
	stripLow    = -2.0 // first Fresnel radii at its bottom
)

// strip draws the clearance along the path in first Fresnel radii, on the
// profile's own distances: the criterion in its own measure, legible even
// where the zone is a hair on the profile.
func (s *sheet) strip() {
	v := &s.view
	if !v.known() || math.IsNaN(v.drawn.MinRatio) {
		return
	}
	s.y += 36
	s.text(marginLeft, s.y, face{size: 22, bold: true}, "Room under the line, in first Fresnel radii (F1)")
	s.text(marginRight, s.y, face{size: 20, fill: quiet, anchor: atEnd}, kFactor(v.drawn.K))
	b := box{v.plot.left, v.plot.right, s.y + 20, s.y + 20 + stripHeight}
	s.group("Clearance along the path", func() { s.stripPlot(b) })
	s.y = b.bottom + 12
}

func (s *sheet) stripPlot(b box) {
	v := &s.view
	low, high := 0.0, max(2, math.Ceil(v.drawn.F1Fraction+0.5))
	if v.drawn.MinRatio < 0 {
		low = stripLow
	}
	y := func(r float64) float64 { return b.bottom - (min(max(r, low), high)-low)/(high-low)*b.height() }
	f := face{size: 20, fill: quiet, anchor: atEnd}
	for _, level := range ticks(low, high, roundStep((high-low)/4)) {
		s.line(b.left-14, y(level), b.right+14, y(level), `stroke="`+faint+`" stroke-width="1"`)
		s.text(b.left-22, y(level)+7, f, fixed(level, 0))
	}
	for _, run := range runs(thin(v.a.Profile.DistanceM, v.ratio, v.lengthM), v.ratio) {
		x, curve, required := make([]float64, len(run)), make([]float64, len(run)), make([]float64, len(run))
		line := make([]point, len(run))
		for at, i := range run {
			x[at], curve[at], required[at] = v.x(v.a.Profile.DistanceM[i]), y(v.ratio[i]), y(v.drawn.F1Fraction)
			line[at] = point{x[at], curve[at]}
		}
		s.path(alarmLook, true, excess(x, required, curve)...)
		s.path(`fill="none" stroke="`+ink+`" stroke-width="2" stroke-linejoin="round"`, false, line)
	}
	s.line(b.left-14, y(0), b.right+14, y(0), `stroke="`+ink+`" stroke-width="1.5"`)
	s.line(b.left-14, y(v.drawn.F1Fraction), b.right+14, y(v.drawn.F1Fraction), requiredLook)
}
