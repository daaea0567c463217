package raster

import (
	"errors"
	"fmt"

	"github.com/lukeroth/gdal"
)

// Projector turns WGS 84 longitudes and latitudes into the x and y of a CRS,
// and back. It is used by one goroutine at a time.
type Projector struct {
	name    string
	forward gdal.CoordinateTransform
	inverse gdal.CoordinateTransform
	zeros   []float64
}

// NewProjector prepares the change between WGS 84 and crs. Datum shifts use
// the grids that PROJ finds on this machine and its next best method
// otherwise. The error is ErrCRS.
func (*Library) NewProjector(crs CRS) (*Projector, error) {
	wgs84, own := gdal.CreateSpatialReference(""), horizontal(crs)
	defer wgs84.Destroy()
	defer own.Destroy()
	p := &Projector{name: crs.Name}
	err := guarded("", func() error {
		if err := wgs84.FromEPSG(epsgWGS84); err != nil {
			return err
		}
		wgs84.SetAxisMappingStrategy(gdal.OAMS_TraditionalGisOrder)
		own.SetAxisMappingStrategy(gdal.OAMS_TraditionalGisOrder)
		p.forward = gdal.CreateCoordinateTransform(wgs84, own)
		p.inverse = gdal.CreateCoordinateTransform(own, wgs84)
		if p.forward.IsNull() || p.inverse.IsNull() {
			return errors.New("no way between it and WGS 84 is known")
		}
		return nil
	})
	if err != nil {
		p.Close()
		return nil, fmt.Errorf("%w: %s: %w", ErrCRS, crs.Name, err)
	}
	return p, nil
}

// horizontal drops the vertical half of a compound system where its horizontal
// half has a code, so that heights are never shifted on the way.
func horizontal(crs CRS) gdal.SpatialReference {
	sr := gdal.CreateSpatialReference(crs.WKT)
	if crs.EPSG == 0 || !sr.IsCompound() {
		return sr
	}
	flat := gdal.CreateSpatialReference("")
	if flat.FromEPSG(crs.EPSG) != nil {
		flat.Destroy()
		return sr
	}
	sr.Destroy()
	return flat
}

// Project replaces each longitude x[i] and latitude y[i] (degrees) by the
// coordinates of the CRS. A point that the CRS cannot hold is ErrCRS.
func (p *Projector) Project(x, y []float64) error { return p.apply(p.forward, x, y) }

// Unproject replaces each x[i], y[i] of the CRS by longitude and latitude.
func (p *Projector) Unproject(x, y []float64) error { return p.apply(p.inverse, x, y) }

func (p *Projector) apply(t gdal.CoordinateTransform, x, y []float64) error {
	if len(x) != len(y) || len(x) == 0 {
		return fmt.Errorf("%w: %s: %d x for %d y", ErrCRS, p.name, len(x), len(y))
	}
	for len(p.zeros) < len(x) {
		p.zeros = append(p.zeros, 0)
	}
	z := p.zeros[:len(x)]
	clear(z)
	outside := errors.New("a point lies outside what it can hold")
	err := guarded("", func() error {
		if !t.Transform(len(x), x, y, z) {
			return outside
		}
		return nil
	})
	if err == nil && (!finite(x...) || !finite(y...)) {
		err = outside
	}
	if err != nil {
		return fmt.Errorf("%w: %s: %w", ErrCRS, p.name, err)
	}
	return nil
}

// Close frees the projector.
func (p *Projector) Close() {
	for _, t := range []*gdal.CoordinateTransform{&p.forward, &p.inverse} {
		if !t.IsNull() {
			t.Destroy()
		}
		*t = gdal.CoordinateTransform{}
	}
}
