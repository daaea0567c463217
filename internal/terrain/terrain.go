package terrain

import (
	"slices"
	"strings"

	"ridgehop/internal/raster"
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
	library *raster.Library
	rasters []Raster // everything found, usable or not, by name
	byName  map[string]*entry
	mosaics []*mosaic
	handles *handles
	chunks  *chunks
	systems map[string]*projectors // by the CRS's WKT
}

// Rasters lists every file found, by name: usable ones, and unusable ones with
// the reason.
func (t *Terrain) Rasters() []Raster { return slices.Clone(t.rasters) }

// Version is the version of a usable raster, as profile.Source gives it. The
// first call reads the whole file.
func (t *Terrain) Version(name string) (string, error) {
	e, ok := t.byName[name]
	if !ok {
		return "", nil
	}
	return e.version()
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
			mosaics = append(mosaics, newMosaic(e, t.systems[e.Info.CRS.WKT]))
		}
	}
	return mosaics
}
