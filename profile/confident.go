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
	if g.surelyHolds(link.Criteria, certainSigmas*(max(a.errorM, b.errorM)+g.p.largestError())) {
		out.Confidence, out.ExtraHeight = 1, ExtraHeight{}
		return
	}
	c := &ws.chain
	c.a, c.b = a, b
	g.fillMargins(g.relieved(link.Criteria, math.Hypot(max(a.errorM, b.errorM), g.p.largestError())), c)
	g.fillErrors(c)
	if link.WithoutExtraHeight {
		out.Confidence = c.errorChain.confidence(&c.confidenceScratch)
		return
	}
	out.Confidence, out.ExtraHeight = c.judge(out.Raise.CapM, &c.confidenceScratch)
}

// doubtSigmas is how many sigmas below its full fraction an error may bring a
// sample, for the question what would be an obstruction: the normal
// distribution's 90th percentile, like ClearConfidence.
const doubtSigmas = 1.2816

// margins are the criteria as they bear on one sample.
type margins struct {
	number          int
	bulge, fraction [maxCriteria]float64
}

// newMargins is that of the criteria's full fractions.
func newMargins(criteria []Criterion) margins {
	m := margins{number: len(criteria)}
	for k, c := range criteria {
		m.bulge[k], m.fraction[k] = bulgeFactor(c.K), c.F1Fraction-ratioTolerance
	}
	return m
}

// relieved is the criteria with the smaller fraction of those whose relief holds
// whatever the errors do: all that they may bring below the full fraction lies
// within the span of an isolated obstruction. Without errors that is the rule of
// the judgement. More clearance only makes the span shorter, and larger errors
// only longer, so that neither can turn the confidence the wrong way.
func (g *geometry) relieved(criteria []Criterion, sigmaM float64) margins {
	m := newMargins(criteria)
	for k, c := range criteria {
		if c.IsolatedF1Fraction < c.F1Fraction && g.doubtfulSpanM(m.bulge[k], m.fraction[k], doubtSigmas*sigmaM) <= isolatedSpanM(g.lengthM) {
			m.fraction[k] = c.IsolatedF1Fraction - ratioTolerance
		}
	}
	return m
}

// doubtfulSpanM is the distance from the first to the last sample that has less
// than so much to spare.
func (g *geometry) doubtfulSpanM(bulge, fraction, spareM float64) float64 {
	first, last := -1, -1
	for i := g.first; i <= g.last; i++ {
		if clearanceM, f1M := g.at(i, bulge); clearanceM-fraction*f1M < spareM {
			if first < 0 {
				first = i
			}
			last = i
		}
	}
	if first < 0 {
		return 0
	}
	return g.p.DistanceM[last] - g.p.DistanceM[first]
}

// surelyHolds is whether every sample has at least so much to spare. It may deny
// it of a path that does, but it is quick: the Fresnel radius, the root of x =
// f1Scale d1 d2, is at most (x/r + r)/2 with r that of the middle of the path,
// for the geometric mean of x/r and r is at most the arithmetic one.
func (g *geometry) surelyHolds(criteria []Criterion, spareM float64) bool {
	m := newMargins(criteria)
	middle := math.Sqrt(g.f1Scale) * g.lengthM / 2
	var perW, fixed [maxCriteria]float64
	for k := range criteria {
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
func (g *geometry) fillMargins(m margins, c *judgedChain) {
	c.lengthM = g.lengthM
	c.distanceM = g.p.DistanceM[g.first : g.last+1]
	c.marginM = resized(c.marginM, len(c.distanceM))
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
