package catalogue

import (
	"path/filepath"
	"strings"
)

// readTiles reads the template of a source, with its cells.
func (r *reader) readTiles(f fields) *Template {
	cells := f.readCells()
	e, ok := f.get("tiles")
	if !ok {
		return nil
	}
	text, ok := e.path()
	if !ok {
		return nil
	}
	parts, err := partsOf(text)
	switch {
	case err != nil:
		e.allowed(text, err.Error())
		return nil
	case hasEnding(text, ".geojson", ".json"):
		e.allowed(text, "tiles are rasters; list GeoJSON under files")
		return nil
	case Remote(text):
		return r.remoteTiles(e, text, parts, cells)
	}
	return r.localTiles(e, text, cells)
}

func (r *reader) remoteTiles(e entry, text string, parts []part, cells Bounds) *Template {
	problem := unfitRemote(text)
	if problem == "" {
		problem = r.outside(fixedFolder(text))
	}
	if !e.allowed(text, problem) {
		return nil
	}
	return &Template{parts: parts, cells: cells, remote: true}
}

// localTiles holds the folder above the first field to the roots. The template is
// cut into parts before the catalogue's folder is put in front: that may have
// braces of its own.
func (r *reader) localTiles(e entry, text string, cells Bounds) *Template {
	_, problem := r.local(strings.ReplaceAll(text, ":lower}", "}"))
	if problem == "" && strings.HasSuffix(text, "/") {
		problem = "it ends in a slash and so names no file"
	}
	folder, path := fixedFolder(text), ""
	if problem == "" {
		path, problem = r.place(folder, r.unlikeFolder)
	}
	if !e.allowed(text, problem) {
		return nil
	}
	parts, err := partsOf(filepath.Clean(strings.TrimPrefix(text, folder)))
	if err != nil {
		e.allowed(text, err.Error())
		return nil
	}
	front := part{text: strings.TrimSuffix(path, "/") + "/"}
	return &Template{parts: append([]part{front}, parts...), cells: cells}
}

// fixedFolder is the part of a template before the segment of its first field,
// with the slash at its end.
func fixedFolder(text string) string {
	literal, _, _ := strings.Cut(text, "{")
	folder := literal[:strings.LastIndex(literal, "/")+1]
	if folder == "" {
		return "./"
	}
	return folder
}

// readCells reads the bounds of a template: by default the whole earth.
func (f fields) readCells() Bounds {
	cells := Earth()
	e, ok := f.get("cells")
	if !ok {
		return cells
	}
	if _, ok := f.get("tiles"); !ok {
		e.fault("has no meaning without tiles; leave it out")
	}
	sides, ok := e.mapping("west", "south", "east", "north")
	if !ok {
		return cells
	}
	cells.West = sides.degrees("west", 180)
	cells.South = sides.degrees("south", 90)
	cells.East = sides.degrees("east", 180)
	cells.North = sides.degrees("north", 90)
	sides.ordered("west", "east", cells.West, cells.East, " (data across the 180th meridian are two sources)")
	sides.ordered("south", "north", cells.South, cells.North, "")
	return cells
}

// degrees is a whole number of degrees from -most to most.
func (f fields) degrees(side string, most int) int {
	e, ok := f.need(side, "cells have west, south, east and north")
	if !ok {
		return 0
	}
	value, ok := e.whole(-most, most, "a whole number of degrees")
	if !ok {
		delete(f.values, side) // already told: not to be compared
	}
	return value
}

// ordered wants the low side below the high one, if both are stated.
func (f fields) ordered(low, high string, least, most int, hint string) {
	_, hasLow := f.get(low)
	e, hasHigh := f.get(high)
	if hasLow && hasHigh && least >= most {
		e.fault("is %d and %s is %d; %s must be less than %s%s", most, low, least, low, high, hint)
	}
}
