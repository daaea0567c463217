package island

// Waves come from the south-west: the outline, moved this far along them in
// km, marks how much of the weather coast they have taken.
const (
	weatherEast  = 0.55
	weatherNorth = 0.75
	cliffSlope   = 650 // steepest face, metres up per km of outline depth
)

// shore returns how far each node lies inside the wave-cut coast, in km.
func shore() *lattice {
	l := newLattice(1)
	each(l.rows, func(row int) {
		for col := range l.cols {
			x, y := l.at(col, row)
			here, _ := mainland(x, y)
			swept, _ := mainland(x-weatherEast, y-weatherNorth)
			l.v[row*l.cols+col] = max(min(here, swept)-0.04, offshore(x, y))
		}
	})
	return l
}

// dress returns the height in metres of the post c columns and r rows from the
// window's north-west corner: the eroded rock, with the small roughness the
// lattice cannot hold, cut back to a cliff where waves reach.
func dress(rock, coast *lattice, c, r int) float64 {
	x, y := float64(float64(c-halfCols)*postEastKM), float64(float64(halfRows-r)*postNorthKM)
	col, row := float64(float64(c)/cellCols), float64(float64(r)/cellRows)
	depth := coast.spline(col, row)
	if depth <= 0 {
		return 0
	}
	// Bending the lattice by less than a cell hides its straight lines.
	bent := rock.spline(
		col+float64(0.9*fractal(71, x/0.5, y/0.5, 2)),
		row+float64(0.9*fractal(79, x/0.5, y/0.5, 2)))
	bent = max(bent, silt(x, y, depth))
	if bent <= 0 {
		return 0
	}
	rough := 4 + float64(16*smooth(0, 500, bent))
	z := bent + float64(rough*smooth(0, 60, bent)*fractal(83, x/0.28, y/0.28, 3))
	return max(min(z, float64(cliffSlope*depth)), 0)
}

// silt returns the height in metres of the ground that rivers have laid down
// in a drowned valley: a gentle fan that reaches the coast on the plain and
// stops short of it elsewhere, which leaves a bay.
func silt(x, y, depth float64) float64 {
	reach := 0.55 + float64(0.6*fractal(97, x/3, y/3, 2))
	reach *= 1 - smooth(-2.0, 0.5, plain.within(x, y))
	over := depth - max(reach, 0.03)
	swell := float64(4 * fractal(101, x/1.3, y/1.3, 3) * smooth(0.1, 0.9, over))
	return float64(over*7) + swell
}
