package drawing

import (
	"math"

	"ridgehop/profile"
)

// Columns of the criteria: where each begins.
const (
	columnK        = marginLeft
	columnRequired = 128.0
	columnLeast    = 364.0
	columnWhere    = 634.0
	columnResult   = 814.0
)

// criteria draws a line for each criterion.
func (s *sheet) criteria() {
	const leading = 40.0
	s.group("Criteria", func() {
		s.heading("Clearance criteria", criteriaName(s.a.Request.CriteriaSet, len(s.a.Request.Criteria) > 0))
		s.y += 26
		for _, column := range []struct {
			x     float64
			words string
		}{{columnK, "k"}, {columnRequired, "required"}, {columnLeast, "least found"}, {columnWhere, "where, from A"}, {columnResult, "result"}} {
			s.text(column.x, s.y, face{size: 20, fill: quiet}, column.words)
		}
		for _, c := range s.a.Judgement.Clearance {
			s.y += leading
			s.criterion(c)
			s.line(marginLeft, s.y+12, marginRight, s.y+12, `stroke="`+faint+`" stroke-width="1"`)
		}
		s.y += 12
		s.criteriaNotes()
	})
}

func (s *sheet) criterion(c profile.Clearance) {
	f := face{size: 22}
	s.text(columnK, s.y, f, kFigure(c.K))
	required, found, where := fraction(c.F1Fraction), ratio(c.MinRatio), unknownWord
	if !math.IsNaN(c.MinRatio) {
		required += " = " + metres(c.F1Fraction*c.F1M)
		found += " = " + atMostM(c.ClearanceM)
		where = distance(c.AtM)
	}
	s.text(columnRequired, s.y, f, required)
	s.text(columnLeast, s.y, f, found)
	s.text(columnWhere, s.y, f, where)
	s.result(c)
}

// result is the outcome in a word; a missed criterion stands in a dark box.
func (s *sheet) result(c profile.Clearance) {
	f := face{size: 22, bold: true}
	word := resultWord(c)
	if word == "missed" {
		s.rect(columnResult-10, s.y-24, marginRight-columnResult+10, 32, `fill="`+alarm+`"`)
		f.fill = paper
	}
	s.text(columnResult, s.y, f, word)
}

func resultWord(c profile.Clearance) string {
	switch {
	case c.Met:
		return "met"
	case missed(c):
		return "missed"
	}
	return "not judged"
}

// criteriaNotes says what the table cannot.
func (s *sheet) criteriaNotes() {
	f := face{size: 20, fill: quiet}
	sure := sureSentence(s.a)
	if sure != "" {
		s.y = s.lines(marginLeft, s.y+30, 28, face{size: 20}, wrap(sure, face{size: 20}, marginRight-marginLeft)) - 28
	}
	isolated := ""
	for _, c := range s.a.Judgement.Clearance {
		if c.Isolated {
			isolated = "At " + kFactor(c.K) + " the obstruction is isolated, so that the smaller fraction is enough. "
		}
	}
	s.y = s.lines(marginLeft, s.y+30, 28, f, wrap(isolated+s.diffraction(), f, marginRight-marginLeft)) - 28
}

// diffraction is the loss at each k, where the path is not free of it.
func (s *sheet) diffraction() string {
	words, some := "", false
	for _, d := range s.a.Judgement.Diffraction {
		if math.IsNaN(d.LossDB) {
			return "Diffraction loss is not known over missing data."
		}
		if words != "" {
			words += ", "
		}
		some = some || d.LossDB >= 0.05
		words += fixed(d.LossDB, 1) + nbsp + "dB at " + kFactor(d.K)
	}
	switch {
	case words == "":
		return ""
	case !some:
		return "No diffraction loss (ITU-R P.526, delta-Bullington)."
	}
	return "Diffraction loss " + words + " (ITU-R P.526, delta-Bullington)."
}

func criteriaName(set profile.CriteriaSet, own bool) string {
	switch {
	case own:
		return "set by the caller"
	case set == profile.P530Temperate:
		return "ITU-R P.530, temperate climate"
	case set == profile.P530Tropical:
		return "ITU-R P.530, tropical climate"
	case set == profile.F160:
		return "0.6 F1 at the median k"
	}
	return string(set)
}
