package raster

import (
	"errors"
	"fmt"
)

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

// The ways in which a remote file can be out of reach. Each error of OpenRemote,
// RemoteVersion and Unchanged, and of Read on a remote Dataset, wraps one of
// these or of those above.
var (
	// ErrAbsent means that the server has no such file: HTTP 404 or 410.
	ErrAbsent = errors.New("does not exist")
	// ErrUnreachable means that the file may be there but cannot be had now:
	// no answer in time, no connection, no permission, a failing server, or
	// one whose answers cannot be relied on.
	ErrUnreachable = errors.New("cannot be reached")
	// ErrChanged is an ErrUnreachable: the content that was opened is no
	// longer there. Opening the file anew gives what is there now.
	ErrChanged = fmt.Errorf("%w as it was", ErrUnreachable)
)

func unreachable(format string, values ...any) error {
	return fmt.Errorf("%w: "+format, append([]any{ErrUnreachable}, values...)...)
}

func changed(how string) error { return fmt.Errorf("%w: %s", ErrChanged, how) }
