package profile

import (
	"errors"
	"fmt"
	"math"
)

// Link is what is judged: a path, the antennas at its ends, the frequency and
// the criteria.
type Link struct {
	Path         Path
	FrequencyGHz float64 // 0.1 to 100
	Polarisation Polarisation
	// AntennaAM and AntennaBM are the antenna heights above mean sea level in
	// metres; NaN where the ground under an antenna is void.
	AntennaAM, AntennaBM float64
	// HeightAFrom and HeightBFrom say what they were counted from.
	HeightAFrom, HeightBFrom HeightFrom
	Criteria                 []Criterion // 1 to 8
	RaiseCapM                float64     // 0 is DefaultRaiseCapM
	// WithoutExtraHeight leaves Assessment.ExtraHeight unknown.
	WithoutExtraHeight bool
}

// Assessment is the judgement of one link.
type Assessment struct {
	Verdict      Verdict
	Reasons      []Reason
	TiltADeg     float64 // elevation of the far antenna seen from A at the median k, up positive
	TiltBDeg     float64
	Clearance    []Clearance
	Obstructions []Obstruction
	Raise        Raise
	Diffraction  []Diffraction
	VoidShare    float64
	// Confidence is the probability, 0 to 1, that every criterion holds, given
	// the vertical errors of what the heights rest on; NaN where it is not
	// known, over voids.
	Confidence float64
	// ExtraHeight is the least extra antenna height that makes it
	// ClearConfidence: zero where it is already, NaN where none up to the cap
	// of Raise does or nothing is known.
	ExtraHeight ExtraHeight
}

// Workspace is memory that a worker keeps from one assessment to the next. Its
// zero value is ready. One goroutine uses it at a time.
type Workspace struct {
	distanceKM, surfaceM, needs, behind []float64
	short                               []shortSample
	reaches                             []reach
	near                                []int
	chain                               judgedChain
	places                              []place
}

// ErrLink means a link that Assess cannot judge: the caller should have
// checked it.
var ErrLink = errors.New("not a link that can be judged")

// Assess judges the link over the profile. The result refers to neither. The
// error is ErrLink with what is wrong.
//
// A profile with bends, that of the exact mode, is first given, in place, the few
// samples more at which the extremes lie: the least clearance over F1 at each
// criterion, what a missed one asks of each raise, and whatever misses one
// unseen between two samples. All that follows, and whoever reads the profile
// later, works on samples. Nothing is added where they are there already.
// Samples of an antenna's own stretch are not judged; if no other is left, the
// verdict is Unknown.
func Assess(link *Link, p *Profile, ws *Workspace) (Assessment, error) {
	if err := link.check(p); err != nil {
		return Assessment{}, err
	}
	capM := link.RaiseCapM
	if capM == 0 {
		capM = DefaultRaiseCapM
	}
	placed := !math.IsNaN(link.AntennaAM) && !math.IsNaN(link.AntennaBM)
	voids := p.Voids()
	if len(p.BendPerM) != 0 && placed {
		refine(link, p, ws, voids > 0)
	}
	nan := math.NaN()
	out := Assessment{VoidShare: p.VoidShare(), Confidence: nan, ExtraHeight: ExtraHeight{AM: nan, BM: nan, BothM: nan}}
	if !placed {
		return out.groundless(link, p, capM), nil
	}
	g := newGeometry(link, p)
	out.TiltADeg, out.TiltBDeg = g.tilts(link)
	out.Clearance = g.clearances(link.Criteria, make([]Clearance, 0, len(link.Criteria)))
	g.settle(link.Criteria, out.Clearance, voids > 0)
	for _, c := range out.Clearance {
		if short(c.MinRatio, c.F1Fraction) {
			out.Obstructions = g.obstructions(c, out.Obstructions)
		}
	}
	out.Verdict, out.Reasons = judge(out.Clearance, p, voids)
	out.Raise = Raise{AM: nan, BM: nan, BothM: nan, CapM: capM}
	if voids > 0 {
		out.Diffraction = unknownDiffraction(link.Criteria, nil)
		return out, nil
	}
	if g.first <= g.last {
		out.Raise = g.raise(link.Criteria, out.Clearance, ws, capM)
	}
	g.judgeConfidence(link, &out, ws)
	out.doubt()
	var err error
	out.Diffraction, err = g.diffraction(link, ws, make([]Diffraction, 0, len(link.Criteria)))
	if err != nil {
		return out, fmt.Errorf("%w: %w", ErrLink, err)
	}
	return out, nil
}

func (link *Link) check(p *Profile) error {
	n := len(p.DistanceM)
	switch {
	case n < 3:
		return fmt.Errorf("%w: %d samples; at least 3 are needed", ErrLink, n)
	case len(p.GroundM) != n || (len(p.CoverM) != 0 && len(p.CoverM) != n):
		return fmt.Errorf("%w: samples of unequal number", ErrLink)
	case len(p.BendPerM) != 0 && !p.bendsWhole(n):
		return fmt.Errorf("%w: bends or sources of another number than samples", ErrLink)
	case len(link.Criteria) == 0 || len(link.Criteria) > maxCriteria:
		return fmt.Errorf("%w: %d criteria; 1 to %d are judged", ErrLink, len(link.Criteria), maxCriteria)
	case !(link.Path.LengthM >= MinLengthM && link.Path.LengthM <= MaxLengthM):
		return fmt.Errorf("%w: path of %g m", ErrLink, link.Path.LengthM)
	case p.DistanceM[0] != 0 || p.DistanceM[n-1] != link.Path.LengthM:
		return fmt.Errorf("%w: samples from %g to %g m on a path of %g m", ErrLink, p.DistanceM[0], p.DistanceM[n-1], link.Path.LengthM)
	case !(link.FrequencyGHz > 0):
		return fmt.Errorf("%w: frequency of %g GHz", ErrLink, link.FrequencyGHz)
	}
	for _, c := range link.Criteria {
		if !(c.K > 0 && c.F1Fraction >= 0) {
			return fmt.Errorf("%w: criterion of %g F1 at k %g", ErrLink, c.F1Fraction, c.K)
		}
	}
	return nil
}

// groundless is the answer where an antenna has no ground to stand on.
func (a Assessment) groundless(link *Link, p *Profile, capM float64) Assessment {
	nan := math.NaN()
	a.Verdict = Unknown
	a.TiltADeg, a.TiltBDeg = nan, nan
	a.Raise = Raise{AM: nan, BM: nan, BothM: nan, CapM: capM}
	a.Diffraction = unknownDiffraction(link.Criteria, nil)
	for _, c := range link.Criteria {
		a.Clearance = append(a.Clearance, Clearance{K: c.K, F1Fraction: c.F1Fraction, MinRatio: nan, AtM: nan, ClearanceM: nan, F1M: nan})
	}
	if math.IsNaN(link.AntennaAM) {
		a.Reasons = append(a.Reasons, Reason{Code: ReasonVoidAtEnd, End: "a"})
	}
	if math.IsNaN(link.AntennaBM) {
		a.Reasons = append(a.Reasons, Reason{Code: ReasonVoidAtEnd, End: "b"})
	}
	if p.Voids() > 0 {
		a.Reasons = append(a.Reasons, voidReason(p))
	}
	return a
}

// tilts are the elevation angles of the far antenna seen from each end.
func (g *geometry) tilts(link *Link) (aDeg, bDeg float64) {
	rise := link.AntennaBM - link.AntennaAM
	return ElevationDeg(rise, g.lengthM), ElevationDeg(-rise, g.lengthM)
}

// ElevationDeg is the angle in degrees, up positive, at which something is seen
// that lies riseM higher at a distance, both in metres, over the earth of the
// median k:
//
//	atan(rise/d - d/(2 k a))
//
// The last term is how far the earth falls away, which is what makes both
// tilts of a level long path point down.
func ElevationDeg(riseM, distanceM float64) float64 {
	return math.Atan(riseM/distanceM-distanceM*bulgeFactor(MedianK)) * 180 / math.Pi
}
