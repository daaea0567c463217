package profile

import "slices"

// insert puts new samples, from A to B, into the profile, on its top as it is:
// what a quadratic is split into bends like the whole. SpacingM, that of the
// samples there are, is updated.
func (p *Profile) insert(places []place) {
	places = p.apart(places)
	if len(places) == 0 {
		return
	}
	// Where no widest step is split, the widest one stays.
	widest := slices.ContainsFunc(places, func(q place) bool {
		return p.DistanceM[q.after+1]-p.DistanceM[q.after] >= p.SpacingM
	})
	p.DistanceM = opened(p.DistanceM, places)
	p.GroundM = opened(p.GroundM, places)
	p.CoverM = opened(p.CoverM, places)
	p.BendPerM = opened(p.BendPerM, places)
	p.SourceIndex = opened(p.SourceIndex, places)
	p.CoverIndex = opened(p.CoverIndex, places)
	for k := range places {
		p.split(places, k)
	}
	if widest {
		p.SpacingM = p.widestM()
	}
}

// bendsWhole is true if what insert lengthens has n entries or none.
func (p *Profile) bendsWhole(n int) bool {
	return len(p.BendPerM) == n && (len(p.SourceIndex) == n || len(p.SourceIndex) == 0) &&
		(len(p.CoverIndex) == n || len(p.CoverIndex) == 0)
}

// apart drops in place what would come too close to a sample or to another
// place to be told from it.
func (p *Profile) apart(places []place) []place {
	const leastM = stepM / 2
	kept := places[:0]
	for _, q := range places {
		behindM := p.DistanceM[q.after]
		if n := len(kept); n > 0 {
			behindM = max(behindM, kept[n-1].atM)
		}
		if q.atM-behindM > leastM && p.DistanceM[q.after+1]-q.atM > leastM {
			kept = append(kept, q)
		}
	}
	return kept
}

// opened makes room in s for an entry at every place: that of places[k] comes to
// lie at places[k].after + 1 + k. Empty stays empty.
func opened[T any](s []T, places []place) []T {
	end := len(s)
	if end == 0 {
		return s
	}
	s = slices.Grow(s, len(places))[:end+len(places)]
	for k, q := range slices.Backward(places) {
		copy(s[q.after+2+k:], s[q.after+1:end])
		end = q.after + 1
	}
	return s
}

// split fills in the sample of one place, once all before it are there.
func (p *Profile) split(places []place, k int) {
	q := places[k]
	i := q.after + 1 + k
	right := i + 1 // the next sample that was there before
	for _, later := range places[k+1:] {
		if later.after != q.after {
			break
		}
		right++
	}
	before, after := q.atM-p.DistanceM[i-1], p.DistanceM[right]-q.atM
	share := before / (before + after)
	between := func(s []float64) float64 { return s[i-1] + (s[right]-s[i-1])*share }
	bendM := p.BendPerM[i-1] * before * after
	p.DistanceM[i], p.BendPerM[i] = q.atM, p.BendPerM[i-1]
	p.GroundM[i] = between(p.GroundM)
	if len(p.CoverM) != 0 {
		p.CoverM[i] = between(p.CoverM)
		if p.CoverM[i-1] > 0 && p.CoverM[right] > 0 {
			// What sinks below the ground is the ground's.
			coverM := max(0, p.CoverM[i]+bendM)
			bendM -= coverM - p.CoverM[i]
			p.CoverM[i] = coverM
		}
	}
	p.GroundM[i] += bendM
	p.credit(i)
}

// credit gives sample i the sources of the one before.
func (p *Profile) credit(i int) {
	ground, cover := int16(-1), int16(-1)
	if len(p.SourceIndex) != 0 {
		ground = p.SourceIndex[i-1]
		p.SourceIndex[i] = ground
	}
	if len(p.CoverIndex) != 0 {
		cover = p.CoverIndex[i-1]
		p.CoverIndex[i] = cover
	}
	p.count(ground, cover)
}

// count adds a sample to the sources that it rests on.
func (p *Profile) count(ground, cover int16) {
	if ground >= 0 && int(ground) < len(p.Sources) {
		p.Sources[ground].Samples++
	}
	if cover >= 0 && cover != ground && int(cover) < len(p.Sources) {
		p.Sources[cover].Samples++
	}
}

func (p *Profile) widestM() float64 {
	widest := 0.0
	for i := 1; i < len(p.DistanceM); i++ {
		if step := p.DistanceM[i] - p.DistanceM[i-1]; step > widest { // max takes four times as long
			widest = step
		}
	}
	return widest
}
