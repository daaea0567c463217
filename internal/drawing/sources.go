package drawing

import (
	"ridgehop/internal/assess"
	"ridgehop/profile"
)

const maxSources = 6

// sources draws what the heights rest on.
func (s *sheet) sources() {
	p := &s.a.Profile
	s.group("Sources of the heights", func() {
		remark := fixed(float64(len(p.DistanceM)), 0) + " samples, " + spacing(p.SpacingM) + " apart"
		if s.a.Judgement.VoidShare > 0 {
			remark += ", " + share(s.a.Judgement.VoidShare) + " without a height"
		}
		s.heading("Height sources", remark)
		if len(p.Sources) == 0 {
			s.y += 34
			s.text(marginLeft, s.y, face{size: 23}, "no raster holds a height on this path")
		}
		for _, source := range p.Sources[:min(len(p.Sources), maxSources)] {
			s.source(source)
		}
		if more := len(p.Sources) - maxSources; more > 0 {
			s.y += 32
			s.text(marginLeft, s.y, face{size: 20, fill: quiet}, "and "+fixed(float64(more), 0)+" more")
		}
	})
}

// source is two lines: name and share, then version, date and kind.
func (s *sheet) source(source profile.Source) {
	s.y += 36
	s.name(marginLeft, s.y, face{size: 23}, sourceName(source), 640)
	s.text(marginRight, s.y, face{size: 23, anchor: atEnd}, partWords(source, s.a))
	s.y += 28
	f := face{size: 20, fill: quiet}
	s.name(marginLeft, s.y, f, sourceDetail(source), marginRight-marginLeft)
}

// partWords says how much of the profile rests on the source.
func partWords(source profile.Source, a *assess.Assessment) string {
	if source.Samples == len(a.Profile.DistanceM) {
		return "all samples"
	}
	return share(float64(source.Samples)/float64(len(a.Profile.DistanceM))) + " of the samples"
}

func sourceName(source profile.Source) string {
	if source.Kind == profile.KindProfile {
		return "a profile brought by the caller"
	}
	return plain(source.Name)
}

func sourceDetail(source profile.Source) string {
	if source.Kind == profile.KindProfile {
		return "taken as given, straight between its points"
	}
	dated := "file date not known"
	if source.DataDate != "" {
		dated = "file of " + plain(source.DataDate)
	}
	return "version " + plain(source.Version) + "; " + dated + "; " + kindWords(source.Kind)
}

func kindWords(k profile.Kind) string {
	switch k {
	case profile.KindGround:
		return "bare earth"
	case profile.KindSurface:
		return "with roofs and trees"
	case profile.KindProfile, profile.KindUnstated:
	}
	return "roofs and trees not stated"
}

// spacing is the step between samples, which may be centimetres.
func spacing(m float64) string {
	if m < 1 {
		return fixed(m, 2) + " m"
	}
	return distance(m)
}
