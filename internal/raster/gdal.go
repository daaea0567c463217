package raster

/*
#cgo pkg-config: gdal
#include <cpl_error.h>

// CPL_LOG is looked at once in the life of the process: here.
static void ridgehop_quiet(void)
{
    CPLSetErrorHandler(CPLQuietErrorHandler);
    CPLDefaultErrorHandler(CE_Debug, CPLE_None, "");
}
*/
import "C"

import (
	"errors"
	"maps"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"sync"

	"github.com/lukeroth/gdal"
)

// GDAL is the library as this process uses it. GDAL keeps its settings for the
// whole process, so one value is made at the start and handed around.
type GDAL struct {
	objects sync.Map // of *object by path: the remote files that were asked for
}

// NewGDAL sets GDAL up: errors are returned instead of printed, no sidecar
// statistics are read or written, no folder is listed on opening a file, and
// PROJ stays off the network. Remote files are read with DefaultRemoteSettings.
func NewGDAL() *GDAL { return NewGDALWith(DefaultRemoteSettings()) }

// NewGDALWith is NewGDAL with settings of the caller's for remote files.
func NewGDALWith(settings RemoteSettings) *GDAL {
	options := settings.options()
	maps.Copy(options, map[string]string{
		"GDAL_PAM_ENABLED":                  "NO",
		"GDAL_DISABLE_READDIR_ON_OPEN":      "EMPTY_DIR",
		"GDAL_CACHEMAX":                     "64",
		"PROJ_NETWORK":                      "OFF",
		"OSR_DEFAULT_AXIS_MAPPING_STRATEGY": "TRADITIONAL_GIS_ORDER",
	})
	// What a watch has GDAL log goes to the watch, save while GDAL asks a cloud
	// for credentials: then to this file, and those are secret.
	if gdal.CPLGetConfigOption("CPL_LOG", "") == "" {
		options["CPL_LOG"] = os.DevNull
	}
	for key, value := range options {
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
