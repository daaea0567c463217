package terrain

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"ridgehop/profile"
)

// What becomes of a file after it was loaded is an error that names the raster
// and not where it lies, for the paths that need it; the others go on.
func TestFileChangedAfterLoading(t *testing.T) {
	later := time.Now().Add(time.Hour)
	cases := []struct {
		name   string
		change func(t *testing.T, path string)
		want   string
	}{
		{"deleted", func(t *testing.T, path string) { must(t, os.Remove(path)) }, "no such file"},
		{"overwritten", func(t *testing.T, path string) {
			square(20, 10, constant(9)).write(t, filepath.Dir(path), filepath.Base(path))
			must(t, os.Chtimes(path, later, later))
		}, "has changed since it was loaded"},
		{"touched", func(t *testing.T, path string) { must(t, os.Chtimes(path, later, later)) }, "has changed since it was loaded"},
		{"replaced by a folder", func(t *testing.T, path string) {
			must(t, os.Remove(path))
			must(t, os.Mkdir(path, 0o755))
		}, "not a regular file"},
		{"emptied", func(t *testing.T, path string) { must(t, os.WriteFile(path, nil, 0o644)) }, "empty"},
		{"cut short", func(t *testing.T, path string) { must(t, os.Truncate(path, 200)) }, ""},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			folder := t.TempDir()
			square(20, 10, constant(1)).write(t, folder, "changed.asc")
			square(20, 10, constant(2)).write(t, folder, "steady.asc")
			terrain := loaded(t, folder)
			at := metresFrom(t, terrain)
			path := pathOf(t, at(-50, 0), at(50, 0))
			c.change(t, filepath.Join(folder, "changed.asc"))
			for range 2 {
				err := terrain.Sample(context.Background(), path, profile.Sampling{}, &profile.Profile{})
				unreadable, ok := errors.AsType[*profile.UnreadableError](err)
				if !ok || unreadable.Raster != "changed.asc" || !strings.Contains(err.Error(), c.want) {
					t.Fatalf("got %v, want changed.asc unreadable with %q", err, c.want)
				}
				if strings.Contains(err.Error(), folder) {
					t.Errorf("got %q, want the folder's place left out", err)
				}
			}
			if got := spot(t, terrain, at(0, 0), "steady.asc"); got != 2 {
				t.Errorf("the other raster: got %g, want 2", got)
			}
		})
	}
}

// Pixels in memory outlive the file, with the version that they were read from.
func TestCachedHeightsOutliveTheFile(t *testing.T) {
	folder := t.TempDir()
	square(20, 10, constant(1)).write(t, folder, "a.asc")
	terrain := loaded(t, folder)
	at := metresFrom(t, terrain)
	path := pathOf(t, at(-50, 0), at(50, 0))
	before := sampled(t, terrain, path, profile.Sampling{})
	must(t, os.Remove(filepath.Join(folder, "a.asc")))
	after := sampled(t, terrain, path, profile.Sampling{})
	if after.GroundM[0] != 1 || after.Sources[0] != before.Sources[0] {
		t.Errorf("got %g of %+v, want 1 of %+v", after.GroundM[0], after.Sources, before.Sources)
	}
}

// A version is never that of other bytes than the heights': a file that changed
// between its pixels and its version, or went, is unreadable.
func TestVersionOfAChangedFile(t *testing.T) {
	for name, change := range map[string]func(path string) error{
		"overwritten": func(path string) error { return os.WriteFile(path, []byte("something else"), 0o644) },
		"deleted":     os.Remove,
	} {
		t.Run(name, func(t *testing.T) {
			folder := t.TempDir()
			square(20, 10, constant(1)).write(t, folder, "a.asc")
			terrain := loaded(t, folder)
			// The pixels come into memory without a profile being finished.
			_, err := terrain.chunks.at(context.Background(), terrain.byName["a.asc"], 0, 0)
			must(t, err)
			must(t, change(filepath.Join(folder, "a.asc")))
			at := metresFrom(t, terrain)
			err = terrain.Sample(context.Background(), pathOf(t, at(-50, 0), at(50, 0)), profile.Sampling{}, &profile.Profile{})
			unreadable, ok := errors.AsType[*profile.UnreadableError](err)
			if !ok || unreadable.Raster != "a.asc" || strings.Contains(err.Error(), folder) {
				t.Errorf("got %v, want a.asc unreadable, without its folder", err)
			}
			r := listed(t, terrain)[0]
			if r.Problem == "" || r.Version != "" {
				t.Errorf("listed: got version %q, problem %q, want a problem alone", r.Version, r.Problem)
			}
		})
	}
}

// A file that was away for a while is listed as such, and is as good as before
// once it is back.
func TestFileThatComesBack(t *testing.T) {
	folder := t.TempDir()
	square(20, 10, constant(1)).write(t, folder, "a.asc")
	terrain := loaded(t, folder)
	path := filepath.Join(folder, "a.asc")
	must(t, os.Rename(path, path+".away"))
	if r := listed(t, terrain)[0]; r.Problem == "" || r.Version != "" {
		t.Errorf("away: got version %q, problem %q, want a problem alone", r.Version, r.Problem)
	}
	must(t, os.Rename(path+".away", path))
	if r := listed(t, terrain)[0]; r.Problem != "" || r.Version == "" {
		t.Errorf("back: got version %q, problem %q, want a version alone", r.Version, r.Problem)
	}
	if got := spot(t, terrain, metresFrom(t, terrain)(0, 0)); got != 1 {
		t.Errorf("back: got %g, want 1", got)
	}
}

// A version is the hash of the content, wherever it lies and whenever it was
// written; an edit of one byte, or of the .prj that places a grid, changes it.
func TestVersions(t *testing.T) {
	version := func(name string, change func(folder string)) string {
		folder := t.TempDir()
		g := square(20, 10, constant(1))
		g.write(t, folder, name)
		if change != nil {
			change(folder)
		}
		return listed(t, loaded(t, folder))[0].Version
	}
	plain := version("a.asc", nil)
	if len(plain) != versionDigits {
		t.Errorf("got %q, want %d digits", plain, versionDigits)
	}
	if got := version("b.asc", func(folder string) {
		old := time.Date(2001, 2, 3, 4, 5, 6, 0, time.UTC)
		must(t, os.Chtimes(filepath.Join(folder, "b.asc"), old, old))
	}); got != plain {
		t.Errorf("same bytes under another name and date: got %s, want %s", got, plain)
	}
	if got := version("a.asc", func(folder string) {
		path := filepath.Join(folder, "a.asc")
		content, err := os.ReadFile(path)
		must(t, err)
		content[len(content)-3] = '2'
		must(t, os.WriteFile(path, content, 0o644))
	}); got == plain {
		t.Errorf("another height: got the same version %s", got)
	}
	if got := version("a.asc", func(folder string) {
		must(t, os.WriteFile(filepath.Join(folder, "a.prj"), definition(t, "32601"), 0o644))
	}); got == plain {
		t.Errorf("another .prj: got the same version %s", got)
	}
}

// The version of a file that stands alone is the head of its SHA-256.
func TestVersionIsTheContentsHash(t *testing.T) {
	folder := t.TempDir()
	writeHGT(t, folder, "N50W003.hgt", hgtSide, constant(5))
	content, err := os.ReadFile(filepath.Join(folder, "N50W003.hgt"))
	must(t, err)
	sum := sha256.Sum256(content)
	want := hex.EncodeToString(sum[:])[:versionDigits]
	terrain := loaded(t, folder)
	if got := listed(t, terrain)[0].Version; got != want {
		t.Errorf("listed: got %s, want %s", got, want)
	}
	a := listed(t, terrain)[0].Bound.Center()
	p := sampled(t, terrain, pathOf(t, a, [2]float64{a[0] + 0.01, a[1]}), profile.Sampling{})
	if got := p.Sources[0].Version; got != want {
		t.Errorf("source: got %s, want %s", got, want)
	}
}

func TestRastersStopsWithItsContext(t *testing.T) {
	folder := t.TempDir()
	square(20, 10, constant(1)).write(t, folder, "a.asc")
	terrain := loaded(t, folder)
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := terrain.Rasters(ctx); !errors.Is(err, context.Canceled) {
		t.Errorf("got %v, want context.Canceled", err)
	}
}
