package profile

import "math"

// Samples are the arrays behind an assessment, for a table or a drawing: one
// entry a sample, from A to B. NaN is a void.
type Samples struct {
	K         float64 // the k-factor of BulgeM
	DistanceM []float64
	GroundM   []float64
	CoverM    []float64 // above GroundM; zeros where none is counted
	BulgeM    []float64
	LineM     []float64 // height of the line between the antennas
	F1M       []float64
}

// NewSamples computes the arrays for the link over the profile at k. DistanceM
// and GroundM are the profile's own.
func NewSamples(link *Link, p *Profile, k float64) Samples {
	n := len(p.DistanceM)
	s := Samples{
		K: k, DistanceM: p.DistanceM, GroundM: p.GroundM, CoverM: p.CoverM,
		BulgeM: make([]float64, n), LineM: make([]float64, n), F1M: make([]float64, n),
	}
	if len(s.CoverM) == 0 {
		s.CoverM = make([]float64, n)
	}
	g := newGeometry(link, p)
	bulge := bulgeFactor(k)
	for i, d1 := range p.DistanceM {
		w := max(0, d1*(g.lengthM-d1))
		s.BulgeM[i] = w * bulge
		s.LineM[i] = g.aM + g.slope*d1
		s.F1M[i] = math.Sqrt(g.f1Scale * w)
	}
	return s
}
