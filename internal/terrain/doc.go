// Package terrain turns a collection of elevation rasters into a
// profile.Terrain.
//
// Rasters that share one pixel grid are laid together as a mosaic, so that
// interpolation across the seam of two tiles reads the pixels of both. They are
// asked by the priority of their source, then finest first, and where one has a
// void or ends, the next is asked. Between pixel centres heights are interpolated
// bilinearly; a sample that a void pixel would have a part in is void. In the half
// pixel between the outermost pixel centres and a mosaic's edge, the pixels that
// exist there decide alone.
//
// In the exact mode a path is walked cell by cell (walk.go), each layer of it,
// bare earth, surface, canopy and buildings, into a strip (strip.go); otherwise
// the layers are read at even distances (even.go). Either way they are brought to
// one vertical datum (datum.go) and put together so that nothing counts twice
// (compose.go).
//
// Pixels are decoded once, in chunks of whole GDAL blocks, and kept as plain
// arrays in a cache bounded in bytes; sampling itself never calls GDAL.
//
// A Terrain is safe for concurrent use.
package terrain
