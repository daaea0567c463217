package climate

import (
	"fmt"
	"io/fs"
	"os"
)

// Maps are the digital maps of one folder, held in memory: about 25 MB with all four.
type Maps struct {
	layers []layer
}

// layer is one map and the line that says where it comes from.
type layer struct {
	quantity quantity
	source   string
	grid     *grid
}

// OpenMaps reads the digital maps of a folder, as the package comment describes it. All
// files are read and checked now, so that a bad one is known before the first question;
// none stays open. A folder without any map is an error. What is wrong with a map is a
// [FileError], with maps.json an [InvalidError]; both come wrapped.
func OpenMaps(dir string) (*Maps, error) {
	if stat, err := os.Stat(dir); err != nil || !stat.IsDir() {
		return nil, fmt.Errorf("climate maps: %s is not a folder", dir)
	}
	m, err := openMaps(os.DirFS(dir))
	if err != nil {
		return nil, fmt.Errorf("climate maps in %s: %w", dir, err)
	}
	return m, nil
}

// At returns the figures at a point in degrees: longitude east, of any turn, and
// latitude north. A figure whose map is missing is NaN, and so are all where the
// point is not on the earth.
func (m *Maps) At(lon, lat float64) Figures {
	f := Unknown()
	f.Sources = make([]string, 0, len(m.layers))
	for _, l := range m.layers {
		f.set(l.quantity, l.grid.at(lon, lat), l.source)
	}
	return f
}

func openMaps(folder fs.FS) (*Maps, error) {
	files, err := findMaps(folder)
	if err != nil {
		return nil, err
	}
	layouts, err := readLayouts(folder, files)
	if err != nil {
		return nil, err
	}
	var m Maps
	for _, p := range products() {
		file, ok := files[p.quantity]
		if !ok {
			continue
		}
		g, err := readMap(folder, file, p, layouts[p.quantity])
		if err != nil {
			return nil, err
		}
		m.layers = append(m.layers, layer{quantity: p.quantity, source: p.quantity.from(p.source(file)), grid: g})
	}
	return &m, nil
}

// findMaps looks through the names in a folder.
func findMaps(folder fs.FS) (map[quantity]string, error) {
	entries, err := fs.ReadDir(folder, ".")
	if err != nil {
		return nil, err
	}
	files := make(map[quantity]string)
	for _, entry := range entries {
		p, ok := productOf(entry.Name())
		if !ok {
			continue
		}
		if other, twice := files[p.quantity]; twice {
			return nil, &FileError{File: entry.Name(), Detail: "holds the same map as " + other + "; keep one of them"}
		}
		files[p.quantity] = entry.Name()
	}
	if len(files) == 0 {
		return nil, fmt.Errorf("there is no map; the files are %s", acceptedNames)
	}
	return files, nil
}
