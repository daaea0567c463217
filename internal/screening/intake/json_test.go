package intake

import (
	"encoding/json"
	"errors"
	"fmt"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// point is a feature, as a map writes it.
func point(id string, lon, lat float64) string {
	return fmt.Sprintf(`{"type":"Feature","id":%q,"geometry":{"type":"Point","coordinates":[%g,%g]},"properties":{}}`, id, lon, lat)
}

func collection(features ...string) string {
	return `{"type":"FeatureCollection","features":[` + strings.Join(features, ",") + `]}`
}

func TestGeoJSON(t *testing.T) {
	text := `{ "name": "roofs", "crs": {"type":"name","properties":{"name":"urn:ogc:def:crs:OGC:1.3:CRS84"}},
	"type": "FeatureCollection", "bbox": [[1],{"a":"]}\"\\"}], "features": [
	{"type":"Feature","id":17,"properties":{"ID":"other","Name":"Caf\u00e9 \"N\"","height":"6.5","height_above":"roof","lon":1,"y":null},
	 "geometry":{"type":"Point","coordinates":[ 13.25 , 52.5, 34.1 ]}},
	{"geometry":{"coordinates":[-0.125,51.5],"type":"Point"},"properties":{"id":"b","antenna_height_m":7,"height":30,"name":null},"type":"Feature"},
	{"geometry":{"coordinates":[1,2],"type":"Point"},"id":null,"properties":{"id":"c","roof":"flat"}},
	{"geometry":{"coordinates":[1,3],"type":"Point"},"id":"d","properties":null}
	], "note": "after" }
`
	want := []Candidate{
		{ID: "17", Name: `Café "N"`, Lon: 13.25, Lat: 52.5, AntennaHeightM: 6.5, HeightAbove: Roof},
		{ID: "b", Lon: -0.125, Lat: 51.5, AntennaHeightM: 7, HeightAbove: Ground},
		{ID: "c", Lon: 1, Lat: 2, HeightAbove: Ground},
		{ID: "d", Lon: 1, Lat: 3, HeightAbove: Ground},
	}
	for _, from := range []string{"at once", "by byte"} {
		seq := Candidates(strings.NewReader(text), GeoJSON, Options{})
		if from == "by byte" {
			seq = Candidates(byByte(text), GeoJSON, Options{})
		}
		rows, err := collect(t, seq)
		if err != nil || len(problems(rows)) > 0 {
			t.Fatalf("%s: got %v, %v; want none", from, problems(rows), err)
		}
		var got []Candidate
		for i, row := range rows {
			if row.Line != i+1 {
				t.Errorf("%s: got feature %d, want %d", from, row.Line, i+1)
			}
			got = append(got, row.Candidate)
		}
		if diff := cmp.Diff(want, got); diff != "" {
			t.Errorf("%s: candidates (-want +got):\n%s", from, diff)
		}
		warned := []Warning{
			{Line: 2, ID: "b", Detail: "has members that are not read: height"},
			{Line: 3, ID: "c", Detail: "has members that are not read: roof"},
		}
		if diff := cmp.Diff(warned, warnings(rows)); diff != "" {
			t.Errorf("%s: warnings (-want +got):\n%s", from, diff)
		}
	}
}

func TestGeoJSONBadFeatures(t *testing.T) {
	ring := strings.Repeat("[13.4,52.5],", MaxLineBytes/8)
	cases := []struct{ name, feature, id, field, detail string }{
		{"polygon", `{"id":"b","geometry":{"type":"Polygon","coordinates":[[[1,2],[3,4]]]}}`, "b", "geometry", "is a Polygon; only Points are read"},
		{"no geometry", `{"id":"b","geometry":null}`, "b", "geometry", "is missing; a Point is needed"},
		{"one coordinate", `{"id":"b","geometry":{"type":"Point","coordinates":[1]}}`, "b", "geometry", "has coordinates that are not a longitude and a latitude, like [13.4, 52.5]"},
		{"no coordinates", `{"id":"b","geometry":{"type":"Point"}}`, "b", "geometry", "has coordinates that are not a longitude and a latitude, like [13.4, 52.5]"},
		{"text for coordinates", `{"id":"b","geometry":{"type":"Point","coordinates":["1","2"]}}`, "b", "geometry", "has coordinates that are not a longitude and a latitude, like [13.4, 52.5]"},
		{"nothing for a coordinate", `{"id":"b","geometry":{"type":"Point","coordinates":[null,2]}}`, "b", "lon", "is null, which is not a number; write it like 52.5"},
		{"metres", point("b", 4500000, 5800000), "b", "lon", "is 4.5e+06; it must be -180 to 180 degrees east"},
		{"no id", `{"geometry":{"type":"Point","coordinates":[1,2]},"properties":{}}`, "", "id", "is missing"},
		{"a list for an id", `{"id":["b"],"geometry":{"type":"Point","coordinates":[1,2]}}`, "", "id", `is ["b"]; text or a number is needed`},
		{"not an object", `7`, "", "", "is not a JSON object"},
		{"no JSON", `{"id":"b",}`, "", "", "is not JSON: invalid character '}' looking for beginning of object key string"},
		{"a large polygon", `{"id":"b","geometry":{"type":"Polygon","coordinates":[[` + ring + `[1,2]]]}}`, "", "", "is longer than the 65536 bytes that are read"},
		{"a property twice", `{"id":"b","geometry":{"type":"Point","coordinates":[1,2]},"properties":{"name":"x","name":"y"}}`, "b", "name", "is there twice"},
		{"a long property", `{"id":"b","geometry":{"type":"Point","coordinates":[1,2]},"properties":{"name":"` + strings.Repeat("x", 1001) + `"}}`, "b", "name", "is longer than the 1000 bytes that are read"},
		{"the same id", point("a", 3, 4), "a", "id", "is that of feature 1 already; every candidate needs its own"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			rows, err := read(t, collection(point("a", 1, 2), c.feature, point("c", 5, 6)), GeoJSON, Options{})
			if err != nil {
				t.Fatalf("got error %v, want none", err)
			}
			want := []RowProblem{{Line: 2, ID: c.id, Field: c.field, Detail: c.detail}}
			if diff := cmp.Diff(want, problems(rows)); diff != "" {
				t.Errorf("problems (-want +got):\n%s", diff)
			}
			if diff := cmp.Diff([]string{"a", "c"}, ids(rows)); diff != "" {
				t.Errorf("candidates (-want +got):\n%s", diff)
			}
		})
	}
}

func TestGeoJSONUnreadable(t *testing.T) {
	a := point("a", 1, 2)
	cases := []struct {
		name, text string
		rows       int
		want       string
	}{
		{"nothing", "", 0, "the list ends before its JSON is complete: it was cut off"},
		{"a feature alone", a, 0, "the GeoJSON is a Feature; a FeatureCollection of Points is needed"},
		{"a bare list", "[" + a + "]", 0, "the GeoJSON has '[' where '{' belongs"},
		{"no features", `{"type":"FeatureCollection"}`, 0, "the GeoJSON has no features; a FeatureCollection of Points is needed"},
		{"features of no kind", `{"features":null}`, 0, "the GeoJSON has 'n' where '[' belongs"},
		{"features twice", `{"features":[` + a + `],"features":[]}`, 1, "the GeoJSON has features twice"},
		{"a grid", `{"crs":{"type":"name","properties":{"name":"urn:ogc:def:crs:EPSG::25833"}},"features":[]}`, 0,
			"the GeoJSON has coordinates in urn:ogc:def:crs:EPSG::25833; export it in WGS 84 longitude and latitude, EPSG:4326"},
		{"cut off", `{"features":[` + a + `,{"id":`, 1, "the list ends before its JSON is complete: it was cut off"},
		{"cut off between", `{"features":[` + a, 1, "the list ends before its JSON is complete: it was cut off"},
		{"no comma", `{"features":[` + a + a + `]}`, 1, "the GeoJSON has '{' where ',' belongs after feature 1"},
		{"more after it", collection(a) + a, 1, "the GeoJSON goes on after its end"},
		{"no name", `{7:8}`, 0, "the GeoJSON has a member without a name"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			rows, err := read(t, c.text, GeoJSON, Options{})
			if list := new(ListError); !errors.As(err, &list) || err.Error() != c.want {
				t.Errorf("got %v, want %s", err, c.want)
			}
			if len(rows) != c.rows {
				t.Errorf("got %d rows, want %d", len(rows), c.rows)
			}
		})
	}
}

func TestNDJSON(t *testing.T) {
	text := "\ufeff" + `{"id":"a","name":"North \"hall\"","longitude":13.25,"lat":"52.5","height":6,"height_above":"roof"}` + "\r\n\n" +
		`{"ID":2,"x":1,"lon":2,"lat":3,"X":4}` + "\n" +
		`[` + "\n" +
		`[1]` + "\n" +
		`{"id":"c","lon":1,"lat":true}` + "\n" +
		`{"id":"d","lat":1}` + "\n" +
		`{"id":"e","lon":1,"lat":"52,5"}` + "\n" +
		`{"id":"f","pad":"` + strings.Repeat("x", MaxLineBytes) + `"}` + "\n" +
		`{"id":"g","lon":1,"lat":2,"x":3}`
	rows, err := read(t, text, NDJSON, Options{})
	if err != nil {
		t.Fatalf("got error %v, want none", err)
	}
	want := []RowProblem{
		{Line: 4, Detail: "is not JSON: unexpected end of JSON input"},
		{Line: 5, Detail: "is not a JSON object"},
		{Line: 6, ID: "c", Field: "lat", Detail: "is true; text or a number is needed"},
		{Line: 7, ID: "d", Field: "lon", Detail: "is missing"},
		{Line: 8, ID: "e", Field: "lat", Detail: "is 52,5, which holds a thousands separator, or a decimal comma where none is read; write it like 1234.5"},
		{Line: 9, Detail: "is longer than the 65536 bytes that are read"},
	}
	if diff := cmp.Diff(want, problems(rows)); diff != "" {
		t.Errorf("problems (-want +got):\n%s", diff)
	}
	if diff := cmp.Diff([]string{"a", "2", "g"}, ids(rows)); diff != "" {
		t.Errorf("candidates (-want +got):\n%s", diff)
	}
	if got, want := rows[0].Candidate, (Candidate{ID: "a", Name: `North "hall"`, Lon: 13.25, Lat: 52.5, AntennaHeightM: 6, HeightAbove: Roof}); got != want {
		t.Errorf("got %+v, want %+v", got, want)
	}
	if got := rows[1].Candidate.Lon; got != 2 {
		t.Errorf("lon beside x: got %g, want 2", got)
	}
}

// The frames of JSON against encoding/json, in one piece and in bytes.
func TestFrame(t *testing.T) {
	for _, value := range []string{`{}`, `[]`, `""`, `"a\"b\\"`, `{"a":[1,{"b":"]}"}]}`, `12.5e3`, `true`, `null`, `"\u005d"`} {
		if !json.Valid([]byte(value)) {
			t.Fatalf("%s is no JSON", value)
		}
		for _, after := range []string{",1", "]", "}", " "} {
			text := []byte(value + after)
			got, rest := cutValue(text)
			if string(got) != value || string(rest) != after {
				t.Errorf("%s: got %s and %s, want %s and %s", text, got, rest, value, after)
			}
			var f frame
			size := 0
			for i := range text {
				n, done := f.scan(text[i : i+1])
				if size += n; done {
					break
				}
			}
			if size != len(value) {
				t.Errorf("%s by byte: got %d bytes, want %d", text, size, len(value))
			}
		}
	}
}
