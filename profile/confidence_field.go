package profile

import (
	"math"
)

// errorField draws the errors of the antennas and of the decisive samples, by
// halving: the antennas first, then the middle sample of each run between what
// lies at both ends of the run, then the middles of both halves, and so on, each
// from its two drawn neighbours (bridge). Which value a sample has in a draw so
// depends on where it lies and on nothing else, while stretches without decisive
// samples cost nothing. Source of drawing a chain by halves: P. Lévy's
// construction of Brownian motion (from memory).
type errorField struct {
	ws    *confidenceScratch
	draws int
	least raises
}

// run is a range of samples of one chain, from the first and before to.
type run struct{ from, to int32 }

// fieldStep draws one sample's z.
type fieldStep struct {
	bridge
	left, right, self, coordinate int32
	decisive                      int32 // -1 where it only serves others
}

const (
	// fieldDraws are drawn, fewer of a path of more than longSamples, and at
	// least one block.
	fieldDraws, longSamples = 1 << fieldBits, 4096
	// blockDraws are drawn at a time, so that they stay near the processor.
	blockDraws = 256
)

type drawBlock [blockDraws]float64

// newErrorField lays out how the decisive samples, of which there is at least
// one, are drawn.
func newErrorField(c *errorChain, ws *confidenceScratch, least raises) errorField {
	if ws.fieldNormals == nil {
		ws.fieldNormals = newFieldNormals()
	}
	const blocks = fieldDraws / blockDraws
	f := errorField{ws: ws, least: least}
	f.draws = blockDraws * min(max(longSamples*blocks/len(c.marginM), 1), blocks)
	for l, m := range least {
		ws.needs[l] = resized(ws.needs[l], f.draws)
		for j := range ws.needs[l] {
			ws.needs[l][j] = m
		}
	}
	ws.fieldSteps = ws.fieldSteps[:0]
	for from := 0; from < len(ws.decisive); {
		to := from
		for to < len(ws.decisive) && ws.decisive[to].run == ws.decisive[from].run {
			to++
		}
		f.planRun(c, from, to)
		from = to
	}
	return f
}

// halving is a stretch of a run between two drawn places.
type halving struct {
	run
	// left and right are the slots of the places, and leftM and rightM how far
	// from A; infinite where there is none.
	left, right   int32
	leftM, rightM float64
	depth         int32
}

// planRun lays out the steps of one run, whose decisive samples are those from
// first on and before end.
func (f *errorField) planRun(c *errorChain, first, end int) {
	d := f.ws.decisive[first]
	h := halving{run: f.ws.runs[d.run], left: slotA, right: slotB, leftM: 0, rightM: c.lengthM}
	if math.IsInf(d.toAM, 1) {
		h.leftM = math.Inf(-1)
	}
	if math.IsInf(d.toBM, 1) {
		h.rightM = math.Inf(1)
	}
	f.plan(c, h, d.correlationM, first, end)
}

// plan lays out the steps of a stretch with its halves, if there are decisive
// samples in it.
func (f *errorField) plan(c *errorChain, h halving, correlationM float64, first, end int) {
	if first == end {
		return
	}
	decisive, at := f.ws.decisive, (h.from+h.to)/2
	atM := c.distanceM[at]
	middle := first
	for middle < end && decisive[middle].at < at {
		middle++
	}
	s := fieldStep{
		bridge: newBridge(atM-h.leftM, h.rightM-atM, correlationM), left: h.left, right: h.right,
		self: slotSamples + h.depth, coordinate: slotSamples + at, decisive: -1,
	}
	after := middle
	if middle < end && decisive[middle].at == at {
		s.decisive = int32(middle)
		after++
	}
	f.ws.fieldSteps = append(f.ws.fieldSteps, s)
	if int(s.self) >= len(f.ws.fieldZ) {
		f.ws.fieldZ = append(f.ws.fieldZ, make([]drawBlock, int(s.self)+1-len(f.ws.fieldZ))...)
	}
	before, behind := h, h
	before.depth, behind.depth = h.depth+1, h.depth+1
	before.to, before.right, before.rightM = at, s.self, atM
	behind.from, behind.left, behind.leftM = at+1, s.self, atM
	f.plan(c, before, correlationM, first, middle)
	f.plan(c, behind, correlationM, after, end)
}

// drawBlock draws a block of draws and notes what each needs.
func (f *errorField) drawBlock(from int) {
	z, normals := f.ws.fieldZ, f.ws.fieldNormals
	zA, zB, n := &z[slotA], &z[slotB], normals.block(slotB, from)
	*zA = *normals.block(slotA, from)
	alike := f.ws.endsAlike
	bridge{from: alike, sigma: math.Sqrt(1 - alike*alike)}.draw(zB, zA, zA, n)
	var needs [levers]*drawBlock
	for l := range needs {
		needs[l] = (*drawBlock)(f.ws.needs[l][from:])
	}
	for i := range f.ws.fieldSteps {
		s := &f.ws.fieldSteps[i]
		s.draw(&z[s.self], &z[s.left], &z[s.right], normals.block(s.coordinate, from))
		if s.decisive >= 0 {
			f.ws.decisive[s.decisive].note(&needs, &z[s.self], zA, zB)
		}
	}
}

func (b bridge) draw(z, left, right, n *drawBlock) {
	for j := range z {
		z[j] = b.from*left[j] + b.to*right[j] + b.sigma*n[j]
	}
}

// note raises what the draws need to what the sample needs.
func (d *decisiveSample) note(needs *[levers]*drawBlock, z, zA, zB *drawBlock) {
	marginM, perA, perB, errorM, floorM := d.marginM, d.perA, d.perB, d.errorM, d.floorM
	atA, atB, atBoth := needs[0], needs[1], needs[2]
	for j := range z {
		deficitM := errorM*z[j] - perA*zA[j] - perB*zB[j] - marginM
		if !(deficitM > floorM) {
			continue
		}
		deficitM = min(deficitM, d.ceilingM)
		if m := deficitM * d.perMetre[0]; m > atA[j] {
			atA[j] = m
		}
		if m := deficitM * d.perMetre[1]; m > atB[j] {
			atB[j] = m
		}
		if deficitM > atBoth[j] {
			atBoth[j] = deficitM
		}
	}
}
