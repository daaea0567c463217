package drawing

import (
	"math"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

// row is a label and a figure.
type row struct {
	label, figure string
	strong        bool // what the crew sets on site
}

// cards draws one card an end: where it is, how high the antenna goes, and
// where it points.
func (s *sheet) cards() {
	const width, gap = 448.0, 24.0
	s.heading("The two ends", "")
	top := s.y + 8
	bottom := top
	for i, e := range s.bothEnds() {
		s.group("End "+e.letter, func() {
			bottom = max(bottom, s.card(marginLeft+float64(i)*(width+gap), top, width, e))
		})
	}
	s.line(marginLeft+width+gap/2, top+8, marginLeft+width+gap/2, bottom, `stroke="`+faint+`" stroke-width="1.5"`)
	s.y = bottom
}

// card draws one end and returns the y of its bottom.
func (s *sheet) card(x, y, width float64, e end) float64 {
	const leading = 38.0
	nameFace := face{size: 28, bold: true}
	s.badge(x+20, y+26, 20, e.letter)
	s.name(x+52, y+36, nameFace, endName(e.request, e.letter), width-52)
	y += 74
	s.text(x, y, face{size: 25}, coordinates(e.request))
	y += 8
	for _, r := range s.rows(e) {
		y += leading
		f := face{size: 26, anchor: atEnd, bold: r.strong}
		s.text(x, y, face{size: 22, fill: quiet}, r.label)
		s.text(x+width, y, f, r.figure)
		s.line(x, y+11, x+width, y+11, `stroke="`+faint+`" stroke-width="1"`)
	}
	return y + 12
}

func coordinates(e assess.End) string {
	if !e.Placed {
		return "no coordinates given"
	}
	return latitude(e.Lat) + ", " + longitude(e.Lon)
}

func (s *sheet) rows(e end) []row {
	path := s.a.Link.Path
	direction, elevation := path.AzimuthADeg, s.a.Judgement.TiltADeg
	if e.letter == "B" {
		direction, elevation = path.AzimuthBDeg, s.a.Judgement.TiltBDeg
	}
	aim := unknownWord
	if path.Located {
		aim = azimuth(direction)
	}
	rows := make([]row, 0, 6)
	if e.request.HeightAbove == assess.AboveRoof {
		rows = append(rows, row{"antenna above roof", metres(e.request.AntennaHeightM), true})
	}
	if e.request.HeightAbove != assess.AboveRoof || s.kindAt(e.sample) == profile.KindProfile {
		rows = append(rows, row{"antenna above ground", metres(e.amslM - e.groundM), e.request.HeightAbove != assess.AboveRoof})
	}
	return append(rows,
		row{"azimuth from true north", aim, true},
		row{"tilt", tilt(elevation), true},
		row{"antenna above sea level", metres(e.amslM), false},
		row{s.groundLabel(e), metres(e.groundM), false})
}

// groundLabel is honest about rasters whose heights are the tops of roofs.
func (s *sheet) groundLabel(e end) string {
	kind := s.kindAt(e.sample)
	switch {
	case math.IsNaN(e.groundM):
		return "ground"
	case kind == profile.KindSurface, kind == profile.KindUnstated && e.request.HeightAbove == assess.AboveRoof:
		return "ground or roof, by raster"
	}
	return "ground above sea level"
}

// kindAt is the kind of raster under a sample; empty if none.
func (s *sheet) kindAt(i int) profile.Kind {
	p := &s.a.Profile
	if i >= len(p.SourceIndex) || p.SourceIndex[i] < 0 || int(p.SourceIndex[i]) >= len(p.Sources) {
		return ""
	}
	return p.Sources[p.SourceIndex[i]].Kind
}
