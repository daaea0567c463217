package terrain

import (
	"context"
	"fmt"
	"log/slog"
	"os"
	"path/filepath"
	"runtime"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"github.com/paulmach/orb"

	"ridgehop/internal/raster"
	"ridgehop/profile"
)

func TestIndexRoundTrip(t *testing.T) {
	folder := manyTiles(t)
	first := loaded(t, folder)
	listed(t, first) // for the versions
	path := filepath.Join(t.TempDir(), "rasters.index")
	must(t, first.Index().Save(path))
	read, err := ReadIndex(path)
	must(t, err)
	if diff := cmp.Diff(first.Index(), read, cmpopts.EquateNaNs()); diff != "" || len(read) == 0 {
		t.Errorf("(-want +got):\n%s", diff)
	}
	again := loadedWith(t, Options{Index: read}, folder)
	if diff := cmp.Diff(listed(t, first), listed(t, again), cmpopts.EquateNaNs()); diff != "" {
		t.Errorf("rasters (-want +got):\n%s", diff)
	}
}

func TestIndexIsNotTrustedOverTheFile(t *testing.T) {
	folder := gridsOf(t, map[string]grid{"a.asc": square(20, 10, constant(1))})
	index := loaded(t, folder).Index()
	square(30, 20, constant(2)).write(t, folder, "a.asc")
	again := loadedWith(t, Options{Index: index}, folder)
	if r := listed(t, again)[0]; r.Width != 30 {
		t.Errorf("got a width of %d, want that of the new file, 30", r.Width)
	}
}

func TestDamagedIndex(t *testing.T) {
	folder := t.TempDir()
	path := filepath.Join(folder, "rasters.index")
	if read, err := ReadIndex(path); err != nil || len(read) != 0 {
		t.Errorf("none: got %v, %v", read, err)
	}
	must(t, loaded(t, gridsOf(t, map[string]grid{"a.asc": square(20, 10, constant(1))})).Index().Save(path))
	whole, err := os.ReadFile(path)
	must(t, err)
	for _, cut := range []int{0, 5, len(whole) / 2, len(whole) - 1} {
		must(t, os.WriteFile(path, whole[:cut], 0o600))
		if read, err := ReadIndex(path); err == nil || len(read) != 0 {
			t.Errorf("cut at %d: got %d rows, %v", cut, len(read), err)
		}
	}
}

// planetFolder is a folder of one file for each degree of the land, none of
// which is a raster, and the index that knows them as what they stand for: whoever
// opens one fails.
func planetFolder(t testing.TB) (folder, saved string) {
	folder = t.TempDir()
	index := Index{}
	then := time.Unix(1_700_000_000, 0)
	info := raster.Info{Driver: "GTiff", Width: 3600, Height: 3600, BlockWidth: 1024, BlockHeight: 1024, DataType: "Float32", Scale: 1,
		CRS: raster.CRS{Name: "WGS 84", EPSG: 4326, Geographic: true, WGS84: true, WKT: string(definition(t, "4326"))}}
	for k := range 26_500 {
		lon, lat := k%360-180, k/360-20
		name := fmt.Sprintf("M_%+03d_%+04d.tif", lat, lon)
		path := filepath.Join(folder, name)
		must(t, os.WriteFile(path, []byte("x"), 0o600))
		must(t, os.Chtimes(path, then, then))
		info.Grid = raster.Grid{Left: float64(lon), Top: float64(lat + 1), PixelX: 1.0 / 3600, PixelY: 1.0 / 3600}
		index[path] = IndexRow{Bytes: 1, Modified: then, Info: info, PixelM: 30, Version: fmt.Sprintf("%016x", k),
			Bound: orb.Bound{Min: orb.Point{float64(lon), float64(lat)}, Max: orb.Point{float64(lon + 1), float64(lat + 1)}}}
	}
	saved = filepath.Join(t.TempDir(), "rasters.index")
	must(t, index.Save(saved))
	return folder, saved
}

func loadPlanet(t testing.TB, folder, saved string) *Terrain {
	read, err := ReadIndex(saved)
	must(t, err)
	terrain, err := Load(context.Background(), raster.NewGDAL(), []string{folder}, Options{Index: read}, slog.New(slog.DiscardHandler))
	must(t, err)
	return terrain
}

// The planet in degrees is loaded from its index without opening a file, in less
// than 100 MB.
func TestPlanetFromIndex(t *testing.T) {
	if testing.Short() {
		t.Skip("writes 26,500 files")
	}
	folder, saved := planetFolder(t)
	var before, after runtime.MemStats
	runtime.GC()
	runtime.ReadMemStats(&before)
	start := time.Now()
	terrain := loadPlanet(t, folder, saved)
	took := time.Since(start)
	runtime.GC()
	runtime.ReadMemStats(&after)
	defer terrain.Close()
	used := float64(after.HeapAlloc) - float64(before.HeapAlloc)
	t.Logf("26,500 rasters in %v and %.0f MB", took, used/1e6)
	if terrain.Usable() != 26_500 || len(terrain.mosaics) != 1 {
		t.Errorf("got %d rasters in %d mosaics, want 26500 in one", terrain.Usable(), len(terrain.mosaics))
	}
	if used > 100e6 {
		t.Errorf("got %.0f MB, want at most 100", used/1e6)
	}
	var unreadable *profile.UnreadableError
	err := terrain.Sample(context.Background(), pathOf(t, orb.Point{10.2, 20.3}, orb.Point{10.3, 20.4}), profile.Sampling{}, &profile.Profile{})
	if err == nil {
		t.Errorf("got no error, want an unreadable raster: %v", unreadable)
	}
}

func BenchmarkLoadPlanet(b *testing.B) {
	folder, saved := planetFolder(b)
	for b.Loop() {
		loadPlanet(b, folder, saved).Close()
	}
}
