package profile

import "math"

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
		r.AM = max(r.AM, g.need(criteria[i], atA, ws))
		r.BM = max(r.BM, g.need(criteria[i], atB, ws))
		r.BothM = max(r.BothM, g.need(criteria[i], atBoth, ws))
	}
	for _, m := range []*float64{&r.AM, &r.BM, &r.BothM} {
		if *m > capM {
			*m = math.NaN()
		}
	}
	return r
}

// need is the least raise through the lever that meets one criterion, by
// whichever of its fractions is met first.
func (g *geometry) need(c Criterion, l lever, ws *Workspace) float64 {
	ws.needs = resized(ws.needs, len(g.p.DistanceM))
	missing := g.needs(c.K, c.F1Fraction, l, ws.needs)
	if !(c.IsolatedF1Fraction < c.F1Fraction) || missing.most == 0 {
		return missing.most
	}
	isolated := g.shrink(missing, ws, isolatedSpanM(g.lengthM))
	ws.spare = resized(ws.spare, len(g.p.DistanceM))
	return min(missing.most, max(isolated, g.needs(c.K, c.IsolatedF1Fraction, l, ws.spare).most))
}

// missing is the stretch of samples that need a raise, and the largest raise.
type missing struct {
	first, end int // samples first <= i < end
	most       float64
}

// needs sets out[i], for the stretch that it returns, to the raise that sample
// i needs to reach the fraction; 0 where it does already.
func (g *geometry) needs(k, fraction float64, l lever, out []float64) missing {
	bulge := bulgeFactor(k)
	found := missing{}
	for i := 1; i < len(out)-1; i++ {
		clearanceM, f1M := g.at(i, bulge)
		short := fraction*f1M - clearanceM
		if !(short > ratioTolerance*f1M) {
			out[i] = 0
			continue
		}
		if found.end == 0 {
			found.first = i
		}
		found.end = i + 1
		out[i] = short / l(g.p.DistanceM[i]/g.lengthM)
		found.most = max(found.most, out[i])
	}
	return found
}

// shrink is the least raise after which the samples that still miss the full
// fraction, those of ws.needs above it, all lie within spanM of each other.
// Every window of that width is tried: the raise must satisfy all samples
// before and behind it.
func (g *geometry) shrink(stretch missing, ws *Workspace, spanM float64) float64 {
	needs, distances := ws.needs[stretch.first:stretch.end], g.p.DistanceM[stretch.first:stretch.end]
	n := len(needs)
	ws.behind = resized(ws.behind, n+1)
	behind := ws.behind // behind[i]: the most that samples i and later need
	behind[n] = 0
	for i := n - 1; i >= 0; i-- {
		behind[i] = max(behind[i+1], needs[i])
	}
	least, before, end := math.Inf(1), 0.0, 0
	for i := range n {
		for end < n && distances[end]-distances[i] <= spanM {
			end++
		}
		least = min(least, max(before, behind[end]))
		before = max(before, needs[i])
	}
	return least
}
