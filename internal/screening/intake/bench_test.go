package intake

import (
	"strings"
	"testing"
)

// benchmark reads lists of candidates and states rows a second.
func benchmark(b *testing.B, format Format, row func(into []byte, i int) []byte, head, foot string) {
	const rows = 100_000
	var text []byte
	text = append(text, head...)
	for i := range rows {
		text = row(text, i)
	}
	list := string(append(text, foot...))
	b.SetBytes(int64(len(list)))
	b.ReportAllocs()
	for b.Loop() {
		count := 0
		for row, err := range Candidates(strings.NewReader(list), format, Options{}) {
			if err != nil || row.Problem != nil {
				b.Fatal(row.Problem, err)
			}
			count++
		}
		if count != rows {
			b.Fatalf("got %d rows, want %d", count, rows)
		}
	}
	b.ReportMetric(float64(rows)*float64(b.N)/b.Elapsed().Seconds(), "rows/s")
}

func BenchmarkCSV(b *testing.B) {
	benchmark(b, CSV, func(into []byte, i int) []byte {
		into = coordinate(append(into, "roof-"...), i)
		into = coordinate(append(into, ",Mill Lane,"...), i)
		into = coordinate(append(into, ','), i+7)
		return append(into, ",6.5\n"...)
	}, "id,name,lon,lat,height\n", "")
}

func BenchmarkCSVQuoted(b *testing.B) {
	benchmark(b, CSV, func(into []byte, i int) []byte {
		into = coordinate(append(into, "\"roof-"...), i)
		into = coordinate(append(into, `","Mill Lane, ""east""",`...), i)
		into = coordinate(append(into, ','), i+7)
		return append(into, ",6.5\n"...)
	}, "id,name,lon,lat,height\n", "")
}

func BenchmarkNDJSON(b *testing.B) {
	benchmark(b, NDJSON, func(into []byte, i int) []byte {
		into = coordinate(append(into, `{"id":"roof-`...), i)
		into = coordinate(append(into, `","name":"Mill Lane","lon":`...), i)
		into = coordinate(append(into, `,"lat":`...), i+7)
		return append(into, ",\"height\":6.5}\n"...)
	}, "", "")
}

func BenchmarkGeoJSON(b *testing.B) {
	benchmark(b, GeoJSON, func(into []byte, i int) []byte {
		if i > 0 {
			into = append(into, ',')
		}
		into = coordinate(append(into, `{"type":"Feature","id":"roof-`...), i)
		into = coordinate(append(into, `","geometry":{"type":"Point","coordinates":[`...), i)
		into = coordinate(append(into, ','), i+7)
		return append(into, `]},"properties":{"name":"Mill Lane","height":6.5}}`...)
	}, `{"type":"FeatureCollection","features":[`, `]}`)
}
