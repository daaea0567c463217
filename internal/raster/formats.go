package raster

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"
)

// format ties a file ending to the one driver that may open it.
type format struct {
	ending string
	driver string
}

// textGrid is the driver whose rows lie one after the other as text.
const textGrid = "AAIGrid"

// formats is the allow-list. Nothing else is ever handed to GDAL, so a file
// cannot choose a driver that fetches addresses or runs expressions. Longer
// endings stand first.
func formats() []format {
	return []format{
		{".hgt.zip", "SRTMHGT"},
		{".hgt", "SRTMHGT"},
		{".tiff", "GTiff"},
		{".tif", "GTiff"},
		{".dem", "USGSDEM"},
		{".asc", textGrid},
	}
}

// Recognised reports whether the file's ending names a format that is read
// here: GeoTIFF (.tif, .tiff), SRTM (.hgt, .hgt.zip), USGS DEM (.dem) or Arc
// ASCII grid (.asc).
func Recognised(path string) bool {
	_, err := driverFor(path)
	return err == nil
}

func driverFor(path string) (string, error) {
	name := strings.ToLower(filepath.Base(path))
	for _, f := range formats() {
		if strings.HasSuffix(name, f.ending) {
			return f.driver, nil
		}
	}
	return "", fmt.Errorf("%w: %q; GeoTIFF (.tif), SRTM (.hgt, .hgt.zip), USGS DEM (.dem) and Arc ASCII (.asc) are",
		ErrFormat, filepath.Base(path))
}

// Beside names the file that lies beside a raster and says where its pixels
// lie: the .prj of an Arc ASCII grid. It is empty where there is none.
func Beside(path string) string {
	ending := filepath.Ext(path)
	if !strings.EqualFold(ending, ".asc") {
		return ""
	}
	for _, other := range []string{".prj", ".PRJ"} {
		beside := strings.TrimSuffix(path, ending) + other
		if _, err := os.Stat(beside); err == nil {
			return beside
		}
	}
	return ""
}
