package profile

import (
	"math"
	"math/rand/v2"
)

// normalCDF is the probability that a standard normal value is at most x, to
// about 1e-15 relative where x > -1 and 1e-13 in the tail, as math.Erfc has it.
// Source: Abramowitz and Stegun, Handbook of Mathematical Functions, 26.2.29.
func normalCDF(x float64) float64 { return math.Erfc(-x/math.Sqrt2) / 2 }

// normalQuantile is the inverse of normalCDF, for 0 < p < 1.
func normalQuantile(p float64) float64 { return -math.Sqrt2 * math.Erfcinv(2*p) }

// The tables replace normalCDF and normalQuantile where they are asked for
// thousands of times. Linear between entries, h apart, they miss by at most
// h²/8 of the second derivative: 1e-5 for the probability, and 1e-3 for the
// quantile between tailShare and 1 - tailShare; outside it is exact.
const (
	cdfFrom, cdfTo  = -8, 6
	cdfPerUnit      = 64
	quantileEntries = 1024
	tailShare       = 8.0 / quantileEntries
	leastShare      = 1e-12
	// strata is into how many equally likely parts a draw divides each normal
	// value; the midpoints stand for them.
	strataBits = 7
	strata     = 1 << strataBits
)

type normalTables struct {
	below    [(cdfTo-cdfFrom)*cdfPerUnit + 2]float64
	quantile [quantileEntries + 2]float64
	stratum  [strata]float64 // normalQuantile of the midpoints
	rotation [rotations]uint64
}

func newNormalTables() *normalTables {
	n := &normalTables{}
	for i := range n.below {
		n.below[i] = normalCDF(cdfFrom + float64(i)/cdfPerUnit)
	}
	for i := 1; i < quantileEntries; i++ {
		n.quantile[i] = normalQuantile(float64(i) / quantileEntries)
	}
	for i := range n.stratum {
		n.stratum[i] = normalQuantile((float64(i) + 0.5) / strata)
	}
	n.rotation = primeRotations()
	return n
}

// cdf is normalCDF by table.
func (n *normalTables) cdf(x float64) float64 {
	if x >= cdfTo {
		return 1
	}
	if !(x > cdfFrom) {
		return 0
	}
	f := (x - cdfFrom) * cdfPerUnit
	i := int(f)
	return n.below[i] + (f-float64(i))*(n.below[i+1]-n.below[i])
}

// at is normalQuantile by table.
func (n *normalTables) at(p float64) float64 {
	if p < tailShare || p > 1-tailShare {
		return normalQuantile(min(max(p, leastShare), 1-leastShare))
	}
	f := p * quantileEntries
	i := int(f)
	return n.quantile[i] + (f-float64(i))*(n.quantile[i+1]-n.quantile[i])
}

// rotations is how many coordinates of a draw have a rotation of their own.
const rotations = 512

// primeRotations are the fractions of the square roots of the primes, as shares
// of 2^64: the sequence of multiples of such fractions fills the unit cube
// evenly. Source: R. D. Richtmyer, "The evaluation of definite integrals, and a
// quasi-Monte-Carlo method based on the properties of algebraic numbers", Los
// Alamos report LA-1342, 1951 (from memory).
func primeRotations() (r [rotations]uint64) {
	n := 0
	for p := 2; n < rotations; p++ {
		if !isPrime(p) {
			continue
		}
		_, fraction := math.Modf(math.Sqrt(float64(p)))
		r[n] = uint64(fraction * (1 << 63) * 2)
		n++
	}
	return r
}

func isPrime(p int) bool {
	for d := 2; d*d <= p; d++ {
		if p%d == 0 {
			return false
		}
	}
	return true
}

const (
	// So many draws have values of their own, and so many orders are shuffled.
	fieldBits, shuffleBits = 10, 3
	// golden is 2^32 over the golden ratio: its multiples stay far apart. Source:
	// D. E. Knuth, The Art of Computer Programming, volume 3, 6.4 (from memory).
	golden = 2654435769
)

// fieldNormals are the normal values of an error field: in each coordinate the
// same, the midpoints of fieldDraws equally likely parts, in another order. That
// is Latin hypercube sampling. Source: M. D. McKay, R. J. Beckman and W. J.
// Conover, Technometrics 21 (1979) 239-245 (from memory).
type fieldNormals struct {
	// shuffled has the first values again at the end.
	shuffled [1 << shuffleBits][fieldDraws + blockDraws]float64
}

func newFieldNormals() *fieldNormals {
	f := &fieldNormals{}
	var inOrder [fieldDraws]float64
	for i := range inOrder {
		inOrder[i] = normalQuantile((float64(i) + 0.5) / fieldDraws)
	}
	for k := range f.shuffled {
		s := f.shuffled[k][:fieldDraws]
		copy(s, inOrder[:])
		r := rand.New(rand.NewPCG(uint64(k), 0))
		r.Shuffle(fieldDraws, func(i, j int) { s[i], s[j] = s[j], s[i] })
		copy(f.shuffled[k][fieldDraws:], s)
	}
	return f
}

// block is the values of one coordinate for the draws from from on: one of the
// shuffled orders, from a place of its own on.
func (f *fieldNormals) block(coordinate int32, from int) *drawBlock {
	place := uint32(coordinate) * golden >> (32 - shuffleBits - fieldBits)
	at := (int(place) + from) % fieldDraws
	return (*drawBlock)(f.shuffled[place>>fieldBits][at:])
}
