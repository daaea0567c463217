package drawing

import (
	"math"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

// reachM is the highest raise shown as something to build: no ordinary mast
// stands higher.
const reachM = 200.0

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
	case !(r.AM <= reachM) && !(r.BM <= reachM) && !(r.BothM <= reachM):
		return raiseOutOfReach
	}
	return raiseByFigures
}

// raiseWords is a raise as a figure, or why it is none.
func raiseWords(m float64) string {
	switch {
	case math.IsNaN(m):
		return "more than was tried"
	case m > reachM:
		return "over 200 m"
	}
	return atLeastM(m)
}

// raises draws the block on what to raise.
func (s *sheet) raises() {
	s.group("What to raise", func() {
		s.heading("What to raise", "extra antenna height that meets every criterion")
		switch advice(s.a) {
		case raiseNothing:
			s.remark("Nothing: the antennas are high enough.")
		case raiseUnknown:
			s.remark("Not known: a height is missing that the answer rests on.")
		case raiseOutOfReach:
			s.remark("Every raise is over 200 m, beyond any ordinary mast: choose another path.")
			s.raiseCells()
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
	const width, height = 293.0, 118.0
	r := s.a.Judgement.Raise
	top := s.y + 14
	for i, cell := range []struct{ label, figure, remark string }{
		{"A alone", raiseFigure(r.AM), raiseTarget(s.a.Request.A, s.aboveGround(0), r.AM)},
		{"or B alone", raiseFigure(r.BM), raiseTarget(s.a.Request.B, s.aboveGround(1), r.BM)},
		{"or both, each", raiseFigure(r.BothM), raiseBothRemark(r.BothM)},
	} {
		x := marginLeft + float64(i)*(width+20.5)
		s.rect(x, top, width, height, `fill="`+band+`"`)
		s.text(x+16, top+30, face{size: 22, fill: quiet}, cell.label)
		s.text(x+16, top+72, face{size: 36, bold: true}, cell.figure)
		s.text(x+16, top+103, face{size: 20, fill: quiet}, cell.remark)
	}
	s.y = top + height
}

func raiseFigure(m float64) string {
	if math.IsNaN(m) || m > reachM {
		return "over 200 m"
	}
	return "+" + atLeastM(m)
}

// raiseTarget says how high the antenna then stands.
func raiseTarget(e assess.End, aboveGroundM, m float64) string {
	switch {
	case math.IsNaN(m):
		return "no height was found"
	case m > reachM:
		return "choose another path"
	case e.HeightAbove == assess.AboveRoof:
		return "to " + atLeastM(e.AntennaHeightM+m) + " above roof"
	case math.IsNaN(aboveGroundM):
		return ""
	}
	return "to " + atLeastM(aboveGroundM+m) + " above ground"
}

func raiseBothRemark(m float64) string {
	switch {
	case math.IsNaN(m):
		return "no height was found"
	case m > reachM:
		return "choose another path"
	}
	return "at A and at B"
}
