package profile

import (
	"math"
	"slices"
)

// Thin reduces, in place, a profile of more than most samples to at most that
// many, for keeping and drawing after it was judged. most below 2 counts as 2.
// A profile that is small enough is left as it is.
//
// It keeps the ends, then the samples nearest to the distances of keep, in
// metres from A and NaN for none, such as where the clearance is least; then in
// up to half of what room is left the first and last sample of each run of
// voids, from A on; then of every stretch of equal length the highest sample
// over the straight line between the ends, on the earth of the median k. So
// hollows go, and tops stay. BendPerM is emptied, since what lies between the
// samples left is no longer known; the samples of each source are counted anew,
// and SpacingM is the widest step. Not safe for concurrent use of p.
func Thin(p *Profile, most int, keep []float64) {
	n := len(p.DistanceM)
	if n <= max(most, 2) {
		return
	}
	t := thinning{p: p, kept: make([]bool, n), room: max(most, 2)}
	t.keep(0)
	t.keep(n - 1)
	for _, d := range keep {
		if !math.IsNaN(d) {
			t.keep(p.nearest(d))
		}
	}
	t.keepVoids()
	t.keepHighest()
	t.drop()
}

type thinning struct {
	p    *Profile
	kept []bool
	room int // how many more may be kept
}

func (t *thinning) keep(i int) {
	if t.room > 0 && !t.kept[i] {
		t.kept[i] = true
		t.room--
	}
}

// nearest is the sample nearest to a distance.
func (p *Profile) nearest(d float64) int {
	i, _ := slices.BinarySearch(p.DistanceM, d)
	if i == len(p.DistanceM) || i > 0 && d-p.DistanceM[i-1] < p.DistanceM[i]-d {
		return i - 1
	}
	return i
}

func (t *thinning) keepVoids() {
	least, h := t.room/2, t.p.GroundM
	void := func(i int) bool { return i >= 0 && i < len(h) && math.IsNaN(h[i]) }
	for i := range h {
		if t.room > least && void(i) && !(void(i-1) && void(i+1)) {
			t.keep(i)
		}
	}
}

// keepHighest keeps the highest of those not kept yet of as many stretches as
// there is room.
func (t *thinning) keepHighest() {
	stretches, lengthM := float64(t.room), t.p.DistanceM[len(t.p.DistanceM)-1]
	best, bestM, current := -1, 0.0, 0
	for i, d := range t.p.DistanceM {
		if stretch := int(d / lengthM * stretches); stretch != current {
			t.keepFound(best)
			best, current = -1, stretch
		}
		if t.kept[i] {
			continue
		}
		// Anything is higher than nothing, and known ground than a void.
		if m := t.heightM(i); best < 0 || m > bestM || math.IsNaN(bestM) && !math.IsNaN(m) {
			best, bestM = i, m
		}
	}
	t.keepFound(best)
}

func (t *thinning) keepFound(i int) {
	if i >= 0 {
		t.keep(i)
	}
}

// heightM is how high sample i lies over the straight line between the ends,
// with the bulge; that line is level where an end is void.
func (t *thinning) heightM(i int) float64 {
	g := geometry{p: t.p}
	last := len(t.p.DistanceM) - 1
	d, lengthM := t.p.DistanceM[i], t.p.DistanceM[last]
	rise := g.topM(last) - g.topM(0)
	if math.IsNaN(rise) {
		rise = 0
	}
	return g.topM(i) - rise*d/lengthM + d*(lengthM-d)*bulgeFactor(MedianK)
}

// drop takes out all that is not kept.
func (t *thinning) drop() {
	p := t.p
	p.DistanceM, p.GroundM, p.CoverM = chosen(p.DistanceM, t.kept), chosen(p.GroundM, t.kept), chosen(p.CoverM, t.kept)
	p.SourceIndex, p.CoverIndex = chosen(p.SourceIndex, t.kept), chosen(p.CoverIndex, t.kept)
	p.BendPerM = p.BendPerM[:0]
	p.SpacingM = p.widestM()
	if len(p.SourceIndex) != len(p.DistanceM) {
		return
	}
	for i := range p.Sources {
		p.Sources[i].Samples = 0
	}
	for i, ground := range p.SourceIndex {
		cover := int16(-1)
		if len(p.CoverIndex) != 0 {
			cover = p.CoverIndex[i]
		}
		p.count(ground, cover)
	}
}

// chosen drops from s, in place, what is not kept. Empty stays empty.
func chosen[T any](s []T, kept []bool) []T {
	out := s[:0]
	for i := range s {
		if kept[i] {
			out = append(out, s[i])
		}
	}
	return out
}
