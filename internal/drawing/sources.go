package drawing

import (
	"math"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

// maxSources is how many sources are named. The credits of the others are shown
// all the same.
const maxSources = 6

// Sources are listed in lines of this size.
var sourceFace = face{size: 20, fill: quiet}

const sourceLeading = 27.0

// sources draws what the heights rest on, and whom to credit.
func (s *sheet) sources() {
	p := &s.a.Profile
	s.group("Sources of the heights", func() {
		s.heading("Height sources", datumWords(p))
		s.y += 24
		s.text(marginLeft, s.y, sourceFace, sampling(s.a))
		if len(p.Sources) == 0 {
			s.y += 34
			s.text(marginLeft, s.y, face{size: 23}, nothingRead(p))
		}
		shown := credits{}
		for _, source := range p.Sources[:min(len(p.Sources), maxSources)] {
			s.source(source, shown)
		}
		if len(p.Sources) > maxSources {
			s.moreSources(p.Sources[maxSources:], shown)
		}
		s.sourceNotes()
	})
}

// nothingRead says that no source gave a height.
func nothingRead(p *profile.Profile) string {
	if len(p.Unreachable) > 0 {
		return "no height on this path could be read"
	}
	return "no raster holds a height on this path"
}

// source is its name and share, then what is known of it, then its credit.
func (s *sheet) source(source profile.Source, shown credits) {
	s.y += 36
	s.name(marginLeft, s.y, face{size: 23}, sourceName(source), 640)
	s.text(marginRight, s.y, face{size: 23, anchor: atEnd}, partWords(source, s.a))
	detail := sourceDetail(source)
	words, again := shown.first(source)
	if again != "" {
		detail, words = detail+"; credit as for "+again, ""
	}
	s.sourceLines(sourceFace, detail)
	s.sourceLines(sourceFace, words)
}

// sourceLines writes words below, none of them cut away.
func (s *sheet) sourceLines(f face, words string) {
	s.y = s.lines(marginLeft, s.y+sourceLeading, sourceLeading, f, wrapWhole(words, f, marginRight-marginLeft)) - sourceLeading
}

// moreSources stands for the sources that are not named.
func (s *sheet) moreSources(rest []profile.Source, shown credits) {
	s.y += 5
	s.sourceLines(sourceFace, "and "+fixed(float64(len(rest)), 0)+" more")
	for _, source := range rest {
		if words, again := shown.first(source); again == "" {
			s.sourceLines(sourceFace, words)
		}
	}
}

// sourceNotes says in a line each where heights are in doubt or were not to be
// had. The cautions and the answer's reasons say more.
func (s *sheet) sourceNotes() {
	f := face{size: 20, bold: true}
	for _, d := range s.a.Profile.DatumDoubts {
		s.y += 5
		s.sourceLines(f, "datum in doubt, by up to about "+fixed(math.Ceil(d.SizeM), 0)+nbsp+"m: "+plain(d.Source))
	}
	away := s.a.Profile.Unreachable
	for _, u := range away[:min(len(away), maxSources)] {
		s.y += 32
		s.name(marginLeft, s.y, f, "could not be read: "+plain(u.Source)+" ("+plain(u.Reason)+")", marginRight-marginLeft)
	}
	if more := len(away) - maxSources; more > 0 {
		s.sourceLines(f, "and "+fixed(float64(more), 0)+" more that could not be read")
	}
}

// ellipsoid is the datum that is not a sea level.
const ellipsoid = "ellipsoid"

// seaLevel is what heights on the sheet are above.
func seaLevel(p *profile.Profile) string {
	if p.VerticalDatum == ellipsoid {
		return "the ellipsoid"
	}
	return "sea level"
}

// datumWords says what the heights count from.
func datumWords(p *profile.Profile) string {
	switch {
	case len(p.Sources) == 0:
		return ""
	case p.VerticalDatum == "":
		return "vertical datum not stated"
	case p.VerticalDatum == ellipsoid:
		return "heights above " + seaLevel(p)
	}
	return "heights above " + plain(p.VerticalDatum)
}

// sampling says how many samples there are, and where.
func sampling(a *assess.Assessment) string {
	p, r := &a.Profile, &a.Request
	words := fixed(float64(len(p.DistanceM)), 0) + " samples, "
	switch even := evenlySpaced(p); {
	case even:
		words += spacing(p.SpacingM) + " apart"
	case r.SpacingM == 0 && len(r.Profile) == 0:
		words = "exact: " + words + "where the path crosses the pixels"
	default:
		words += spacing(p.SpacingM) + " apart at most"
	}
	if a.Judgement.VoidShare > 0 {
		words += "; " + share(a.Judgement.VoidShare) + " without a height"
	}
	return words
}

// evenlySpaced is false in the exact mode, and for most profiles that a caller
// brings. A few centimetres in ten kilometres are rounding.
func evenlySpaced(p *profile.Profile) bool {
	n := len(p.DistanceM)
	length := p.DistanceM[n-1]
	step := length / float64(n-1)
	for i, d := range p.DistanceM {
		if math.Abs(d-float64(i)*step) > 1e-6*length {
			return false
		}
	}
	return true
}

// partWords says how much of the profile rests on the source.
func partWords(source profile.Source, a *assess.Assessment) string {
	if source.Samples == len(a.Profile.DistanceM) {
		return "all samples"
	}
	return share(float64(source.Samples)/float64(len(a.Profile.DistanceM))) + " of the samples"
}

// spacing is the step between samples, which may be centimetres.
func spacing(m float64) string {
	if m < 1 {
		return fixed(m, 2) + nbsp + "m"
	}
	return distance(m)
}
