package profile

import (
	"math"
)

// errorDraws estimates the confidence over a fixed set of drawn error chains, by
// separation of variables: the errors are drawn one after the other, each only
// where its sample holds, and the draw counts with the product of the
// probabilities that they did. Source: A. Genz, "Numerical computation of
// multivariate normal probabilities", J. Comput. Graph. Stat. 1 (1992) 141-149.
//
// The sample that is likeliest to fail comes first, then the two antennas, then
// the likeliest sample between those that are drawn, and so on (the order is in
// the spirit of Genz and Bretz, "Computation of Multivariate Normal and t
// Probabilities", 2009, section 4.1.3; from memory). A chain makes that cheap:
// an error depends on its two drawn neighbours alone,
//
//	z = (r1 (1-r2²) z1 + r2 (1-r1²) z2 + sqrt((1-r1²)(1-r2²)(1-r1²r2²)) n) / (1-r1²r2²)
//
// with r1 and r2 the correlations with them, and n standard normal. It follows
// from the conditional normal distribution.
type errorDraws struct {
	ws     *confidenceScratch
	first  *doubtfulSample
	firstZ int
	// endsAlike is the correlation of zA and zB, and endsApart the sigma of
	// what of zB zA does not tell.
	endsAlike, endsApart float64
	// between draws first's z from zA and zB; failing is how the sample's
	// clearance moves zA, zB and z.
	between             bridge
	moveA, moveB, moveZ float64
}

// Slots of the drawn values: the ends, then the samples. A sample with none
// drawn beside it has the end for its neighbour, infinitely far where that is
// not on its chain.
const (
	slotA = iota
	slotB
	slotSamples
)

// drawStep draws one sample's z from two that are drawn.
type drawStep struct {
	bridge
	left, right, self int32
	leaf              bool // nothing is drawn from it
	// The sample holds while z <= limit + limitA zA + limitB zB.
	limit, limitA, limitB float64
	perSigma              float64
	rotation              uint64
}

// bridge is z = from z1 + to z2 + sigma n.
type bridge struct{ from, to, sigma float64 }

// newBridge is the bridge of a sample between two others, in metres from each;
// +Inf is none.
func newBridge(fromM, toM, correlationM float64) bridge {
	// 1-r² by Expm1: near neighbours have r near 1.
	r1, r2 := alike(fromM, correlationM), alike(toM, correlationM)
	apart1, apart2 := -math.Expm1(-2*fromM/correlationM), -math.Expm1(-2*toM/correlationM)
	perApart := -1 / math.Expm1(-2*(fromM+toM)/correlationM)
	return bridge{r1 * apart2 * perApart, r2 * apart1 * perApart, math.Sqrt(apart1 * apart2 * perApart)}
}

const (
	// fewDraws chains are drawn, and fullDraws instead where the weights of the
	// few spread; few alone where their mean is far from ClearConfidence or over
	// manySamples are in doubt.
	fewDraws, fullDraws, manySamples = 64, 256, 2048
	// fewSpread is the standard error of few independent draws that is let pass.
	// These are spread evenly, and err about a third as much.
	fewSpread = 0.006
	// Below farFromClear nobody needs to know as well.
	farFromClear = 0.7
	// lostShare is the weight below which a draw adds nothing.
	lostShare = 1e-6
)

// newErrorDraws orders the doubtful samples of ws, with the likeliest to fail
// first.
func newErrorDraws(ws *confidenceScratch, first int) errorDraws {
	if ws.normal == nil {
		ws.normal = newNormalTables()
	}
	all := ws.doubtful
	d := errorDraws{
		ws: ws, first: &all[first], firstZ: first,
		endsAlike: ws.endsAlike, endsApart: math.Sqrt(1 - ws.endsAlike*ws.endsAlike),
	}
	d.condition()
	ws.z = resized(ws.z, len(all)+slotSamples)
	ws.steps = ws.steps[:0]
	for from := 0; from < len(all); {
		to := from
		for to < len(all) && all[to].run == all[from].run {
			to++
		}
		if from <= d.firstZ && d.firstZ < to {
			d.order(from, d.firstZ, -1, d.firstZ)
			d.order(d.firstZ+1, to, d.firstZ, -1)
		} else {
			d.order(from, to, -1, -1)
		}
		from = to
	}
	return d
}

// likeliest is the sample from from on and before to that is likeliest to fail;
// of equals, the one nearest the middle.
func likeliest(all []doubtfulSample, from, to int) int {
	best, bestOff := from, to-from
	for i := from; i < to; i++ {
		off := max(2*i+1-from-to, from+to-2*i-1)
		if s, least := all[i].sigmas, all[best].sigmas; s < least || s == least && off < bestOff {
			best, bestOff = i, off
		}
	}
	return best
}

// order appends the samples from from on and before to, which lie between the
// drawn samples left and right, -1 for none, of the same run. It halves long
// stretches, so that the work is n log n.
func (d *errorDraws) order(from, to, left, right int) {
	if from >= to {
		return
	}
	margin := (to - from) / 4
	at := likeliest(d.ws.doubtful, from+margin, to-margin)
	d.ws.steps = append(d.ws.steps, d.step(at, left, right))
	d.ws.steps[len(d.ws.steps)-1].leaf = to-from == 1
	d.order(from, at, left, at)
	d.order(at+1, to, at, right)
}

// step draws sample at between the drawn samples left and right.
func (d *errorDraws) step(at, left, right int) drawStep {
	s := &d.ws.doubtful[at]
	leftM, rightM, leftSlot, rightSlot := s.toAM, s.toBM, int32(slotA), int32(slotB)
	if left >= 0 {
		leftM, leftSlot = s.distanceM-d.ws.doubtful[left].distanceM, int32(left+slotSamples)
	}
	if right >= 0 {
		rightM, rightSlot = d.ws.doubtful[right].distanceM-s.distanceM, int32(right+slotSamples)
	}
	b, perError := newBridge(leftM, rightM, s.correlationM), 1/s.errorM
	return drawStep{
		bridge: b, left: leftSlot, right: rightSlot, self: int32(at + slotSamples),
		limit: s.marginM * perError, limitA: s.perA * perError, limitB: s.perB * perError,
		perSigma: 1 / b.sigma,
		rotation: d.ws.normal.rotation[(len(d.ws.steps)+firstCoordinates)%rotations],
	}
}

// firstCoordinates is how many coordinates of a draw go to the first sample and
// the antennas, beside the even one.
const firstCoordinates = 3

// condition prepares the draw of the first sample and the antennas.
func (d *errorDraws) condition() {
	f := d.first
	d.between = newBridge(f.toAM, f.toBM, f.correlationM)
	rA, rB := alike(f.toAM, f.correlationM), alike(f.toBM, f.correlationM)
	perVariance := 1 / (f.sigmaM * f.sigmaM)
	d.moveA = (f.perA + f.perB*d.endsAlike - f.errorM*rA) * perVariance
	d.moveB = (f.perB + f.perA*d.endsAlike - f.errorM*rB) * perVariance
	d.moveZ = (f.perA*rA + f.perB*rB - f.errorM) * perVariance
}

// probability is the mean weight of the draws, given that of the first sample.
func (d *errorDraws) probability(firstHolds float64) float64 {
	mean, spread := d.mean(fewDraws, firstHolds)
	if spread < fewSpread*math.Sqrt(fewDraws) || mean < farFromClear || len(d.ws.steps) > manySamples {
		return mean
	}
	mean, _ = d.mean(fullDraws, firstHolds)
	return mean
}

// mean is the mean weight of n draws, and the standard deviation of one.
func (d *errorDraws) mean(n int, firstHolds float64) (mean, spread float64) {
	sum, squares := 0.0, 0.0
	for j := range n {
		// The first sample's clearance error, evenly over where it holds.
		share := firstHolds * (float64(j) + 0.5) / float64(n)
		d.drawFirst(j, -d.first.sigmaM*d.ws.normal.at(share))
		weight := firstHolds * d.weight(j)
		sum, squares = sum+weight, squares+weight*weight
	}
	mean = sum / float64(n)
	return mean, math.Sqrt(max(squares/float64(n)-mean*mean, 0))
}

// coordinate is the stratum of draw j in one coordinate.
func coordinate(j int, rotation uint64) uint64 {
	return (uint64(j)*rotation + rotation/2) >> (64 - strataBits)
}

// drawFirst draws the antennas' errors and that of the first sample, and moves
// them to where the first sample's clearance error is clearanceM: for normal
// values, that is the draw given the clearance error.
func (d *errorDraws) drawFirst(j int, clearanceM float64) {
	normal, f := d.ws.normal, d.first
	zA := normal.stratum[coordinate(j, normal.rotation[0])]
	zB := d.endsAlike*zA + d.endsApart*normal.stratum[coordinate(j, normal.rotation[1])]
	z := d.between.from*zA + d.between.to*zB + d.between.sigma*normal.stratum[coordinate(j, normal.rotation[2])]
	off := clearanceM - (f.perA*zA + f.perB*zB - f.errorM*z)
	d.ws.z[slotA] = zA + d.moveA*off
	d.ws.z[slotB] = zB + d.moveB*off
	d.ws.z[d.firstZ+slotSamples] = z + d.moveZ*off
}

// weight draws the other samples, each where it holds, and gives the probability
// that they do.
func (d *errorDraws) weight(j int) float64 {
	z, normal := d.ws.z, d.ws.normal
	zA, zB := z[slotA], z[slotB]
	weight := 1.0
	for k := range d.ws.steps {
		s := &d.ws.steps[k]
		mean := s.from*z[s.left] + s.to*z[s.right]
		holds := normal.cdf((s.limit + s.limitA*zA + s.limitB*zB - mean) * s.perSigma)
		stratum := coordinate(j, s.rotation)
		if holds == 1 {
			z[s.self] = mean + s.sigma*normal.stratum[stratum]
			continue
		}
		weight *= holds
		if weight < lostShare {
			return 0
		}
		if !s.leaf {
			z[s.self] = mean + s.sigma*normal.at(holds*(float64(stratum)+0.5)/strata)
		}
	}
	return weight
}
