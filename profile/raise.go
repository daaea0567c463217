package profile

import (
	"math"
	"slices"
)

// Raise is the least extra antenna height, in metres, that meets every
// criterion: at A alone, at B alone, or the same at both ends. Zero where they
// are met already; NaN where no raise up to the cap meets them, or where a
// void keeps it from being known.
type Raise struct {
	AM, BM, BothM float64
	CapM          float64
}

// DefaultRaiseCapM is the cap where the caller states none: beyond any mast,
// so that the figure says how far out of reach a path is.
const DefaultRaiseCapM = 20000

// lever is how far the line rises at a distance share t from A for one metre
// of raise.
type lever func(t float64) float64

func atA(t float64) float64  { return 1 - t }
func atB(t float64) float64  { return t }
func atBoth(float64) float64 { return 1 }

// raise solves the three raises. The clearance at a sample grows linearly with
// a raise, so the raise that a sample needs is a quotient, and the largest
// quotient is the answer: nothing is searched for.
func (g *geometry) raise(criteria []Criterion, found []Clearance, ws *Workspace, capM float64) Raise {
	r := Raise{CapM: capM}
	for i := range found {
		if found[i].Met {
			continue
		}
		g.gatherShort(criteria[i], ws)
		r.AM = g.need(criteria[i], atA, ws, r.AM)
		r.BM = g.need(criteria[i], atB, ws, r.BM)
		r.BothM = g.need(criteria[i], atBoth, ws, r.BothM)
	}
	for _, m := range []*float64{&r.AM, &r.BM, &r.BothM} {
		if *m > capM {
			*m = math.NaN()
		}
	}
	return r
}

// shortSample is a sample that misses a criterion's full fraction.
type shortSample struct {
	distanceM float64
	t         float64 // share of the path from A
	// fullM is what is missing to the full fraction, isolatedM to the isolated
	// one; the latter may be negative.
	fullM, isolatedM float64
}

// gatherShort collects in ws what misses the criterion, from A to B.
func (g *geometry) gatherShort(c Criterion, ws *Workspace) {
	bulge := bulgeFactor(c.K)
	ws.short = ws.short[:0]
	for i := g.first; i <= g.last; i++ {
		clearanceM, f1M := g.at(i, bulge)
		if missing := c.F1Fraction*f1M - clearanceM; missing > ratioTolerance*f1M {
			d := g.p.DistanceM[i]
			ws.short = append(ws.short, shortSample{
				distanceM: d, t: d / g.lengthM, fullM: missing, isolatedM: c.IsolatedF1Fraction*f1M - clearanceM,
			})
		}
	}
}

// need is the least raise through the lever that meets one criterion, by
// whichever of its fractions is met first, or what is needed already if that is
// more.
func (g *geometry) need(c Criterion, l lever, ws *Workspace, already float64) float64 {
	ws.needs = resized(ws.needs, len(ws.short))
	full, isolated := 0.0, 0.0
	for i := range ws.short {
		s := &ws.short[i]
		perMetre := 1 / l(s.t)
		ws.needs[i] = s.fullM * perMetre
		full = max(full, ws.needs[i])
		isolated = max(isolated, s.isolatedM*perMetre)
	}
	if !(c.IsolatedF1Fraction < c.F1Fraction) || isolated >= full || already >= full {
		return max(full, already)
	}
	spanM := isolatedSpanM(g.lengthM)
	least := min(full, max(isolated, shrink(ws, spanM)))
	if len(g.p.BendPerM) == 0 {
		return max(least, already)
	}
	r := newRefiner(*g, ws)
	return max(already, r.shrinkBetween(c, straight{l(0), (l(1) - l(0)) / g.lengthM}, spanM, max(least, already), full))
}

// shrink is the least raise after which the samples that still miss the full
// fraction, those of ws.needs above it, all lie within spanM of each other.
// Every window of that width is tried: the raise must satisfy all samples
// before and behind it.
func shrink(ws *Workspace, spanM float64) float64 {
	n := len(ws.short)
	ws.behind = resized(ws.behind, n+1)
	behind := ws.behind // behind[i]: the most that samples i and later need
	behind[n] = 0
	for i, need := range slices.Backward(ws.needs) {
		behind[i] = max(behind[i+1], need)
	}
	least, before, end := math.Inf(1), 0.0, 0
	for i := range n {
		for end < n && ws.short[end].distanceM-ws.short[i].distanceM <= spanM {
			end++
		}
		least = min(least, max(before, behind[end]))
		before = max(before, ws.needs[i])
	}
	return least
}
