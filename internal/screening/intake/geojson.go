package intake

import (
	"bytes"
	"encoding/json"
	"io"
)

// features are the rows of a GeoJSON FeatureCollection.
type features struct {
	w       *window
	number  int // of the feature last read
	begun   bool
	found   bool // the array of features
	within  bool // that array
	unknown unknown
}

// next reads one feature.
func (f *features) next(rec *record) error {
	rec.reset(f.number + 1)
	first := false
	if !f.within {
		if err := f.seek(); err != nil {
			return err
		}
		first = true
	}
	sign, err := f.token()
	if err != nil {
		return err
	}
	if sign == ']' {
		f.w.consume(1)
		f.within = false
		return f.next(rec) // there may be members after the features
	}
	if !first {
		if err := f.expect(','); err != nil {
			return err
		}
		if _, err := f.token(); err != nil {
			return err
		}
	}
	raw, err := f.value()
	if err != nil {
		return err
	}
	f.number++
	f.take(rec, raw)
	return nil
}

// seek reads the members of the collection up to its features; the error is
// io.EOF after the last member.
func (f *features) seek() error {
	if !f.begun {
		if err := f.expect('{'); err != nil {
			return err
		}
	}
	for {
		sign, err := f.token()
		if err != nil {
			return err
		}
		if sign == '}' {
			f.w.consume(1)
			return f.end()
		}
		if f.begun {
			if err := f.expect(','); err != nil {
				return err
			}
		}
		f.begun = true
		if done, err := f.member(); done || err != nil {
			return err
		}
	}
}

// member reads one member of the collection; done where its features begin.
func (f *features) member() (done bool, err error) {
	if _, err := f.token(); err != nil {
		return false, err
	}
	raw, err := f.value()
	if err != nil {
		return false, err
	}
	if !json.Valid(raw) || raw[0] != '"' {
		return false, f.unreadable("has a member without a name")
	}
	name := string(unquoted(raw))
	if err := f.expect(':'); err != nil {
		return false, err
	}
	if _, err := f.token(); err != nil {
		return false, err
	}
	if name == "features" {
		if f.found {
			return false, f.unreadable("has features twice")
		}
		f.found, f.within = true, true
		return true, f.expect('[')
	}
	raw, err = f.value()
	if err != nil {
		return false, err
	}
	return false, f.check(name, raw)
}

// check judges a member beside the features.
func (f *features) check(name string, raw []byte) error {
	switch name {
	case "type":
		var kind string
		if err := json.Unmarshal(raw, &kind); err != nil || kind != "FeatureCollection" {
			return f.unreadable("is a %s; a FeatureCollection of Points is needed", shown40(kind))
		}
	case "crs":
		// RFC 7946 section 4 knows WGS 84 alone; older files may state another.
		if len(raw) > 0 && raw[0] == 'n' || bytes.Contains(raw, []byte("CRS84")) || bytes.Contains(raw, []byte("4326")) {
			return nil
		}
		var crs struct{ Properties struct{ Name string } }
		_ = json.Unmarshal(raw, &crs) // for the message
		return f.unreadable("has coordinates in %s; export it in WGS 84 longitude and latitude, EPSG:4326", shown40(crs.Properties.Name))
	}
	return nil
}

// end is what follows the collection: nothing.
func (f *features) end() error {
	if !f.found {
		return f.unreadable("has no features; a FeatureCollection of Points is needed")
	}
	f.skipSpace()
	if len(f.w.bytes()) > 0 {
		return f.unreadable("goes on after its end")
	}
	if f.w.err != io.EOF { //nolint:errorlint // a reader's own io.EOF is bare, by io.Reader
		return broken(GeoJSON, f.number, f.w.err)
	}
	return io.EOF
}

func (f *features) unreadable(format string, args ...any) error {
	return unreadable(GeoJSON, 0, "the GeoJSON "+format, args...)
}

// skipSpace leaves nothing held only where nothing more comes.
func (f *features) skipSpace() {
	for {
		held := f.w.bytes()
		rest := bytes.TrimLeft(held, jsonSpace)
		f.w.consume(len(held) - len(rest))
		if len(rest) > 0 || !f.w.more() {
			return
		}
	}
}

// token is the next sign that is no space; it is not consumed.
func (f *features) token() (byte, error) {
	f.skipSpace()
	if held := f.w.bytes(); len(held) > 0 {
		return held[0], nil
	}
	return 0, broken(GeoJSON, f.number, f.w.err)
}

// expect consumes a certain sign.
func (f *features) expect(sign byte) error {
	got, err := f.token()
	if err != nil {
		return err
	}
	if got != sign {
		where := ""
		if f.number > 0 {
			where = " after " + GeoJSON.row(f.number)
		}
		return f.unreadable("has %q where %q belongs%s", rune(got), rune(sign), where)
	}
	f.w.consume(1)
	return nil
}

// value consumes one JSON value; nil where it is longer than the limit.
func (f *features) value() (raw []byte, err error) {
	var end frame
	size, long := 0, false
	for {
		held := f.w.bytes()
		n, done := end.scan(held[size:])
		size += n
		if done {
			f.w.consume(size)
			if long || size > MaxLineBytes {
				return nil, nil
			}
			return held[:size], nil
		}
		if size > MaxLineBytes {
			long = true
			f.w.consume(size)
			size = 0
		}
		if !f.w.more() {
			return nil, broken(GeoJSON, f.number, f.w.err)
		}
	}
}

// take reads one feature into a record.
func (f *features) take(rec *record, raw []byte) {
	if raw == nil {
		rec.refuse("", "%s", tooLong(MaxLineBytes))
		return
	}
	if fault := jsonFault(raw); fault != "" {
		rec.refuse("", "%s", fault)
		return
	}
	c := cells{record: rec, unknown: f.unknown}
	var id, geometry []byte
	members(raw, func(name, value []byte) {
		switch string(name) {
		case "id":
			id = value
		case "geometry":
			geometry = value
		case "properties":
			if value[0] == '{' {
				members(value, c.putProperty)
			}
		}
	})
	if id != nil && id[0] != 'n' { // the feature's own id goes before a property
		c.ranks[colID] = 0
		c.put([]byte(colID.String()), id)
	}
	c.point(geometry)
	c.finish()
}

// putProperty takes a property; the place is the geometry's to say.
func (c *cells) putProperty(name, value []byte) {
	if known, _ := lookUp(name); known != colLon && known != colLat {
		c.put(name, value)
	}
}

// point reads the geometry.
func (c *cells) point(geometry []byte) {
	const field = "geometry"
	if c.problem != nil {
		return
	}
	if len(geometry) == 0 || geometry[0] != '{' {
		c.refuse(field, "is missing; a Point is needed")
		return
	}
	var kind, coordinates []byte
	members(geometry, func(name, value []byte) {
		switch string(name) {
		case "type":
			kind, _ = cellText(value)
		case "coordinates":
			coordinates = value
		}
	})
	if string(kind) != "Point" {
		c.refuse(field, "is a %s; only Points are read", shown40(string(kind)))
		return
	}
	inner := bytes.TrimSuffix(bytes.TrimPrefix(coordinates, []byte("[")), []byte("]"))
	parts := bytes.Split(inner, []byte(","))
	if len(inner) == len(coordinates) || len(parts) < 2 || bytes.ContainsAny(inner, `[{"`) {
		c.refuse(field, "has coordinates that are not a longitude and a latitude, like [13.4, 52.5]")
		return
	}
	c.cells[colLon], c.cells[colLat] = bytes.Trim(parts[0], jsonSpace), bytes.Trim(parts[1], jsonSpace)
}
