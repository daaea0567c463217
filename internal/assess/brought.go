package assess

import (
	"math"

	"ridgehop/profile"
)

// broughtStepM is the widest gap left between the points of a profile that
// the caller brings, where the request states none: the pixel of the public
// one-arc-second models. The terrain between two points is taken as straight;
// the points in between let the earth's bulge count there too.
const broughtStepM = 30.0

// broughtCorrelationM is how far errors of a caller's heights reach, where the
// caller says how large they are: surveyed points are measured one by one, but
// from few instrument stations. Common practice, no source.
const broughtCorrelationM = 100.0

// broughtProfile fills into with the caller's points, stretched to lengthM, and
// points between them.
func broughtProfile(points []Point, lengthM, spacingM float64, into *profile.Profile) error {
	step := broughtStepM
	if spacingM > 0 {
		step = spacingM
	}
	step = min(step, lengthM/profile.MinIntervals)
	last := len(points) - 1
	stretch := lengthM / points[last].DistanceM
	count := 1
	for i := range last {
		count += pieces((points[i+1].DistanceM-points[i].DistanceM)*stretch, step)
		if count > profile.MaxSamples {
			return invalid("/spacing_m", "makes more than %d samples of this profile; a larger one fits", profile.MaxSamples)
		}
	}
	into.Resize(count)
	into.CoverM = make([]float64, count)
	into.SpacingM, into.PixelM = 0, 0
	at := 0
	for i := range last {
		at = between(points[i], points[i+1], stretch, step, into, at)
	}
	put(into, at, lengthM, points[last].GroundM, points[last].CoverM)
	into.Sources = append(into.Sources, profile.Source{Name: "profile", Version: "as given", Kind: profile.KindProfile, Samples: count})
	return nil
}

func pieces(gap, step float64) int { return max(1, int(math.Ceil(gap/step-1e-9))) }

// between puts p and the points up to q, q excluded, and returns the next free
// index.
func between(p, q Point, stretch, step float64, into *profile.Profile, at int) int {
	gap := (q.DistanceM - p.DistanceM) * stretch
	n := pieces(gap, step)
	into.SpacingM = max(into.SpacingM, gap/float64(n))
	for k := range n {
		f := float64(k) / float64(n)
		put(into, at, p.DistanceM*stretch+f*gap, p.GroundM+f*(q.GroundM-p.GroundM), p.CoverM+f*(q.CoverM-p.CoverM))
		at++
	}
	return at
}

func put(into *profile.Profile, at int, distanceM, groundM, coverM float64) {
	into.DistanceM[at], into.GroundM[at], into.CoverM[at] = distanceM, groundM, coverM
	into.SourceIndex[at] = 0
}
