package p526

import (
	"cmp"
	"math"

	"ridgehop/internal/itu/p525"
	"ridgehop/internal/itu/validity"
)

// leastEdgeDB is the loss each of two similar edges must exceed for eq (40).
const leastEdgeDB = 15

// DoubleEdge is a path with two isolated obstacles, the three sections being
// transmitter to first edge, first to second edge, second edge to receiver.
type DoubleEdge struct {
	// FrequencyGHz is the frequency in GHz.
	FrequencyGHz float64
	// FirstKM, MiddleKM and LastKM are the lengths of the three sections in km.
	FirstKM, MiddleKM, LastKM float64
	// FirstM is the height in m of the first edge above the line from the transmitter
	// to the top of the second edge; SecondM that of the second edge above the line from
	// the top of the first edge to the receiver.
	FirstM, SecondM float64
}

// DoubleEdgeLoss is the loss of two edges, in dB.
type DoubleEdgeLoss struct {
	// FirstDB and SecondDB are the losses of the two edges.
	FirstDB, SecondDB float64
	// CorrectionDB corrects for the distance between them; it is added.
	CorrectionDB float64
}

// LossDB returns the loss of both edges in dB.
func (l DoubleEdgeLoss) LossDB() float64 { return l.FirstDB + l.SecondDB + l.CorrectionDB }

// Loss returns the loss of two similar edges. The error wraps a
// validity.RangeError when frequency or a section is not positive, or when one of the
// edges loses 15 dB or less, where the method does not hold.
//
// Source: P.526-16 section 4.3, eqs (39) and (40).
func (e DoubleEdge) Loss() (DoubleEdgeLoss, error) {
	a, b, c := e.FirstKM, e.MiddleKM, e.LastKM
	if err := checkSections(e.FrequencyGHz, a, b, c); err != nil {
		return DoubleEdgeLoss{}, err
	}
	loss := DoubleEdgeLoss{
		FirstDB:      KnifeEdgeDB(Nu(e.FrequencyGHz, e.FirstM, a, b)),
		SecondDB:     KnifeEdgeDB(Nu(e.FrequencyGHz, e.SecondM, b, c)),
		CorrectionDB: 10 * math.Log10((a+b)*(b+c)/(b*(a+b+c))),
	}
	err := cmp.Or(
		validity.Above("loss of the first edge", loss.FirstDB, leastEdgeDB, "dB"),
		validity.Above("loss of the second edge", loss.SecondDB, leastEdgeDB, "dB"),
	)
	if err != nil {
		return DoubleEdgeLoss{}, err
	}
	return loss, nil
}

// DominantEdge is a path with two isolated obstacles of which the main one rises
// much more than the other into the first Fresnel zone. The sections run from the
// end nearer to the main edge.
type DominantEdge struct {
	// FrequencyGHz is the frequency in GHz.
	FrequencyGHz float64
	// FirstKM, MiddleKM and LastKM are the lengths of the three sections in km: end to
	// main edge, main to other edge, other edge to far end.
	FirstKM, MiddleKM, LastKM float64
	// MainM and OtherM are the heights in m of the edges above the straight line
	// between the ends.
	MainM, OtherM float64
	// OtherOverMainM is the height in m of the other edge above the line from the top
	// of the main edge to the far end.
	OtherOverMainM float64
}

// Loss returns the loss: SecondDB is that of the other edge seen from the main
// edge, and CorrectionDB is the negative of the Recommendation's Tc. The error wraps
// a validity.RangeError when frequency or a section is not positive, or the main
// edge is not above the line with the larger diffraction parameter of the two.
//
// Source: P.526-16 section 4.3, eqs (41) to (43).
func (e DominantEdge) Loss() (DoubleEdgeLoss, error) {
	a, b, c := e.FirstKM, e.MiddleKM, e.LastKM
	if err := checkSections(e.FrequencyGHz, a, b, c); err != nil {
		return DoubleEdgeLoss{}, err
	}
	scale := math.Sqrt(0.002 * (a + b + c) / p525.Wavelength(e.FrequencyGHz))
	p := e.MainM * scale / math.Sqrt(a*(b+c))
	q := e.OtherM * scale / math.Sqrt((a+b)*c)
	if err := cmp.Or(
		validity.Above("diffraction parameter of the main edge", p, 0, ""),
		validity.Between("diffraction parameter of the other edge", q, 0, p, ""),
	); err != nil {
		return DoubleEdgeLoss{}, err
	}
	alpha := math.Atan(math.Sqrt(b * (a + b + c) / (a * c)))
	tc := (12 - 20*math.Log10(2/(1-alpha/math.Pi))) * math.Pow(q/p, 2*p)
	return DoubleEdgeLoss{
		FirstDB:      KnifeEdgeDB(p),
		SecondDB:     KnifeEdgeDB(Nu(e.FrequencyGHz, e.OtherOverMainM, b, c)),
		CorrectionDB: -tc,
	}, nil
}

func checkSections(frequencyGHz, a, b, c float64) error {
	return cmp.Or(
		validity.Above("frequency", frequencyGHz, 0, "GHz"),
		validity.Above("length of the first section", a, 0, "km"),
		validity.Above("length of the middle section", b, 0, "km"),
		validity.Above("length of the last section", c, 0, "km"),
	)
}
