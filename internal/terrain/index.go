package terrain

import (
	"encoding/gob"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"time"

	"github.com/paulmach/orb"

	"ridgehop/internal/raster"
)

// Index is what was found when files were looked at, by their place on disk:
// with it a folder of tens of thousands of tiles is loaded without opening one.
// A file of another size or date is looked at anew.
type Index map[string]IndexRow

// IndexRow is what is known of one file.
type IndexRow struct {
	Bytes    int64
	Modified time.Time
	Beside   besideFile
	Info     raster.Info
	Bound    orb.Bound
	PixelM   float64
	Version  string // empty if it was never needed
}

// recall fills in the entry from the index; false if it is not there, or not as
// it was.
func (x Index) recall(e *entry) bool {
	row, ok := x[e.path]
	if !ok || e.stat() != nil || row.Bytes != e.bytes || !row.Modified.Equal(e.Modified) || row.Beside != e.beside {
		return false
	}
	e.describe(row.Info)
	e.Bound, e.PixelM, e.known = row.Bound, row.PixelM, row.Version
	e.source.state(&e.Raster)
	return true
}

// Index is what this terrain knows of its files.
func (t *Terrain) Index() Index { return t.index() }

func (t *Terrain) index() Index {
	out := Index{}
	if t == nil {
		return out
	}
	for _, e := range t.byName {
		if e.remote || e.outlines != nil {
			continue
		}
		e.mu.Lock()
		out[e.path] = IndexRow{Bytes: e.bytes, Modified: e.Modified, Beside: e.beside, Info: e.info, Bound: e.Bound, PixelM: e.PixelM, Version: e.known}
		e.mu.Unlock()
	}
	return out
}

// savedIndex is the index as it is written: definitions of coordinate systems,
// by far the longest part, stand once.
type savedIndex struct {
	Systems []string
	Rows    map[string]savedRow
}

type savedRow struct {
	IndexRow
	System int
}

// indexFormat stands at the start of a saved index; another one is not read.
const indexFormat = "ridgehop rasters 2"

// Save writes the index to a file, whole or not at all.
func (x Index) Save(path string) error {
	saved := savedIndex{Rows: make(map[string]savedRow, len(x))}
	numbers := map[string]int{}
	for name, row := range x {
		n, ok := numbers[row.Info.CRS.WKT]
		if !ok {
			n = len(saved.Systems)
			numbers[row.Info.CRS.WKT] = n
			saved.Systems = append(saved.Systems, row.Info.CRS.WKT)
		}
		row.Info.CRS.WKT = ""
		saved.Rows[name] = savedRow{row, n}
	}
	f, err := os.CreateTemp(filepath.Dir(path), filepath.Base(path)+".*")
	if err != nil {
		return fmt.Errorf("index of rasters: %w", withoutFolder(err))
	}
	encoder := gob.NewEncoder(f)
	err = errors.Join(encoder.Encode(indexFormat), encoder.Encode(saved), f.Close())
	if err == nil {
		err = os.Rename(f.Name(), path)
	}
	if err != nil {
		return fmt.Errorf("index of rasters: %w", errors.Join(withoutFolder(err), os.Remove(f.Name())))
	}
	return nil
}

// ReadIndex reads a saved index; an empty one where there is no file. A file
// that cannot be understood is an error: the caller may go on without.
func ReadIndex(path string) (Index, error) {
	f, err := os.Open(path)
	if errors.Is(err, fs.ErrNotExist) {
		return Index{}, nil
	}
	if err != nil {
		return Index{}, fmt.Errorf("index of rasters: %w", withoutFolder(err))
	}
	defer f.Close()
	var format string
	var saved savedIndex
	decoder := gob.NewDecoder(f)
	if err := decoder.Decode(&format); err != nil || format != indexFormat {
		return Index{}, errors.New("index of rasters: it is of another version of the program")
	}
	if err := decoder.Decode(&saved); err != nil {
		return Index{}, fmt.Errorf("index of rasters: %w", err)
	}
	out := make(Index, len(saved.Rows))
	for name, row := range saved.Rows {
		if row.System < 0 || row.System >= len(saved.Systems) {
			return Index{}, errors.New("index of rasters: it is damaged")
		}
		row.Info.CRS.WKT = saved.Systems[row.System]
		out[name] = row.IndexRow
	}
	return out, nil
}
