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
	Criteria             []Criterion // 1 to 8
	RaiseCapM            float64     // 0 is DefaultRaiseCapM
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
}

// Workspace is memory that a worker keeps from one assessment to the next. Its
// zero value is ready. One goroutine uses it at a time.
type Workspace struct {
	distanceKM, surfaceM, needs, behind []float64
	short                               []shortSample
}

// ErrLink means a link that Assess cannot judge: the caller should have
// checked it.
var ErrLink = errors.New("not a link that can be judged")

// Assess judges the link over the profile. The result refers to neither. The
// error is ErrLink with what is wrong.
func Assess(link *Link, p *Profile, ws *Workspace) (Assessment, error) {
	if err := link.check(p); err != nil {
		return Assessment{}, err
	}
	capM := link.RaiseCapM
	if capM == 0 {
		capM = DefaultRaiseCapM
	}
	voids := p.Voids()
	out := Assessment{VoidShare: float64(voids) / float64(len(p.GroundM))}
	if math.IsNaN(link.AntennaAM) || math.IsNaN(link.AntennaBM) {
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
	if voids > 0 {
		out.Raise = Raise{AM: math.NaN(), BM: math.NaN(), BothM: math.NaN(), CapM: capM}
		out.Diffraction = unknownDiffraction(link.Criteria, nil)
		return out, nil
	}
	out.Raise = g.raise(link.Criteria, out.Clearance, ws, capM)
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
	if voids := p.Voids(); voids > 0 {
		a.Reasons = append(a.Reasons, voidReason(p, voids))
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
