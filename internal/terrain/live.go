package terrain

import (
	"context"
	"fmt"
	"sync"
	"sync/atomic"

	"ridgehop/profile"
)

// Live is a Terrain that can be loaded anew while it is in use: whoever has
// begun with one goes on with it, and it is closed when the last has ended. It is
// safe for concurrent use.
type Live struct {
	load    func(ctx context.Context, previous *Terrain) (*Terrain, error)
	loading sync.Mutex // one at a time

	mu      sync.RWMutex // guards current; held for reading while users are counted
	current *generation
}

// generation is a Terrain and how many use it.
type generation struct {
	*Terrain
	users atomic.Int64
	last  chan struct{} // closed when it is replaced and nobody uses it any more
}

// NewLive loads a terrain with load, which is called again for every Reload with
// the terrain in use.
func NewLive(ctx context.Context, load func(ctx context.Context, previous *Terrain) (*Terrain, error)) (*Live, error) {
	first, err := load(ctx, nil)
	if err != nil {
		return nil, err
	}
	return &Live{load: load, current: newGeneration(first)}, nil
}

// newGeneration counts the Live itself as a user.
func newGeneration(t *Terrain) *generation {
	g := &generation{Terrain: t, last: make(chan struct{})}
	g.users.Store(1)
	return g
}

func (g *generation) leave() {
	if g.users.Add(-1) == 0 {
		close(g.last)
	}
}

// enter takes hold of the terrain in use.
func (l *Live) enter() *generation {
	l.mu.RLock()
	defer l.mu.RUnlock()
	l.current.users.Add(1)
	return l.current
}

// Reload loads the terrain anew and uses it from then on. If it cannot be
// loaded the one in use stays, and the error says why. It returns what came,
// went and changed.
func (l *Live) Reload(ctx context.Context) (profile.RasterChanges, error) {
	l.loading.Lock()
	defer l.loading.Unlock()
	old := l.enter()
	fresh, err := l.load(ctx, old.Terrain)
	if err != nil {
		old.leave()
		return profile.RasterChanges{}, fmt.Errorf("the rasters in use stay: %w", err)
	}
	changes := changesBetween(old.Terrain, fresh)
	old.leave()
	l.mu.Lock()
	l.current = newGeneration(fresh)
	l.mu.Unlock()
	old.leave() // the Live's own hold
	go func() {
		<-old.last
		old.Close()
	}()
	return changes, nil
}

// Close closes the terrain in use. Nothing may use the Live any more.
func (l *Live) Close() {
	l.current.leave()
	<-l.current.last
	l.current.Close()
}

// Sample implements profile.Terrain.
func (l *Live) Sample(ctx context.Context, path profile.Path, how profile.Sampling, into *profile.Profile) error {
	g := l.enter()
	defer g.leave()
	return g.Terrain.Sample(ctx, path, how, into)
}

// Rasters is that of the Terrain in use.
func (l *Live) Rasters(ctx context.Context) ([]profile.Raster, error) {
	g := l.enter()
	defer g.leave()
	return g.Terrain.Rasters(ctx)
}

// Heights is that of the Terrain in use.
func (l *Live) Heights(ctx context.Context, lon, lat float64) (profile.Spot, error) {
	g := l.enter()
	defer g.leave()
	return g.Terrain.Heights(ctx, lon, lat)
}

// Coverage is that of the Terrain in use.
func (l *Live) Coverage(ctx context.Context) ([]profile.Coverage, error) {
	g := l.enter()
	defer g.leave()
	return g.Terrain.Coverage(ctx)
}

// Usable is that of the Terrain in use.
func (l *Live) Usable() int {
	g := l.enter()
	defer g.leave()
	return g.Terrain.Usable()
}

// Index is that of the Terrain in use.
func (l *Live) Index() Index {
	g := l.enter()
	defer g.leave()
	return g.Terrain.Index()
}
