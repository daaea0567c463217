package assess

import (
	"cmp"
	"slices"
	"strings"

	"ridgehop/profile"
)

// kindsMixed reports whether the terrain is bare earth at some samples and a
// surface alone at others.
func kindsMixed(p *profile.Profile) bool {
	ground, surface := false, false
	for i, source := range p.SourceIndex {
		if source < 0 {
			continue
		}
		above := len(p.CoverIndex) > 0 && p.CoverIndex[i] >= 0
		ground = ground || p.Sources[source].Kind == profile.KindGround && !above
		surface = surface || p.Sources[source].Kind == profile.KindSurface
	}
	return ground && surface
}

// onSurface reports whether an antenna's height above ground counts from the
// top of a surface, since no bare earth is known there.
func (a *Assessment) onSurface(e End, i int) bool {
	p := &a.Profile
	if e.HeightAbove != AboveGround || i < 0 || i >= len(p.SourceIndex) || p.SourceIndex[i] < 0 {
		return false
	}
	return p.Sources[p.SourceIndex[i]].Kind == profile.KindSurface
}

// datumCautions say what the heights count from, where that is in doubt.
func (a *Assessment) datumCautions(add func(code, format string, args ...any)) {
	p := &a.Profile
	for _, d := range p.DatumDoubts {
		add("vertical_datum_unresolved", "Heights of %s count from %s and could not be brought to %s: they may be off by up to about %.0f m.",
			d.Source, cmp.Or(d.From, "a datum that is not stated"), cmp.Or(p.VerticalDatum, "the others'"), d.SizeM)
	}
	unstated := slices.ContainsFunc(p.Sources, func(s profile.Source) bool {
		return s.VerticalDatum == "" && (s.Kind == profile.KindGround || s.Kind == profile.KindSurface || s.Kind == profile.KindUnstated)
	})
	if unstated && len(p.DatumDoubts) == 0 {
		add("vertical_datum_unstated", "The rasters do not say what their heights count from; they are used as they stand.")
	}
}

// coverCautions say what of trees and buildings is not known.
func (a *Assessment) coverCautions(add func(code, format string, args ...any)) {
	p := &a.Profile
	kinds := map[profile.Kind]bool{}
	for _, s := range p.Sources {
		kinds[s.Kind] = true
	}
	if kinds[profile.KindGround] && !kinds[profile.KindSurface] && !kinds[profile.KindUnstated] && a.Request.CoverHeightM == 0 {
		switch {
		case kinds[profile.KindCanopy]:
		case kinds[profile.KindBuildings]:
			add("trees_not_known", "Only bare earth and buildings are known here: no tree is counted. State cover_height_m, or load a canopy or a surface model.")
		default:
			add("bare_earth_only", "Only bare earth is known here: no roof and no tree is counted. State cover_height_m, or load a surface model, canopy or buildings.")
		}
	}
	for _, end := range []struct {
		name string
		e    End
		from profile.HeightFrom
	}{{"A", a.Request.A, a.Link.HeightAFrom}, {"B", a.Request.B, a.Link.HeightBFrom}} {
		if end.e.HeightAbove == AboveRoof && end.from == profile.FromGround && len(p.CoverIndex) > 0 {
			add("no_roof_found", "Nothing stands at %s as far as the data shows: its height above the roof counts from the ground. Is the place right?", end.name)
		}
	}
}

// leftOutCaution says which heights of trees and buildings were not counted.
func (a *Assessment) leftOutCaution(add func(code, format string, args ...any)) {
	if names := a.Profile.LeftOut; len(names) > 0 {
		add("cover_left_out", "Heights of %s were not counted, since a surface model speaks there and holds them already: counted with it they would count twice.",
			strings.Join(names, ", "))
	}
}

// errorCautions say where a vertical error was assumed.
func (a *Assessment) errorCautions(add func(code, format string, args ...any)) {
	for _, s := range a.Profile.Sources {
		if s.ErrorAssumed {
			add("vertical_error_assumed", "No vertical error is stated for %s: the confidence assumes %g m (1 sigma), correlated over %g m.", s.Name, s.ErrorM, s.CorrelationM)
			return
		}
	}
}
