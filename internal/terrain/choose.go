package terrain

import (
	"context"
	"fmt"
	"slices"
	"strings"

	"ridgehop/profile"
)

// chosen is what a path may be sampled from.
type chosen struct {
	mosaics []*mosaic
	prints  []outlined
}

// choose lists what may lie under a path: everything, or what belongs to the
// rasters and sources of the names in only.
func (t *Terrain) choose(ctx context.Context, geographic track, only []string, into *profile.Profile) (chosen, error) {
	out := chosen{mosaics: t.mosaics, prints: t.prints}
	var names map[string]bool
	if len(only) > 0 {
		var err error
		if names, err = t.names(only); err != nil {
			return chosen{}, err
		}
		out = t.named(names)
	}
	for _, s := range t.sources {
		if s.tiles == nil {
			continue
		}
		filter := names
		if names[s.Name] {
			filter = nil
		} else if names != nil && !slices.ContainsFunc(only, s.owns) {
			continue
		}
		more, err := s.tiles.under(ctx, geographic, filter, &into.Unreachable)
		if err != nil {
			return chosen{}, err
		}
		out.mosaics = append(slices.Clip(out.mosaics), more...)
	}
	return out, nil
}

// owns reports whether a raster's name is that of one of the source's.
func (s *source) owns(name string) bool { return strings.HasPrefix(name, s.Name+"/") }

// names checks that every name is that of a raster or a source.
func (t *Terrain) names(only []string) (map[string]bool, error) {
	names := map[string]bool{}
	for _, name := range only {
		known := t.byName[name] != nil || slices.ContainsFunc(t.sources, func(s *source) bool {
			return !s.plain && s.Name == name || s.tiles != nil && s.owns(name)
		})
		if !known {
			return nil, fmt.Errorf("%w: %q", profile.ErrUnknownRaster, name)
		}
		names[name] = true
	}
	return names, nil
}

// named are the rasters of these names, or whose source has one of them, laid
// together.
func (t *Terrain) named(names map[string]bool) chosen {
	wanted := func(e *entry) bool { return names[e.Name] || e.Source != "" && names[e.Source] }
	var out chosen
	var entries []*entry
	for _, e := range t.byName {
		if wanted(e) && e.outlines == nil {
			entries = append(entries, e)
		}
	}
	for _, p := range t.prints {
		if wanted(p.entry) {
			out.prints = append(out.prints, p)
		}
	}
	out.mosaics = t.lay(entries)
	return out
}
