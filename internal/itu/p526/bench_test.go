package p526_test

import (
	"math"
	"testing"

	"ridgehop/internal/itu/p526"
)

// sampleProfile is a 10 km path of 334 points with rolling ground; heightM lifts
// its middle.
func sampleProfile(n int, lengthKM, heightM float64) (distanceKM, groundM []float64) {
	distanceKM, groundM = make([]float64, n), make([]float64, n)
	for i := range n {
		t := float64(i) / float64(n-1)
		distanceKM[i] = lengthKM * t
		groundM[i] = 120 + 8*math.Sin(9*t) + 3*math.Sin(61*t) + heightM*math.Exp(-40*(t-0.5)*(t-0.5))
	}
	return distanceKM, groundM
}

func BenchmarkDeltaBullington(b *testing.B) {
	cases := []struct {
		name    string
		heightM float64
		mastM   float64
	}{{"clear", 0, 40}, {"ridge", 60, 15}, {"low", 0, 1}}
	for _, c := range cases {
		distanceKM, groundM := sampleProfile(334, 10, c.heightM)
		tx, rx := groundM[0]+c.mastM, groundM[333]+c.mastM
		b.Run(c.name+"/path", func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if _, err := p526.NewGeneralPath(distanceKM, groundM, groundM, tx, rx); err != nil {
					b.Fatal(err)
				}
			}
		})
		path, err := p526.NewGeneralPath(distanceKM, groundM, groundM, tx, rx)
		if err != nil {
			b.Fatal(err)
		}
		in := p526.Conditions{EffectiveRadiusKM: p526.EffectiveRadiusKM(4.0 / 3), FrequencyGHz: 18.7, Polarisation: p526.Vertical}
		b.Run(c.name+"/k", func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				path.DeltaBullington(in)
			}
		})
	}
}
