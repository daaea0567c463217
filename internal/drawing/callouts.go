package drawing

import (
	"cmp"
	"math"
	"slices"

	"ridgehop/profile"
)

// maxCallouts is how many obstructions are named on the profile.
const maxCallouts = 4

// callout is a place on the profile with two lines of words above it.
type callout struct {
	atM, topM   float64 // distance from A; height above sea level
	k           float64
	first, then string
	severity    float64
	alarming    bool
	centre      float64 // of its box
	width       float64
}

// callouts marks the worst obstructions, or else the tightest place, each in a
// box in the row at top with a leader to the place, and all the obstructed
// stretches along the bottom.
func (s *sheet) callouts(chosen []callout, top float64) {
	for i := range chosen {
		chosen[i].centre = s.view.x(chosen[i].atM)
	}
	spread(chosen, s.view.plot.left+8, s.view.plot.right-8)
	for _, f := range chosen {
		s.leader(f, top+58)
	}
	for _, f := range chosen {
		s.callout(f, top)
	}
	s.stretches()
}

func (s *sheet) chooseCallouts() []callout {
	var all []callout
	for _, o := range grouped(s.a.Judgement.Obstructions) {
		all = append(all, newCallout(callout{
			atM: o.PeakAtM, topM: o.TopM, k: o.K, severity: o.ShortM, alarming: true,
			first: s.placeAt(o.PeakAtM, o.K), then: atLeastM(o.ShortM) + " short",
		}))
	}
	slices.SortStableFunc(all, func(p, q callout) int { return cmp.Compare(q.severity, p.severity) })
	all = fitting(all[:min(len(all), maxCallouts)], s.view.plot.width()-16)
	if len(all) > 0 {
		slices.SortStableFunc(all, func(p, q callout) int { return cmp.Compare(p.atM, q.atM) })
		return all
	}
	c := tightest(s.a.Judgement.Clearance)
	if math.IsNaN(c.MinRatio) {
		return nil
	}
	i := s.sampleAt(c.AtM)
	return []callout{newCallout(callout{
		atM: c.AtM, topM: s.view.top[i] - s.view.bulge(c.AtM), k: c.K,
		first: "tightest: " + s.placeAt(c.AtM, c.K), then: atMostM(c.ClearanceM) + ", " + ratio(c.MinRatio) + " free",
	})}
}

// placeAt names a distance, and the k-factor unless it is the one drawn.
func (s *sheet) placeAt(d, k float64) string {
	if k == s.view.drawn.K {
		return distance(d)
	}
	return distance(d) + ", " + kFactor(k)
}

func newCallout(f callout) callout {
	look := calloutFace(f)
	f.width = max(textWidth(f.first, look), textWidth(f.then, look)) + 20
	return f
}

func calloutFace(f callout) face {
	if f.alarming {
		return face{size: 20, bold: true, fill: paper, anchor: atMiddle}
	}
	return face{size: 20, bold: true, anchor: atMiddle}
}

// fitting are as many of the callouts, from the first, as find room side by side.
func fitting(callouts []callout, room float64) []callout {
	for i, f := range callouts {
		if room -= f.width + calloutGap; room < -calloutGap {
			return callouts[:i]
		}
	}
	return callouts
}

// grouped keeps, of obstructions that overlap because several criteria meet
// them, the one that misses most.
func grouped(all []profile.Obstruction) []profile.Obstruction {
	var out []profile.Obstruction
	end := math.Inf(-1)
	for _, o := range byBeginning(all) {
		if o.FromM > end {
			out, end = append(out, o), o.ToM
			continue
		}
		end = max(end, o.ToM)
		if o.ShortM > out[len(out)-1].ShortM {
			out[len(out)-1] = o
		}
	}
	return out
}

// byBeginning sorts obstructions along the path.
func byBeginning(all []profile.Obstruction) []profile.Obstruction {
	return slices.SortedStableFunc(slices.Values(all), func(p, q profile.Obstruction) int { return cmp.Compare(p.FromM, q.FromM) })
}

// sampleAt is the sample at a distance that is one of the profile's: the nearest,
// since a kept profile's are rounded and the next may be the foot of a wall.
func (s *sheet) sampleAt(d float64) int {
	at := s.a.Profile.DistanceM
	i, _ := slices.BinarySearch(at, d)
	if i == len(at) || i > 0 && d-at[i-1] < at[i]-d {
		return i - 1
	}
	return i
}

const calloutGap = 10.0

// spread places boxes above their places, given from left to right, and pushes
// apart those that would overlap.
func spread(callouts []callout, left, right float64) {
	edge := left
	for i := range callouts {
		f := &callouts[i]
		f.centre = max(f.centre, edge+f.width/2)
		edge = f.centre + f.width/2 + calloutGap
	}
	edge = right
	for i := len(callouts) - 1; i >= 0; i-- {
		f := &callouts[i]
		f.centre = min(f.centre, edge-f.width/2)
		edge = f.centre - f.width/2 - calloutGap
	}
}
