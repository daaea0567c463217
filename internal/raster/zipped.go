package raster

import (
	"archive/zip"
	"fmt"
	"path"
	"strings"

	"github.com/lukeroth/gdal"
)

// zipOpens is an error where GDAL cannot open an SRTM tile that a zip holds:
// one that is damaged, has a password, or is packed in a way that GDAL does not
// know. GDAL's driver goes on without the file, and the first read would end
// the process.
func zipOpens(name string) error {
	archive, err := zip.OpenReader(name)
	if err != nil {
		return fmt.Errorf("%w: it is no sound zip", ErrUnreadable)
	}
	defer archive.Close()
	for _, member := range archive.File {
		if path.Base(member.Name) != member.Name || !strings.EqualFold(path.Ext(member.Name), ".hgt") {
			continue
		}
		f, err := gdal.VSIFOpenL("/vsizip/"+name+"/"+member.Name, "rb")
		if err != nil {
			return fmt.Errorf("%w: %s in it cannot be unpacked; zips packed by deflate, without a password, are read", ErrUnreadable, member.Name)
		}
		gdal.VSIFCloseL(f)
	}
	return nil
}
