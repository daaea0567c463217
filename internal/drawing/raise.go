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

// raiseAdvice is which of the things there is to say about raises.
type raiseAdvice int

const (
	raiseByFigures raiseAdvice = iota
	raiseNothing
	raiseUnknown
	raiseOutOfReach
	raiseToBeSure // the criteria are met, but not surely enough
	raiseNeverSure
)

func advice(a *assess.Assessment) raiseAdvice {
	r := a.Judgement.Raise
	none := math.IsNaN(r.AM) && math.IsNaN(r.BM) && math.IsNaN(r.BothM)
	switch {
	case a.Judgement.Verdict == profile.Unknown, none && a.Judgement.VoidShare > 0:
		return raiseUnknown
	case r.AM == 0 && r.BM == 0 && r.BothM == 0:
		return adviceToBeSure(a)
	case !(r.AM <= reach(r)) && !(r.BM <= reach(r)) && !(r.BothM <= reach(r)):
		return raiseOutOfReach
	}
	return raiseByFigures
}

// adviceToBeSure is what to say where every criterion is met.
func adviceToBeSure(a *assess.Assessment) raiseAdvice {
	switch {
	case !doubtful(a):
		return raiseNothing
	case !(a.Judgement.ExtraHeight.BothM <= reach(a.Judgement.Raise)):
		return raiseNeverSure
	}
	return raiseToBeSure
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

// neverSure is what to say where the criteria are met and no raise makes that
// sure enough.
func neverSure(r profile.Raise) string {
	return "Nothing to meet the criteria; no raise up to " + fixed(reach(r), 0) + nbsp + "m makes that " + clearWords() + "."
}

// notKnown is what to say where what to raise is not known.
func notKnown(a *assess.Assessment) string {
	if a.Judgement.VoidShare == 0 && len(a.Profile.Unreachable) == 0 {
		return "Not known while the path cannot be judged."
	}
	return "Not known while heights are missing."
}

// raises draws the block on what to raise.
func (s *sheet) raises() {
	s.group("What to raise", func() {
		advice := advice(s.a)
		remark := "extra antenna height that meets every criterion"
		if advice == raiseToBeSure {
			remark = "extra antenna height to be " + clearWords()
		}
		s.heading("What to raise", remark)
		r, extra := s.a.Judgement.Raise, s.a.Judgement.ExtraHeight
		switch advice {
		case raiseNothing:
			s.remark("Nothing: the antennas are high enough.")
		case raiseUnknown:
			s.remark(notKnown(s.a))
		case raiseOutOfReach:
			s.remark(outOfReach(r))
		case raiseNeverSure:
			s.remark(neverSure(r))
		case raiseToBeSure:
			s.raiseCells(extra)
		case raiseByFigures:
			s.raiseCells(profile.ExtraHeight{AM: r.AM, BM: r.BM, BothM: r.BothM})
			if doubtful(s.a) && !math.IsNaN(extra.BothM) {
				s.sureCells(extra)
			}
		}
	})
}

// remark is a sentence in the place of figures.
func (s *sheet) remark(words string) {
	f := face{size: 28, bold: true}
	s.y = s.lines(marginLeft, s.y+34, 36, f, wrap(words, f, marginRight-marginLeft)) - 24
}

// The cells of the three ways to raise.
const (
	raiseCellWidth  = 293.0
	raiseCellHeight = 106.0
	raiseCellStep   = raiseCellWidth + 20.5
)

// raiseCells draws the three ways side by side.
func (s *sheet) raiseCells(r profile.ExtraHeight) {
	most, ends := reach(s.a.Judgement.Raise), s.bothEnds()
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
		figure, outcome := "+"+raiseWords(cell.m, most), cell.outcome
		if !(cell.m <= most) {
			figure, outcome = raiseWords(cell.m, most), "out of a mast's reach"
		}
		x := marginLeft + float64(i)*raiseCellStep
		s.rect(x, top, raiseCellWidth, raiseCellHeight, `fill="`+band+`"`)
		s.text(x+16, top+27, face{size: 21, fill: quiet}, cell.label)
		s.text(x+16, top+65, face{size: 34, bold: true}, figure)
		s.text(x+16, top+93, face{size: 20, fill: quiet}, outcome)
	}
	s.y = top + raiseCellHeight
}

// sureCells adds to each way how much would also make it sure enough.
func (s *sheet) sureCells(extra profile.ExtraHeight) {
	const height = 32.0
	most := reach(s.a.Judgement.Raise)
	for i, m := range []float64{extra.AM, extra.BM, extra.BothM} {
		figure := raiseWords(m, most)
		if m <= most {
			figure = "+" + figure
		}
		x := marginLeft + float64(i)*raiseCellStep
		s.rect(x, s.y-1, raiseCellWidth, height+1, `fill="`+band+`"`)
		s.text(x+16, s.y+19, face{size: 20, bold: true}, clearWords()+": "+figure)
	}
	s.y += height
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
