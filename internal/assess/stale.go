package assess

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"

	"ridgehop/profile"
)

// What the terrain says and the callers of this package handle.
type (
	// Spot is what is known of the height of one place.
	Spot = profile.Spot
	// SpotHeight is one raster's height at a place.
	SpotHeight = profile.SpotHeight
	// Coverage is the part of the earth that one source has rasters for.
	Coverage = profile.Coverage
	// RasterChanges is what loading the rasters anew found.
	RasterChanges = profile.RasterChanges
	// Source is one raster that gave heights.
	Source = profile.Source
)

// Stale says why the assessment would rest on other data if it were made now:
// a raster has another version, is gone, or another one speaks on the path. It
// is empty where nothing has changed, and for a profile that the caller brought.
// The error is what kept the terrain from being read, or ctx's.
func (s *Service) Stale(ctx context.Context, a *Assessment) ([]string, error) {
	if len(a.Request.Profile) > 0 {
		return nil, nil
	}
	var now profile.Profile
	err := s.terrain.Sample(ctx, a.Link.Path, profile.Sampling{SpacingM: a.Request.SpacingM, Rasters: a.Request.Rasters}, &now)
	if errors.Is(err, profile.ErrUnknownRaster) {
		return []string{"A raster that was asked for by name is no longer loaded."}, nil
	}
	if err != nil {
		return nil, err
	}
	return differences(&a.Profile, &now), nil
}

// differences compares what two profiles of one path rest on.
func differences(before, now *profile.Profile) []string {
	var out []string
	for _, s := range now.Sources {
		switch old := named(before.Sources, s.Name); {
		case old == nil:
			out = append(out, fmt.Sprintf("Raster %s speaks on the path now.", s.Name))
		case old.Version != s.Version:
			out = append(out, fmt.Sprintf("Raster %s has changed: version %s is now %s.", s.Name, old.Version, s.Version))
		case old.Kind != s.Kind || old.VerticalDatum != s.VerticalDatum || old.ErrorM != s.ErrorM || old.CorrelationM != s.CorrelationM:
			out = append(out, fmt.Sprintf("The catalogue says other things of raster %s.", s.Name))
		}
	}
	for _, s := range before.Sources {
		away := slices.ContainsFunc(now.Unreachable, func(u profile.Unreachable) bool { return u.Source == s.Name })
		if named(now.Sources, s.Name) == nil && !away {
			out = append(out, fmt.Sprintf("Raster %s no longer speaks on the path.", s.Name))
		}
	}
	if len(out) == 0 && len(now.Unreachable) == 0 && (before.VerticalDatum != now.VerticalDatum || endsMoved(before, now)) {
		out = append(out, "Heights are brought to another vertical datum, or put together otherwise, now.")
	}
	if len(before.Unreachable) > 0 && len(now.Unreachable) == 0 {
		out = append(out, "A raster that did not answer then answers now.")
	}
	return out
}

// endsMoved reports whether the ground at either end is another one, by more than
// a record's rounding.
func endsMoved(before, now *profile.Profile) bool {
	const rounding = 0.01
	b, n := before.GroundM, now.GroundM
	if len(b) == 0 || len(n) == 0 {
		return false
	}
	moved := func(x, y float64) bool { return math.Abs(x-y) > rounding || math.IsNaN(x) != math.IsNaN(y) }
	return moved(b[0], n[0]) || moved(b[len(b)-1], n[len(n)-1])
}

func named(sources []profile.Source, name string) *profile.Source {
	for i := range sources {
		if sources[i].Name == name {
			return &sources[i]
		}
	}
	return nil
}
