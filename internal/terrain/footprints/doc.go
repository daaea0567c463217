// Package footprints knows where buildings stand and how high they are: it reads
// their outlines from GeoJSON (RFC 7946) and says which stretches of a path lie
// inside them.
//
// Outlines and paths are in degrees of longitude and latitude on WGS 84, and
// straight between their corners in those degrees. A polygon may have holes: what
// lies inside an odd number of its rings is inside (even-odd rule). A wall
// belongs to its building as far as double precision can tell; a corner that is
// only touched may or may not.
//
// An outline across the antimeridian must be cut there, as section 3.1.9 of the
// RFC asks: one that spans more than 180 degrees is refused.
package footprints
