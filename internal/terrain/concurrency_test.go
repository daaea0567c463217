package terrain

import (
	"context"
	"errors"
	"fmt"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"sync/atomic"
	"testing"
	"time"

	"github.com/paulmach/orb"

	"ridgehop/internal/raster"
	"ridgehop/profile"
)

// manyTiles writes four SRTM tiles, in chunks larger than a tiny cache holds,
// and a coarse raster in another system under all of them.
func manyTiles(t testing.TB) string {
	folder := t.TempDir()
	for i, west := range []string{"W005", "W004"} {
		for j, north := range []string{"N57", "N56"} {
			writeHGT(t, folder, north+west+".hgt", hgtSide, func(column, row int) float64 {
				return float64((7*(column+1200*i) + 13*(row+1200*j)) % 500)
			})
		}
	}
	grid{columns: 100, rows: 100, left: 350_000, top: 6_450_000, pixel: 4000, system: "32630", height: rough}.write(t, folder, "coarse.asc")
	return folder
}

func manyPaths(t testing.TB, n int) []profile.Path {
	r := rand.New(rand.NewPCG(5, 58))
	var paths []profile.Path
	for range n {
		a := orb.Point{-5.2 + 2.4*r.Float64(), 55.8 + 2.4*r.Float64()}
		paths = append(paths, pathOf(t, a, orb.Point{a[0] + 0.4*r.Float64() - 0.2, a[1] + 0.4*r.Float64() - 0.2}))
	}
	return paths
}

// Many goroutines, a cache that holds next to nothing and one or two open
// files give what one goroutine with room for everything gives.
func TestManyAtOnce(t *testing.T) {
	folder := manyTiles(t)
	paths := manyPaths(t, 12)
	roomy := loaded(t, folder)
	var want []*profile.Profile
	for _, path := range paths {
		want = append(want, sampled(t, roomy, path, profile.Sampling{}))
	}
	for _, options := range []Options{{CacheBytes: 1, OpenRasters: 1}, {CacheBytes: 600 << 10, OpenRasters: 2}, {}} {
		t.Run(fmt.Sprintf("%d bytes, %d open", options.CacheBytes, options.OpenRasters), func(t *testing.T) {
			terrain := loadedWith(t, options, folder)
			var wg sync.WaitGroup
			for g := range 6 {
				wg.Go(func() {
					into := &profile.Profile{}
					for k := range paths {
						n := (k*7 + g*5) % len(paths)
						if err := terrain.Sample(context.Background(), paths[n], profile.Sampling{}, into); err != nil {
							t.Errorf("path %d: got %v", n, err)
							return
						}
						if len(into.GroundM) != len(want[n].GroundM) {
							t.Errorf("path %d: got %d samples, want %d", n, len(into.GroundM), len(want[n].GroundM))
							return
						}
						for i, h := range want[n].GroundM {
							if !near(into.GroundM[i], h, 0) {
								t.Errorf("path %d, sample %d: got %g, want %g", n, i, into.GroundM[i], h)
								return
							}
						}
					}
				})
			}
			wg.Wait()
		})
	}
}

// The list of rasters is read while others sample.
func TestListedWhileSampled(t *testing.T) {
	terrain := loaded(t, manyTiles(t))
	paths := manyPaths(t, 10)
	var wg sync.WaitGroup
	for range 4 {
		wg.Go(func() {
			rasters, err := terrain.Rasters(context.Background())
			if err != nil || len(rasters) != 5 {
				t.Errorf("got %d rasters, %v, want 5", len(rasters), err)
			}
		})
		wg.Go(func() {
			for _, path := range paths {
				how := profile.Sampling{Rasters: []string{"N56W004.hgt", "coarse.asc"}}
				if err := terrain.Sample(context.Background(), path, how, &profile.Profile{}); err != nil {
					t.Error(err)
				}
			}
		})
	}
	wg.Wait()
}

// No more files are open than were allowed, whoever asks at the same time.
func TestOpenFilesAreBounded(t *testing.T) {
	folder := manyTiles(t)
	paths := manyPaths(t, 5)
	for _, most := range []int{1, 3} {
		terrain := loadedWith(t, Options{CacheBytes: 1, OpenRasters: most}, folder)
		open := func() int {
			terrain.handles.mu.Lock()
			defer terrain.handles.mu.Unlock()
			return terrain.handles.open
		}
		var samplers, watcher sync.WaitGroup
		var done atomic.Bool
		watcher.Go(func() {
			for !done.Load() {
				if got := open(); got > most {
					t.Errorf("at once: got %d files open, want at most %d", got, most)
					return
				}
				time.Sleep(time.Millisecond)
			}
		})
		for g := range 4 {
			samplers.Go(func() {
				for k := range paths {
					if err := terrain.Sample(context.Background(), paths[(k+3*g)%len(paths)], profile.Sampling{}, &profile.Profile{}); err != nil {
						t.Error(err)
					}
				}
			})
		}
		samplers.Wait()
		done.Store(true)
		watcher.Wait()
		for _, path := range paths {
			sampled(t, terrain, path, profile.Sampling{})
			if got := openIn(folder); got > most {
				t.Errorf("got %d files open, want at most %d", got, most)
			}
		}
		terrain.Close()
		if got := openIn(folder); got != 0 {
			t.Errorf("got %d files open after closing, want 0", got)
		}
	}
}

// Whoever waits for a place among the open files may give up.
func TestWaitingForAPlaceEndsWithTheContext(t *testing.T) {
	folder := t.TempDir()
	square(10, 10, constant(1)).write(t, folder, "a.asc")
	terrain := loadedWith(t, Options{OpenRasters: 1}, folder)
	e := terrain.byName["a.asc"]
	err := terrain.handles.with(context.Background(), e, func(*raster.Dataset) error {
		ctx, cancel := context.WithCancel(context.Background())
		cancel()
		return terrain.handles.with(ctx, e, func(*raster.Dataset) error { return nil })
	})
	if !errors.Is(err, context.Canceled) {
		t.Errorf("got %v, want context.Canceled", err)
	}
}

// openIn counts the files of a folder that this process has open, where the
// system tells.
func openIn(folder string) int {
	descriptors, _ := os.ReadDir("/proc/self/fd")
	n := 0
	for _, d := range descriptors {
		if target, err := os.Readlink(filepath.Join("/proc/self/fd", d.Name())); err == nil && strings.HasPrefix(target, folder) {
			n++
		}
	}
	return n
}

func TestContextEnds(t *testing.T) {
	terrain := loadedWith(t, Options{CacheBytes: 1}, manyTiles(t))
	path := pathOf(t, orb.Point{-4.9, 56.1}, orb.Point{-3.1, 57.9})
	how := profile.Sampling{SpacingM: 100}
	t.Run("before", func(t *testing.T) {
		ctx, cancel := context.WithCancel(context.Background())
		cancel()
		if err := terrain.Sample(ctx, path, how, &profile.Profile{}); !errors.Is(err, context.Canceled) {
			t.Errorf("got %v, want context.Canceled", err)
		}
	})
	t.Run("deadline passed", func(t *testing.T) {
		ctx, cancel := context.WithDeadline(context.Background(), time.Now().Add(-time.Second))
		defer cancel()
		if err := terrain.Sample(ctx, path, how, &profile.Profile{}); !errors.Is(err, context.DeadlineExceeded) {
			t.Errorf("got %v, want context.DeadlineExceeded", err)
		}
	})
	// The end of a context is not the raster's fault.
	t.Run("during", func(t *testing.T) {
		for after := 1; after < 8; after++ {
			ctx := newEnding(after)
			err := terrain.Sample(ctx, path, how, &profile.Profile{})
			if !errors.Is(err, context.Canceled) {
				t.Errorf("after %d looks: got %v, want context.Canceled", after, err)
			}
			if _, ok := errors.AsType[*profile.UnreadableError](err); ok {
				t.Errorf("after %d looks: got %v, want no raster blamed", after, err)
			}
		}
	})
	t.Run("and another goes on", func(t *testing.T) {
		if p := sampled(t, terrain, path, how); p.Voids() != 0 {
			t.Errorf("got %d voids, want none", p.Voids())
		}
	})
}

// ending is a context that ends once it was looked at so many times.
type ending struct {
	context.Context
	left atomic.Int32
	done chan struct{}
	once sync.Once
}

func newEnding(after int) *ending {
	e := &ending{Context: context.Background(), done: make(chan struct{})}
	e.left.Store(int32(after))
	return e
}

func (e *ending) Done() <-chan struct{} { return e.done }

func (e *ending) Err() error {
	if e.left.Add(-1) >= 0 {
		return nil
	}
	e.once.Do(func() { close(e.done) })
	return context.Canceled
}
