package raster

import (
	"fmt"
	"math"
	"strconv"

	"github.com/lukeroth/gdal"
)

// CRS is a raster's horizontal coordinate reference system.
type CRS struct {
	// Name is what the system calls itself, for example "WGS 84".
	Name string
	// EPSG is its EPSG code; 0 where the file states none.
	EPSG int
	// Geographic systems count degrees; projected ones count metres or feet.
	Geographic bool
	// WGS84 means that a raster's x and y are WGS 84 longitude and latitude.
	WGS84 bool
	// MetresPerUnit is the length of one projected unit; 0 if Geographic.
	MetresPerUnit float64
	// WKT is the full definition, used to build a Projector.
	WKT string
}

const epsgWGS84 = 4326

// largestAngle lies above every unit that longitudes are counted in, degrees
// and grads, in radians, and below the metre, which counts as 1.
const largestAngle = 0.1

func describeCRS(wkt string) (CRS, error) {
	crs := CRS{WKT: wkt}
	if wkt == "" {
		return crs, fmt.Errorf("%w: the file names none (an Arc ASCII grid needs a .prj file beside it)", ErrCRS)
	}
	sr := gdal.CreateSpatialReference(wkt)
	if sr.IsNull() {
		return crs, fmt.Errorf("%w: its definition cannot be read", ErrCRS)
	}
	defer sr.Destroy()
	root := "PROJCS"
	switch {
	case sr.IsGeographic():
		root = "GEOGCS"
		crs.Geographic = true
	case sr.IsProjected():
		// The binding's own LinearUnits frees memory that is not its own.
		text, _ := sr.AttrValue("PROJCS|UNIT", 1)
		crs.MetresPerUnit, _ = strconv.ParseFloat(text, 64)
		if !(crs.MetresPerUnit > 0) {
			return crs, fmt.Errorf("%w: it has no unit of length", ErrCRS)
		}
	default:
		return crs, fmt.Errorf("%w: it is neither geographic nor projected", ErrCRS)
	}
	// PROJ ends the process over longitudes and latitudes in a unit of length.
	text, _ := sr.AttrValue("GEOGCS|UNIT", 1)
	angle, _ := strconv.ParseFloat(text, 64)
	if !(angle > 0 && angle < largestAngle) || crs.Geographic && math.Abs(angle-math.Pi/180) > 1e-9 {
		return crs, fmt.Errorf("%w: its longitudes and latitudes do not count degrees", ErrCRS)
	}
	crs.Name, _ = sr.AttrValue(root, 0)
	crs.EPSG, _ = strconv.Atoi(sr.AuthorityCode(root))
	crs.WGS84 = crs.Geographic && crs.EPSG == epsgWGS84
	return crs, nil
}
