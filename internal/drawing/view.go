package drawing

import (
	"math"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

// box is a part of the sheet.
type box struct{ left, right, top, bottom float64 }

func (b box) width() float64  { return b.right - b.left }
func (b box) height() float64 { return b.bottom - b.top }

// view is the profile as it is drawn: heights over an earth bent for one
// k-factor, so that the line between the antennas is straight.
//
// Heights on the view are metres above the straight chord that joins sea level
// below the two ends: a height above sea level plus the bulge there.
type view struct {
	a       *assess.Assessment
	lengthM float64
	plot    box
	// drawn is the clearance whose k bends the earth, second another one at
	// another k that is shown beside it; second.K is 0 for none.
	drawn, second profile.Clearance
	ground        []float64 // terrain on the view; NaN is a void
	top           []float64 // terrain and cover; the same slice where there is no cover
	covered       bool
	ratio         []float64 // clearance over first Fresnel radius; NaN over voids and where none is judged
	bulgePer      float64   // bulge in metres over d1*d2
	f1Per         float64   // first Fresnel radius squared over d1*d2
	low, high     float64   // the heights at the bottom and top of the plot
	blank         bool      // no height is known at all
}

func newView(a *assess.Assessment) view {
	v := view{a: a, lengthM: a.Link.Path.LengthM}
	v.drawn = a.Judgement.Clearance[drawnIndex(a.Judgement.Clearance)]
	v.bend()
	v.low, v.high = v.heights()
	v.chooseSecond()
	pad := 0.04 * (v.high - v.low)
	v.low, v.high = v.low-pad, v.high+pad
	return v
}

// drawnIndex is the first clearance that asks for a part of the zone.
func drawnIndex(all []profile.Clearance) int {
	for i, c := range all {
		if c.F1Fraction > 0 {
			return i
		}
	}
	return 0
}

// bend puts terrain, cover and clearance on the view.
func (v *view) bend() {
	s := profile.NewSamples(&v.a.Link, &v.a.Profile, v.drawn.K)
	n := len(s.DistanceM)
	widest := n / 2
	if w := s.DistanceM[widest] * (v.lengthM - s.DistanceM[widest]); w > 0 {
		v.bulgePer, v.f1Per = s.BulgeM[widest]/w, s.F1M[widest]*s.F1M[widest]/w
	}
	v.ground, v.ratio = make([]float64, n), make([]float64, n)
	v.top = v.ground
	for i, cover := range s.CoverM {
		if cover > 0 && !math.IsNaN(s.GroundM[i]) {
			v.covered, v.top = true, make([]float64, n)
			break
		}
	}
	for i := range n {
		v.ground[i] = s.GroundM[i] + s.BulgeM[i]
		if v.covered {
			v.top[i] = v.ground[i] + s.CoverM[i]
		}
		v.ratio[i] = (s.LineM[i] - v.top[i]) / s.F1M[i]
	}
	first, last := v.judged()
	for i := range n {
		if i < first || i > last {
			v.ratio[i] = math.NaN()
		}
	}
}

// chooseSecond takes another k on board if it can be told from the first and
// does not flatten the picture: the tightest of the rest.
func (v *view) chooseSecond() {
	var rest []profile.Clearance
	for _, c := range v.a.Judgement.Clearance {
		if math.Abs(c.K-v.drawn.K) > 0.01*v.drawn.K {
			rest = append(rest, c)
		}
	}
	if len(rest) == 0 || v.a.Judgement.VoidShare == 1 {
		return // no ground to draw another time
	}
	second := tightest(rest)
	shift := v.bulge(v.lengthM/2) * math.Abs(v.drawn.K/second.K-1)
	span := v.high - v.low
	if shift < 0.012*span || shift > 0.6*span {
		return
	}
	v.second = second
	if second.K < v.drawn.K {
		v.high += shift
	} else {
		v.low -= shift
	}
}

// known says whether both antennas have a height, so that there is a line.
func (v *view) known() bool {
	return !math.IsNaN(v.a.Link.AntennaAM) && !math.IsNaN(v.a.Link.AntennaBM)
}

func (v *view) bulge(d float64) float64 { return v.bulgePer * max(0, d*(v.lengthM-d)) }

// bulgeAt is the bulge for another k.
func (v *view) bulgeAt(d, k float64) float64 { return v.bulge(d) * v.drawn.K / k }

func (v *view) f1(d float64) float64 { return math.Sqrt(v.f1Per * max(0, d*(v.lengthM-d))) }

// lineAt is the height of the line between the antennas.
func (v *view) lineAt(d float64) float64 {
	return v.a.Link.AntennaAM + (v.a.Link.AntennaBM-v.a.Link.AntennaAM)*d/v.lengthM
}

func (v *view) x(d float64) float64 { return v.plot.left + d/v.lengthM*v.plot.width() }

func (v *view) y(height float64) float64 {
	return v.plot.bottom - (height-v.low)/(v.high-v.low)*v.plot.height()
}
