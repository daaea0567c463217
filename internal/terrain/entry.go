package terrain

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io"
	"os"
	"strings"
	"sync"
	"time"

	"github.com/paulmach/orb"

	"ridgehop/internal/raster"
	"ridgehop/profile"
)

// Raster describes one file found in the folders, usable or not.
type Raster struct {
	// Name is the file's path below its folder, with slashes; it is unique.
	Name string
	Kind profile.Kind
	// Problem says why the file is not used; empty if it is. The fields below
	// are then meaningless.
	Problem string
	// Bound is the extent in WGS 84 longitude and latitude, outer pixel edges.
	Bound orb.Bound
	// PixelM is the finer side of a pixel in metres, at the raster's middle.
	PixelM float64
	Info   raster.Info
	// Modified is when the file was last changed, Bytes its size.
	Modified time.Time
	Bytes    int64
}

// entry is a usable raster and where it lies.
type entry struct {
	Raster
	path    string
	version func() (string, error)
}

func newEntry(r Raster, path string) *entry {
	return &entry{Raster: r, path: path, version: sync.OnceValues(func() (string, error) { return contentVersion(path) })}
}

// unchanged is an error once the file is no longer the one that was loaded: its
// pixels may have moved, and its version no longer names them.
func (e *entry) unchanged() error {
	stat, err := os.Stat(e.path)
	if err != nil {
		return errors.New("the file is gone")
	}
	if stat.Size() != e.Bytes || !stat.ModTime().Equal(e.Modified) {
		return errors.New("the file has changed since it was loaded: restart to use it as it is now")
	}
	return nil
}

// versionDigits is how much of the content's SHA-256 names a version: 64 bits,
// far more than telling two versions of one raster apart needs.
const versionDigits = 16

// contentVersion names the content of a file: the same bytes have the same
// version on every machine, and no edit goes unnoticed.
func contentVersion(path string) (string, error) {
	f, err := os.Open(path) // #nosec G304 -- a file that the operator's own folder holds
	if err != nil {
		return "", fmt.Errorf("version of a raster: %w", err)
	}
	defer f.Close()
	h := sha256.New()
	if _, err := io.Copy(h, f); err != nil {
		return "", fmt.Errorf("version of a raster: %w", err)
	}
	return hex.EncodeToString(h.Sum(nil))[:versionDigits], nil
}

// kindOf reads the kind from the file's name, where producers write it by
// custom: "dtm" for bare earth, "dsm" for surfaces. "dem" and anything else
// say nothing about it. Common practice, no source.
func kindOf(name string) profile.Kind {
	for _, word := range strings.FieldsFunc(strings.ToLower(name), func(r rune) bool {
		return !(r >= 'a' && r <= 'z')
	}) {
		switch word {
		case "dtm":
			return profile.KindGround
		case "dsm":
			return profile.KindSurface
		}
	}
	return profile.KindUnstated
}
