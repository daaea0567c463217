package profile

import "testing"

// One link of 10 km over a raster of one arc second, two k-factors.
func BenchmarkAssess(b *testing.B) {
	for _, c := range []struct {
		name     string
		antennaM float64
		want     Verdict
	}{{"clear", 400, Clear}, {"obstructed", 50, Obstructed}} {
		b.Run(c.name, func(b *testing.B) {
			s, ws := hilly(334, c.antennaM), &Workspace{}
			if got := s.assess(b).Verdict; got != c.want {
				b.Fatalf("got %s, want %s", got, c.want)
			}
			b.ReportAllocs()
			for b.Loop() {
				if _, err := Assess(&s.link, &s.p, ws); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
