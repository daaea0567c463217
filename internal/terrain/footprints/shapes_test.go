package footprints

import (
	"encoding/json"
	"fmt"
	"strings"

	"github.com/paulmach/orb"
	"pgregory.net/rapid"
)

// building is a Feature as tests write it.
type building struct {
	height   any
	polygons orb.MultiPolygon
}

// square is the ring around a square, counter-clockwise.
func square(west, south, side float64) orb.Ring {
	return orb.Ring{{west, south}, {west + side, south}, {west + side, south + side}, {west, south + side}, {west, south}}
}

func polygonOf(rings ...orb.Ring) orb.MultiPolygon { return orb.MultiPolygon{rings} }

func asJSON(t rapid.TB, v any) string {
	t.Helper()
	text, err := json.Marshal(v)
	if err != nil {
		t.Fatal(err)
	}
	return string(text)
}

// featureOf is the text of a Feature.
func featureOf(height, kind, coordinates string) string {
	return fmt.Sprintf(`{"type":"Feature","properties":{"h":%s},"geometry":{"type":"%s","coordinates":%s}}`, height, kind, coordinates)
}

// squareFeature is a Feature that can be used, with any height.
func squareFeature(height string) string {
	return featureOf(height, "Polygon", "[[[0,0],[1,0],[1,1],[0,1],[0,0]]]")
}

// collection is the text of a FeatureCollection.
func collection(features ...string) string {
	return `{"type":"FeatureCollection","features":[` + strings.Join(features, ",") + `]}`
}

// build reads buildings by way of their GeoJSON.
func build(t rapid.TB, buildings ...building) *Footprints {
	t.Helper()
	var features []string
	for _, b := range buildings {
		if len(b.polygons) == 1 {
			features = append(features, featureOf(asJSON(t, b.height), "Polygon", asJSON(t, b.polygons[0])))
			continue
		}
		features = append(features, featureOf(asJSON(t, b.height), "MultiPolygon", asJSON(t, b.polygons)))
	}
	f, report, err := Read(strings.NewReader(collection(features...)), "h")
	if err != nil {
		t.Fatal(err)
	}
	if report.Used != len(buildings) {
		t.Fatalf("got %+v, want %d used", report, len(buildings))
	}
	return f
}

// pathOf is a path with one metre to a hundredth of a degree.
func pathOf(points ...orb.Point) []Vertex {
	var path []Vertex
	distanceM := 0.0
	for i, p := range points {
		if i > 0 {
			distanceM += 100 * length(points[i-1], p)
		}
		path = append(path, Vertex{DistanceM: distanceM, Lon: p.Lon(), Lat: p.Lat()})
	}
	return path
}
