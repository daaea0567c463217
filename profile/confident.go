package profile

import "math"

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
	last := len(g.p.DistanceM) - 1
	a, b := g.p.endError(link.HeightAFrom, 0), g.p.endError(link.HeightBFrom, last)
	if g.surelyHolds(out.Clearance, certainSigmas*(max(a.errorM, b.errorM)+g.p.largestError())) {
		out.Confidence, out.ExtraHeight = 1, ExtraHeight{}
		return
	}
	c := &ws.chain
	c.a, c.b = a, b
	g.fillMargins(out.Clearance, c)
	g.fillErrors(c)
	out.Confidence, out.ExtraHeight = c.judge(out.Raise.CapM, &c.confidenceScratch)
}

// margins are the criteria as they bear on one sample, of the fractions that the
// judgement asked for.
type margins struct {
	number          int
	bulge, fraction [maxCriteria]float64
}

func newMargins(found []Clearance) margins {
	m := margins{number: len(found)}
	for k, f := range found {
		m.bulge[k], m.fraction[k] = bulgeFactor(f.K), f.F1Fraction-ratioTolerance
	}
	return m
}

// surelyHolds is whether every sample has at least so much to spare. It may deny
// it of a path that does, but it is quick: the Fresnel radius, the root of x =
// f1Scale d1 d2, is at most (x/r + r)/2 with r that of the middle of the path,
// for the geometric mean of x/r and r is at most the arithmetic one.
func (g *geometry) surelyHolds(found []Clearance, spareM float64) bool {
	m := newMargins(found)
	middle := math.Sqrt(g.f1Scale) * g.lengthM / 2
	var perW, fixed [maxCriteria]float64
	for k := range found {
		half := max(m.fraction[k], 0) / 2
		perW[k], fixed[k] = m.bulge[k]+half*g.f1Scale/middle, half*middle+spareM
	}
	perWs := perW[:m.number]
	for i, d1 := range g.p.DistanceM[g.first : g.last+1] {
		w := d1 * (g.lengthM - d1)
		flat := g.aM + g.slope*d1 - g.topM(g.first+i)
		for k, per := range perWs {
			if !(flat-w*per >= fixed[k]) {
				return false
			}
		}
	}
	return true
}

// fillMargins lays out what each judged sample has to spare, by the criterion
// that leaves least.
func (g *geometry) fillMargins(found []Clearance, c *judgedChain) {
	c.lengthM = g.lengthM
	c.distanceM = g.p.DistanceM[g.first : g.last+1]
	c.marginM = resized(c.marginM, len(c.distanceM))
	m := newMargins(found)
	bulges := m.bulge[:m.number]
	for i, d1 := range c.distanceM {
		w := d1 * (g.lengthM - d1)
		flat, f1 := g.aM+g.slope*d1-g.topM(g.first+i), math.Sqrt(g.f1Scale*w)
		least := math.Inf(1)
		for k, b := range bulges {
			least = min(least, flat-w*b-m.fraction[k]*f1)
		}
		c.marginM[i] = least
	}
}

// fillErrors lays out how large the errors are.
func (g *geometry) fillErrors(c *judgedChain) {
	n := len(c.distanceM)
	c.errorM, c.correlationM = resized(c.errorM, n), resized(c.correlationM, n)
	if cap(c.source) < n {
		c.source = make([]int16, n)
	}
	c.source = c.source[:n]
	for i := range n {
		at := g.first + i
		if i > 0 && g.p.sourcesAlike(at-1, at) {
			c.errorM[i], c.correlationM[i], c.source[i] = c.errorM[i-1], c.correlationM[i-1], c.source[i-1]
			continue
		}
		c.errorM[i], c.correlationM[i], c.source[i] = g.p.topError(at)
	}
}

// sourcesAlike is whether two samples rest on the same sources.
func (p *Profile) sourcesAlike(i, k int) bool {
	return len(p.Sources) == 0 ||
		p.SourceIndex[i] == p.SourceIndex[k] && (len(p.CoverIndex) == 0 || p.CoverIndex[i] == p.CoverIndex[k])
}

// largestError is at least the 1-sigma of the top of any sample.
func (p *Profile) largestError() float64 {
	largest := 0.0
	for i := range p.Sources {
		largest = max(largest, p.Sources[i].ErrorM)
	}
	if len(p.CoverIndex) != 0 {
		return math.Sqrt2 * largest // of cover on ground: the root of two squares
	}
	return largest
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
