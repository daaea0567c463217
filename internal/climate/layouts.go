package climate

import (
	"fmt"
	"io/fs"
	"maps"
	"slices"
	"strings"
)

// layoutsFile is the optional file beside the maps that says how they are laid out.
const layoutsFile = "maps.json"

const mostLayoutsBytes = 64 << 10

// readLayouts returns the layout of each map found: the published one, or what
// maps.json says.
func readLayouts(folder fs.FS, files map[quantity]string) (map[quantity]layout, error) {
	layouts := make(map[quantity]layout)
	for _, p := range products() {
		layouts[p.quantity] = p.layout
	}
	name, err := findLayoutsFile(folder)
	if name == "" || err != nil {
		return layouts, err
	}
	opened, err := folder.Open(name)
	if err != nil {
		return nil, err
	}
	defer opened.Close()
	document, err := decodeJSON(opened, mostLayoutsBytes)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", name, err)
	}
	if err := applyLayouts(layouts, document, files); err != nil {
		return nil, fmt.Errorf("%s: %w", name, err)
	}
	return layouts, nil
}

// applyLayouts changes the published layouts to what the document says of the files.
func applyLayouts(layouts map[quantity]layout, document any, files map[quantity]string) error {
	var found findings
	said := make(map[quantity]string)
	fields := found.object("", document)
	for _, key := range slices.Sorted(maps.Keys(fields)) {
		at := pointer("", key)
		p, ok := productOf(key)
		if !ok || !strings.EqualFold(files[p.quantity], key) {
			found.add(at, "is no map in this folder; the files are %s", acceptedNames)
			continue
		}
		if other, twice := said[p.quantity]; twice {
			found.add(at, "is the same file as %s", other)
		}
		said[p.quantity] = at
		layouts[p.quantity] = found.layout(at, fields[key], p.layout)
	}
	return found.err()
}

// findLayoutsFile returns the name of maps.json in the case it has in the folder, or
// nothing. Only a regular file is opened: anything else could keep us waiting.
func findLayoutsFile(folder fs.FS) (string, error) {
	entries, err := fs.ReadDir(folder, ".")
	if err != nil {
		return "", err
	}
	for _, entry := range entries {
		if !strings.EqualFold(entry.Name(), layoutsFile) {
			continue
		}
		stat, err := fs.Stat(folder, entry.Name())
		if err != nil {
			return "", err
		}
		if !stat.Mode().IsRegular() {
			return "", &FileError{File: entry.Name(), Detail: "is not a regular file"}
		}
		return entry.Name(), nil
	}
	return "", nil
}

// layout reads what is said of one map over what is published.
func (f *findings) layout(at string, value any, published layout) layout {
	fields := f.object(at, value, "first_longitude", "north_first")
	if given, ok := fields["first_longitude"]; ok {
		longitude, isNumber := number(given)
		if !isNumber || longitude != -180 && longitude != 0 {
			f.add(at+"/first_longitude", "is %s; it must be -180 or 0 degrees east", describe(given))
		}
		published.firstLongitude = longitude
	}
	if given, ok := fields["north_first"]; ok {
		published.northFirst = f.boolean(at+"/north_first", given)
	}
	return published
}
