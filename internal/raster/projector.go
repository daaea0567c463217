package raster

/*
#include <stdlib.h>
#include <cpl_error.h>
#include <ogr_srs_api.h>

static OGRSpatialReferenceH ridgehop_coded(int epsg) {
	OGRSpatialReferenceH sr = OSRNewSpatialReference(NULL);
	if (OSRImportFromEPSG(sr, epsg) != OGRERR_NONE) {
		OSRRelease(sr);
		return NULL;
	}
	OSRSetAxisMappingStrategy(sr, OAMS_TRADITIONAL_GIS_ORDER);
	return sr;
}

// Drops the vertical half of a compound system where its horizontal half has
// a code, so that heights are never shifted on the way.
static OGRSpatialReferenceH ridgehop_horizontal(const char *wkt, int epsg) {
	OGRSpatialReferenceH sr = OSRNewSpatialReference(wkt);
	if (sr && epsg && OSRIsCompound(sr)) {
		OGRSpatialReferenceH flat = ridgehop_coded(epsg);
		if (flat) {
			OSRRelease(sr);
			return flat;
		}
	}
	if (sr) OSRSetAxisMappingStrategy(sr, OAMS_TRADITIONAL_GIS_ORDER);
	return sr;
}

static OGRCoordinateTransformationH ridgehop_between(OGRSpatialReferenceH from, OGRSpatialReferenceH to, int ballpark) {
	OGRCoordinateTransformationOptionsH options = OCTNewCoordinateTransformationOptions();
	OCTCoordinateTransformationOptionsSetBallparkAllowed(options, ballpark);
	OGRCoordinateTransformationH made = OCTNewCoordinateTransformationEx(from, to, options);
	OCTDestroyCoordinateTransformationOptions(options);
	return made;
}
*/
import "C"

import (
	"errors"
	"fmt"
	"unsafe"
)

// Projector turns WGS 84 longitudes and latitudes into the x and y of a CRS,
// and back. It is used by one goroutine at a time.
type Projector struct {
	name    string
	forward C.OGRCoordinateTransformationH
	inverse C.OGRCoordinateTransformationH
	zeros   []float64
}

// NewProjector prepares the change between WGS 84 and crs. Datum shifts use
// the grids that PROJ finds on this machine and its next best method
// otherwise. The error is ErrCRS.
func (*GDAL) NewProjector(crs CRS) (*Projector, error) {
	definition := C.CString(crs.WKT)
	defer C.free(unsafe.Pointer(definition))
	p := &Projector{name: crs.Name}
	err := guarded("", func() error {
		wgs84, own := C.ridgehop_coded(epsgWGS84), C.ridgehop_horizontal(definition, C.int(crs.EPSG))
		if wgs84 == nil || own == nil {
			return errors.New("its definition cannot be read")
		}
		defer C.OSRRelease(wgs84)
		defer C.OSRRelease(own)
		p.forward, p.inverse = between(wgs84, own), between(own, wgs84)
		if p.forward == nil || p.inverse == nil {
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

// between prepares one direction. A ballpark change, which takes two datums for
// one, is the last resort: wherever PROJ may choose it, it does so outside the
// area that the true shift is meant for, and a path that leaves it would jump.
func between(from, to C.OGRSpatialReferenceH) C.OGRCoordinateTransformationH {
	if shift := C.ridgehop_between(from, to, 0); shift != nil {
		return shift
	}
	C.CPLErrorReset()
	return C.ridgehop_between(from, to, 1)
}

// Project replaces each longitude x[i] and latitude y[i] (degrees) by the
// coordinates of the CRS. A point that the CRS cannot hold is ErrCRS.
func (p *Projector) Project(x, y []float64) error { return p.apply(p.forward, x, y) }

// Unproject replaces each x[i], y[i] of the CRS by longitude and latitude.
func (p *Projector) Unproject(x, y []float64) error { return p.apply(p.inverse, x, y) }

func (p *Projector) apply(t C.OGRCoordinateTransformationH, x, y []float64) error {
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
		if C.OCTTransform(t, C.int(len(x)), coordinates(x), coordinates(y), coordinates(z)) == 0 {
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

func coordinates(s []float64) *C.double { return (*C.double)(unsafe.Pointer(&s[0])) }

// Close frees the projector.
func (p *Projector) Close() {
	for _, t := range []*C.OGRCoordinateTransformationH{&p.forward, &p.inverse} {
		if *t != nil {
			C.OCTDestroyCoordinateTransformation(*t)
		}
		*t = nil
	}
}
