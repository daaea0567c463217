package catalogue

import "strings"

// ellipsoid is the datum that needs no grid: its undulation is 0.
const ellipsoid = "ellipsoid"

// readGrids reads the geoid grids by datum.
func (r *reader) readGrids(top fields) map[string]string {
	grids := map[string]string{}
	e, ok := top.get("datums")
	if !ok {
		return grids
	}
	datums, ok := e.mapping()
	if !ok {
		return grids
	}
	for _, name := range datums.order {
		if path, ok := r.readGrid(name, datums.values[name]); ok {
			grids[name] = path
		}
	}
	return grids
}

func (r *reader) readGrid(name string, e entry) (string, bool) {
	switch {
	case name == ellipsoid:
		e.fault("needs no grid; leave it out")
		return "", false
	case !isName(name):
		e.fault("is no name of a datum; it must be 1 to 64 of a-z, 0-9, _ and -, beginning with a letter or digit")
		return "", false
	}
	f, ok := e.mapping("grid")
	if !ok {
		return "", false
	}
	grid, ok := f.need("grid", "it names a .gtx or .tif file on disk")
	if !ok {
		return "", false
	}
	text, ok := grid.path()
	if !ok {
		return "", false
	}
	return r.gridFile(grid, text)
}

// gridFile is the path of a grid. It may lie outside the roots, as systems keep
// grids in one place for all programs.
func (r *reader) gridFile(e entry, text string) (string, bool) {
	switch {
	case Remote(text):
		return "", e.allowed(text, "a grid must lie on disk")
	case !hasEnding(text, ".gtx", ".tif", ".tiff"):
		return "", e.allowed(text, "a grid is a .gtx or .tif file")
	}
	path, problem := r.local(text)
	if problem == "" {
		problem = r.unlikeFile(path)
	}
	return path, e.allowed(text, problem)
}

// meantDatum is the name that another spelling of a datum stands for; empty where
// it stands for none. Heights above the ellipsoid under a name that is taken for
// a national datum would be tens of metres off.
func meantDatum(text string) string {
	plain := strings.NewReplacer("-", "", "_", "", " ", "").Replace(strings.ToLower(text))
	meant := map[string]string{
		"wgs84": ellipsoid, "grs80": ellipsoid, "etrs89": ellipsoid, "ellipsoidal": ellipsoid, "ellipsoidheight": ellipsoid, "epsg4979": ellipsoid,
		"egm1996": "egm96", "epsg5773": "egm96", "egm08": "egm2008", "epsg3855": "egm2008",
		ellipsoid: ellipsoid, "egm96": "egm96", "egm2008": "egm2008",
	}[plain]
	if meant == text { // spelt right
		return ""
	}
	return meant
}
