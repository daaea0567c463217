package drawing

import (
	"math"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

// reachM is the highest raise shown as something to build: no ordinary mast
// stands higher.
const reachM = 200.0

// reach is reachM, or less if no higher raise was looked for.
func reach(r profile.Raise) float64 {
	if r.CapM > 0 {
		return min(reachM, r.CapM)
	}
	return reachM
}

// raiseAdvice is which of the four things there is to say about raises.
type raiseAdvice int

const (
	raiseByFigures raiseAdvice = iota
	raiseNothing
	raiseUnknown
	raiseOutOfReach
)

func advice(a *assess.Assessment) raiseAdvice {
	r := a.Judgement.Raise
	none := math.IsNaN(r.AM) && math.IsNaN(r.BM) && math.IsNaN(r.BothM)
	switch {
	case a.Judgement.Verdict == profile.Unknown, none && a.Judgement.VoidShare > 0:
		return raiseUnknown
	case r.AM == 0 && r.BM == 0 && r.BothM == 0:
		return raiseNothing
	case !(r.AM <= reach(r)) && !(r.BM <= reach(r)) && !(r.BothM <= reach(r)):
		return raiseOutOfReach
	}
	return raiseByFigures
}

// raiseWords is a raise as a figure, or how far it is out of reach.
func raiseWords(m, reach float64) string {
	if !(m <= reach) {
		return "over " + fixed(reach, 0) + nbsp + "m"
	}
	return atLeastM(m)
}

// outOfReach is what to say where no raise will do.
func outOfReach(r profile.Raise) string {
	if reach(r) < reachM {
		return "No raise up to " + fixed(reach(r), 0) + nbsp + "m, the most that was tried, is enough."
	}
	return "Every raise is over " + fixed(reachM, 0) + nbsp + "m, beyond any ordinary mast: choose another path."
}

// raises draws the block on what to raise.
func (s *sheet) raises() {
	s.group("What to raise", func() {
		s.heading("What to raise", "extra antenna height that meets every criterion")
		switch advice(s.a) {
		case raiseNothing:
			s.remark("Nothing: the antennas are high enough.")
		case raiseUnknown:
			s.remark("Not known while heights are missing.")
		case raiseOutOfReach:
			s.remark(outOfReach(s.a.Judgement.Raise))
		case raiseByFigures:
			s.raiseCells()
		}
	})
}

// remark is a sentence in the place of figures.
func (s *sheet) remark(words string) {
	f := face{size: 28, bold: true}
	s.y = s.lines(marginLeft, s.y+34, 36, f, wrap(words, f, marginRight-marginLeft)) - 24
}

// raiseCells draws the three ways side by side.
func (s *sheet) raiseCells() {
	const width, height = 293.0, 106.0
	r, ends := s.a.Judgement.Raise, s.bothEnds()
	top := s.y + 8
	for i, cell := range []struct {
		label   string
		m       float64
		outcome string
	}{
		{"A alone", r.AM, raiseTarget(ends[0], r.AM)},
		{"or B alone", r.BM, raiseTarget(ends[1], r.BM)},
		{"or both, each", r.BothM, "at A and at B"},
	} {
		figure, outcome := "+"+raiseWords(cell.m, reach(r)), cell.outcome
		if !(cell.m <= reach(r)) {
			figure, outcome = raiseWords(cell.m, reach(r)), "out of a mast's reach"
		}
		x := marginLeft + float64(i)*(width+20.5)
		s.rect(x, top, width, height, `fill="`+band+`"`)
		s.text(x+16, top+27, face{size: 21, fill: quiet}, cell.label)
		s.text(x+16, top+65, face{size: 34, bold: true}, figure)
		s.text(x+16, top+93, face{size: 20, fill: quiet}, outcome)
	}
	s.y = top + height
}

// raiseTarget says how high the antenna then stands.
func raiseTarget(e end, m float64) string {
	switch {
	case e.request.HeightAbove == assess.AboveRoof:
		return "to " + atLeastM(e.request.AntennaHeightM+m) + " above roof"
	case math.IsNaN(e.aboveGroundM()):
		return "to " + atLeastM(e.amslM+m) + " above sea level"
	}
	return "to " + atLeastM(e.aboveGroundM()+m) + " above ground"
}
