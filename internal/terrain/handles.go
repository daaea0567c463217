package terrain

import (
	"context"
	"slices"
	"sync"

	"ridgehop/internal/raster"
)

// handles opens rasters when they are first read and keeps a bounded number of
// them open. Each is used by one goroutine at a time.
type handles struct {
	gdal   *raster.GDAL
	places chan struct{} // one token for each handle that may be in use

	mu   sync.Mutex
	open int      // in use and idle together
	idle []handle // least recently used first
}

type handle struct {
	entry   *entry
	dataset *raster.Dataset
}

func newHandles(library *raster.GDAL, most int) *handles {
	return &handles{gdal: library, places: make(chan struct{}, most)}
}

// with runs use with an open handle of the raster, waiting while all allowed
// handles are in use.
func (h *handles) with(ctx context.Context, e *entry, use func(*raster.Dataset) error) error {
	select {
	case h.places <- struct{}{}:
	case <-ctx.Done():
		return ctx.Err()
	}
	defer func() { <-h.places }()
	dataset := h.takeIdle(e)
	if dataset == nil {
		var err error
		if dataset, err = h.openAgain(e); err != nil {
			h.forget()
			return err
		}
	}
	err := use(dataset)
	if err != nil && e.remote { // it would say the same for ever
		dataset.Close()
		h.forget()
		return err
	}
	h.keepIdle(e, dataset)
	return err
}

func (h *handles) openAgain(e *entry) (*raster.Dataset, error) {
	if e.remote {
		return h.gdal.OpenRemote(e.path)
	}
	return h.gdal.Open(e.path)
}

// takeIdle takes the raster's handle if one is idle. If none is, it counts one
// that is about to be opened, and where that would be too many closes the one
// that was used longest ago.
func (h *handles) takeIdle(e *entry) *raster.Dataset {
	h.mu.Lock()
	defer h.mu.Unlock()
	for i, one := range slices.Backward(h.idle) {
		if one.entry == e {
			found := one.dataset
			h.idle = append(h.idle[:i], h.idle[i+1:]...)
			return found
		}
	}
	if h.open == cap(h.places) { // fewer than that are in use, so one is idle
		h.idle[0].dataset.Close()
		h.idle = append(h.idle[:0], h.idle[1:]...)
		h.open--
	}
	h.open++
	return nil
}

// forget uncounts a handle that could not be opened, or was closed.
func (h *handles) forget() {
	h.mu.Lock()
	defer h.mu.Unlock()
	h.open--
}

func (h *handles) keepIdle(e *entry, dataset *raster.Dataset) {
	h.mu.Lock()
	defer h.mu.Unlock()
	h.idle = append(h.idle, handle{e, dataset})
}

func (h *handles) close() {
	h.mu.Lock()
	defer h.mu.Unlock()
	for _, one := range h.idle {
		one.dataset.Close()
	}
	h.open -= len(h.idle)
	h.idle = nil
}
