package profile

import "github.com/paulmach/orb"

// Spot is what is known of the height of one place.
type Spot struct {
	Lon, Lat float64 // WGS 84, degrees
	// Heights are what each raster says there by itself, as it states it: above
	// its own vertical datum, or above the ground. Those asked first stand first.
	Heights []SpotHeight
	// GroundM and CoverM are what a path makes of them, in metres above
	// VerticalDatum and above GroundM; GroundM is NaN where nothing is known,
	// CoverM where no source speaks of cover. Ground and Cover are the sources;
	// nil where there is none.
	GroundM, CoverM float64
	Ground, Cover   *Source
	VerticalDatum   string
	DatumDoubts     []DatumDoubt
	Unreachable     []Unreachable
}

// SpotHeight is one raster's height at a place.
type SpotHeight struct {
	Source  Source
	HeightM float64 // NaN is a void
}

// Coverage is the part of the earth that one source has rasters for.
type Coverage struct {
	// Name is the source's; of plain folders it is empty.
	Name string
	Kind Kind
	// OnDemand means that nobody has looked which rasters exist: Area is where
	// they may lie.
	OnDemand bool
	Rasters  int
	// Area is in WGS 84, without what lies in none of the rasters. A void inside
	// a raster is not cut out.
	Area                 orb.MultiPolygon
	Attribution, Licence string
}

// RasterChanges is what loading the rasters anew found: names of rasters and
// sources, sorted.
type RasterChanges struct {
	Added, Removed, Changed []string
}
