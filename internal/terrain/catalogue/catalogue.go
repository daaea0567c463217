package catalogue

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"

	"ridgehop/profile"
)

// What a catalogue may hold at most.
const (
	// MaxBytes is the largest file read.
	MaxBytes = 4 << 20
	// MaxSources is the largest number of sources.
	MaxSources = 1000
	// MaxFiles is the largest number of files that one source may list.
	MaxFiles = 10000
)

// Catalogue is the sources of one file, checked. Safe for concurrent use, as
// long as nobody writes to it.
type Catalogue struct {
	// Datum is the vertical datum that answers are given in; empty means that
	// of the first source used on a path.
	Datum string
	// Grids are the geoid grids by datum, as absolute paths on disk: a height
	// above the WGS 84 ellipsoid is the height in the datum plus the grid's
	// undulation. A grid may lie outside the roots: it is not a source.
	Grids map[string]string
	// Roots are where sources may lie: cleaned absolute paths, links resolved,
	// and remote ones with a slash at their end.
	Roots []string
	// Sources are in the order of the file.
	Sources []Source
	// Warnings are what is allowed and seldom meant, one sentence each.
	Warnings []string
}

// Source is one origin of heights. Exactly one of Folder, Files and Tiles is set.
type Source struct {
	// Name is unique: a-z, 0-9, _ and -, 1 to 64 of them.
	Name string
	// Kind is KindGround, KindSurface, KindCanopy or KindBuildings.
	Kind profile.Kind
	// Folder is an absolute path on disk. What lies in it is not looked at here.
	Folder string
	// Files are absolute paths on disk, or remote ones. They are rasters, or all
	// of them GeoJSON footprints on disk, if HeightProperty is set. A path may
	// have links in it: its ending says what the file is.
	Files []string
	// Tiles names one raster for each degree of the earth.
	Tiles *Template
	// HeightProperty is the property of a footprint that holds the building's
	// height above ground in metres.
	HeightProperty string
	// Datum is what heights count from: "ellipsoid", one of the catalogue's
	// Grids, or a name that nothing here resolves. Empty for canopy and
	// buildings, whose heights are above ground.
	Datum string
	// VerticalErrorM is the 1-sigma error of a height, above 0 to 100.
	VerticalErrorM float64
	// CorrelationLengthM is the distance at which the correlation of two errors
	// has fallen to 1/e, above 0 to 100000.
	CorrelationLengthM float64
	// Priority: the higher is asked first; between equals, the finer pixels.
	Priority int
	// Attribution and Licence are what the data's owner asks to be shown.
	Attribution, Licence string
}

// Read reads and checks a file, and that the folders and files it names exist.
// Faults of its content are a FaultsError. Messages name files by their base
// names, and paths as the operator wrote them.
func Read(path string) (*Catalogue, error) {
	name := filepath.Base(path)
	content, err := contentOf(path)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", name, err)
	}
	return Parse(content, filepath.Dir(path), name)
}

func contentOf(path string) ([]byte, error) {
	file, err := os.Open(path)
	if err != nil {
		return nil, withoutPath(err)
	}
	defer file.Close()
	content, err := io.ReadAll(io.LimitReader(file, MaxBytes+1))
	if err != nil {
		return nil, withoutPath(err)
	}
	return content, nil
}

// withoutPath is the error without the folders of this machine.
func withoutPath(err error) error {
	if errors.Is(err, fs.ErrNotExist) {
		return errors.New("there is no such file")
	}
	if at, ok := errors.AsType[*fs.PathError](err); ok {
		return at.Err
	}
	return err
}

// Parse is Read with the content at hand: folder is what relative paths start
// from, name is what messages call the file.
func Parse(content []byte, folder, name string) (*Catalogue, error) {
	return parse(content, folder, name, true)
}

// ParseSyntax is Parse without a look at the disk: whether the named folders and
// files exist, and where links in them lead, is not known then.
func ParseSyntax(content []byte, folder, name string) (*Catalogue, error) {
	return parse(content, folder, name, false)
}

func parse(content []byte, folder, name string, disk bool) (*Catalogue, error) {
	absolute, err := filepath.Abs(folder)
	if err != nil {
		return nil, fmt.Errorf("%s: its folder: %w", name, withoutPath(err))
	}
	r := &reader{file: name, folder: absolute, disk: disk}
	made := r.catalogue(content)
	if err := r.err(); err != nil {
		return nil, err
	}
	made.Warnings = warnings(made, name)
	return made, nil
}

// catalogue reads what it can; it means nothing where there are faults.
func (r *reader) catalogue(content []byte) *Catalogue {
	made := &Catalogue{}
	root, ok := r.document(content)
	if !ok {
		return made
	}
	top, ok := root.mapping("datum", "roots", "datums", "sources")
	if !ok {
		return made
	}
	made.Roots = r.readRoots(top)
	if e, ok := top.get("datum"); ok {
		made.Datum, _ = e.name()
	}
	made.Grids = r.readGrids(top)
	made.Sources = r.readSources(top)
	return made
}
