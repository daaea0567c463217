package terrain

import (
	"context"
	"math"

	"github.com/paulmach/orb"

	"ridgehop/internal/geodesy"
	"ridgehop/profile"
)

// spotM is the length of the path whose first sample stands for a place.
const spotM = 2.0

// Heights reads every raster at one place, and says what a path makes of them
// there. The errors are those of Sample.
func (t *Terrain) Heights(ctx context.Context, lon, lat float64) (profile.Spot, error) {
	out := profile.Spot{Lon: lon, Lat: lat, CoverM: math.NaN()}
	azimuth := 0.0
	if lat > 0 { // away from the pole
		azimuth = 180
	}
	a := orb.Point{lon, lat}
	path := profile.Path{A: a, B: geodesy.Direct(a, azimuth, spotM), Located: true, LengthM: spotM, AzimuthADeg: azimuth}
	var p profile.Profile
	if err := t.Sample(ctx, path, profile.Sampling{SpacingM: spotM / 2}, &p); err != nil {
		return out, err
	}
	out.GroundM, out.VerticalDatum = p.GroundM[0], p.VerticalDatum
	out.DatumDoubts, out.Unreachable = p.DatumDoubts, p.Unreachable
	if i := p.SourceIndex[0]; i >= 0 {
		out.Ground = &p.Sources[i]
	}
	if len(p.CoverM) > 0 {
		out.CoverM = p.CoverM[0]
		if i := p.CoverIndex[0]; i >= 0 {
			out.Cover = &p.Sources[i]
		}
	}
	var err error
	out.Heights, err = t.each(ctx, path)
	return out, err
}

// each reads every raster under the start of a path by itself.
func (t *Terrain) each(ctx context.Context, path profile.Path) ([]profile.SpotHeight, error) {
	var p profile.Profile
	s := sampler{ctx: ctx, terrain: t, line: geodesy.LineFrom(path.A, path.AzimuthADeg, path.LengthM), into: &p, scratch: new(scratch)}
	if err := s.cross(nil); err != nil {
		return nil, err
	}
	var out []profile.SpotHeight
	say := func(e *entry, heightM float64) error {
		version, err := e.version()
		if err != nil {
			return &profile.UnreadableError{Raster: e.Name, Err: err}
		}
		out = append(out, profile.SpotHeight{Source: e.asSource(version, 0), HeightM: heightM})
		return nil
	}
	for l := range layerCount {
		levels := s.levels(l)
		for i := range levels {
			u, v := levels[i].track[0].at(0)
			h, tile, err := levels[i].cur.height(u, v)
			if err == nil && tile >= 0 {
				err = say(levels[i].mosaic.tiles[tile].entry, h)
			}
			if err != nil {
				return nil, err
			}
		}
	}
	for _, print := range t.prints {
		if h, _, ok := print.outlines.At(path.A.Lon(), path.A.Lat()); ok {
			if err := say(print.entry, h); err != nil {
				return nil, err
			}
		}
	}
	return out, nil
}
