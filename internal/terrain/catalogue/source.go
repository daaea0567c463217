package catalogue

import "ridgehop/profile"

// readSources reads the list of sources.
func (r *reader) readSources(top fields) []Source {
	e, ok := top.need("sources", "a catalogue lists one or more")
	if !ok {
		return nil
	}
	list, ok := e.list(MaxSources)
	if !ok {
		return nil
	}
	sources := make([]Source, 0, len(list))
	lines := map[string]int{}
	for _, each := range list {
		f, ok := each.mapping("name", "kind", "folder", "files", "tiles", "cells", "height_property", "datum",
			"vertical_error_m", "correlation_length_m", "priority", "attribution", "licence")
		if !ok {
			continue
		}
		sources = append(sources, r.readSource(f, lines))
	}
	return sources
}

// readSource reads one source; lines are those of the names so far.
func (r *reader) readSource(f fields, lines map[string]int) Source {
	s := Source{Name: f.uniqueName(lines), Kind: f.readKind()}
	f.oneOrigin()
	s.Folder = r.readFolder(f)
	s.Files, s.HeightProperty = r.readFiles(f, s.Kind)
	s.Tiles = r.readTiles(f)
	s.Datum = f.readDatum(s.Kind)
	if e, ok := f.need("vertical_error_m", "state the 1-sigma error of a height in metres"); ok {
		s.VerticalErrorM = e.positive(100, "a number of metres")
	}
	if e, ok := f.need("correlation_length_m", "state over how many metres errors are alike"); ok {
		s.CorrelationLengthM = e.positive(100_000, "a number of metres")
	}
	if e, ok := f.get("priority"); ok {
		s.Priority, _ = e.whole(-1_000_000, 1_000_000, "a whole number")
	}
	if e, ok := f.need("attribution", "say whom to credit"); ok {
		s.Attribution = e.text(500)
	}
	if e, ok := f.need("licence", "say on what terms the data may be used"); ok {
		s.Licence = e.text(200)
	}
	return s
}

func (f fields) uniqueName(lines map[string]int) string {
	e, ok := f.need("name", "every source has one")
	if !ok {
		return ""
	}
	name, ok := e.name()
	if !ok {
		return ""
	}
	if first, taken := lines[name]; taken {
		e.fault("is %s, as on line %d; every source has a name of its own", shown(name), first)
		return name
	}
	lines[name] = e.line
	return name
}

// readKind is empty where the kind is at fault.
func (f fields) readKind() profile.Kind {
	e, ok := f.need("kind", "it is ground, surface, canopy or buildings")
	if !ok || !e.scalar() {
		return ""
	}
	switch kind := profile.Kind(e.node.Value); kind {
	case profile.KindGround, profile.KindSurface, profile.KindCanopy, profile.KindBuildings:
		return kind
	}
	e.fault("is %s; it must be ground, surface, canopy or buildings", shown(e.node.Value))
	return ""
}

// oneOrigin wants exactly one of folder, files and tiles.
func (f fields) oneOrigin() {
	var stated []string
	for _, key := range []string{"folder", "files", "tiles"} {
		if _, ok := f.get(key); ok {
			stated = append(stated, key)
		}
	}
	switch len(stated) {
	case 0:
		f.fault("has no data; name one of folder, files or tiles")
	case 1:
	default:
		f.fault("has %s; name exactly one of folder, files or tiles", listed(stated))
	}
}

// readDatum wants a datum where heights count from one.
func (f fields) readDatum(kind profile.Kind) string {
	e, stated := f.get("datum")
	if stated {
		if meant := meantDatum(e.node.Value); meant != "" {
			e.fault("is %s; write %s", shown(e.node.Value), meant)
			return ""
		}
	}
	switch kind {
	case profile.KindGround, profile.KindSurface:
		if _, ok := f.need("datum", "say what the heights count from: egm96, egm2008, ellipsoid or another name"); !ok {
			return ""
		}
		name, _ := e.name()
		return name
	case profile.KindCanopy, profile.KindBuildings:
		if stated {
			e.fault("has no meaning for %s, whose heights are above the ground; leave it out", kind)
		}
	}
	return ""
}
