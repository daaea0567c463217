package drawing

import (
	"math"
	"strings"

	"ridgehop/internal/assess"
)

// Columns of the radio's two directions: where each begins; the last one's end
// is the margin.
const (
	columnDirection  = marginLeft
	columnReceived   = 164.0
	columnFadeMargin = 388.0
	columnModulation = 560.0
)

// radio draws what stands at the ends and what arrives, where a radio was
// asked about.
func (s *sheet) radio() {
	if s.a.Radio == nil || s.a.Request.Radio == nil {
		return
	}
	report := &s.a.Radio.Report
	s.group("Radio", func() {
		s.heading("Radio", targetWords(s.a.Request.Radio.Target, outcome(s.a)))
		s.y += 26
		head := face{size: 20, fill: quiet}
		s.text(columnDirection, s.y, head, "from, to")
		s.text(columnReceived, s.y, head, "received level")
		s.text(columnFadeMargin, s.y, head, "fade margin")
		s.text(columnModulation, s.y, head, "in modulation")
		s.text(marginRight, s.y, face{size: 20, fill: quiet, anchor: atEnd}, "EIRP")
		s.direction("A to B", &report.AToB)
		s.direction("B to A", &report.BToA)
		s.y += 8
		s.equipment("A", s.a.Request.Radio.A)
		s.equipment("B", s.a.Request.Radio.B)
		s.availability(&report.Availability.Both)
		s.radioReasons()
	})
}

func (s *sheet) direction(words string, b *assess.Budget) {
	s.y += 38
	f := face{size: 23, bold: true}
	s.text(columnDirection, s.y, face{size: 23}, words)
	received, eirp := inTarget(b)
	s.text(columnReceived, s.y, f, level(received, "dBm"))
	s.text(columnFadeMargin, s.y, f, level(b.TargetMarginDB, "dB"))
	modulation := plain(b.Target)
	if modulation == "" {
		modulation = "none"
	}
	s.name(columnModulation, s.y, face{size: 23}, modulation, 230)
	s.text(marginRight, s.y, face{size: 23, anchor: atEnd}, level(eirp, "dBm"))
	s.line(marginLeft, s.y+11, marginRight, s.y+11, `stroke="`+faint+`" stroke-width="1"`)
}

// inTarget is the received level and the EIRP in the modulation that the row
// names, for which a radio may turn its power down.
func inTarget(b *assess.Budget) (receivedDBM, eirpDBM float64) {
	for _, m := range b.Margins {
		if m.Modulation == b.Target {
			return m.LevelDBM, b.EIRPDBM - (b.ReceivedDBM - m.LevelDBM)
		}
	}
	return b.ReceivedDBM, b.EIRPDBM
}

// availability says for how much of the year both directions work, rounded
// down.
func (s *sheet) availability(both *assess.Outage) {
	if !both.Known || math.IsNaN(both.AvailabilityAnnualPercent) {
		return
	}
	percent := math.Floor(both.AvailabilityAnnualPercent*1e4) / 1e4
	s.y += 30
	s.text(marginLeft, s.y, face{size: 20}, "Works "+trimmed(percent)+nbsp+"% of the year in both directions, by rain and multipath at that margin.")
}

// equipment is what stands at one end, by the names its owner gave it.
func (s *sheet) equipment(letter string, t assess.TerminalRequest) {
	var parts []string
	if t.Radio != nil {
		parts = append(parts, plain(t.Radio.Name))
	}
	if t.Antenna != nil {
		parts = append(parts, plain(t.Antenna.Name))
	}
	if t.Polarisation != "" {
		parts = append(parts, string(t.Polarisation))
	}
	if t.AzimuthDeg != nil {
		parts = append(parts, "aimed at "+fixed(*t.AzimuthDeg, 1)+"°")
	}
	if t.TiltDeg != nil {
		parts = append(parts, "tilted "+fixed(*t.TiltDeg, 1)+"°")
	}
	s.y += 30
	s.name(marginLeft, s.y, face{size: 20}, "At "+letter+": "+strings.Join(parts, "; "), marginRight-marginLeft)
}

// radioReasons says why the target is missed.
func (s *sheet) radioReasons() {
	f := face{size: 20, bold: true}
	for _, reason := range s.a.Radio.Report.Reasons {
		s.y = s.lines(marginLeft, s.y+30, 28, f, wrap(plain(reason.Detail), f, marginRight-marginLeft)) - 28
	}
}

// level is a power or a ratio to a decibel's tenth.
func level(v float64, unit string) string {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return unknownWord
	}
	return fixed(v, 1) + nbsp + unit
}

// outcome is how the radio's target fares: met, missed, or not judged where
// only missing data stands in the way.
func outcome(a *assess.Assessment) string {
	switch {
	case a.Radio.Report.Meets:
		return "met"
	case a.RadioUnjudged():
		return "not judged"
	}
	return "missed"
}

// targetWords says what was asked for, and how it fares.
func targetWords(t assess.Target, outcome string) string {
	var parts []string
	if t.CapacityMbps > 0 {
		parts = append(parts, fixed(t.CapacityMbps, 0)+nbsp+"Mbit/s")
	}
	if t.MarginDB > 0 {
		parts = append(parts, level(t.MarginDB, "dB")+" margin")
	}
	if t.AvailabilityPercent > 0 {
		parts = append(parts, trimmed(t.AvailabilityPercent)+nbsp+"% of the year")
	}
	if len(parts) == 0 {
		parts = []string{"any margin"}
	}
	return "target " + outcome + ": " + strings.Join(parts, ", ")
}

// magneticAzimuth is NaN where none was asked for or none is known.
func (s *sheet) magneticAzimuth(letter string) float64 {
	switch {
	case s.a.Radio == nil:
		return math.NaN()
	case letter == "A":
		return s.a.Radio.Report.Aim.A.MagneticAzimuthDeg
	}
	return s.a.Radio.Report.Aim.B.MagneticAzimuthDeg
}
