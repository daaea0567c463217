package p526

import "math"

// oneObstacleM is the largest spacing in m of consecutive profile points that count as
// one obstacle when the string touches both.
const oneObstacleM = 250

// CascadedCylinders is the result of the cascaded-cylinder method, losses in dB
// relative to free space.
type CascadedCylinders struct {
	// LossDB is the diffraction loss of the path: the sum of the three that follow.
	LossDB float64
	// CylinderDB is the sum over the obstacles, SubPathDB over the sections between them,
	// and SpreadingDB corrects for diffraction over several obstacles.
	CylinderDB, SubPathDB, SpreadingDB float64
	// Obstacles is the number of cylinders.
	Obstacles int
}

// CascadedCylinders returns the diffraction loss of the path when each obstacle
// is a cylinder fitted to the profile. The effective earth radius is in km and the
// frequency in GHz, both positive. It needs a profile with the detail of the ridges. A
// path that no obstacle blocks has the sub-path loss of its whole length, which is our
// reading.
//
// Confidence is low: no published example exists, and the fitting of the radius was
// written from memory, no source at hand. Use it to compare, and
// [GeneralPath.DeltaBullington] to decide.
//
// Source: P.526-16 section 4.4, Attachments 1 and 2.
func (g *GeneralPath) CascadedCylinders(effectiveRadiusKM, frequencyGHz float64) CascadedCylinders {
	p := stretchedString{
		distances: g.distances, heights: g.surface, txM: g.txM, rxM: g.rxM,
		diameterM: 2000 * effectiveRadiusKM, frequencyGHz: frequencyGHz,
	}
	var out CascadedCylinders
	last := len(p.distances) - 1
	// The spreading correction is -10 log10 of the product of second/(first+second),
	// times the sum of the first and all second distances, over the last second one.
	product, sum, second := 1.0, 0.0, 1.0
	before, x := 0, p.next(0)
	for x != last {
		y, z := p.obstacle(x)
		c := p.cylinder(before, x, y, z)
		out.Obstacles++
		out.CylinderDB += KnifeEdgeDB(c.nu()) + c.curvatureDB()
		out.SubPathDB += p.subPathDB(before, x)
		if out.Obstacles == 1 {
			sum = c.FirstKM
		}
		second = c.SecondKM
		product *= second / (c.FirstKM + second)
		sum += second
		before, x = y, z
	}
	out.SubPathDB += p.subPathDB(before, last)
	if out.Obstacles > 0 {
		out.SpreadingDB = -10 * math.Log10(product*sum/second)
	}
	out.LossDB = out.CylinderDB + out.SubPathDB + out.SpreadingDB
	return out
}

// stretchedString is a string stretched over a profile from antenna to antenna.
type stretchedString struct {
	distances, heights []float64
	txM, rxM           float64
	diameterM          float64 // of the effective earth
	frequencyGHz       float64
}

// at returns distance and height of a point in m; the ends are the antennas.
func (p stretchedString) at(i int) (distanceM, heightM float64) {
	switch i {
	case 0:
		return 0, p.txM
	case len(p.distances) - 1:
		return 1000 * p.distances[i], p.rxM
	}
	return 1000 * p.distances[i], p.heights[i]
}

// slope returns the elevation of point j seen from point i in radians, and their
// distance in m. The effective earth falls away between them.
func (p stretchedString) slope(i, j int) (radians, distanceM float64) {
	di, hi := p.at(i)
	dj, hj := p.at(j)
	distanceM = math.Abs(dj - di)
	return (hj-hi)/distanceM - distanceM/p.diameterM, distanceM
}

// next returns the point the string touches after point i: the one of highest elevation.
func (p stretchedString) next(i int) int {
	best, highest := i+1, math.Inf(-1)
	for j := i + 1; j < len(p.distances); j++ {
		if elevation, _ := p.slope(i, j); elevation > highest {
			best, highest = j, elevation
		}
	}
	return best
}

// obstacle returns the last point y of the obstacle that begins at point x, and the point
// z the string touches after it.
func (p stretchedString) obstacle(x int) (y, z int) {
	y, z = x, p.next(x)
	for z == y+1 && z != len(p.distances)-1 && 1000*(p.distances[z]-p.distances[y]) <= oneObstacleM {
		y, z = z, p.next(z)
	}
	return y, z
}

// cylinder fits a cylinder to the obstacle from x to y, between the points w and z that
// the string touches before and after it. An obstacle of several points has its vertex
// where the rays cross above it.
func (p stretchedString) cylinder(w, x, y, z int) RoundedObstacle {
	alphaW, first := p.slope(w, x)
	alphaZ, _ := p.slope(z, y)
	dw, hw := p.at(w)
	dz, hz := p.at(z)
	dx, vertex := p.at(x)
	dy, _ := p.at(y)
	length := dz - dw
	bend := 2 * length / p.diameterM
	theta := alphaW + alphaZ + bend
	if x != y {
		first = ((alphaZ+bend/2)*length + hz - hw) / theta
		if theta*p.diameterM/2 < dy-dx { // nearly straight: the crossing is ill defined
			first = (dx+dy)/2 - dw
		}
		vertex = hw + first*alphaW + first*first/p.diameterM
	}
	second := length - first
	c := RoundedObstacle{
		HeightM:      vertex + first*second/p.diameterM - (hw*second+hz*first)/length,
		FrequencyGHz: p.frequencyGHz, FirstKM: first / 1000, SecondKM: second / 1000,
	}
	radius := (dy - dx) / theta
	if x == y {
		radius = p.sampleRadius(x)
	}
	blunt := -math.Expm1(-4 * c.nu())
	c.RadiusM = max(radius*blunt*blunt*blunt, 0)
	return c
}

// sampleRadius is the radius in m of an obstacle of one point, from the slopes down to
// its neighbours; 0 where they do not form a crest.
func (p stretchedString) sampleRadius(i int) float64 {
	before, d1 := p.slope(i, i-1)
	after, d2 := p.slope(i, i+1)
	turn := -before - after
	if turn <= 0 {
		return 0
	}
	return 2 * min(d1, d2) / turn
}

// subPathDB is the loss of the section between two points of the string, from the point
// between them that fills most of the first Fresnel zone. The slopes next to
// the obstacles at its ends belong to these and are left out.
func (p stretchedString) subPathDB(u, v int) float64 {
	first, last := p.valley(u, v)
	if first >= last {
		return 0
	}
	du, hu := p.at(u)
	dv, hv := p.at(v)
	length := dv - du
	nu := math.Inf(-1)
	for i := first; i <= last; i++ {
		d, h := p.at(i)
		a, b := d-du, dv-d
		rise := h + a*b/p.diameterM - (hu*b+hv*a)/length
		nu = max(nu, Nu(p.frequencyGHz, rise, a/1000, b/1000))
	}
	return KnifeEdgeDB(nu)
}

// valley returns the points between u and v at which the profile stops falling, coming
// from either side.
func (p stretchedString) valley(u, v int) (first, last int) {
	height := func(i int) float64 { _, h := p.at(i); return h }
	first, last = u+1, v-1
	for first < v && height(first) > height(first+1) {
		first++
	}
	for last > u && height(last) > height(last-1) {
		last--
	}
	return first, last
}
