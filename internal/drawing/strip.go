package drawing

import "math"

// The strip's measures.
const (
	stripHeight = 92.0
	stripLow    = -2.0 // first Fresnel radii at its bottom, where any are cut
	stripHigh   = 2.0  // at its top, or more if more is required
)

// strip draws the clearance along the path in first Fresnel radii, on the
// profile's own distances: the criterion in its own measure, legible even
// where the zone is a hair on the profile.
func (s *sheet) strip() {
	v := &s.view
	high := max(stripHigh, math.Ceil(v.drawn.F1Fraction+0.5))
	if !v.known() || !(v.drawn.MinRatio < high) {
		return // nothing is known, or all of the path lies off the strip's top
	}
	s.y += 36
	s.text(marginLeft, s.y, face{size: 22, bold: true}, "Clearance, in first Fresnel radii (F1)")
	s.text(marginRight, s.y, face{size: 20, fill: quiet, anchor: atEnd}, kFactor(v.drawn.K))
	r := stripScale{box: box{v.plot.left, v.plot.right, s.y + 18, s.y + 18 + stripHeight}, high: high}
	if v.drawn.MinRatio < 0 {
		r.low = stripLow
	}
	s.group("Clearance along the path", func() {
		s.stripLevels(r)
		s.stripCurve(r)
	})
	s.y = r.bottom + 8
}

// stripScale places clearances in first Fresnel radii.
type stripScale struct {
	box
	low, high float64
}

func (r stripScale) y(ratio float64) float64 {
	return r.bottom - (min(max(ratio, r.low), r.high)-r.low)/(r.high-r.low)*r.height()
}

func (r stripScale) holds(ratio float64) bool { return ratio >= r.low && ratio <= r.high }

func (s *sheet) stripLevels(r stripScale) {
	f := face{size: 20, fill: quiet, anchor: atEnd}
	step := 1.0
	if r.high-r.low > 4 {
		step = 2
	}
	for _, level := range ticks(r.low, r.high, step) {
		s.line(r.left-14, r.y(level), r.right+14, r.y(level), `stroke="`+faint+`" stroke-width="1"`)
		s.text(r.left-20, r.y(level)+7, f, fixed(level, 0))
	}
}

// stripCurve fills what falls short of the requirement, then draws the
// clearance as far as the strip holds it.
func (s *sheet) stripCurve(r stripScale) {
	v := &s.view
	var short, lines [][]point
	for _, run := range runs(thin(v.a.Profile.DistanceM, v.ratio, allColumns), v.ratio) {
		steps := r.steps(v, run)
		pairs := make([]pair, len(steps))
		for i, at := range steps {
			pairs[i] = pair{at.x, r.y(v.drawn.F1Fraction), r.y(at.y)}
		}
		short = append(short, excess(pairs)...)
		lines = append(lines, r.inside(steps)...)
	}
	s.path(alarmLook, true, short...)
	s.path(`fill="none" stroke="`+ink+`" stroke-width="2" stroke-linejoin="round"`, false, lines...)
	s.line(r.left-14, r.y(0), r.right+14, r.y(0), `stroke="`+ink+`" stroke-width="1.5"`)
	s.line(r.left-14, r.y(v.drawn.F1Fraction), r.right+14, r.y(v.drawn.F1Fraction), requiredLook)
}

// steps are the samples' ratios, each at its place across the sheet, with a
// step more wherever the curve crosses an edge of the strip.
func (r stripScale) steps(v *view, run []int) []point {
	out := make([]point, 0, len(run)+8)
	for at, i := range run {
		to := point{v.x(v.a.Profile.DistanceM[i]), v.ratio[i]}
		if at > 0 {
			from := out[len(out)-1]
			first, second := r.high, r.low
			if to.y > from.y {
				first, second = second, first
			}
			for _, edge := range []float64{first, second} {
				if (from.y < edge) != (to.y < edge) && from.y != edge && to.y != edge {
					t := (edge - from.y) / (to.y - from.y)
					out = append(out, point{from.x + t*(to.x-from.x), edge})
				}
			}
		}
		out = append(out, to)
	}
	return out
}

// inside is the curve without what lies above or below the strip: it leaves
// through the edge rather than running along it as if it had been measured
// there.
func (r stripScale) inside(steps []point) [][]point {
	var out [][]point
	var line []point
	for i, at := range steps {
		if r.holds(at.y) {
			line = append(line, point{at.x, r.y(at.y)})
		}
		if last := i == len(steps)-1; last || !r.holds(at.y) {
			if len(line) > 1 {
				out = append(out, line)
			}
			line = nil
		}
	}
	return out
}
