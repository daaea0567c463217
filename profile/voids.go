package profile

import "math"

// Void is a stretch of a profile without a height, from its first sample
// without one to its last.
type Void struct{ FromM, ToM float64 }

// VoidSpans lists the stretches without a height, from A to B.
func (p *Profile) VoidSpans() []Void {
	var out []Void
	open := false
	for i, h := range p.GroundM {
		switch {
		case !math.IsNaN(h):
			open = false
		case open:
			out[len(out)-1].ToM = p.DistanceM[i]
		default:
			out, open = append(out, Void{p.DistanceM[i], p.DistanceM[i]}), true
		}
	}
	return out
}

// VoidShare is the share of the path without a height, 0 to 1: of its length in
// the exact mode, which has a sample at either edge of a void, and otherwise of
// the samples.
func (p *Profile) VoidShare() float64 {
	n := len(p.GroundM)
	if n == 0 {
		return 0
	}
	if len(p.BendPerM) == 0 {
		return float64(p.Voids()) / float64(n)
	}
	sum := 0.0
	for _, v := range p.VoidSpans() {
		sum += v.ToM - v.FromM
	}
	return sum / p.DistanceM[n-1]
}
