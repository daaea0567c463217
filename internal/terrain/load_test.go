package terrain

import (
	"bytes"
	"context"
	"errors"
	"io/fs"
	"log/slog"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"ridgehop/internal/raster"
	"ridgehop/profile"
)

// Files that are not fit are listed with the reason, logged, and stop nothing.
func TestUnusableFilesAreListed(t *testing.T) {
	folder := t.TempDir()
	write := func(name, content string) {
		path := filepath.Join(folder, name)
		must(t, os.MkdirAll(filepath.Dir(path), 0o755))
		must(t, os.WriteFile(path, []byte(content), 0o644))
	}
	square(10, 10, constant(1)).write(t, folder, "good.asc")
	square(10, 10, constant(1)).write(t, folder, "deep/er/good.asc")
	square(10, 10, constant(1)).write(t, folder, "lost.asc")
	must(t, os.Remove(filepath.Join(folder, "lost.prj")))
	cut := square(50, 10, rough)
	cut.write(t, folder, "cut.asc")
	whole, err := os.ReadFile(filepath.Join(folder, "cut.asc"))
	must(t, err)
	write("cut.asc", string(whole[:len(whole)/2]))
	write("empty.tif", "")
	write("notes.tif", "not a raster")
	write("N50W003.hgt", "too short")
	write("readme.txt", "not looked at")
	write("good.vrt", "not looked at")
	must(t, os.Mkdir(filepath.Join(folder, "folder.tif"), 0o755))
	grid{columns: 4, rows: 4, left: 5000, top: 5000, pixel: 10, height: constant(1)}.write(t, folder, "nowhere.asc")
	grid{columns: 4, rows: 4, left: 1e12, top: 5000, pixel: 10, system: "32630", height: constant(1)}.write(t, folder, "far.asc")
	grid{columns: 4, rows: 4, left: 5000, top: 5000, pixel: 10, system: "2303", height: constant(1)}.write(t, folder, "untied.asc")

	var log bytes.Buffer
	terrain, err := Load(context.Background(), raster.NewGDAL(), []string{folder}, Options{}, slog.New(slog.NewTextHandler(&log, nil)))
	must(t, err)
	defer terrain.Close()
	wants := map[string]string{
		"good.asc": "", "deep/er/good.asc": "",
		"lost.asc":    "no usable coordinate reference system",
		"cut.asc":     "can't read line",
		"empty.tif":   "empty (0 bytes)",
		"notes.tif":   "`notes.tif' not recognized",
		"N50W003.hgt": "cannot be read",
		"far.asc":     "no usable coordinate reference system: WGS 84 / UTM zone 30N: ",
		"untied.asc":  "no usable coordinate reference system: Qornoq 1927 / Greenland zone 4 west: ",
		"nowhere.asc": "it spans longitudes 5000 to 5040 and latitudes 4960 to 5000",
	}
	rasters := listed(t, terrain)
	if len(rasters) != len(wants) {
		t.Errorf("got %d files, want %d", len(rasters), len(wants))
	}
	for _, r := range rasters {
		want, known := wants[r.Name]
		switch {
		case !known:
			t.Errorf("got %q, want it not listed", r.Name)
		case want == "" && r.Problem != "", !strings.Contains(r.Problem, want):
			t.Errorf("%s: got problem %q, want %q", r.Name, r.Problem, want)
		case strings.Contains(r.Problem, folder):
			t.Errorf("%s: got %q, want the folder's place left out", r.Name, r.Problem)
		case (r.Version == "") != (r.Problem != ""):
			t.Errorf("%s: got version %q with problem %q", r.Name, r.Version, r.Problem)
		}
		if logged := strings.Contains(log.String(), "raster="+r.Name+" "); logged != (want != "") {
			t.Errorf("%s: got logged %t, want %t", r.Name, logged, want != "")
		}
	}
	if got := terrain.Usable(); got != 2 {
		t.Errorf("usable: got %d, want 2", got)
	}
	if got := spot(t, terrain, metresFrom(t, terrain)(0, 0), "good.asc"); got != 1 {
		t.Errorf("height of the good one: got %g, want 1", got)
	}
}

func TestRastersTellWhatTheyAre(t *testing.T) {
	folder := t.TempDir()
	writeHGT(t, folder, "N50W003.hgt", hgtSide, constant(5))
	square(20, 10, constant(1)).write(t, folder, "town_dtm.asc")
	rasters := listed(t, loaded(t, folder))
	if len(rasters) != 2 {
		t.Fatalf("got %d rasters, want 2", len(rasters))
	}
	tile, town := rasters[0], rasters[1]
	if tile.CRS != "WGS 84" || tile.EPSG != 4326 || tile.Format != "SRTMHGT" || tile.DataType != "Int16" || tile.NoData != -32768 ||
		!tile.HasNoData || !tile.PixelIsPoint || tile.Width != hgtSide || tile.Height != hgtSide || tile.Modified.IsZero() || tile.Kind != profile.KindUnstated {
		t.Errorf("tile: got %+v", tile)
	}
	half := 0.5 / 1200
	for i, edge := range [4][2]float64{
		{tile.Bound.Min[0], -3 - half}, {tile.Bound.Min[1], 50 - half}, {tile.Bound.Max[0], -2 + half}, {tile.Bound.Max[1], 51 + half},
	} {
		if math.Abs(edge[0]-edge[1]) > 1e-9 {
			t.Errorf("tile: edge %d: got %.9f, want %.9f", i, edge[0], edge[1])
		}
	}
	// 3" of longitude at 50.5 degrees, on a sphere.
	if want := 92.66 * math.Cos(50.5*math.Pi/180); math.Abs(tile.PixelM-want) > 0.1 {
		t.Errorf("tile: pixel: got %g m, want %g", tile.PixelM, want)
	}
	if town.Kind != profile.KindGround || town.EPSG != 32630 || town.PixelM != 10 || town.Format != "AAIGrid" {
		t.Errorf("town: got %+v", town)
	}
	at := metresFrom(t, loaded(t, folder))
	if corner := at(-100, -100); math.Abs(town.Bound.Min[0]-corner[0]) > 1e-5 || math.Abs(town.Bound.Min[1]-corner[1]) > 1e-5 {
		t.Errorf("town: got %v, want %v for its south-western corner", town.Bound.Min, corner)
	}
}

func TestFolders(t *testing.T) {
	library, log := raster.NewGDAL(), slog.New(slog.DiscardHandler)
	folder := t.TempDir()
	square(10, 10, constant(1)).write(t, folder, "a.asc")
	link := filepath.Join(t.TempDir(), "link")
	must(t, os.Symlink(folder, link))
	t.Run("missing", func(t *testing.T) {
		missing := filepath.Join(folder, "missing")
		_, err := Load(context.Background(), library, []string{folder, missing}, Options{}, log)
		if want := "raster folder " + missing + ": "; !errors.Is(err, fs.ErrNotExist) || !strings.HasPrefix(err.Error(), want) {
			t.Errorf("got %v, want %q and fs.ErrNotExist", err, want)
		}
	})
	t.Run("a file", func(t *testing.T) {
		_, err := Load(context.Background(), library, []string{filepath.Join(folder, "a.asc")}, Options{}, log)
		if err == nil || !strings.Contains(err.Error(), "not a folder") {
			t.Errorf("got %v, want that it is not a folder", err)
		}
	})
	t.Run("a link to a folder", func(t *testing.T) {
		terrain, err := Load(context.Background(), library, []string{link}, Options{}, log)
		must(t, err)
		defer terrain.Close()
		if terrain.Usable() != 1 || listed(t, terrain)[0].Name != "a.asc" {
			t.Errorf("got %d rasters, want a.asc", terrain.Usable())
		}
	})
	t.Run("none", func(t *testing.T) {
		if got := loaded(t).Usable(); got != 0 {
			t.Errorf("got %d rasters, want none", got)
		}
	})
	t.Run("a context that ended", func(t *testing.T) {
		ctx, cancel := context.WithCancel(context.Background())
		cancel()
		if _, err := Load(ctx, library, []string{folder}, Options{}, log); !errors.Is(err, context.Canceled) {
			t.Errorf("got %v, want context.Canceled", err)
		}
	})
}

// Of two files of one name the one of the first folder counts; an unusable
// file takes no name.
func TestDuplicateNames(t *testing.T) {
	first, second, broken := t.TempDir(), t.TempDir(), t.TempDir()
	square(10, 10, constant(1)).write(t, first, "a.asc")
	square(10, 10, constant(2)).write(t, second, "a.asc")
	must(t, os.WriteFile(filepath.Join(broken, "a.asc"), []byte("broken"), 0o644))
	terrain := loaded(t, broken, first, second)
	at := metresFrom(t, terrain)
	if got := spot(t, terrain, at(0, 0)); got != 1 {
		t.Errorf("got %g, want 1 of the first folder", got)
	}
	if got := spot(t, terrain, at(0, 0), "a.asc"); got != 1 {
		t.Errorf("by name: got %g, want 1 of the first folder", got)
	}
	var problems []bool
	for _, r := range listed(t, terrain) {
		problems = append(problems, r.Problem != "")
	}
	if diff := cmp.Diff(problems, []bool{true, false, true}); diff != "" || terrain.Usable() != 1 {
		t.Errorf("problems: got -, want +\n%s", diff)
	}
	if got := listed(t, terrain)[2].Problem; !strings.Contains(got, "same name") {
		t.Errorf("got %q, want that the name is taken", got)
	}
}

func TestChunkSizes(t *testing.T) {
	cases := []struct {
		name          string
		block         [2]int
		width, height int
	}{
		{"rows of an SRTM tile", [2]int{1201, 1}, 1201, 219},
		{"small tiles", [2]int{16, 16}, 256, 1024},
		{"tiles", [2]int{256, 256}, 256, 1024},
		{"large tiles", [2]int{512, 512}, 512, 512},
		{"odd tiles", [2]int{100, 100}, 300, 900},
		{"one wide row", [2]int{100_000, 1}, 100_000, 3},
		{"one column", [2]int{1, 1000}, 132, 2000},
	}
	for _, c := range cases {
		width, height := chunkSize(raster.Info{BlockWidth: c.block[0], BlockHeight: c.block[1]})
		if width != c.width || height != c.height {
			t.Errorf("%s: got %d x %d, want %d x %d", c.name, width, height, c.width, c.height)
		}
		if width%c.block[0] != 0 || height%c.block[1] != 0 || width*height < chunkPixels && width*height < c.block[0]*c.block[1] {
			t.Errorf("%s: got %d x %d, want whole blocks", c.name, width, height)
		}
	}
}
