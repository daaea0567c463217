// Package raster is the only room that knows GDAL. It opens elevation rasters
// by an allow-list of drivers, checks them before anything is read, reads
// windows of heights in metres, and projects longitudes and latitudes to a
// raster's own coordinates. Errors carry GDAL's own words.
//
// A GDAL is safe for concurrent use. A Dataset or a Projector is used by
// one goroutine at a time.
package raster
