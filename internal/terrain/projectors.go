package terrain

import (
	"sync"

	"ridgehop/internal/raster"
)

// projectors lends out the projectors of one CRS: each is used by one
// goroutine at a time, and they are few.
type projectors struct {
	gdal *raster.GDAL
	mu   sync.Mutex
	idle []*raster.Projector
}

// with runs use with a projector of crs.
func (p *projectors) with(crs raster.CRS, use func(*raster.Projector) error) error {
	own, err := p.take(crs)
	if err != nil {
		return err
	}
	defer p.give(own)
	return use(own)
}

func (p *projectors) take(crs raster.CRS) (*raster.Projector, error) {
	p.mu.Lock()
	defer p.mu.Unlock()
	if n := len(p.idle); n > 0 {
		own := p.idle[n-1]
		p.idle = p.idle[:n-1]
		return own, nil
	}
	return p.gdal.NewProjector(crs)
}

func (p *projectors) give(own *raster.Projector) {
	p.mu.Lock()
	defer p.mu.Unlock()
	p.idle = append(p.idle, own)
}

func (p *projectors) close() {
	p.mu.Lock()
	defer p.mu.Unlock()
	for _, own := range p.idle {
		own.Close()
	}
	p.idle = nil
}
