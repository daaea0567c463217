package terrain

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"log/slog"
	"maps"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"time"

	"ridgehop/internal/raster"
	"ridgehop/internal/terrain/catalogue"
	"ridgehop/internal/terrain/footprints"
	"ridgehop/profile"
)

// Load looks through the folders and the catalogue's sources for elevation
// data, checks each file, and indexes those that are fit. Folders are searched
// whole for files whose ending names an elevation format. A file that is not fit
// is kept in Rasters with the reason, and logged; it never stops the loading. A
// folder that cannot be listed is an error, and so is a geoid grid that cannot
// be read. Files are closed again: they are opened when a path first needs
// them. Rasters by degrees of the earth are not looked at before that.
func Load(ctx context.Context, gdal *raster.GDAL, folders []string, options Options, log *slog.Logger) (*Terrain, error) {
	t, err := newTerrain(gdal, options)
	if err != nil {
		return nil, err
	}
	l := loading{Terrain: t, ctx: ctx, log: log, index: options.Previous.index()}
	if err := l.all(folders, options); err != nil {
		t.Close()
		return nil, err
	}
	t.mosaics = t.lay(l.usable)
	return t, nil
}

func newTerrain(gdal *raster.GDAL, options Options) (*Terrain, error) {
	options = options.withDefaults()
	t := &Terrain{
		gdal: gdal, byName: map[string]*entry{}, systems: map[string]*projectors{}, handles: newHandles(gdal, options.OpenRasters),
		scratch: sync.Pool{New: func() any { return new(scratch) }},
	}
	var err error
	t.chunks, err = newChunks(options.CacheBytes, t.handles, options.Blocks)
	return t, err
}

// loading is a Terrain while it is loaded.
type loading struct {
	*Terrain
	ctx    context.Context
	log    *slog.Logger
	index  Index
	usable []*entry
}

func (l *loading) all(folders []string, options Options) error {
	plain := map[profile.Kind]*source{}
	for _, kind := range []profile.Kind{profile.KindGround, profile.KindSurface, profile.KindUnstated} {
		plain[kind] = &source{Source: catalogue.Source{Kind: kind}, plain: true}
		l.sources = append(l.sources, plain[kind])
	}
	maps.Copy(l.index, options.Index)
	for _, folder := range folders {
		if err := l.scan(folder, func(name string) (*source, string) { return plain[kindOf(name)], name }); err != nil {
			return err
		}
	}
	if options.Catalogue == nil {
		return nil
	}
	return l.catalogue(options.Catalogue)
}

// catalogue loads the sources of the operator's catalogue.
func (l *loading) catalogue(c *catalogue.Catalogue) error {
	var err error
	if l.datums.grids, err = readGeoids(l.gdal, c.Grids); err != nil {
		return err
	}
	l.datums.target = c.Datum
	for _, stated := range c.Sources {
		s := &source{Source: stated}
		l.sources = append(l.sources, s)
		switch {
		case stated.Tiles != nil:
			s.tiles = newTiles(s, l.Terrain)
		case stated.Folder != "":
			err = l.scan(stated.Folder, func(name string) (*source, string) { return s, s.Name + "/" + name })
		default:
			for _, file := range stated.Files {
				l.take(l.newEntry(s, file, s.Name+"/"+filepath.Base(file)))
			}
		}
		if err != nil {
			return err
		}
	}
	return nil
}

// scan looks through one folder; belongs gives a file's source and name.
func (l *loading) scan(folder string, belongs func(name string) (*source, string)) error {
	// A walk does not follow a link, not even the one that it starts from.
	root, err := filepath.EvalSymlinks(folder)
	if err != nil {
		return unlisted(folder, err)
	}
	err = filepath.WalkDir(root, func(path string, d fs.DirEntry, err error) error {
		if err == nil {
			err = l.ctx.Err()
		}
		if err == nil && path == root && !d.IsDir() {
			err = errors.New("not a folder")
		}
		if err != nil || d.IsDir() || !raster.Recognised(path) {
			return err
		}
		name, err := filepath.Rel(root, path)
		if err != nil {
			return err
		}
		s, name := belongs(filepath.ToSlash(name))
		l.take(l.newEntry(s, path, name))
		return nil
	})
	if err != nil {
		return unlisted(folder, err)
	}
	return nil
}

// take looks at a file and keeps it, usable or not.
func (l *loading) take(e *entry) {
	l.entries = append(l.entries, e)
	err := errors.New("a raster of the same name was found earlier")
	if l.byName[e.Name] == nil {
		err = l.check(e)
	}
	if err != nil {
		e.Problem = strings.ReplaceAll(err.Error(), e.path, filepath.Base(e.path))
		l.log.Warn("raster not used", "raster", e.Name, "reason", e.Problem)
		return
	}
	l.byName[e.Name] = e
	if e.outlines != nil {
		l.prints = append(l.prints, outlined{e, e.outlines})
		return
	}
	l.usable = append(l.usable, e)
}

// check looks at a file, or recalls what was found when it was looked at.
func (l *loading) check(e *entry) error {
	switch {
	case e.source.HeightProperty != "":
		return l.readOutlines(e)
	case l.index.recall(e):
		return nil
	}
	return l.inspect(e)
}

// readOutlines reads the outlines of buildings, all of them.
func (l *loading) readOutlines(e *entry) error {
	f, err := os.Open(e.path)
	if err != nil {
		return withoutFolder(err)
	}
	defer f.Close()
	if err := e.stat(); err != nil {
		return err
	}
	read, report, err := footprints.Read(f, e.source.HeightProperty)
	if err != nil {
		return err
	}
	if report.Used == 0 {
		return fmt.Errorf("none of its %d buildings has a usable height under %q, or all their outlines are at fault", report.WithoutHeight+report.Refused, e.source.HeightProperty)
	}
	if left := report.WithoutHeight + report.Refused; left > 0 {
		l.log.Warn("buildings left out", "raster", e.Name, "used", report.Used, "without_height", report.WithoutHeight, "refused", report.Refused)
	}
	e.outlines, e.Bound, e.Format = read, read.Bound(), "GeoJSON"
	e.source.state(&e.Raster)
	return nil
}

// stat notes a file's size and date.
func (e *entry) stat() error {
	stat, err := os.Stat(e.path)
	if err != nil {
		return errors.New("cannot be read")
	}
	e.Modified, e.bytes, e.beside = stat.ModTime(), stat.Size(), besideOf(e.path)
	return nil
}

// unlisted says which folder could not be listed, and why, once.
func unlisted(folder string, err error) error {
	return fmt.Errorf("raster folder %s: %w", folder, withoutFolder(err))
}

// inspect opens a file, checks it, and reads its last block, which shows a file
// that was cut short; of a remote one that would fetch a block for nothing.
func (t *Terrain) inspect(e *entry) error {
	dataset, err := t.open(e)
	if err != nil {
		return err
	}
	defer dataset.Close()
	e.describe(dataset.Info())
	if !e.remote {
		if err := dataset.Read(e.Width-1, e.Height-1, 1, 1, make([]float32, 1)); err != nil {
			return err
		}
	}
	if e.Bound, e.PixelM, err = t.extent(e.info); err != nil {
		return err
	}
	e.source.state(&e.Raster)
	return nil
}

// open opens a raster for the first time, and notes what names its content.
func (t *Terrain) open(e *entry) (*raster.Dataset, error) {
	if !e.remote {
		if err := e.stat(); err != nil {
			return nil, err
		}
		return t.gdal.Open(e.path)
	}
	d, err := t.gdal.OpenRemote(e.path)
	if err != nil {
		return nil, err
	}
	e.known, e.checkedAt = d.Version(), time.Now()
	return d, nil
}
