package profile

import (
	"math"
)

// judgedChain is memory for the chain of margins of one path.
type judgedChain struct {
	errorChain
	confidenceScratch
}

// judgeConfidence finds how sure it is that every criterion holds, and the extra
// height that would make it sure enough. Where nothing is known both stay
// unknown.
func (g *geometry) judgeConfidence(link *Link, out *Assessment, ws *Workspace) {
	if g.first > g.last {
		return
	}
	c := &ws.chain
	g.fillChain(link, out.Clearance, c)
	out.Confidence = c.confidence(&c.confidenceScratch)
	out.ExtraHeight = ExtraHeight{}
	if out.Confidence >= ClearConfidence {
		return
	}
	for _, way := range []struct {
		height *float64
		by     lever
	}{{&out.ExtraHeight.AM, atA}, {&out.ExtraHeight.BM, atB}, {&out.ExtraHeight.BothM, atBoth}} {
		*way.height = c.raiseFor(ClearConfidence, out.Raise.CapM, way.by, &c.confidenceScratch)
	}
}

// fillChain lays out what each judged sample has to spare, by the criterion that
// leaves least, and how large the errors are. The fractions are those that the
// judgement asked for.
func (g *geometry) fillChain(link *Link, found []Clearance, c *judgedChain) {
	n := g.last - g.first + 1
	c.lengthM = g.lengthM
	c.distanceM = g.p.DistanceM[g.first : g.last+1]
	c.marginM, c.errorM, c.correlationM = resized(c.marginM, n), resized(c.errorM, n), resized(c.correlationM, n)
	if cap(c.source) < n {
		c.source = make([]int16, n)
	}
	c.source = c.source[:n]
	var bulge, fraction [maxCriteria]float64
	for k, f := range found {
		bulge[k], fraction[k] = bulgeFactor(f.K), f.F1Fraction-ratioTolerance
	}
	bulges := bulge[:len(found)]
	for i := range n {
		at := g.first + i
		d1 := g.p.DistanceM[at]
		w := d1 * (g.lengthM - d1)
		flat, f1 := g.aM+g.slope*d1-g.topM(at), math.Sqrt(g.f1Scale*w)
		least := math.Inf(1)
		for k, b := range bulges {
			least = min(least, flat-w*b-fraction[k]*f1)
		}
		c.marginM[i] = least
		c.errorM[i], c.correlationM[i], c.source[i] = g.p.topError(at)
	}
	last := len(g.p.DistanceM) - 1
	c.a, c.b = g.p.endError(link.HeightAFrom, 0), g.p.endError(link.HeightBFrom, last)
}

// topError is the vertical error of the top of the profile at sample i: its
// 1-sigma, its correlation length, and a number that tells sources apart. What a
// surface model shows is of its own error; heights above ground have the
// ground's besides.
func (p *Profile) topError(i int) (errorM, correlationM float64, source int16) {
	if len(p.Sources) == 0 || p.SourceIndex[i] < 0 {
		return 0, 1, -1
	}
	ground := p.SourceIndex[i]
	of := &p.Sources[ground]
	if len(p.CoverIndex) == 0 || p.CoverIndex[i] < 0 {
		return of.ErrorM, max(of.CorrelationM, leastCorrelationM), ground
	}
	cover := p.CoverIndex[i]
	above := &p.Sources[cover]
	if above.Kind == KindCanopy || above.Kind == KindBuildings {
		// Told apart from the bare ground: its errors are larger.
		return math.Hypot(of.ErrorM, above.ErrorM), max(above.CorrelationM, leastCorrelationM), aboveGround + cover
	}
	return above.ErrorM, max(above.CorrelationM, leastCorrelationM), cover
}

// aboveGround is added to the number of a source whose heights stand on ground
// of another.
const aboveGround = 1 << 14

// leastCorrelationM keeps divisions sound where a source states no length: its
// errors are then all but independent.
const leastCorrelationM = 1e-3

// endError is the error of an antenna's height, by what it counts from.
func (p *Profile) endError(from HeightFrom, i int) endError {
	if from == FromSeaLevel || len(p.Sources) == 0 || p.SourceIndex[i] < 0 {
		return endError{source: -1}
	}
	ground := p.SourceIndex[i]
	if from == FromCover {
		errorM, _, source := p.topError(i)
		return endError{errorM, source}
	}
	return endError{p.Sources[ground].ErrorM, ground}
}
