// Package geodesy measures on the WGS 84 ellipsoid: the geodesic between two
// points, its length and azimuths, and positions along it. The work is done by
// a kept library after C. F. F. Karney, Algorithms for geodesics, Journal of
// Geodesy 87 (2013), which converges everywhere, poles, antimeridian and
// antipodes included.
//
// It also knows where a compass points, by the World Magnetic Model 2025, and how
// high the geoid lies above the ellipsoid, by grids that are read here.
//
// Points are orb.Point: longitude, latitude, in degrees. Everything here is
// safe for concurrent use.
package geodesy
