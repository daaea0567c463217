package profile

// Cover is what a caller says of trees and buildings.
type Cover struct {
	// StatedM is the least height of cover above bare earth, in metres. It
	// counts only where no surface model speaks, which holds it already.
	StatedM float64
	// GrowthM is by how much trees will be higher than the data shows, in
	// metres.
	GrowthM float64
}

// growsFromM is from which height above bare earth what a surface shows is
// taken for trees that grow, and not for the difference between two models.
// Common practice, no source.
const growsFromM = 1.0

// AddCover counts what the caller says on every sample between the ends. An
// antenna stands above what covers its own place, so the ends keep what they
// have. Growth is counted wherever trees may be: on the canopy, on stated
// cover, on what a surface shows above bare earth, and on a surface alone, of
// which nobody knows what grows there. Buildings do not grow.
func (p *Profile) AddCover(c Cover) {
	if c.StatedM <= 0 && c.GrowthM <= 0 {
		return
	}
	n := len(p.GroundM)
	if len(p.CoverM) == 0 {
		p.CoverM = resized(p.CoverM, n)
		clear(p.CoverM)
	}
	added := 0.0 // at the sample before
	for i := range n {
		more := 0.0
		if i > 0 && i < n-1 {
			cover := p.covered(i, c)
			more, p.CoverM[i] = cover-p.CoverM[i], cover
		}
		// Where both ends of a stretch rise alike it runs as before, only higher;
		// otherwise, or where cover of its own dips between them, no lower than
		// straight.
		if i > 0 && len(p.BendPerM) > 0 && (more != added || c.StatedM > 0 && p.hasCover(i-1) && p.hasCover(i)) {
			p.BendPerM[i-1] = max(0, p.BendPerM[i-1])
		}
		added = more
	}
}

func (p *Profile) covered(i int, c Cover) float64 {
	cover, kind := p.CoverM[i], p.coverKind(i)
	switch kind {
	case KindBuildings:
		return max(cover, c.StatedM+growth(c.StatedM, c.GrowthM))
	case KindSurface:
		if len(p.CoverIndex) > 0 && p.CoverIndex[i] >= 0 && cover < growsFromM {
			return cover
		}
		return cover + c.GrowthM
	case KindGround, KindCanopy, KindProfile, KindUnstated:
	}
	cover = max(cover, c.StatedM)
	if kind == KindUnstated {
		return cover + c.GrowthM
	}
	return cover + growth(cover, c.GrowthM)
}

// growth is that of cover which is there at all.
func growth(coverM, growthM float64) float64 {
	if coverM < growsFromM {
		return 0
	}
	return growthM
}

// coverKind is the kind of the source that says what stands at sample i: that
// of the cover, or that of the ground where its heights may hold the cover.
func (p *Profile) coverKind(i int) Kind {
	if len(p.CoverIndex) > 0 && p.CoverIndex[i] >= 0 {
		kind := p.Sources[p.CoverIndex[i]].Kind
		if kind == KindUnstated {
			return KindSurface // over bare earth it speaks for what stands there
		}
		return kind
	}
	if s := p.SourceIndex[i]; s >= 0 {
		return p.Sources[s].Kind
	}
	return KindGround
}

// hasCover is whether a source gives cover at sample i.
func (p *Profile) hasCover(i int) bool { return len(p.CoverIndex) > 0 && p.CoverIndex[i] >= 0 }
