package terrain

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io"
	"os"
	"path"
	"slices"
	"strings"
	"sync"

	"ridgehop/internal/raster"
	"ridgehop/profile"
)

// entry is one file found in the folders, and where it lies.
type entry struct {
	profile.Raster
	info  raster.Info
	path  string
	bytes int64

	mu    sync.Mutex // guards known
	known string     // the version, once it is known
}

func newEntry(path, name string) *entry {
	return &entry{Raster: profile.Raster{Name: name, Kind: kindOf(name)}, path: path}
}

// version is contentVersion, computed once. A failure is tried again the next
// time.
func (e *entry) version() (string, error) {
	e.mu.Lock()
	defer e.mu.Unlock()
	if e.known != "" {
		return e.known, nil
	}
	version, err := e.contentVersion()
	if err == nil {
		e.known = version
	}
	return version, err
}

// describe copies what the raster declares to where callers see it.
func (e *entry) describe(info raster.Info) {
	e.info = info
	e.Width, e.Height = info.Width, info.Height
	e.CRS, e.EPSG = info.CRS.Name, info.CRS.EPSG
	e.Format, e.DataType = info.Driver, info.DataType
	e.NoData, e.HasNoData = info.NoData, info.HasNoData
	e.PixelIsPoint = info.PixelIsPoint
}

// unchanged is an error once the file is no longer the one that was loaded: its
// pixels may have moved, and its version no longer names them.
func (e *entry) unchanged() error {
	stat, err := os.Stat(e.path)
	if err != nil {
		return errors.New("the file is gone")
	}
	if stat.Size() != e.bytes || !stat.ModTime().Equal(e.Modified) {
		return errors.New("the file has changed since it was loaded: restart to use it as it is now")
	}
	return nil
}

// versionDigits is how much of the content's SHA-256 names a version: 64 bits,
// far more than telling two versions of one raster apart needs.
const versionDigits = 16

// contentVersion names the content of the file that was loaded, and of the one
// beside it that says where its pixels lie, if there is one: the same bytes
// have the same version on every machine, and no edit goes unnoticed.
func (e *entry) contentVersion() (string, error) {
	h := sha256.New()
	for _, path := range []string{e.path, raster.Beside(e.path)} {
		if path == "" {
			continue
		}
		if err := copyFile(h, path); err != nil {
			return "", fmt.Errorf("its version: %w", err)
		}
	}
	if err := e.unchanged(); err != nil {
		return "", err
	}
	return hex.EncodeToString(h.Sum(nil))[:versionDigits], nil
}

// copyFile copies a file's content. Its errors do not say where the file lies.
func copyFile(to io.Writer, path string) error {
	f, err := os.Open(path)
	if err == nil {
		defer f.Close()
		_, err = io.Copy(to, f)
	}
	if where, ok := errors.AsType[*os.PathError](err); ok {
		return where.Err
	}
	return err
}

// kindOf reads the kind from the file's name, or else from the folders that it
// lies in, where producers write it by custom: "dtm" for bare earth, "dsm" for
// surfaces. "dem" and anything else say nothing about it, nor do both words at
// once. Common practice, no source.
func kindOf(name string) profile.Kind {
	folders, file := path.Split(name)
	if kind := kindIn(file); kind != profile.KindUnstated {
		return kind
	}
	return kindIn(folders)
}

func kindIn(text string) profile.Kind {
	words := strings.FieldsFunc(strings.ToLower(text), func(r rune) bool { return !(r >= 'a' && r <= 'z') })
	ground, surface := slices.Contains(words, "dtm"), slices.Contains(words, "dsm")
	switch {
	case ground && !surface:
		return profile.KindGround
	case surface && !ground:
		return profile.KindSurface
	}
	return profile.KindUnstated
}
