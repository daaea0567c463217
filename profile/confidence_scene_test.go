package profile

import (
	"math"
	"math/rand/v2"
	"slices"
)

// shapes are margins along a path, in sigmas of its first source, given the
// share of the path and the least margin.
var marginShapes = []struct {
	name string
	at   func(t float64, r *rand.Rand) float64
}{
	{"flat", func(float64, *rand.Rand) float64 { return 0 }},
	{"ridge", func(t float64, _ *rand.Rand) float64 { return 120 * math.Abs(t-0.4) }},
	{"two ridges", func(t float64, _ *rand.Rand) float64 { return min(100*math.Abs(t-0.3), 80*math.Abs(t-0.7)) }},
	{"rough", func(_ float64, r *rand.Rand) float64 { return 2 * math.Abs(r.NormFloat64()) }},
	{"hills", func(t float64, _ *rand.Rand) float64 { return 3 + 3*math.Sin(40*t) }},
	{"bowl", func(t float64, _ *rand.Rand) float64 { return 8 * (2*t - 1) * (2*t - 1) }},
}

// geometric is a value between from and to, evenly spread over the orders of
// magnitude.
func geometric(r *rand.Rand, from, to float64) float64 {
	return from * math.Pow(to/from, r.Float64())
}

// randomErrorChain is a path of at most so many samples, 30 m apart, over one or
// two sources.
func randomErrorChain(r *rand.Rand, shape, most int) *errorChain {
	n := 20 + r.IntN(most-20)
	c := &errorChain{lengthM: 30 * float64(n+1)}
	sigmas := [2]float64{geometric(r, 0.2, 5), geometric(r, 0.2, 5)}
	lengths := [2]float64{geometric(r, 30, 5000), geometric(r, 30, 5000)}
	cut := n
	if r.IntN(3) == 0 {
		cut = r.IntN(n)
	}
	least := 5*r.Float64() - 0.5
	for i := range n {
		source := 0
		if i >= cut {
			source = 1
		}
		d := 30 * float64(i+1)
		c.distanceM = append(c.distanceM, d)
		c.marginM = append(c.marginM, sigmas[0]*(least+marginShapes[shape].at(d/c.lengthM, r)))
		c.errorM = append(c.errorM, sigmas[source])
		c.correlationM = append(c.correlationM, lengths[source])
		c.source = append(c.source, int16(source))
	}
	c.a = endError{sigmas[c.source[0]], c.source[0]}
	c.b = endError{sigmas[c.source[n-1]], c.source[n-1]}
	switch r.IntN(5) {
	case 0:
		c.a = endError{} // above sea level
	case 1:
		c.b = endError{}
	case 2:
		c.a = endError{geometric(r, 0.2, 5), 7} // a survey of its own
	}
	return c
}

// simulated draws the errors of the whole path n times, sample after sample from
// A to B, and counts: slow, and without any of the code that it is to check.
func (c *errorChain) simulated(r *rand.Rand, n int) float64 {
	var judged []int
	for i, m := range c.marginM {
		if !math.IsNaN(m) {
			judged = append(judged, i)
		}
	}
	// clears[i] is m_i + t eB - e_i + (1-t) eA built up in two passes.
	e, held := make([]float64, len(c.marginM)), 0
	r1, r2 := make([]float64, len(judged)), make([]float64, len(judged))
	from, source := 0.0, c.a.source
	for k, i := range judged {
		if c.source[i] == source && (k > 0 || c.a.errorM > 0) {
			r1[k] = math.Exp(-(c.distanceM[i] - from) / c.correlationM[i])
		}
		r2[k] = math.Sqrt(1 - r1[k]*r1[k])
		from, source = c.distanceM[i], c.source[i]
	}
	rB := 0.0
	if last := judged[len(judged)-1]; c.source[last] == c.b.source {
		rB = math.Exp(-(c.lengthM - c.distanceM[last]) / c.correlationM[last])
	}
	for range n {
		zA := r.NormFloat64()
		z := zA
		for k, i := range judged {
			z = r1[k]*z + r2[k]*r.NormFloat64()
			e[i] = c.errorM[i] * z
		}
		eA, eB := c.a.errorM*zA, c.b.errorM*(rB*z+math.Sqrt(1-rB*rB)*r.NormFloat64())
		fails := slices.ContainsFunc(judged, func(i int) bool {
			t := c.distanceM[i] / c.lengthM
			return c.marginM[i]+(1-t)*eA+t*eB-e[i] < 0
		})
		if !fails {
			held++
		}
	}
	return float64(held) / float64(n)
}

// mirrored is the path seen from B.
func (c *errorChain) mirrored() *errorChain {
	m := c.clone()
	for _, s := range [][]float64{m.distanceM, m.marginM, m.errorM, m.correlationM} {
		slices.Reverse(s)
	}
	slices.Reverse(m.source)
	for i := range m.distanceM {
		m.distanceM[i] = c.lengthM - m.distanceM[i]
	}
	m.a, m.b = c.b, c.a
	return m
}

func (c *errorChain) clone() *errorChain {
	m := *c
	m.distanceM, m.marginM = slices.Clone(c.distanceM), slices.Clone(c.marginM)
	m.errorM, m.correlationM = slices.Clone(c.errorM), slices.Clone(c.correlationM)
	m.source = slices.Clone(c.source)
	return &m
}
