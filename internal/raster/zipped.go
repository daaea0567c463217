package raster

import (
	"archive/zip"
	"errors"
	"fmt"
	"io"
	"path"
	"strings"

	"github.com/lukeroth/gdal"
)

// mostTileBytes bounds an unpacked SRTM tile: the largest that there is has
// 7201 x 7201 pixels.
const mostTileBytes = 2 * 7201 * 7201

// soundZip is an error where the SRTM tile in a zip is damaged, has a password,
// or is packed in a way that GDAL does not know. GDAL's driver asks for none of
// that: what it cannot unpack it reads as whatever its memory holds, and a tile
// that it cannot open ends the process at the first read.
func soundZip(name string) error {
	archive, err := zip.OpenReader(name)
	if err != nil {
		return fmt.Errorf("%w: it is no sound zip", ErrUnreadable)
	}
	defer archive.Close()
	for _, member := range archive.File {
		if path.Base(member.Name) != member.Name || !strings.EqualFold(path.Ext(member.Name), ".hgt") {
			continue
		}
		if err := unpacks(member); err != nil {
			return fmt.Errorf("%w: %s in it cannot be unpacked: %w", ErrUnreadable, member.Name, err)
		}
		f, err := gdal.VSIFOpenL("/vsizip/"+name+"/"+member.Name, "rb")
		if err != nil {
			return fmt.Errorf("%w: %s in it cannot be unpacked by GDAL", ErrUnreadable, member.Name)
		}
		gdal.VSIFCloseL(f)
	}
	return nil
}

// unpacks reads a member to its end, where its checksum is held against it.
func unpacks(member *zip.File) error {
	if member.UncompressedSize64 > mostTileBytes {
		return errors.New("it is too large")
	}
	f, err := member.Open()
	if err != nil {
		return err
	}
	defer f.Close()
	_, err = io.Copy(io.Discard, io.LimitReader(f, mostTileBytes+1))
	return err
}
