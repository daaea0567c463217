package profile

import "math"

// Obstruction is a stretch of the path that misses a criterion.
type Obstruction struct {
	K          float64
	F1Fraction float64
	// FromM and ToM are the first and last failing samples' distances from A.
	FromM, ToM float64
	// PeakAtM is the worst sample, the one with the least clearance over F1;
	// TopM is the height of terrain and cover there, ShortM how much clearance
	// is missing there.
	PeakAtM, TopM, ShortM float64
}

// groupGapM joins failing stretches that lie no further apart into one
// obstruction, after P.526-16 section 4.4, which counts neighbouring profile
// points up to 250 m apart as one obstacle.
const groupGapM = 250.0

// obstructions lists what misses the criterion that c reports on, from A to B.
func (g *geometry) obstructions(c Clearance, out []Obstruction) []Obstruction {
	bulge := bulgeFactor(c.K)
	open := false
	worst := math.Inf(1)
	for i := g.first; i <= g.last; i++ {
		clearanceM, f1M := g.at(i, bulge)
		ratio := clearanceM / f1M
		if !short(ratio, c.F1Fraction) {
			continue
		}
		d := g.p.DistanceM[i]
		if !open || d-out[len(out)-1].ToM > groupGapM+distanceToleranceM {
			out = append(out, Obstruction{K: c.K, F1Fraction: c.F1Fraction, FromM: d})
			open, worst = true, math.Inf(1)
		}
		o := &out[len(out)-1]
		o.ToM = d
		if ratio < worst {
			worst = ratio
			o.PeakAtM, o.TopM, o.ShortM = d, g.topM(i), c.F1Fraction*f1M-clearanceM
		}
	}
	return out
}
