package terrain

import (
	"maps"
	"slices"

	"ridgehop/internal/terrain/catalogue"
	"ridgehop/profile"
)

// changesBetween compares what two terrains hold. A raster counts as changed
// where its file's size or date is another, or what its source says of it.
func changesBetween(old, fresh *Terrain) profile.RasterChanges {
	before, after := old.states(), fresh.states()
	var out profile.RasterChanges
	for _, name := range slices.Sorted(maps.Keys(after)) {
		state, known := before[name]
		switch {
		case !known:
			out.Added = append(out.Added, name)
		case state != after[name]:
			out.Changed = append(out.Changed, name)
		}
	}
	for _, name := range slices.Sorted(maps.Keys(before)) {
		if _, stays := after[name]; !stays {
			out.Removed = append(out.Removed, name)
		}
	}
	return out
}

// state is what would make answers differ.
type state struct {
	path, kind, datum string
	bytes, modified   int64
	errorM, lengthM   float64
	priority          int
	beside            besideFile
}

// states are those of the usable rasters, and of the sources by degrees of the
// earth, by name.
func (t *Terrain) states() map[string]state {
	out := make(map[string]state, len(t.byName))
	for name, e := range t.byName {
		out[name] = state{e.path, string(e.Kind), e.VerticalDatum, e.bytes, e.Modified.UnixNano(), e.ErrorM, e.CorrelationM, e.Priority, e.beside}
	}
	for _, s := range t.sources {
		if s.tiles != nil {
			out[s.Name] = state{path: s.Tiles.Path(catalogue.Cell{}), kind: string(s.Kind), datum: s.Datum,
				errorM: s.VerticalErrorM, lengthM: s.CorrelationLengthM, priority: s.Priority}
		}
	}
	return out
}
