package footprints

import (
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"strings"
)

// document reads the outer object member by member, in any order, and the
// features one by one.
type document struct {
	json     *json.Decoder
	property string
	shapes   shapes
	report   Report

	kind     string  // the "type"
	features bool    // there is a list of them
	single   feature // what a document that is one feature has
}

// feature is a GeoJSON Feature as the document has it.
type feature struct {
	Type       string          `json:"type"`
	Geometry   *geometry       `json:"geometry"`
	Properties json.RawMessage `json:"properties"`
	CRS        json.RawMessage `json:"crs"`
}

type geometry struct {
	Type        string          `json:"type"`
	Coordinates json.RawMessage `json:"coordinates"`
}

func (d *document) read() error {
	if err := d.expect('{', "an object"); err != nil {
		return err
	}
	for d.json.More() {
		name, err := d.json.Token()
		if err != nil {
			return err
		}
		if err := d.member(name.(string)); err != nil { // a name in an object is a string
			return err
		}
	}
	if _, err := d.json.Token(); err != nil {
		return err
	}
	if _, err := d.json.Token(); !errors.Is(err, io.EOF) {
		return errors.New("more text behind the document, which must be one object")
	}
	return d.finish()
}

// expect reads the opening of an object or a list.
func (d *document) expect(want json.Delim, words string) error {
	token, err := d.json.Token()
	if err != nil {
		return err
	}
	if token != want {
		return fmt.Errorf("got %s, want %s", shortened(fmt.Sprint(token)), words)
	}
	return nil
}

// member reads one member of the outer object.
func (d *document) member(name string) error {
	switch name {
	case "type":
		return d.json.Decode(&d.kind)
	case "features":
		return d.list()
	case "crs":
		return d.json.Decode(&d.single.CRS)
	case "geometry":
		return d.json.Decode(&d.single.Geometry)
	case "properties":
		return d.json.Decode(&d.single.Properties)
	}
	var other json.RawMessage
	return d.json.Decode(&other)
}

// list reads the features.
func (d *document) list() error {
	if d.features {
		return errors.New(`"features" is there twice`)
	}
	d.features = true
	if err := d.expect('[', `a list of "features"`); err != nil {
		return err
	}
	for i := 0; d.json.More(); i++ {
		var f feature
		err := d.json.Decode(&f)
		if err == nil {
			err = d.add(f, i)
		}
		if err != nil {
			return fmt.Errorf("features[%d]: %w", i, plain(err))
		}
	}
	_, err := d.json.Token()
	return err
}

// finish is what can be said only once all members are known.
func (d *document) finish() error {
	switch {
	case d.kind == "FeatureCollection" && d.features:
		return checkCRS(d.single.CRS)
	case d.kind == "FeatureCollection":
		return errors.New(`a FeatureCollection without "features"`)
	case d.kind == "Feature" && !d.features:
		d.single.Type = d.kind
		return d.add(d.single, 0)
	case d.kind == "Feature":
		return errors.New(`a Feature with "features": want one or the other`)
	}
	return fmt.Errorf("type %s: must be FeatureCollection or Feature", quoted(d.kind))
}

// add uses a feature or counts why not.
func (d *document) add(f feature, i int) error {
	if f.Type != "Feature" {
		return fmt.Errorf("type %s: must be Feature", quoted(f.Type))
	}
	if err := checkCRS(f.CRS); err != nil {
		return err
	}
	if f.Geometry != nil && f.Geometry.Type != "Polygon" && f.Geometry.Type != "MultiPolygon" {
		return fmt.Errorf("geometry of type %s: must be Polygon or MultiPolygon", quoted(f.Geometry.Type))
	}
	heightM, known, err := height(f.Properties, d.property)
	if err == nil && !known {
		d.report.WithoutHeight++
		return nil
	}
	if err == nil {
		err = d.shapes.add(f.Geometry, heightM, i)
	}
	if refused, ok := errors.AsType[refusedError](err); ok {
		d.refuse(fmt.Sprintf("features[%d]: %s", i, refused))
		return nil
	}
	if err == nil {
		d.report.Used++
	}
	return err
}

func (d *document) refuse(note string) {
	d.report.Refused++
	if len(d.report.Notes) < maxNotes {
		d.report.Notes = append(d.report.Notes, note)
	}
}

// refusedError says why one feature cannot be used; the others can.
type refusedError string

func (e refusedError) Error() string { return string(e) }

// checkCRS refuses a coordinate reference system other than longitude and
// latitude on WGS 84. Programs name it in several ways after GeoJSON of 2008:
// all end in CRS84, or in 4326 of EPSG.
func checkCRS(raw json.RawMessage) error {
	if len(raw) == 0 || string(raw) == "null" {
		return nil
	}
	var crs struct {
		Properties struct {
			Name string `json:"name"`
		} `json:"properties"`
	}
	if err := json.Unmarshal(raw, &crs); err != nil {
		return fmt.Errorf("crs: %w", plain(err))
	}
	name := strings.ToUpper(crs.Properties.Name)
	parts := strings.FieldsFunc(name, func(r rune) bool { return r == ':' || r == '/' })
	if len(parts) > 0 {
		switch last := parts[len(parts)-1]; {
		case last == "CRS84", last == "4326" && strings.Contains(name, "EPSG"):
			return nil
		}
	}
	return fmt.Errorf("crs %s: must be CRS84 or EPSG:4326, longitude and latitude on WGS 84", quoted(crs.Properties.Name))
}

// quoted is a text of the document in quotes, shortened.
func quoted(text string) string { return fmt.Sprintf("%q", shortened(text)) }

// shortened is the beginning of a text, for a message.
func shortened(text string) string {
	const most = 40
	if len(text) <= most {
		return text
	}
	return strings.ToValidUTF8(text[:most], "") + "..."
}
