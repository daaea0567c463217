package terrain

import (
	"cmp"
	"context"
	"math"
	"slices"

	"ridgehop/internal/geodesy"
	"ridgehop/internal/terrain/footprints"
	"ridgehop/profile"
)

// Sample implements profile.Terrain.
func (t *Terrain) Sample(ctx context.Context, path profile.Path, how profile.Sampling, into *profile.Profile) error {
	s := sampler{ctx: ctx, terrain: t, line: geodesy.LineFrom(path.A, path.AzimuthADeg, path.LengthM).To(path.B), into: into}
	s.scratch, _ = t.scratch.Get().(*scratch)
	defer t.scratch.Put(s.scratch)
	s.sources.into = into
	into.Resize(0)
	into.PixelM = 0
	if err := s.cross(how.Rasters); err != nil {
		return err
	}
	var err error
	if how.SpacingM > 0 {
		err = s.even(how.SpacingM)
	} else {
		err = s.exact()
	}
	if err != nil {
		return err
	}
	s.markOutside()
	return s.name()
}

// sampler fills one profile.
type sampler struct {
	ctx        context.Context
	terrain    *Terrain
	line       geodesy.Line
	geographic track
	layers     [layerCount][]crossing
	prints     []outlined // building outlines that may lie under the path
	into       *profile.Profile
	sources    sources
	*scratch
}

// scratch is memory that goes from one path to the next.
type scratch struct {
	strips   [layerCount]strip
	vertices []footprints.Vertex
	inside   []footprints.Span
	shifts   []shift
}

// cross finds what lies under the path, layer by layer.
func (s *sampler) cross(only []string) error {
	var err error
	if s.geographic, err = newTrack(s.line.LengthM(), geographicPlane(s.line)); err != nil {
		return err
	}
	found, err := s.terrain.choose(s.ctx, s.geographic, only, s.into)
	if err != nil {
		return err
	}
	crossed, err := s.terrain.crossed(s.line, s.geographic, found.mosaics)
	if err != nil {
		return err
	}
	s.prints = found.prints
	for _, c := range crossed {
		l := layerOf(c.mosaic.source.Kind)
		s.layers[l] = append(s.layers[l], c)
		if l <= surfaceLayer && (s.into.PixelM == 0 || c.pixelM < s.into.PixelM) {
			s.into.PixelM = c.pixelM
		}
	}
	return nil
}

// levels prepares a layer's mosaics for reading.
func (s *sampler) levels(l layer) []level {
	out := make([]level, len(s.layers[l]))
	for i, c := range s.layers[l] {
		out[i] = level{crossing: c, cur: cursor{ctx: s.ctx, m: c.mosaic, chunks: s.terrain.chunks, tile: -1, away: &s.into.Unreachable}}
	}
	return out
}

// markOutside says which end no raster of heights above the sea reaches. A
// source that does not answer may have reached it.
func (s *sampler) markOutside() {
	n := len(s.into.GroundM) - 1
	if n < 0 || len(s.into.Unreachable) > 0 {
		return
	}
	s.into.AOutside = math.IsNaN(s.into.GroundM[0]) && !s.reached(0)
	s.into.BOutside = math.IsNaN(s.into.GroundM[n]) && !s.reached(s.line.LengthM())
}

// reached reports whether any raster lies under the point at distance d, one of
// the two ends.
func (s *sampler) reached(d float64) bool {
	for _, l := range []layer{groundLayer, surfaceLayer} {
		if slices.ContainsFunc(s.layers[l], func(c crossing) bool {
			p := &c.track[0]
			if d > 0 {
				p = &c.track[len(c.track)-1]
			}
			u, v := p.at(d)
			return c.mosaic.underPoint(u, v)
		}) {
			return true
		}
	}
	return false
}

// name lists the rasters that something rests on, those asked first standing
// first, with their versions.
func (s *sampler) name() error {
	samples := s.count()
	place := make([]int16, len(samples))
	for _, i := range s.ranked() {
		e := s.sources.entries[i]
		if samples[i] == 0 { // another layer spoke wherever it would have
			if layerOf(e.Kind) > surfaceLayer {
				s.into.LeftOut = append(s.into.LeftOut, e.Name)
			}
			continue
		}
		version, err := e.version()
		if err != nil {
			return &profile.UnreadableError{Raster: e.Name, Err: err}
		}
		place[i] = int16(len(s.into.Sources))
		s.into.Sources = append(s.into.Sources, e.asSource(version, samples[i]))
	}
	for _, indices := range [][]int16{s.into.SourceIndex, s.into.CoverIndex} {
		for k, i := range indices {
			if i >= 0 {
				indices[k] = place[i]
			}
		}
	}
	return nil
}

// count is how many samples rest on each raster, for the ground or the cover.
func (s *sampler) count() []int {
	samples := make([]int, len(s.sources.entries))
	for _, ground := range s.into.SourceIndex {
		if ground >= 0 {
			samples[ground]++
		}
	}
	for k, cover := range s.into.CoverIndex {
		if cover >= 0 && cover != s.into.SourceIndex[k] {
			samples[cover]++
		}
	}
	return samples
}

// ranked are the places of the rasters in use as they are asked, whichever way
// the path runs.
func (s *sampler) ranked() []int {
	order := make([]int, len(s.sources.entries))
	for i := range order {
		order[i] = i
	}
	slices.SortFunc(order, func(a, b int) int { return asksFirst(s.sources.entries[a], s.sources.entries[b]) })
	return order
}

// asksFirst orders rasters as they are asked.
func asksFirst(a, b *entry) int {
	return cmp.Or(cmp.Compare(b.Priority, a.Priority), cmp.Compare(a.PixelM, b.PixelM), cmp.Compare(a.Name, b.Name))
}

func (e *entry) asSource(version string, samples int) profile.Source {
	return profile.Source{
		Name: e.Name, Version: version, Kind: e.Kind, DataDate: e.dataDate(), Samples: samples,
		VerticalDatum: e.VerticalDatum, ErrorM: e.ErrorM, CorrelationM: e.CorrelationM, ErrorAssumed: e.ErrorAssumed,
		Attribution: e.Attribution, Licence: e.Licence,
	}
}
