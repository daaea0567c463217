package profile

import (
	"time"

	"github.com/paulmach/orb"
)

// Raster describes one elevation raster, usable or not.
type Raster struct {
	// Name is unique among the rasters.
	Name string
	Kind Kind
	// Problem says why it is not used; empty if it is. Where it is set, the
	// fields below may be empty.
	Problem string
	// Version changes whenever the content does.
	Version string
	// Bound is the extent in WGS 84 longitude and latitude, outer pixel edges.
	Bound orb.Bound
	// PixelM is the finer side of a pixel in metres, at the raster's middle.
	PixelM        float64
	Width, Height int // pixels
	// CRS is what the coordinate reference system calls itself, EPSG its code,
	// 0 if it has none.
	CRS      string
	EPSG     int
	Format   string
	DataType string
	// NoData is the declared void value, meaningful if HasNoData; it may be
	// NaN.
	NoData       float64
	HasNoData    bool
	PixelIsPoint bool
	Modified     time.Time
	// Source is the name of the catalogue's entry that it belongs to; empty
	// where it was found in a plain folder. Sources of a higher Priority are
	// asked first.
	Source   string
	Priority int
	// The rest is what Source says of a raster; see there.
	VerticalDatum        string
	ErrorM, CorrelationM float64
	ErrorAssumed         bool
	Attribution, Licence string
}
