package catalogue

import "ridgehop/profile"

// readFolder is the path of a folder of rasters, or empty.
func (r *reader) readFolder(f fields) string {
	e, ok := f.get("folder")
	if !ok {
		return ""
	}
	text, ok := e.path()
	if !ok {
		return ""
	}
	if Remote(text) {
		e.allowed(text, "a folder must lie on disk; list what is remote under files, or name it by tiles")
		return ""
	}
	path, problem := r.place(text, r.unlikeFolder)
	e.allowed(text, problem)
	return path
}

// readFiles reads the files of a source, and the property that GeoJSON needs.
func (r *reader) readFiles(f fields, kind profile.Kind) (paths []string, property string) {
	list := f.fileList()
	footprints, seen := 0, map[string]bool{}
	for _, e := range list {
		if isGeoJSON(e.node.Value) {
			footprints++
		}
		path, ok := r.readFile(e, kind)
		if !ok {
			continue
		}
		if seen[path] {
			e.fault("is %s, which is in the list already", shown(e.node.Value))
		}
		seen[path] = true
		paths = append(paths, path)
	}
	if footprints > 0 && footprints < len(list) {
		f.values["files"].fault("has both GeoJSON and rasters; make two sources of them")
	}
	if footprints > 0 && kind != profile.KindBuildings {
		return paths, "" // told already
	}
	return paths, f.heightProperty(footprints > 0)
}

func (f fields) fileList() []entry {
	e, ok := f.get("files")
	if !ok {
		return nil
	}
	list, _ := e.list(MaxFiles)
	return list
}

func (r *reader) readFile(e entry, kind profile.Kind) (string, bool) {
	text, ok := e.path()
	if !ok {
		return "", false
	}
	switch {
	case isGeoJSON(text) && kind != profile.KindBuildings && kind != "":
		return "", e.allowed(text, "GeoJSON is read for buildings only")
	case isGeoJSON(text) && Remote(text):
		return "", e.allowed(text, "GeoJSON must lie on disk")
	case !Remote(text):
		path, problem := r.place(text, r.unlikeFile)
		return path, e.allowed(text, problem)
	}
	problem := unfitRemote(text)
	if problem == "" {
		problem = r.outside(text)
	}
	return text, e.allowed(text, problem)
}

func isGeoJSON(path string) bool { return hasEnding(path, ".geojson", ".json") }

// heightProperty is needed with footprints and refused without.
func (f fields) heightProperty(footprints bool) string {
	e, stated := f.get("height_property")
	switch {
	case footprints && !stated:
		f.need("height_property", "name the property of a footprint that holds the building's height in metres")
	case footprints:
		return e.text(100)
	case stated:
		e.fault("has no meaning without GeoJSON files; leave it out")
	}
	return ""
}
