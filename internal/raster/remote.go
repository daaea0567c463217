package raster

import (
	"errors"
	"fmt"
	"path"
	"strconv"
	"strings"
)

// RemoteSettings bounds what a remote file may cost in time. A request that
// never ends costs (Retries+1) x TimeoutS, and the delays between the tries,
// of which each is two to two and a half times the one before. A Read gives up
// after one such request, or two where the table of blocks must be fetched too.
type RemoteSettings struct {
	TimeoutS        int     // seconds for one request, from connecting to the last byte; below 1: the default, 10
	ConnectTimeoutS int     // seconds for connecting; below 1: the default, 5
	Retries         int     // tries after the first; below 0: none
	RetryDelayS     float64 // seconds before the first retry; 0 or less: the default, 0.3
}

// DefaultRemoteSettings returns what NewGDAL uses: 10 s a request, 5 s for
// connecting, and 2 retries of which the first comes after 0.3 s. Common
// practice, no source.
func DefaultRemoteSettings() RemoteSettings {
	return RemoteSettings{TimeoutS: 10, ConnectTimeoutS: 5, Retries: 2, RetryDelayS: 0.3}
}

// options is the settings in GDAL's words, with what must never be otherwise.
func (s RemoteSettings) options() map[string]string {
	usual := DefaultRemoteSettings()
	if s.TimeoutS < 1 {
		s.TimeoutS = usual.TimeoutS
	}
	if s.ConnectTimeoutS < 1 {
		s.ConnectTimeoutS = usual.ConnectTimeoutS
	}
	if !(s.RetryDelayS > 0) { // with 0, GDAL would not try again at all
		s.RetryDelayS = usual.RetryDelayS
	}
	return map[string]string{
		"GDAL_HTTP_TIMEOUT":                strconv.Itoa(s.TimeoutS),
		"GDAL_HTTP_CONNECTTIMEOUT":         strconv.Itoa(s.ConnectTimeoutS),
		"GDAL_HTTP_MAX_RETRY":              strconv.Itoa(max(s.Retries, 0)),
		"GDAL_HTTP_RETRY_DELAY":            strconv.FormatFloat(s.RetryDelayS, 'f', -1, 64),
		"CPL_VSIL_CURL_ALLOWED_EXTENSIONS": ".tif,.tiff",
		// One request at a time and on the thread that reads: a watch could
		// not tell the answers apart, nor hear another thread.
		"GDAL_HTTP_MULTIRANGE": "SERIAL",
		"GDAL_NUM_THREADS":     "1",
		// Without this GDAL fetches a window's blocks beforehand, and where that
		// fails begins again one by one: twice the time until it gives up.
		"GDAL_MAX_RAW_BLOCK_CACHE_SIZE": "0",
		// A cache of each handle's own would outlive what a watch drops.
		"VSI_CACHE": "NO",
		// Where a redirect led is not to be remembered.
		"CPL_VSIL_CURL_USE_S3_REDIRECT": "NO",
	}
}

// remote is the part of a Dataset that lies on a server.
type remote struct {
	object  *object
	content identity
	failed  error
}

// OpenRemote opens a GeoTIFF on a server, without fetching more of it than its
// head, and makes the checks of Open. Its path is GDAL's: /vsicurl/ and an
// http or https address, or /vsis3/, the bucket and the key; it ends in .tif
// or .tiff. Credentials and the endpoint of an S3 server come from GDAL's
// environment variables.
//
// All that is ever read of the Dataset is of the content that the file had when
// it was opened: where the server gives bytes of other content, or fails, Read
// is an error, and each Read after it is the same error. Close the Dataset then
// and open it anew.
//
// The errors wrap ErrAbsent, ErrUnreachable, ErrChanged, or one of Open's, and
// say nothing about where the file lies. Safe for concurrent use.
func (g *GDAL) OpenRemote(path string) (*Dataset, error) {
	if err := remotePath(path); err != nil {
		return nil, err
	}
	o := g.object(path)
	content, err := o.identify()
	if err != nil {
		return nil, err
	}
	d := &Dataset{path: path, remote: &remote{object: o, content: content}}
	if _, err = o.watched(&content, func() error { return d.open("GTiff") }); err != nil {
		d.Close()
		return nil, withoutPlace(err, path)
	}
	return d, nil
}

// RemoteVersion asks the server which content the file has now, and names it:
// two contents have different versions. It is made from the ETag, where the
// server gives a strong one, or else from the time of the last change and the
// size. The path is one of OpenRemote's, and so are the errors. Safe for
// concurrent use.
func (g *GDAL) RemoteVersion(path string) (string, error) {
	if err := remotePath(path); err != nil {
		return "", err
	}
	content, err := g.object(path).identify()
	if err != nil {
		return "", err
	}
	return content.version(), nil
}

// ForgetRemote drops what GDAL has cached of the file: its bytes, and that it
// is absent. Nothing needs it to be right; it frees memory, at most 16 MB for
// all files together. It waits until no other call is reading the file. Safe
// for concurrent use.
func (g *GDAL) ForgetRemote(path string) {
	if remotePath(path) == nil {
		g.object(path).forget()
	}
}

// Version names the content that a remote Dataset was opened on, as
// RemoteVersion does. It is empty for a plain file.
func (d *Dataset) Version() string {
	if d.remote == nil {
		return ""
	}
	return d.remote.content.version()
}

// Unchanged asks the server whether the file still has the content that the
// Dataset was opened on: one request. The error is ErrChanged if it has not.
// Reading needs no such question: it finds out by itself, but only when it
// fetches something. For a plain file the answer is always nil. Safe for
// concurrent use, also with Read.
func (d *Dataset) Unchanged() error {
	if d.remote == nil {
		return nil
	}
	content, err := d.remote.object.identify()
	switch {
	case errors.Is(err, ErrAbsent):
		return changed("it is gone")
	case err != nil:
		return err
	case content != d.remote.content:
		return changed("its content has changed")
	}
	return nil
}

// reading runs a call that reads pixels.
func (r *remote) reading(call func() error) error {
	if r.failed == nil {
		// GDAL keeps decoded blocks with each handle, and they may hold what
		// the watch refused: after an error the handle is never used again.
		_, err := r.object.watched(&r.content, call)
		r.failed = withoutPlace(err, r.object.path)
	}
	return r.failed
}

func (g *GDAL) object(path string) *object {
	o, _ := g.objects.LoadOrStore(path, &object{path: path})
	return o.(*object)
}

// remotePath lets a path through only if GDAL can make nothing of it but one
// GeoTIFF on a server.
func remotePath(name string) error {
	place, ok := strings.CutPrefix(name, "/vsis3/")
	if !ok {
		place, ok = strings.CutPrefix(name, "/vsicurl/http://")
	}
	if !ok {
		place, ok = strings.CutPrefix(name, "/vsicurl/https://")
	}
	if !ok {
		return fmt.Errorf("%w: not the name of a remote file: /vsicurl/http://, /vsicurl/https:// or /vsis3/ and its place", ErrUnreadable)
	}
	server, file, _ := strings.Cut(place, "/")
	plain := !strings.ContainsFunc(place, func(r rune) bool { return r < ' ' || r == 0x7f || strings.ContainsRune(`<>?#\`, r) })
	lower := strings.ToLower(place)
	switch {
	case !plain || strings.Contains(lower, "/vsi") || strings.Contains(lower, "..") || strings.Contains(lower, "%2e"):
		return fmt.Errorf("%w: the name of a remote file has no .., ?, #, <, >, backslash, control character or further /vsi", ErrUnreadable)
	case strings.Contains(server, "@"):
		return fmt.Errorf("%w: an address with a password in it: give it to GDAL as GDAL_HTTP_USERPWD", ErrUnreadable)
	case server == "" || file == "":
		return fmt.Errorf("%w: the name of a remote file has a server or a bucket, and a file", ErrUnreadable)
	case !remoteEnding(file):
		return fmt.Errorf("%w: %q; of remote files, GeoTIFF (.tif, .tiff) is", ErrFormat, path.Base(file))
	}
	return nil
}

// remoteEnding reports whether a name ends like a remote raster.
func remoteEnding(name string) bool {
	name = strings.ToLower(name)
	return strings.HasSuffix(name, ".tif") || strings.HasSuffix(name, ".tiff")
}

// withoutPlace cuts addresses in GDAL's words down to the file's name.
func withoutPlace(err error, name string) error {
	if err == nil {
		return nil
	}
	words := strings.Fields(err.Error())
	var found bool
	for i, word := range words {
		if strings.Contains(word, "://") || strings.Contains(word, "/vsi") {
			words[i], found = path.Base(name), true
		}
	}
	if !found {
		return err
	}
	for _, sentinel := range []error{ErrUnreadable, ErrShape, ErrGeoreference, ErrCRS, ErrUnit} {
		if errors.Is(err, sentinel) {
			text := strings.Join(words, " ")
			return fmt.Errorf("%w: %s", sentinel, strings.TrimPrefix(text, sentinel.Error()+": "))
		}
	}
	return errors.New(strings.Join(words, " "))
}
