package profile

import (
	"math"

	"ridgehop/internal/itu/p525"
	"ridgehop/internal/itu/p526"
)

// Clearance is how one criterion fares along the path.
type Clearance struct {
	K float64
	// F1Fraction is the fraction that was required here: the criterion's own,
	// or its smaller one where the obstruction is isolated.
	F1Fraction float64
	Isolated   bool
	// Met is true if every sample is known and every one that is judged reaches
	// the fraction.
	Met bool
	// MinRatio is the least clearance over first Fresnel radius among the
	// known samples that are judged; NaN if there is none. AtM is where,
	// ClearanceM and F1M the clearance and first Fresnel radius there.
	MinRatio, AtM, ClearanceM, F1M float64
}

// ratioTolerance absorbs floating-point rounding where a clearance meets its
// criterion exactly, as after a raise: a billionth of a Fresnel radius.
const ratioTolerance = 1e-9

func short(ratio, fraction float64) bool { return ratio < fraction-ratioTolerance }

// geometry is what the per-sample formulas share for one link and profile.
type geometry struct {
	p       *Profile
	lengthM float64
	aM      float64 // antenna height at A, above sea level
	slope   float64 // of the line between the antennas
	f1Scale float64 // wavelength over path length: F1^2 = f1Scale * d1 * d2
	// first and last are the samples that are judged; none if first > last.
	first, last int
}

func newGeometry(link *Link, p *Profile) geometry {
	first, last := p.judged(link.Path.LengthM)
	return geometry{
		first: first, last: last,
		p:       p,
		lengthM: link.Path.LengthM,
		aM:      link.AntennaAM,
		slope:   (link.AntennaBM - link.AntennaAM) / link.Path.LengthM,
		f1Scale: p525.Wavelength(link.FrequencyGHz) / link.Path.LengthM,
	}
}

// bulgeFactor times d1*d2 is the earth bulge in metres at k (P.526-16 2.1:
// d1 d2 / (2 k a)).
func bulgeFactor(k float64) float64 { return 1 / (2 * k * p526.EarthRadiusKM * 1000) }

// BulgeM is the earth bulge in metres at a distance from A on a path, both in
// metres, at the k-factor k > 0 (P.526-16 2.1).
func BulgeM(k, distanceM, lengthM float64) float64 {
	return distanceM * (lengthM - distanceM) * bulgeFactor(k)
}

// topM is what the line must clear at sample i: terrain height and cover.
func (g *geometry) topM(i int) float64 {
	top := g.p.GroundM[i]
	if len(g.p.CoverM) != 0 {
		top += g.p.CoverM[i]
	}
	return top
}

// at gives the clearance and the first Fresnel radius at sample i for the
// bulge factor of a k. The clearance is NaN over a void.
func (g *geometry) at(i int, bulge float64) (clearanceM, f1M float64) {
	d1 := g.p.DistanceM[i]
	w := d1 * (g.lengthM - d1)
	return g.aM + g.slope*d1 - g.topM(i) - w*bulge, math.Sqrt(g.f1Scale * w)
}

// maxCriteria bounds the criteria of one link, so that the one pass over the
// samples keeps its state on the stack.
const maxCriteria = 8

// clearances makes the one pass over the samples that are judged, for every
// criterion at once, and finds the least clearance over F1 of each.
func (g *geometry) clearances(criteria []Criterion, out []Clearance) []Clearance {
	var bulge, least [maxCriteria]float64
	var where [maxCriteria]int
	for c := range criteria {
		bulge[c], least[c] = bulgeFactor(criteria[c].K), math.Inf(1)
	}
	bulges, leasts, wheres := bulge[:len(criteria)], least[:len(criteria)], where[:len(criteria)]
	for i := g.first; i <= g.last; i++ {
		d1 := g.p.DistanceM[i]
		w := d1 * (g.lengthM - d1)
		flat := g.aM + g.slope*d1 - g.topM(i)
		perF1 := 1 / math.Sqrt(g.f1Scale*w)
		for c, b := range bulges {
			// A void makes the ratio NaN, which is less than nothing.
			if ratio := (flat - w*b) * perF1; ratio < leasts[c] {
				leasts[c], wheres[c] = ratio, i
			}
		}
	}
	for c := range criteria {
		out = append(out, g.clearance(criteria[c], leasts[c], wheres[c]))
	}
	return out
}

func (g *geometry) clearance(criterion Criterion, ratio float64, i int) Clearance {
	c := Clearance{K: criterion.K, F1Fraction: criterion.F1Fraction, MinRatio: math.NaN(), AtM: math.NaN(), ClearanceM: math.NaN(), F1M: math.NaN()}
	if i == 0 {
		return c
	}
	c.MinRatio, c.AtM = ratio, g.p.DistanceM[i]
	c.ClearanceM, c.F1M = g.at(i, bulgeFactor(criterion.K))
	return c
}

// settle decides which fraction each criterion asks for, and whether it is
// met. Over voids nothing is met, and no obstruction counts as isolated: more
// of it may lie in the void.
func (g *geometry) settle(criteria []Criterion, found []Clearance, voids bool) {
	for i := range found {
		c := &found[i]
		relief := criteria[i].IsolatedF1Fraction < criteria[i].F1Fraction
		if relief && !voids && short(c.MinRatio, c.F1Fraction) &&
			g.spanM(criteria[i]) <= isolatedSpanM(g.lengthM) {
			c.Isolated, c.F1Fraction = true, criteria[i].IsolatedF1Fraction
		}
		c.Met = !voids && !math.IsNaN(c.MinRatio) && !short(c.MinRatio, c.F1Fraction)
	}
}

// spanM is the distance from the first to the last sample that misses the
// criterion's full fraction.
func (g *geometry) spanM(criterion Criterion) float64 {
	first, last := -1, -1
	bulge := bulgeFactor(criterion.K)
	for i := g.first; i <= g.last; i++ {
		clearanceM, f1M := g.at(i, bulge)
		if !short(clearanceM/f1M, criterion.F1Fraction) {
			continue
		}
		if first < 0 {
			first = i
		}
		last = i
	}
	if first < 0 {
		return 0
	}
	return g.p.DistanceM[last] - g.p.DistanceM[first]
}
