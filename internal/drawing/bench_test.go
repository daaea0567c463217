package drawing

import (
	"io"
	"testing"
)

// BenchmarkSVG draws a link of 10 km over 341 samples, and one of 176 km over
// 19,000. The first should stay well under a millisecond.
func BenchmarkSVG(b *testing.B) {
	for _, name := range []string{"obstructed", "long"} {
		for _, c := range cases() {
			if c.name != name {
				continue
			}
			a := c.assessment(b)
			b.Run(name, func(b *testing.B) {
				b.ReportAllocs()
				for b.Loop() {
					if err := SVG(io.Discard, a); err != nil {
						b.Fatal(err)
					}
				}
			})
		}
	}
}
