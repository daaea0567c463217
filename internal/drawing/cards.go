package drawing

import (
	"math"
	"strings"

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
	s.y += blockGap - 2
	s.line(marginLeft, s.y, marginRight, s.y, `stroke="`+ink+`" stroke-width="2"`)
	top := s.y + 14
	bottom, lines := top, 1
	for _, e := range s.bothEnds() {
		lines = max(lines, len(cardName(e, width)))
	}
	for i, e := range s.bothEnds() {
		s.group("End "+e.letter, func() {
			bottom = max(bottom, s.card(marginLeft+float64(i)*(width+gap), top, width, e, lines))
		})
	}
	s.line(marginLeft+width+gap/2, top+8, marginLeft+width+gap/2, bottom, `stroke="`+faint+`" stroke-width="1.5"`)
	s.y = bottom
}

const cardNameSize = 26.0

// cardName is the end's name in one line or two.
func cardName(e end, width float64) []string {
	f := face{size: cardNameSize, bold: true}
	lines := wrap(endName(e.request, e.letter), f, width-52)
	if len(lines) > 2 {
		lines = []string{lines[0], shorten(strings.Join(lines[1:], " "), f, width-52)}
	}
	return lines
}

// card draws one end, its name in so many lines, and returns the y of its
// bottom.
func (s *sheet) card(x, y, width float64, e end, lines int) float64 {
	const leading = 36.0
	s.badge(x+20, y+22, 20, e.letter)
	s.raw("<g><title>")
	s.escaped(endName(e.request, e.letter))
	s.raw("</title>\n")
	s.lines(x+52, y+31, 31, face{size: cardNameSize, bold: true}, cardName(e, width))
	s.raw("</g>\n")
	y += 38 + 31*float64(lines)
	s.text(x, y, face{size: 26}, coordinates(e.request))
	y += 6
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
	rows := make([]row, 0, 7)
	if e.request.HeightAbove == assess.AboveRoof {
		rows = append(rows, row{"antenna above roof", metres(e.request.AntennaHeightM), true})
	}
	if e.request.HeightAbove != assess.AboveRoof || s.kindAt(e.sample) == profile.KindProfile {
		rows = append(rows, row{"antenna above ground", metres(e.aboveGroundM()), e.request.HeightAbove != assess.AboveRoof})
	}
	rows = append(rows, row{"azimuth from true north", aim, true})
	if magnetic := s.magneticAzimuth(e.letter); !math.IsNaN(magnetic) {
		rows = append(rows, row{"azimuth, magnetic", azimuth(magnetic), true})
	}
	return append(rows,
		row{"tilt", tilt(elevation), true},
		row{"antenna above " + seaLevel(&s.a.Profile), metres(e.amslM), false},
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
	return "ground above " + seaLevel(&s.a.Profile)
}

// kindAt is the kind of raster under a sample; empty if none.
func (s *sheet) kindAt(i int) profile.Kind {
	p := &s.a.Profile
	if i >= len(p.SourceIndex) || p.SourceIndex[i] < 0 || int(p.SourceIndex[i]) >= len(p.Sources) {
		return ""
	}
	return p.Sources[p.SourceIndex[i]].Kind
}
