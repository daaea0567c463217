package profile

import (
	"math/rand/v2"
	"testing"
)

// doubtfulPath has so many of 450 rough samples in doubt.
func doubtfulPath(doubtful int) *errorChain {
	r := rand.New(rand.NewPCG(3, 4))
	c := &errorChain{lengthM: 451 * 30, a: endError{1.5, 0}, b: endError{1.5, 0}}
	for i := range 450 {
		margin := 100.0
		if i < doubtful {
			margin = 3.5 + 3*r.Float64()
		}
		c.distanceM = append(c.distanceM, 30*float64(i+1))
		c.marginM = append(c.marginM, margin)
		c.errorM = append(c.errorM, 1.5)
		c.correlationM = append(c.correlationM, 300)
		c.source = append(c.source, 0)
	}
	return c
}

func BenchmarkConfidence(b *testing.B) {
	for _, n := range []struct {
		name     string
		doubtful int
	}{{"none of 450", 0}, {"1", 1}, {"10", 10}, {"60", 60}, {"450", 450}} {
		b.Run(n.name, func(b *testing.B) {
			c, ws := doubtfulPath(n.doubtful), &confidenceScratch{}
			b.ReportAllocs()
			for b.Loop() {
				c.confidence(ws)
			}
		})
	}
}

func BenchmarkExtraHeight(b *testing.B) {
	for _, n := range []struct {
		name     string
		doubtful int
	}{{"10 of 450", 10}, {"60", 60}, {"450", 450}} {
		b.Run(n.name, func(b *testing.B) {
			c, ws := doubtfulPath(n.doubtful), &confidenceScratch{}
			for i := range n.doubtful {
				c.marginM[i] -= 4
			}
			b.ReportAllocs()
			for b.Loop() {
				c.gather(ws)
				c.extraHeight(DefaultRaiseCapM, ws)
			}
		})
	}
}
