package drawing

import (
	"math"

	"ridgehop/internal/assess"
)

// end is one end of the link as the blocks need it.
type end struct {
	letter  string
	request assess.End
	sample  int
	groundM float64 // NaN if void
	amslM   float64 // of the antenna; NaN if not known
}

func (s *sheet) bothEnds() [2]end {
	return [2]end{
		{"A", s.a.Request.A, 0, s.a.GroundAM, s.a.Link.AntennaAM},
		{"B", s.a.Request.B, len(s.a.Profile.GroundM) - 1, s.a.GroundBM, s.a.Link.AntennaBM},
	}
}

// aboveGroundM is the height of the antenna above ground; NaN if not known.
func (e end) aboveGroundM() float64 {
	if e.request.HeightAbove == assess.AboveGround {
		return e.request.AntennaHeightM
	}
	return e.amslM - e.groundM
}

// masts draws both antennas on their masts, with a label in the row at top and
// a thin leader down to the antenna.
func (s *sheet) masts(top float64) {
	v := &s.view
	for i, e := range s.bothEnds() {
		x, anchor, aside := v.plot.left, atStart, 28.0
		if i == 1 {
			x, anchor, aside = v.plot.right, atEnd, -28.0
		}
		foot := v.plot.bottom
		if !math.IsNaN(e.amslM) {
			foot = v.y(e.amslM)
			s.mast(x, e)
		}
		s.line(x, top+38, x, foot, `stroke="`+quiet+`" stroke-width="1.5" stroke-dasharray="1 5" stroke-linecap="round"`)
		s.badge(x, top+18, 20, e.letter)
		s.text(x+aside, top+26, face{size: 23, bold: true, anchor: anchor}, aboveWords(e))
	}
}

// mast stands on the ground or, where the height is above a roof that the
// profile knows, on that.
func (s *sheet) mast(x float64, e end) {
	v := &s.view
	antenna := v.y(e.amslM)
	if !math.IsNaN(v.ground[e.sample]) {
		base := v.ground[e.sample]
		if e.request.HeightAbove == assess.AboveRoof {
			base = v.top[e.sample]
		}
		s.line(x, v.y(base), x, antenna, `stroke="`+ink+`" stroke-width="5"`)
	}
	s.circle(x, antenna, 8, `fill="`+paper+`" stroke="`+ink+`" stroke-width="4"`)
}

func aboveWords(e end) string {
	switch {
	case e.request.HeightAbove == assess.AboveRoof:
		return metres(e.request.AntennaHeightM) + " above roof"
	case math.IsNaN(e.aboveGroundM()):
		return metres(e.amslM) + " above sea level"
	}
	return metres(e.aboveGroundM()) + " above ground"
}
