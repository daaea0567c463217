package raster

import "errors"

// The ways in which a file can be unfit. Each error of Open wraps one of them
// and adds what was found and what would be right.
var (
	// ErrUnreadable means that GDAL could not open or read the file.
	ErrUnreadable = errors.New("cannot be read")
	// ErrFormat means that the file's ending names no format of the allow-list.
	ErrFormat = errors.New("not an elevation format that is read here")
	// ErrShape means a width, height, band count, type or block that cannot be
	// a sane elevation raster.
	ErrShape = errors.New("not the shape of an elevation raster")
	// ErrGeoreference means that the pixels' place on earth is missing or is
	// of a kind that is not read here.
	ErrGeoreference = errors.New("no usable georeference")
	// ErrCRS means that the coordinate reference system is missing or unknown.
	ErrCRS = errors.New("no usable coordinate reference system")
	// ErrUnit means heights in a unit that is not known.
	ErrUnit = errors.New("unknown height unit")
)
