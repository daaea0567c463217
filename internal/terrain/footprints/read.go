package footprints

import (
	"bufio"
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"strings"
)

// ErrDocument means a document that is not GeoJSON of buildings.
var ErrDocument = errors.New("not a GeoJSON document of buildings")

// limits keep a document from taking all memory: 8 million corners are 128 MB,
// a city of a million buildings.
type limits struct {
	bytes   int64
	corners int
}

const (
	maxBytes   = 256 << 20
	maxCorners = 8_000_000
	maxNotes   = 10
)

// Report says what of a document was used. Its counts are of features and add
// up to all that the document holds.
type Report struct {
	// Used are the buildings.
	Used int
	// WithoutHeight were left out because the property is absent, null or blank.
	WithoutHeight int
	// Refused were left out because their height is not above 0 and at most
	// 1000 m, or their outline is none.
	Refused int
	// Notes say of the first refused features, ten at most, what is wrong.
	Notes []string
}

// Read reads a GeoJSON document (RFC 7946): a FeatureCollection or one Feature,
// of Polygon and MultiPolygon geometries in longitude and latitude on WGS 84. A
// "crs" member, of which the RFC has none, may name CRS84 or EPSG:4326 only.
// heightProperty names the property that holds a building's height above the
// ground in metres, a number or a string of one, above 0 and at most 1000.
//
// A feature is left out and counted in the [Report] if its height is not usable,
// if it has no geometry, or if its outline is none: coordinates that are not
// finite or off the earth, a ring that is not closed or has fewer than four
// positions, a polygon of more than 180 degrees of longitude. Longitude and
// latitude the wrong way round show only where a latitude is beyond 90 degrees.
//
// Everything else is [ErrDocument] and says which feature is wrong: other types
// of geometry or document, what is not JSON, text behind the document, more than
// 256 MiB or 8 million corners. An error of r is passed on. Features are decoded
// one at a time, so memory is needed for the corners and one feature.
func Read(r io.Reader, heightProperty string) (*Footprints, Report, error) {
	return read(r, heightProperty, limits{bytes: maxBytes, corners: maxCorners})
}

func read(r io.Reader, heightProperty string, most limits) (*Footprints, Report, error) {
	if heightProperty == "" {
		return nil, Report{}, errors.New("the name of the height property is empty")
	}
	source := &source{r: r, left: most.bytes}
	buffered := bufio.NewReader(source)
	skipByteOrderMark(buffered)
	d := document{json: json.NewDecoder(buffered), property: heightProperty, shapes: shapes{maxCorners: most.corners}}
	err := d.read()
	switch {
	case source.err != nil:
		return nil, Report{}, fmt.Errorf("reading building outlines: %w", source.err)
	case source.left < 0:
		return nil, Report{}, fmt.Errorf("%w: larger than %d MiB", ErrDocument, most.bytes>>20)
	case err != nil:
		return nil, Report{}, fmt.Errorf("%w: %w", ErrDocument, plain(err))
	}
	return d.shapes.footprints(), d.report, nil
}

// source reads no more than a number of bytes, and remembers the reader's own
// error: it is not the document's.
type source struct {
	r    io.Reader
	left int64 // below 0 once there was more
	err  error
}

// Read implements io.Reader. It ends one byte beyond the limit.
func (s *source) Read(p []byte) (int, error) {
	if s.left < 0 {
		return 0, io.EOF
	}
	if int64(len(p)) > s.left+1 {
		p = p[:s.left+1]
	}
	n, err := s.r.Read(p)
	s.left -= int64(n)
	if err != nil && !errors.Is(err, io.EOF) {
		s.err = err
	}
	return n, err
}

// skipByteOrderMark passes over the mark that some programs write before UTF-8.
func skipByteOrderMark(r *bufio.Reader) {
	mark := []byte("\ufeff")
	if start, err := r.Peek(len(mark)); err == nil && bytes.Equal(start, mark) {
		_, _ = r.Discard(len(mark)) // they are in the buffer
	}
}

// plain puts an error of the JSON package, which speaks of Go types, in the
// words of the document.
func plain(err error) error {
	var kind *json.UnmarshalTypeError
	var syntax *json.SyntaxError
	switch {
	case errors.As(err, &kind) && kind.Field == "":
		return fmt.Errorf("a JSON %s, want an object", kind.Value)
	case errors.As(err, &kind):
		return fmt.Errorf("%q is a JSON %s, which it cannot be", kind.Field, kind.Value)
	case errors.Is(err, io.EOF), errors.Is(err, io.ErrUnexpectedEOF), strings.HasSuffix(err.Error(), "unexpected end of JSON input"):
		return errors.New("broken JSON: it ends too early") // the JSON package says it in three ways
	case errors.As(err, &syntax):
		return fmt.Errorf("broken JSON: %s", syntax.Error())
	}
	return err
}
