package terrain

import (
	"context"
	"errors"
	"log/slog"
	"os"
	"path/filepath"
	"sync"
	"sync/atomic"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"

	"ridgehop/internal/raster"
	"ridgehop/profile"
)

// liveFolder is a Live over a folder.
func liveFolder(t testing.TB, folder string) *Live {
	t.Helper()
	gdal := raster.NewGDAL()
	live, err := NewLive(context.Background(), func(ctx context.Context, previous *Terrain) (*Terrain, error) {
		return Load(ctx, gdal, []string{folder}, Options{Previous: previous}, slog.New(slog.DiscardHandler))
	})
	must(t, err)
	t.Cleanup(live.Close)
	return live
}

func TestReload(t *testing.T) {
	folder := gridsOf(t, map[string]grid{"a.asc": square(20, 10, constant(1)), "b.asc": square(40, 90, constant(5)), "c.asc": square(40, 200, constant(9))})
	live := liveFolder(t, folder)
	path := pathOf(t, metresFrom(t, live.current.Terrain)(-50, 3), metresFrom(t, live.current.Terrain)(50, -3))
	read := func() *profile.Profile {
		var p profile.Profile
		must(t, live.Sample(context.Background(), path, profile.Sampling{}, &p))
		return &p
	}
	before := read()
	square(20, 10, constant(2)).write(t, folder, "a.asc")
	must(t, os.Chtimes(filepath.Join(folder, "a.asc"), longAgo(), longAgo()))
	square(20, 5, constant(3)).write(t, folder, "new.asc")
	must(t, os.Remove(filepath.Join(folder, "c.asc")))
	changes, err := live.Reload(context.Background())
	must(t, err)
	if diff := cmp.Diff(profile.RasterChanges{Added: []string{"new.asc"}, Removed: []string{"c.asc"}, Changed: []string{"a.asc"}}, changes); diff != "" {
		t.Errorf("changes (-want +got):\n%s", diff)
	}
	if after := read(); before.GroundM[0] != 1 || after.GroundM[len(after.GroundM)/2] != 3 {
		t.Errorf("got %g before and %g after, want 1 and 3 of the finer raster", before.GroundM[0], after.GroundM[len(after.GroundM)/2])
	}
	// What cannot be loaded leaves what is in use.
	must(t, os.RemoveAll(folder))
	if _, err := live.Reload(context.Background()); err == nil {
		t.Error("a folder that is gone: got no error")
	}
	if live.Usable() != 3 {
		t.Errorf("after a failure: got %d rasters in use, want 3", live.Usable())
	}
}

// Requests under way while the rasters are loaded anew, again and again, are
// answered by one state or the other, none is dropped, and every terrain is
// closed once nobody uses it.
func TestReloadUnderLoad(t *testing.T) {
	folder := t.TempDir()
	square(60, 10, constant(10)).write(t, folder, "a.asc")
	live := liveFolder(t, folder)
	at := metresFrom(t, live.current.Terrain)
	paths := []profile.Path{pathOf(t, at(-250, 3), at(250, -3)), pathOf(t, at(3, 250), at(-3, -250)), pathOf(t, at(-200, -200), at(220, 190))}
	ctx, stop := context.WithCancel(context.Background())
	var answered, wrong atomic.Int64
	var readers sync.WaitGroup
	for k := range 4 {
		readers.Go(func() {
			var p profile.Profile
			for i := k; ctx.Err() == nil; i++ {
				err := live.Sample(context.Background(), paths[i%len(paths)], profile.Sampling{}, &p)
				// While the file is being replaced its own change is an honest error.
				if _, changing := errors.AsType[*profile.UnreadableError](err); changing {
					continue
				}
				height := p.GroundM[0]
				for _, h := range p.GroundM {
					if err != nil || h != height {
						wrong.Add(1)
						break
					}
				}
				answered.Add(1)
			}
		})
	}
	var old []*generation
	for k := range 20 {
		old = append(old, live.current)
		fresh := filepath.Join(t.TempDir(), "x.asc")
		square(60, 10, constant(float64(11+k))).write(t, filepath.Dir(fresh), "x.asc")
		must(t, os.Rename(fresh, filepath.Join(folder, "a.asc")))
		_, err := live.Reload(context.Background())
		must(t, err)
		for enough, deadline := answered.Load()+8, time.Now().Add(5*time.Second); answered.Load() < enough && time.Now().Before(deadline); {
			time.Sleep(time.Millisecond)
		}
	}
	stop()
	readers.Wait()
	for i, g := range old {
		<-g.last
		if n := g.users.Load(); n != 0 {
			t.Errorf("state %d: got %d users, want none", i, n)
		}
	}
	t.Logf("%d answers over 20 reloads", answered.Load())
	if answered.Load() == 0 || wrong.Load() != 0 {
		t.Errorf("got %d answers, %d of them wrong", answered.Load(), wrong.Load())
	}
}

// longAgo is a date in the past, another than that of a file just written.
func longAgo() time.Time { return time.Unix(1_000_000_000, 0) }
