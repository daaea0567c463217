package terrain

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"math"
	"path"
	"strings"
	"sync"
	"time"

	"ridgehop/internal/raster"
	"ridgehop/internal/terrain/catalogue"
	"ridgehop/profile"
)

// tiles are the rasters of a source that has one for each degree of the earth.
// None is opened before a path needs it, and which of them exist is only known
// then.
type tiles struct {
	source  *source
	terrain *Terrain

	mu    sync.Mutex
	cells map[catalogue.Cell]*tileState
	laid  map[string][]*mosaic // by the tiles that a path needs
}

// tileState is what is known of one cell's raster. Its lock is held while the
// raster is looked at, so that it is opened once however many ask.
type tileState struct {
	mu      sync.Mutex
	entry   *entry
	absent  bool
	problem error
	askedAt time.Time // when problem was met
}

// askAgainAfter is how long a raster that did not answer is left alone.
const askAgainAfter = 20 * time.Second

// mostLaid bounds the combinations of tiles that are kept ready.
const mostLaid = 4096

func newTiles(s *source, t *Terrain) *tiles {
	return &tiles{source: s, terrain: t, cells: map[catalogue.Cell]*tileState{}, laid: map[string][]*mosaic{}}
}

// under are the mosaics of the tiles that lie under a path. only limits them to
// rasters of these names; nil is all. A tile that does not answer is noted.
func (t *tiles) under(ctx context.Context, geographic track, only map[string]bool, away *[]profile.Unreachable) ([]*mosaic, error) {
	var entries []*entry
	var key strings.Builder
	for _, c := range cellsUnder(geographic) {
		if !t.source.Tiles.Covers(c) {
			continue
		}
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		e, err := t.entry(c)
		if err != nil {
			noteAway(away, t.name(c), err)
			continue
		}
		if e == nil || only != nil && !only[e.Name] {
			continue
		}
		entries = append(entries, e)
		fmt.Fprintf(&key, "%p ", e)
	}
	if len(entries) == 0 {
		return nil, nil
	}
	return t.lay(key.String(), entries), nil
}

func (t *tiles) lay(key string, entries []*entry) []*mosaic {
	t.mu.Lock()
	defer t.mu.Unlock()
	if found, ok := t.laid[key]; ok {
		return found
	}
	if len(t.laid) >= mostLaid {
		clear(t.laid)
	}
	made := t.terrain.lay(entries)
	t.laid[key] = made
	return made
}

// name is that of a cell's raster, whether it exists or not.
func (t *tiles) name(c catalogue.Cell) string {
	return t.source.Name + "/" + path.Base(t.source.Tiles.Path(c))
}

// entry is the raster of a cell; nil where there is none.
func (t *tiles) entry(c catalogue.Cell) (*entry, error) {
	t.mu.Lock()
	state := t.cells[c]
	if state == nil {
		state = &tileState{}
		t.cells[c] = state
	}
	t.mu.Unlock()
	state.mu.Lock()
	defer state.mu.Unlock()
	if state.entry != nil && state.entry.due() {
		state.entry.recheck(t.terrain.gdal)
	}
	switch {
	case state.entry != nil && !state.entry.gone.Load():
		return state.entry, nil
	case state.absent:
		return nil, nil
	case state.problem != nil && time.Since(state.askedAt) < askAgainAfter:
		return nil, state.problem
	}
	state.entry, state.problem = nil, nil
	e, err := t.look(c)
	switch {
	case errors.Is(err, raster.ErrAbsent), errors.Is(err, fs.ErrNotExist):
		state.absent = true
		return nil, nil
	case err != nil:
		state.problem, state.askedAt = err, time.Now()
		return nil, err
	}
	state.entry = e
	return e, nil
}

// look opens a cell's raster for the first time.
func (t *tiles) look(c catalogue.Cell) (*entry, error) {
	e := t.terrain.newEntry(t.source, t.source.Tiles.Path(c), t.name(c))
	if !e.remote {
		if err := exists(e.path); err != nil {
			return nil, err
		}
	}
	if err := t.terrain.inspect(e); err != nil {
		return nil, err
	}
	if !cellBound(c).Intersects(e.Bound) {
		return nil, fmt.Errorf("it lies at longitudes %g to %g and latitudes %g to %g, not where its name says",
			e.Bound.Min[0], e.Bound.Max[0], e.Bound.Min[1], e.Bound.Max[1])
	}
	return e, nil
}

// known are the rasters that have been looked at, and what was wrong with those
// that could not be.
func (t *tiles) known() (entries []*entry) {
	t.mu.Lock()
	defer t.mu.Unlock()
	for _, state := range t.cells {
		if state.mu.TryLock() { // one that is being looked at is not known yet
			if state.entry != nil {
				entries = append(entries, state.entry)
			}
			state.mu.Unlock()
		}
	}
	return entries
}

// seamDeg is how near a path may come to a neighbouring cell without needing
// its raster: a few pixels of the models that are published by degrees.
const seamDeg = 0.003

// cellsUnder are the degrees of the earth that a path comes over or near to,
// in the order in which it does.
func cellsUnder(geographic track) []catalogue.Cell {
	var out []catalogue.Cell
	seen := map[catalogue.Cell]bool{}
	for i := range geographic {
		p := &geographic[i]
		parts := max(1, math.Ceil((p.to-p.from)/1000))
		x0, y0 := p.at(p.from)
		for k := range int(parts) {
			x1, y1 := p.at(p.from + (p.to-p.from)*float64(k+1)/parts)
			for x := math.Floor(min(x0, x1) - seamDeg); x <= math.Floor(max(x0, x1)+seamDeg); x++ {
				for y := math.Floor(min(y0, y1) - seamDeg); y <= math.Floor(max(y0, y1)+seamDeg); y++ {
					lon := x - 360*math.Floor((x+180)/360)
					c := catalogue.Cell{Lon: int(lon), Lat: int(y)}
					if !seen[c] && y >= -90 && y < 90 {
						seen[c] = true
						out = append(out, c)
					}
				}
			}
			x0, y0 = x1, y1
		}
	}
	return out
}
