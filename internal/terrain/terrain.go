package terrain

import (
	"context"
	"slices"
	"strings"

	"ridgehop/internal/raster"
	"ridgehop/profile"
)

// Options bound what a Terrain takes. Zero values mean the defaults.
type Options struct {
	// CacheBytes bounds the decoded heights kept in memory; default 512 MiB.
	CacheBytes uint64
	// OpenRasters bounds the files held open at once; default 64.
	OpenRasters int
}

// Terrain is a collection of rasters. Load makes one; Close frees it.
type Terrain struct {
	gdal    *raster.GDAL
	entries []*entry // everything found, usable or not
	byName  map[string]*entry
	mosaics []*mosaic
	handles *handles
	chunks  *chunks
	systems map[string]*projectors // by the CRS's WKT
}

// Rasters lists every file found, by name: usable ones, and unusable ones with
// the reason. The first call reads each usable file whole, for its version, and
// stops when ctx ends.
func (t *Terrain) Rasters(ctx context.Context) ([]profile.Raster, error) {
	out := make([]profile.Raster, 0, len(t.entries))
	for _, e := range t.entries {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		r := e.Raster
		if r.Problem == "" {
			var err error
			if r.Version, err = e.version(); err != nil {
				r.Problem = "cannot be read any more"
			}
		}
		out = append(out, r)
	}
	slices.SortStableFunc(out, func(a, b profile.Raster) int { return strings.Compare(a.Name, b.Name) })
	return out, nil
}

// Usable counts the rasters that answers may rest on.
func (t *Terrain) Usable() int { return len(t.byName) }

// Close closes the open files. No Sample may be running.
func (t *Terrain) Close() {
	t.handles.close()
	for _, system := range t.systems {
		system.close()
	}
	t.chunks.cache.StopAllGoroutines()
}

// lay puts rasters together into mosaics, finest first, by name where equal.
func (t *Terrain) lay(entries []*entry) []*mosaic {
	sorted := slices.Clone(entries)
	slices.SortFunc(sorted, func(a, b *entry) int { return strings.Compare(a.Name, b.Name) })
	var mosaics []*mosaic
	for _, e := range sorted {
		if !slices.ContainsFunc(mosaics, func(m *mosaic) bool { return m.accept(e) }) {
			mosaics = append(mosaics, newMosaic(e, t.systems[e.info.CRS.WKT]))
		}
	}
	return mosaics
}
