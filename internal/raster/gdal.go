package raster

/*
#cgo pkg-config: gdal
#include <cpl_error.h>

static void ridgehop_quiet(void) { CPLSetErrorHandler(CPLQuietErrorHandler); }
*/
import "C"

import (
	"errors"
	"path/filepath"
	"runtime"
	"strings"

	"github.com/lukeroth/gdal"
)

// GDAL is the library as this process uses it. GDAL keeps its settings for the
// whole process, so one value is made at the start and handed around.
type GDAL struct{}

// NewGDAL sets GDAL up: errors are returned instead of printed, no sidecar
// statistics are read or written, no folder is listed on opening a file, and
// PROJ stays off the network.
func NewGDAL() *GDAL {
	for key, value := range map[string]string{
		"GDAL_PAM_ENABLED":                  "NO",
		"GDAL_DISABLE_READDIR_ON_OPEN":      "EMPTY_DIR",
		"GDAL_CACHEMAX":                     "64",
		"PROJ_NETWORK":                      "OFF",
		"OSR_DEFAULT_AXIS_MAPPING_STRATEGY": "TRADITIONAL_GIS_ORDER",
	} {
		gdal.CPLSetConfigOption(key, value)
	}
	C.ridgehop_quiet()
	return &GDAL{}
}

// Version is the release of the GDAL that this binary was built against.
func (*GDAL) Version() string { return gdal.RELEASE_NAME }

// guarded runs one GDAL call on one operating-system thread and, where the
// call reports failure, returns GDAL's own message, which GDAL keeps for that
// thread only. path, if any, is cut down to the file's name in the message:
// callers see a raster's name, never where it lies.
func guarded(path string, call func() error) error {
	runtime.LockOSThread()
	defer runtime.UnlockOSThread()
	C.CPLErrorReset()
	err := call()
	if err == nil {
		return nil
	}
	text := strings.TrimSpace(C.GoString(C.CPLGetLastErrorMsg()))
	if text == "" {
		return err
	}
	if path != "" {
		text = strings.ReplaceAll(text, path, filepath.Base(path))
	}
	return errors.New(text)
}
