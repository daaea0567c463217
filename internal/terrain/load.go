package terrain

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"log/slog"
	"math"
	"os"
	"path/filepath"
	"strings"

	"github.com/paulmach/orb"

	"ridgehop/internal/raster"
)

// Load scans the folders, with their subfolders, for files whose ending names
// an elevation format, checks each, and indexes those that are fit. A file
// that is not fit is kept in Rasters with the reason, and logged; it never
// stops the loading. A folder that cannot be listed is an error. Files are
// closed again: they are opened when a path first needs them.
func Load(ctx context.Context, library *raster.Library, folders []string, options Options, log *slog.Logger) (*Terrain, error) {
	if options.CacheBytes == 0 {
		options.CacheBytes = 512 << 20
	}
	if options.OpenRasters == 0 {
		options.OpenRasters = 64
	}
	t := &Terrain{library: library, byName: map[string]*entry{}, systems: map[string]*projectors{}, handles: newHandles(library, options.OpenRasters)}
	var err error
	if t.chunks, err = newChunks(options.CacheBytes, t.handles); err != nil {
		return nil, err
	}
	var usable []*entry
	for _, folder := range folders {
		found, err := t.scan(ctx, folder, log)
		if err != nil {
			t.Close()
			return nil, err
		}
		usable = append(usable, found...)
	}
	t.mosaics = t.lay(usable)
	return t, nil
}

// scan looks through one folder.
func (t *Terrain) scan(ctx context.Context, folder string, log *slog.Logger) ([]*entry, error) {
	var usable []*entry
	err := filepath.WalkDir(folder, func(path string, d fs.DirEntry, err error) error {
		if err == nil {
			err = ctx.Err()
		}
		if err != nil || d.IsDir() || !raster.Recognised(path) {
			return err
		}
		name, err := filepath.Rel(folder, path)
		if err != nil {
			return err
		}
		e := newEntry(path, filepath.ToSlash(name))
		t.entries = append(t.entries, e)
		if err := t.inspect(e); err != nil {
			e.Problem = strings.ReplaceAll(err.Error(), path, filepath.Base(path))
			log.Warn("raster not used", "raster", e.Name, "reason", e.Problem)
			return nil
		}
		if t.systems[e.info.CRS.WKT] == nil {
			t.systems[e.info.CRS.WKT] = &projectors{library: t.library}
		}
		t.byName[e.Name] = e
		usable = append(usable, e)
		return nil
	})
	if where, ok := errors.AsType[*os.PathError](err); ok {
		return nil, fmt.Errorf("raster folder %s: %w", folder, where.Err)
	}
	return usable, err
}

// inspect opens a file, checks it, and reads its last block, which shows a file
// that was cut short.
func (t *Terrain) inspect(e *entry) error {
	if _, taken := t.byName[e.Name]; taken {
		return errors.New("a raster of the same name was found in an earlier folder")
	}
	stat, err := os.Stat(e.path)
	if err != nil {
		return errors.New("cannot be read")
	}
	e.Modified, e.bytes = stat.ModTime(), stat.Size()
	dataset, err := t.library.Open(e.path)
	if err != nil {
		return err
	}
	defer dataset.Close()
	e.describe(dataset.Info())
	if err := dataset.Read(e.Width-1, e.Height-1, 1, 1, make([]float32, 1)); err != nil {
		return err
	}
	if e.Bound, err = t.extent(e.info); err != nil {
		return err
	}
	e.PixelM = pixelMetres(e.info.CRS, e.info.Grid, e.Bound.Center().Lat())
	return nil
}

// extent is the box of longitudes and latitudes around a raster's outer edge.
func (t *Terrain) extent(info raster.Info) (orb.Bound, error) {
	g := info.Grid
	right, bottom := g.Left+float64(info.Width)*g.PixelX, g.Top-float64(info.Height)*g.PixelY
	if info.CRS.WGS84 {
		if math.Abs(g.Top) > 91 || math.Abs(bottom) > 91 || math.Abs(g.Left) > 361 || right-g.Left > 361 {
			return orb.Bound{}, fmt.Errorf("%w: it spans longitudes %g to %g and latitudes %g to %g", raster.ErrGeoreference, g.Left, right, bottom, g.Top)
		}
		return orb.Bound{Min: orb.Point{g.Left, bottom}, Max: orb.Point{right, g.Top}}, nil
	}
	projector, err := t.library.NewProjector(info.CRS)
	if err != nil {
		return orb.Bound{}, err
	}
	defer projector.Close()
	x, y := edge(g.Left, bottom, right, g.Top)
	if err := projector.Unproject(x, y); err != nil {
		return orb.Bound{}, err
	}
	b := orb.Bound{Min: orb.Point{x[0], y[0]}, Max: orb.Point{x[0], y[0]}}
	for i := range x {
		lon := x[0] + math.Remainder(x[i]-x[0], 360)
		b = b.Extend(orb.Point{lon, y[i]})
	}
	return b, nil
}

// edge walks around a rectangle in steps, since its sides bend in longitude
// and latitude.
func edge(left, bottom, right, top float64) (x, y []float64) {
	const steps = 16
	for k := range steps {
		f := float64(k) / steps
		x = append(x, left+f*(right-left), right, right-f*(right-left), left)
		y = append(y, bottom, bottom+f*(top-bottom), top, top-f*(top-bottom))
	}
	return x, y
}
