package terrain

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io"
	"os"
	"time"

	"ridgehop/internal/raster"
)

// version names the content: the same bytes have the same version on every
// machine, and no edit goes unnoticed. It is computed once; a failure is tried
// again the next time. That of a remote raster is known from the first look.
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

// versionDigits is how much of the content's SHA-256 names a version: 64 bits,
// far more than telling two versions of one raster apart needs.
const versionDigits = 16

// contentVersion names the content of the file that was loaded, and of the one
// beside it that says where its pixels lie, if there is one.
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
	return withoutFolder(err)
}

// current is an error where a raster that was just read is no longer the one that
// was loaded. A remote one's dataset reads one version only, which is compared
// with the entry's.
func (e *entry) current(d *raster.Dataset) error {
	switch {
	case !e.remote:
		return e.unchanged()
	case d.Version() != e.known:
		e.gone.Store(true)
		if e.source.tiles == nil {
			return fmt.Errorf("%w: it was replaced; reload the rasters to have the new one", raster.ErrChanged)
		}
		return fmt.Errorf("%w: it was replaced; ask again to have the new one", raster.ErrChanged)
	}
	return nil
}

// recheck asks the server of a remote raster whether it is still the one that
// was loaded. A server that does not answer leaves what is known as it was.
func (e *entry) recheck(gdal *raster.GDAL) {
	version, err := gdal.RemoteVersion(e.path)
	e.mu.Lock()
	defer e.mu.Unlock()
	e.checkedAt = time.Now()
	if err == nil && version != e.known || errors.Is(err, raster.ErrAbsent) {
		e.gone.Store(true)
	}
}

// recheckAfter is how long a remote raster is used without asking its server
// whether it has been replaced, while nothing new is read from it.
const recheckAfter = 10 * time.Minute

// due reports whether it is time to ask.
func (e *entry) due() bool {
	e.mu.Lock()
	defer e.mu.Unlock()
	return e.remote && time.Since(e.checkedAt) > recheckAfter
}
