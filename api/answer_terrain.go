package api

import "ridgehop/internal/assess"

// terrainOf says what the heights came from.
func terrainOf(a *assess.Assessment) Terrain {
	p := &a.Profile
	out := Terrain{
		Rasters: []TerrainSource{}, VerticalDatum: unlessZero(p.VerticalDatum), SpacingM: round(p.SpacingM, 4),
		Samples: int32(len(p.GroundM)), VoidShare: round(a.Judgement.VoidShare, 6),
		Voids: []Void{}, Unreachable: []UnreachableSource{},
	}
	for _, s := range p.Sources {
		out.Rasters = append(out.Rasters, terrainSource(s, len(p.GroundM)))
	}
	for _, v := range p.VoidSpans() {
		out.Voids = append(out.Voids, Void{FromM: round(v.FromM, 3), ToM: round(v.ToM, 3), LengthM: round(v.ToM-v.FromM, 3)})
	}
	for _, u := range p.Unreachable {
		out.Unreachable = append(out.Unreachable, UnreachableSource{Name: u.Source, Reason: u.Reason})
	}
	return out
}

func terrainSource(s assess.Source, samples int) TerrainSource {
	return TerrainSource{
		Name: s.Name, Version: s.Version, Kind: RasterKind(s.Kind), Share: round(float64(s.Samples)/float64(samples), 6),
		VerticalDatum: unlessZero(s.VerticalDatum), VerticalErrorM: round(s.ErrorM, 3), CorrelationLengthM: round(s.CorrelationM, 3),
		ErrorAssumed: s.ErrorAssumed, Attribution: s.Attribution, Licence: s.Licence,
	}
}

// unlessZero is a value, or nil where it is its type's zero, which says nothing.
func unlessZero[T comparable](v T) *T {
	var zero T
	if v == zero {
		return nil
	}
	return &v
}

func samplesOf(a *assess.Assessment) *Samples {
	s := a.Samples()
	return &Samples{
		K: s.K, DistanceM: rounded(s.DistanceM), GroundM: figures(s.GroundM), CoverM: rounded(s.CoverM),
		BulgeM: rounded(s.BulgeM), LineM: figures(s.LineM), F1M: rounded(s.F1M),
	}
}
