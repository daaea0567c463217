package terrain

import (
	"context"
	"slices"
	"strings"
	"sync"

	"ridgehop/internal/raster"
	"ridgehop/internal/terrain/blockstore"
	"ridgehop/internal/terrain/catalogue"
	"ridgehop/profile"
)

// Options bound what a Terrain takes. Zero values mean the defaults.
type Options struct {
	// CacheBytes bounds the decoded heights kept in memory; default 512 MiB.
	CacheBytes uint64
	// OpenRasters bounds the files held open at once; default 64.
	OpenRasters int
	// Catalogue is the operator's; nil if there are only folders.
	Catalogue *catalogue.Catalogue
	// Blocks keeps what was read of remote rasters on disk; nil keeps nothing.
	Blocks *blockstore.Store
	// Index is what is known of files from an earlier run, and Previous is a
	// terrain whose knowledge of files is taken over. Both may be nil.
	Index    Index
	Previous *Terrain
}

func (o Options) withDefaults() Options {
	if o.CacheBytes == 0 {
		o.CacheBytes = 512 << 20
	}
	if o.OpenRasters == 0 {
		o.OpenRasters = 64
	}
	return o
}

// Terrain is a collection of rasters. Load makes one; Close frees it.
type Terrain struct {
	gdal    *raster.GDAL
	sources []*source
	entries []*entry // everything found, usable or not
	byName  map[string]*entry
	mosaics []*mosaic
	prints  []outlined
	datums  datums
	handles *handles
	chunks  *chunks
	scratch sync.Pool

	mu      sync.Mutex             // guards systems
	systems map[string]*projectors // by the CRS's WKT
}

// Rasters lists every file found, by name: usable ones, and unusable ones with
// the reason; of those by degrees of the earth, the ones that were needed so far.
// The first call reads each usable file whole, for its version, and
// stops when ctx ends.
func (t *Terrain) Rasters(ctx context.Context) ([]profile.Raster, error) {
	entries := slices.Clone(t.entries)
	for _, s := range t.sources {
		if s.tiles != nil {
			entries = append(entries, s.tiles.known()...)
		}
	}
	out := make([]profile.Raster, 0, len(entries))
	for _, e := range entries {
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

// Usable counts the rasters that answers may rest on, and the sources by degrees
// of the earth, whose rasters are not counted before they are needed.
func (t *Terrain) Usable() int {
	n := len(t.byName)
	for _, s := range t.sources {
		if s.tiles != nil {
			n++
		}
	}
	return n
}

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
			mosaics = append(mosaics, newMosaic(e, t.system(e.info.CRS)))
		}
	}
	return mosaics
}

// system is the projectors of a CRS.
func (t *Terrain) system(crs raster.CRS) *projectors {
	t.mu.Lock()
	defer t.mu.Unlock()
	if t.systems[crs.WKT] == nil {
		t.systems[crs.WKT] = &projectors{gdal: t.gdal}
	}
	return t.systems[crs.WKT]
}
