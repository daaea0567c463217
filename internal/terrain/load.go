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

	"ridgehop/internal/geodesy"
	"ridgehop/internal/raster"
)

// Load scans the folders, with their subfolders, for files whose ending names
// an elevation format, checks each, and indexes those that are fit. A file
// that is not fit is kept in Rasters with the reason, and logged; it never
// stops the loading. A folder that cannot be listed is an error. Files are
// closed again: they are opened when a path first needs them.
func Load(ctx context.Context, library *raster.GDAL, folders []string, options Options, log *slog.Logger) (*Terrain, error) {
	if options.CacheBytes == 0 {
		options.CacheBytes = 512 << 20
	}
	if options.OpenRasters == 0 {
		options.OpenRasters = 64
	}
	t := &Terrain{gdal: library, byName: map[string]*entry{}, systems: map[string]*projectors{}, handles: newHandles(library, options.OpenRasters)}
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
	// A walk does not follow a link, not even the one that it starts from.
	root, err := filepath.EvalSymlinks(folder)
	if err != nil {
		return nil, unlisted(folder, err)
	}
	err = filepath.WalkDir(root, func(path string, d fs.DirEntry, err error) error {
		if err == nil {
			err = ctx.Err()
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
		e := newEntry(path, filepath.ToSlash(name))
		t.entries = append(t.entries, e)
		if err := t.inspect(e); err != nil {
			e.Problem = strings.ReplaceAll(err.Error(), path, filepath.Base(path))
			log.Warn("raster not used", "raster", e.Name, "reason", e.Problem)
			return nil
		}
		if t.systems[e.info.CRS.WKT] == nil {
			t.systems[e.info.CRS.WKT] = &projectors{gdal: t.gdal}
		}
		t.byName[e.Name] = e
		usable = append(usable, e)
		return nil
	})
	if err != nil {
		return nil, unlisted(folder, err)
	}
	return usable, nil
}

// unlisted says which folder could not be listed, and why, once.
func unlisted(folder string, err error) error {
	if where, ok := errors.AsType[*os.PathError](err); ok {
		err = where.Err
	}
	return fmt.Errorf("raster folder %s: %w", folder, err)
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
	dataset, err := t.gdal.Open(e.path)
	if err != nil {
		return err
	}
	defer dataset.Close()
	e.describe(dataset.Info())
	if err := dataset.Read(e.Width-1, e.Height-1, 1, 1, make([]float32, 1)); err != nil {
		return err
	}
	e.Bound, e.PixelM, err = t.extent(e.info)
	return err
}

// extent is the box of longitudes and latitudes around a raster's outer edge,
// and the finer side of a pixel in metres at its middle.
func (t *Terrain) extent(info raster.Info) (orb.Bound, float64, error) {
	g := info.Grid
	right, bottom := g.Left+float64(info.Width)*g.PixelX, g.Top-float64(info.Height)*g.PixelY
	edges := orb.Bound{Min: orb.Point{g.Left, bottom}, Max: orb.Point{right, g.Top}}
	if info.CRS.WGS84 {
		if math.Abs(g.Top) > 91 || math.Abs(bottom) > 91 || math.Abs(g.Left) > 361 || right-g.Left > 361 {
			return orb.Bound{}, 0, fmt.Errorf("%w: it spans longitudes %g to %g and latitudes %g to %g", raster.ErrGeoreference, g.Left, right, bottom, g.Top)
		}
		return edges, pixelMetres(info.CRS, g, edges.Center().Lat()), nil
	}
	projector, err := t.gdal.NewProjector(info.CRS)
	if err != nil {
		return orb.Bound{}, 0, err
	}
	defer projector.Close()
	bound, err := unprojected(projector, info.CRS, edges)
	if err != nil {
		return orb.Bound{}, 0, err
	}
	middle := edges.Center()
	x, y := []float64{middle[0], middle[0] + g.PixelX}, []float64{middle[1], middle[1]}
	if err := projector.Unproject(x, y); err != nil {
		return orb.Bound{}, 0, err
	}
	step, err := geodesy.NewLine(orb.Point{x[0], y[0]}, orb.Point{x[1], y[1]})
	if err != nil {
		return orb.Bound{}, 0, err
	}
	return bound, onGround(pixelMetres(info.CRS, g, y[0]), info.CRS, g.PixelX, step.LengthM()), nil
}

// unprojected is the box of longitudes and latitudes around a rectangle.
func unprojected(projector *raster.Projector, crs raster.CRS, edges orb.Bound) (orb.Bound, error) {
	x, y := edge(edges.Min[0], edges.Min[1], edges.Max[0], edges.Max[1])
	if err := projector.Unproject(x, y); err != nil {
		return orb.Bound{}, err
	}
	start := x[0]
	if crs.Geographic { // counted as the grid counts, which may be beyond 180
		start = edges.Min[0] + math.Remainder(start-edges.Min[0], 360)
	}
	b := orb.Bound{Min: orb.Point{start, y[0]}, Max: orb.Point{start, y[0]}}
	for i := range x {
		b = b.Extend(orb.Point{start + math.Remainder(x[i]-start, 360), y[i]})
	}
	for _, lat := range []float64{-90, 90} {
		// Around a pole the edges do not show what they enclose.
		x, y := []float64{0}, []float64{lat}
		if err := projector.Project(x, y); err == nil && !crs.Geographic && edges.Contains(orb.Point{x[0], y[0]}) {
			b = b.Extend(orb.Point{-180, lat}).Extend(orb.Point{180, lat})
		}
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
