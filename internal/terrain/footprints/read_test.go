package footprints

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"testing/iotest"

	"github.com/google/go-cmp/cmp"
	"github.com/paulmach/orb"

	"ridgehop/internal/sharedtest"
)

const unitSquare = "[[[0,0],[1,0],[1,1],[0,1],[0,0]]]"

// 84 real outlines; two of them have a null for their height.
func TestSharedBuildings(t *testing.T) {
	file, err := os.Open(filepath.Join(sharedtest.Dir(t), "elevation", "alexandria_buildings.geojson"))
	if err != nil {
		t.Skip("the shared data folder holds no alexandria_buildings.geojson: real outlines were not read")
	}
	defer file.Close()
	f, report, err := Read(file, "HEIGHT")
	if err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff(report, Report{Used: 82, WithoutHeight: 2}); diff != "" {
		t.Errorf("got -, want +:\n%s", diff)
	}
	// The first feature: its wall along latitude 38.8121, roughly, and its wings.
	if h, id, ok := f.At(-77.0514, 38.8119); !ok || id != 0 || math.Abs(h-17.53) > 1e-6 {
		t.Errorf("in the first building: got %g m, %d, %v; want 17.53, 0", h, id, ok)
	}
	if _, _, ok := f.At(-77.0517, 38.8118); ok {
		t.Error("in the yard between its wings: got a building, want none")
	}
	spans := f.Along([]Vertex{{0, -77.0522, 38.8118}, {100, -77.0512, 38.8118}}, nil)
	if len(spans) != 2 || spans[0].ID != 0 || spans[1].ID != 0 {
		t.Errorf("across both wings: got %+v, want two spans of the first building", spans)
	}
}

func TestReadReports(t *testing.T) {
	shape := func(coordinates string) string { return featureOf("5", "Polygon", coordinates) }
	tests := []struct {
		name    string
		feature string
		want    Report
	}{
		{"number", squareFeature("12.5"), Report{Used: 1}},
		{"tallest", squareFeature("1000"), Report{Used: 1}},
		{"exponent", squareFeature("1.2e1"), Report{Used: 1}},
		{"numeric string", squareFeature(`" 12.5 "`), Report{Used: 1}},
		{"null", squareFeature("null"), Report{WithoutHeight: 1}},
		{"blank", squareFeature(`" "`), Report{WithoutHeight: 1}},
		{"absent", strings.Replace(squareFeature("5"), `"h"`, `"H"`, 1), Report{WithoutHeight: 1}},
		{"no properties", strings.Replace(squareFeature("5"), `{"h":5}`, "null", 1), Report{WithoutHeight: 1}},
		{"properties absent", strings.Replace(squareFeature("5"), `"properties"`, `"other"`, 1), Report{WithoutHeight: 1}},
		{"zero", squareFeature("0"), refused("height 0 m: must be above 0 and at most 1000")},
		{"negative", squareFeature("-3"), refused("height -3 m: must be above 0 and at most 1000")},
		{"too tall", squareFeature("1000.1"), refused("height 1000.1 m: must be above 0 and at most 1000")},
		{"too large for a double", squareFeature("1e999"), refused(`height "1e999": must be a number of metres`)},
		{"infinite", squareFeature(`"inf"`), refused("height +Inf m: must be above 0 and at most 1000")},
		{"not a number", squareFeature(`"NaN"`), refused("height NaN m: must be above 0 and at most 1000")},
		{"with its unit", squareFeature(`"12 m"`), refused(`height "12 m": must be a number of metres`)},
		{"true", squareFeature("true"), refused(`height "true": must be a number of metres`)},
		{"list", squareFeature("[5]"), refused(`height "[5]": must be a number of metres`)},
		{"long text", squareFeature(`"` + strings.Repeat("x", 1000) + `"`), refused(`height "` + strings.Repeat("x", 40) + `...": must be a number of metres`)},
		{"multipolygon", featureOf("5", "MultiPolygon", "["+unitSquare+","+unitSquare+"]"), Report{Used: 1}},
		{"heights in positions", shape("[[[0,0,7],[1,0,7],[1,1,7,9],[0,1,7],[0,0,7]]]"), Report{Used: 1}},
		{"white space", shape(" [ [ [ 0 , 0 ] ,\n[1,0],\t[1,1],[ 0,1 ],\r\n[0,0] ] ] "), Report{Used: 1}},
		{"no geometry", `{"type":"Feature","properties":{"h":5},"geometry":null}`, refused("it has no geometry")},
		{"empty polygon", shape("[]"), refused("its geometry is empty")},
		{"empty multipolygon", featureOf("5", "MultiPolygon", "[]"), refused("its geometry is empty")},
		{"empty parts", featureOf("5", "MultiPolygon", "[[],[]]"), refused("its geometry is empty")},
		{"empty ring", shape("[[]]"), refused("a ring has 0 positions: must be 4 at least")},
		{"three positions", shape("[[[0,0],[1,0],[0,0]]]"), refused("a ring has 3 positions: must be 4 at least")},
		{"not closed", shape("[[[0,0],[1,0],[1,1],[0,1]]]"), refused("a ring is not closed: it begins at [0 0] and ends at [0 1]")},
		{"hole not closed", shape("[[[0,0],[9,0],[9,9],[0,0]],[[1,1],[2,1],[2,2],[1,2]]]"), refused("a ring is not closed: it begins at [1 1] and ends at [1 2]")},
		{"swapped", shape("[[[51,-100],[52,-100],[52,-99],[51,-100]]]"), refused("latitude -100: must be -90 to 90; the position looks swapped, longitude comes first")},
		{"metres", shape("[[[321498,4297500],[321598,4297500],[321598,4297600],[321498,4297500]]]"), refused("longitude 321498, latitude 4.2975e+06: must be degrees, -180 to 180 and -90 to 90")},
		{"infinite position", shape("[[[0,1e999],[1,0],[1,1],[0,1e999]]]"), refused("longitude 0, latitude +Inf: must be degrees, -180 to 180 and -90 to 90")},
		{"across the antimeridian", shape("[[[179,0],[-179,0],[-179,1],[179,0]]]"), refused("a polygon spans 358 degrees of longitude: one across the antimeridian must be cut there")},
		{"cut at the antimeridian", featureOf("5", "MultiPolygon", "[[[[179,0],[180,0],[180,1],[179,0]]],[[[-180,0],[-179,0],[-180,1],[-180,0]]]]"), Report{Used: 1}},
	}
	for _, test := range tests {
		f, got, err := Read(strings.NewReader(collection(test.feature)), "h")
		if err != nil {
			t.Errorf("%s: got %v, want no error", test.name, err)
			continue
		}
		if diff := cmp.Diff(got, test.want); diff != "" {
			t.Errorf("%s: got -, want +:\n%s", test.name, diff)
		}
		if f.Bound().IsEmpty() != (got.Used == 0) {
			t.Errorf("%s: got the bound %v, want none but of what is used", test.name, f.Bound())
		}
	}
}

// refused is the report of one refused feature.
func refused(why string) Report {
	return Report{Refused: 1, Notes: []string{"features[0]: " + why}}
}

// A feature that turns out bad at its end leaves nothing of itself; those
// around it keep their places as IDs.
func TestReadLeavesOutWholeFeatures(t *testing.T) {
	half := featureOf("9", "MultiPolygon", "["+unitSquare+",[[[5,5],[6,5],[6,6],[5,5]],[[7,7],[8,7],[8,8]]]]")
	far := featureOf("3", "Polygon", "[[[20,0],[21,0],[21,1],[20,1],[20,0]]]")
	f, report, err := Read(strings.NewReader(collection(squareFeature("null"), half, squareFeature("4"), half, far)), "h")
	if err != nil || report.Used != 2 || report.Refused != 2 || report.WithoutHeight != 1 {
		t.Fatalf("got %+v (%v), want 2 used, 2 refused, 1 without height", report, err)
	}
	if h, id, ok := f.At(0.5, 0.5); !ok || h != 4 || id != 2 {
		t.Errorf("got %g m, %d, %v; want 4, 2", h, id, ok)
	}
	if h, id, ok := f.At(20.5, 0.5); !ok || h != 3 || id != 4 {
		t.Errorf("got %g m, %d, %v; want 3, 4", h, id, ok)
	}
	if _, _, ok := f.At(5.8, 5.5); ok {
		t.Error("in the refused part: got a building, want none")
	}
}

func TestReadNotesTenAtMost(t *testing.T) {
	_, report, err := Read(strings.NewReader(collection(strings.Split(strings.Repeat(squareFeature("-1")+"\n", 25)+squareFeature("1"), "\n")...)), "h")
	if err != nil || report.Used != 1 || report.Refused != 25 || len(report.Notes) != 10 {
		t.Fatalf("got %+v (%v), want 25 refused and 10 notes", report, err)
	}
	if got, want := report.Notes[9], "features[9]: height -1 m: must be above 0 and at most 1000"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}

func TestReadDocuments(t *testing.T) {
	crs := func(name string) string {
		return `{"crs":{"type":"name","properties":{"name":"` + name + `"}},` + collection(squareFeature("5"))[1:]
	}
	for name, text := range map[string]string{
		"members in another order": `{"bbox":[0,0,1,1],"features":[` + squareFeature("5") + `],"name":{"features":[1]},"type":"FeatureCollection"}`,
		"one feature":              squareFeature("5"),
		"byte order mark":          "\ufeff" + collection(squareFeature("5")),
		"text around":              "\n " + collection(squareFeature("5")) + "\r\n",
		"crs null":                 `{"crs":null,` + collection(squareFeature("5"))[1:],
		"CRS84":                    crs("urn:ogc:def:crs:OGC:1.3:CRS84"),
		"CRS84 without version":    crs("urn:ogc:def:crs:OGC::CRS84"),
		"short":                    crs("EPSG:4326"),
		"small letters":            crs("epsg:4326"),
		"urn":                      crs("urn:ogc:def:crs:EPSG::4326"),
		"address":                  crs("http://www.opengis.net/def/crs/EPSG/0/4326"),
	} {
		for _, r := range []io.Reader{strings.NewReader(text), iotest.OneByteReader(strings.NewReader(text))} {
			f, report, err := Read(r, "h")
			if err != nil || report.Used != 1 {
				t.Errorf("%s: got %+v (%v), want one building", name, report, err)
				continue
			}
			if h, id, ok := f.At(0.5, 0.5); !ok || h != 5 || id != 0 {
				t.Errorf("%s: got %g m, %d, %v; want 5, 0", name, h, id, ok)
			}
		}
	}
	if _, report, err := Read(strings.NewReader(collection()), "h"); err != nil || report.Used != 0 {
		t.Errorf("no features: got %+v (%v), want an empty report", report, err)
	}
}

func TestReadRefusesDocuments(t *testing.T) {
	good := squareFeature("5")
	tests := []struct{ name, text, want string }{
		{"empty", "", "it ends too early"},
		{"cut", collection(good, good)[:200], "features[1]: broken JSON: it ends too early"},
		{"cut behind the features", strings.TrimSuffix(collection(good), "]}"), "it ends too early"},
		{"no JSON", "<gml/>", "broken JSON: invalid character '<'"},
		{"broken feature", collection(good, `{"type":}`), "features[1]: broken JSON: invalid character '}'"},
		{"list", "[" + good + "]", "got [, want an object"},
		{"number", "5", "got 5, want an object"},
		{"no type", `{"features":[]}`, `type "": must be FeatureCollection or Feature`},
		{"geometry alone", `{"type":"Polygon","coordinates":` + unitSquare + `}`, `type "Polygon": must be FeatureCollection or Feature`},
		{"type a number", `{"type":5}`, "a JSON number"},
		{"no features", `{"type":"FeatureCollection"}`, `a FeatureCollection without "features"`},
		{"features null", `{"type":"FeatureCollection","features":null}`, `want a list of "features"`},
		{"features twice", `{"type":"FeatureCollection","features":[],"features":[]}`, `"features" is there twice`},
		{"feature and list", `{"features":[],` + good[1:], "want one or the other"},
		{"more behind", collection(good) + "{}", "more text behind the document"},
		{"noise behind", collection(good) + "]", "more text behind the document"},
		{"feature null", collection(good, "null"), `features[1]: type "": must be Feature`},
		{"feature a number", collection("5"), "features[0]: a JSON number, want an object"},
		{"feature a list", collection("[]"), "features[0]: a JSON array, want an object"},
		{"bare geometry", collection(good, `{"type":"Polygon","coordinates":[]}`), `features[1]: type "Polygon": must be Feature`},
		{"point", collection(good, good, featureOf("5", "Point", "[0,0]")), `features[2]: geometry of type "Point": must be Polygon or MultiPolygon`},
		{"point without height", collection(featureOf("null", "Point", "[0,0]")), `features[0]: geometry of type "Point"`},
		{"geometry without type", collection(`{"type":"Feature","properties":{"h":5},"geometry":{}}`), `features[0]: geometry of type ""`},
		{"one feature, a line", featureOf("5", "LineString", "[[0,0],[1,1]]"), `geometry of type "LineString"`},
		{"geometry a number", collection(`{"type":"Feature","geometry":5}`), `features[0]: "geometry" is a JSON number`},
		{"properties a list", collection(strings.Replace(good, `{"h":5}`, "[5]", 1)), "features[0]: properties: a JSON array, want an object"},
		{"coordinates absent", collection(strings.Replace(good, "coordinates", "coords", 1)), "features[0]: coordinates: must be lists"},
		{"coordinates null", collection(featureOf("5", "Polygon", "null")), "features[0]: coordinates: must be lists"},
		{"coordinates an object", collection(featureOf("5", "Polygon", "{}")), "features[0]: coordinates: must be lists"},
		{"too deep", collection(featureOf("5", "Polygon", "["+unitSquare+"]")), "features[0]: coordinates: must be lists"},
		{"too flat", collection(featureOf("5", "MultiPolygon", unitSquare)), "features[0]: coordinates: must be lists"},
		{"a null among numbers", collection(featureOf("5", "Polygon", "[[[0,0],[1,null],[1,1],[0,0]]]")), "features[0]: coordinates: must be lists"},
		{"text among numbers", collection(featureOf("5", "Polygon", `[[["0",0],[1,0],[1,1],[0,0]]]`)), "features[0]: coordinates: must be lists"},
		{"half a position", collection(featureOf("5", "Polygon", "[[[0],[1],[1],[0]]]")), "features[0]: coordinates: must be lists"},
		{"other crs", `{"crs":{"type":"name","properties":{"name":"urn:ogc:def:crs:EPSG::27700"}},` + collection(good)[1:], `crs "urn:ogc:def:crs:EPSG::27700": must be CRS84 or EPSG:4326`},
		{"other authority", `{"crs":{"type":"name","properties":{"name":"other:4326"}},` + collection(good)[1:], `crs "other:4326"`},
		{"crs of no name", `{"crs":{"type":"link"},` + collection(good)[1:], `crs ""`},
		{"crs a text", `{"crs":"EPSG:4326",` + collection(good)[1:], "crs: a JSON string, want an object"},
		{"crs of a feature", collection(good, `{"crs":{"properties":{"name":"EPSG:3857"}},`+good[1:]), `features[1]: crs "EPSG:3857"`},
	}
	for _, test := range tests {
		f, _, err := Read(strings.NewReader(test.text), "h")
		if f != nil || !errors.Is(err, ErrDocument) || !strings.Contains(err.Error(), test.want) {
			t.Errorf("%s: got %v (%v), want ErrDocument with %q", test.name, err, f != nil, test.want)
		}
	}
	if _, _, err := Read(strings.NewReader(collection(good)), ""); err == nil {
		t.Error("a property without a name: got no error, want one")
	}
}

func TestReadLimits(t *testing.T) {
	text := collection(squareFeature("5"), squareFeature("6"))
	exact := limits{bytes: int64(len(text)), corners: 10}
	if _, report, err := read(strings.NewReader(text), "h", exact); err != nil || report.Used != 2 {
		t.Fatalf("at the limits: got %+v (%v), want both buildings", report, err)
	}
	_, _, err := read(strings.NewReader(text), "h", limits{bytes: exact.bytes, corners: 9})
	if !errors.Is(err, ErrDocument) || !strings.Contains(err.Error(), "features[1]: more than 9 corners in all") {
		t.Errorf("a corner more: got %v, want ErrDocument", err)
	}
	for _, more := range []string{text + " ", text + strings.Repeat(" ", 1<<20)} {
		_, _, err = read(strings.NewReader(more), "h", exact)
		if !errors.Is(err, ErrDocument) || !strings.Contains(err.Error(), "larger than") {
			t.Errorf("%d bytes more: got %v, want ErrDocument", len(more)-len(text), err)
		}
	}
}

// A disk that fails is not a bad document.
func TestReadPassesOnFailures(t *testing.T) {
	broken := errors.New("broken")
	text := collection(squareFeature("5"))
	for _, n := range []int{0, 2, 50, len(text)} {
		_, _, err := Read(io.MultiReader(strings.NewReader(text[:n]), iotest.ErrReader(broken)), "h")
		if !errors.Is(err, broken) || errors.Is(err, ErrDocument) {
			t.Errorf("failure after %d bytes: got %v, want the reader's own error", n, err)
		}
	}
}

// Whatever is read answers, and lies on earth.
func FuzzRead(f *testing.F) {
	for _, seed := range []string{
		collection(squareFeature("5"), squareFeature("null"), squareFeature(`"7"`)),
		featureOf("5", "MultiPolygon", "["+unitSquare+"]"),
		collection(featureOf("5", "Polygon", "[[[179,0],[180,0],[180,1e-300],[179,0]],[[0,0,1],[0,0],[0,0],[0,0]]]")),
		`{"type":"FeatureCollection","crs":{"properties":{"name":"EPSG:4326"}},"features":[{"type":"Feature","geometry":null}]}`,
		"\ufeff{}", `{"type":"Feature","properties":{"h":1},"geometry":{"type":"Polygon","coordinates":[[[[[`, strings.Repeat("[", 200),
	} {
		f.Add([]byte(seed), 0.5, 0.5, 3.0, -2.0)
	}
	f.Fuzz(func(t *testing.T, text []byte, lonA, latA, lonB, latB float64) {
		footprints, report, err := Read(bytes.NewReader(text), "h")
		if err != nil {
			if footprints != nil || !errors.Is(err, ErrDocument) {
				t.Fatalf("got %v and %v, want no footprints and ErrDocument", footprints, err)
			}
			return
		}
		if len(report.Notes) != min(report.Refused, maxNotes) {
			t.Errorf("got %d notes of %d refused, want one each, 10 at most", len(report.Notes), report.Refused)
		}
		bound := footprints.Bound()
		world := orb.Bound{Min: orb.Point{-180, -90}, Max: orb.Point{180, 90}}
		if !bound.IsEmpty() && !(world.Contains(bound.Min) && world.Contains(bound.Max)) {
			t.Errorf("got the bound %v, want one on earth", bound)
		}
		for _, s := range footprints.Along([]Vertex{{0, lonA, latA}, {1, lonB, latB}, {2, bound.Min[0], bound.Min[1]}, {3, bound.Max[0], bound.Max[1]}}, nil) {
			if !(s.FromM >= 0 && s.FromM < s.ToM && s.ToM <= 3 && s.HeightM > 0 && s.HeightM <= maxHeightM && s.ID >= 0) {
				t.Errorf("got the span %+v, want one on the path", s)
			}
		}
		footprints.At(lonA, latA)
	})
}

// town writes a document of n buildings, each 20 m or so wide, in a square of
// streets 56 m or so apart, 0.0005 degrees.
func town(n int) []byte {
	var b bytes.Buffer
	side := int(math.Ceil(math.Sqrt(float64(n))))
	b.WriteString(`{"type":"FeatureCollection","features":[`)
	for i := range n {
		if i > 0 {
			b.WriteByte(',')
		}
		west, south := 10+0.0005*float64(i%side), 50+0.0005*float64(i/side)
		east, north := west+0.0002, south+0.0002
		fmt.Fprintf(&b, `{"type":"Feature","properties":{"use":"dwelling","HEIGHT":%d},"geometry":{"type":"Polygon","coordinates":[[[%.6f,%.6f],[%.6f,%.6f],[%.6f,%.6f],[%.6f,%.6f],[%.6f,%.6f]]]}}`,
			5+i%40, west, south, east, south, east, north, west, north, west, south)
	}
	b.WriteString("]}")
	return b.Bytes()
}
