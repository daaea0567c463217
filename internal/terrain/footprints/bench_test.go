package footprints

import (
	"bytes"
	"fmt"
	"testing"

	"github.com/paulmach/orb"
)

func readTown(b *testing.B, n int) *Footprints {
	b.Helper()
	f, report, err := Read(bytes.NewReader(town(n)), "HEIGHT")
	if err != nil || report.Used != n {
		b.Fatalf("got %+v (%v), want %d used", report, err, n)
	}
	return f
}

// BenchmarkAlong follows 10 km or so through a town of 200,000 buildings.
func BenchmarkAlong(b *testing.B) {
	f := readTown(b, 200_000)
	from, to := orb.Point{10.05, 50.05}, orb.Point{10.165, 50.102}
	for _, vertices := range []int{2, 200, 2000} {
		var path []Vertex
		for i := range vertices {
			t := float64(i) / float64(vertices-1)
			p := between(from, to, t)
			path = append(path, Vertex{DistanceM: 10e3 * t, Lon: p.Lon(), Lat: p.Lat()})
		}
		b.Run(fmt.Sprintf("vertices=%d", vertices), func(b *testing.B) {
			var spans []Span
			b.ReportAllocs()
			for b.Loop() {
				spans = f.Along(path, spans[:0])
			}
			b.ReportMetric(float64(len(spans)), "spans")
		})
	}
}

func BenchmarkAt(b *testing.B) {
	f := readTown(b, 200_000)
	b.ReportAllocs()
	for i := 0; b.Loop(); i++ {
		f.At(10+0.0003*float64(i%700), 50+0.0003*float64(i%699))
	}
}

func BenchmarkRead(b *testing.B) {
	text := town(20_000)
	b.SetBytes(int64(len(text)))
	b.ReportAllocs()
	for b.Loop() {
		if _, _, err := Read(bytes.NewReader(text), "HEIGHT"); err != nil {
			b.Fatal(err)
		}
	}
}
