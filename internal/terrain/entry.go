package terrain

import (
	"errors"
	"io/fs"
	"os"
	"path"
	"slices"
	"strings"
	"sync"
	"sync/atomic"
	"time"

	"github.com/paulmach/orb"

	"ridgehop/internal/raster"
	"ridgehop/internal/terrain/catalogue"
	"ridgehop/internal/terrain/footprints"
	"ridgehop/profile"
)

// entry is one raster, or one file of outlines, and where it lies.
type entry struct {
	profile.Raster
	source   *source
	info     raster.Info
	path     string
	bytes    int64
	beside   besideFile // the file beside it that says where its pixels lie
	remote   bool
	outlines *footprints.Footprints
	gone     atomic.Bool // a remote one that was replaced since it was looked at

	mu        sync.Mutex // guards what follows
	known     string     // the version, once it is known
	checkedAt time.Time  // when a remote one was last found unchanged
}

func (t *Terrain) newEntry(s *source, where, name string) *entry {
	e := &entry{Raster: profile.Raster{Name: name, Kind: s.Kind, Source: s.Name}, source: s, path: where, remote: catalogue.Remote(where)}
	return e
}

// describe copies what the raster declares to where callers see it.
func (e *entry) describe(info raster.Info) {
	e.info = info
	e.Width, e.Height = info.Width, info.Height
	e.CRS, e.EPSG = info.CRS.Name, info.CRS.EPSG
	e.Format, e.DataType = info.Driver, info.DataType
	e.NoData, e.HasNoData = info.NoData, info.HasNoData
	e.PixelIsPoint = info.PixelIsPoint
}

// dataDate is when the raster's content was last changed, as far as is known.
func (e *entry) dataDate() string {
	if e.Modified.IsZero() {
		return ""
	}
	return e.Modified.UTC().Format("2006-01-02")
}

// unchanged is an error once the file is no longer the one that was loaded: its
// pixels may have moved, and its version no longer names them.
func (e *entry) unchanged() error {
	stat, err := os.Stat(e.path)
	if err != nil {
		return errors.New("the file is gone")
	}
	if stat.Size() != e.bytes || !stat.ModTime().Equal(e.Modified) || besideOf(e.path) != e.beside {
		return errors.New("the file has changed since it was loaded: reload the rasters to use it as it is now")
	}
	return nil
}

// exists is an error where there is no such file.
func exists(path string) error {
	_, err := os.Stat(path)
	return withoutFolder(err)
}

// withoutFolder is the error without the place on disk.
func withoutFolder(err error) error {
	if where, ok := errors.AsType[*fs.PathError](err); ok {
		return where.Err
	}
	return err
}

// cellBound is the degree of the earth that a cell is.
func cellBound(c catalogue.Cell) orb.Bound {
	lon, lat := float64(c.Lon), float64(c.Lat)
	return orb.Bound{Min: orb.Point{lon, lat}, Max: orb.Point{lon + 1, lat + 1}}
}

// kindOf reads the kind from the file's name, or else from the folders that it
// lies in, where producers write it by custom: "dtm" for bare earth, "dsm" for
// surfaces. "dem" and anything else say nothing about it, nor do both words at
// once. Common practice, no source.
func kindOf(name string) profile.Kind {
	folders, file := path.Split(name)
	if kind := kindIn(file); kind != profile.KindUnstated {
		return kind
	}
	return kindIn(folders)
}

func kindIn(text string) profile.Kind {
	words := strings.FieldsFunc(strings.ToLower(text), func(r rune) bool { return !(r >= 'a' && r <= 'z') })
	ground, surface := slices.Contains(words, "dtm"), slices.Contains(words, "dsm")
	switch {
	case ground && !surface:
		return profile.KindGround
	case surface && !ground:
		return profile.KindSurface
	}
	return profile.KindUnstated
}

// besideFile is the size and the date of the file beside a raster that says where
// its pixels lie; zero where there is none.
type besideFile struct {
	Bytes    int64
	Modified int64 // nanoseconds since 1970
}

func besideOf(path string) besideFile {
	beside := raster.Beside(path)
	if beside == "" {
		return besideFile{}
	}
	stat, err := os.Stat(beside)
	if err != nil {
		return besideFile{}
	}
	return besideFile{stat.Size(), stat.ModTime().UnixNano()}
}
