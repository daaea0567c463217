package profile

// endM is how near to an antenna the path is judged, in metres, where nothing
// is the antenna's own. At the antenna itself the Fresnel zone has no width.
const endM = 1e-3

// stepM is the least step between samples that is worth having, in metres.
const stepM = 1e-6

// judged is the range of samples, both included, that are judged: those
// between the ends, less what the antennas themselves stand on. There is none
// if first > last. Half a step absorbs the rounding of an own stretch that ends
// at a sample.
func (p *Profile) judged(lengthM float64) (first, last int) {
	first, last = 1, len(p.DistanceM)-2
	for p.OwnAM > 0 && first <= last && p.DistanceM[first] <= p.OwnAM+stepM/2 {
		first++
	}
	for p.OwnBM > 0 && last >= first && p.DistanceM[last] >= lengthM-p.OwnBM-stepM/2 {
		last--
	}
	return first, last
}

// open is the part of the path that is judged, in metres from A. There is none
// unless fromM < toM.
func (p *Profile) open(lengthM float64) (fromM, toM float64) {
	fromM, toM = endM, lengthM-endM
	if p.OwnAM > 0 {
		fromM = max(fromM, p.OwnAM+stepM)
	}
	if p.OwnBM > 0 {
		toM = min(toM, lengthM-p.OwnBM-stepM)
	}
	return fromM, toM
}
