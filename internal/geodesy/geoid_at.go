package geodesy

import "math"

// Bound is the area in degrees between whose edges, themselves included, there
// may be values: -180 <= west < 180, and east beyond 180 where the grid crosses
// the antimeridian. Where it closes on itself, east is west + 360.
func (g *Geoid) Bound() (west, south, east, north float64) {
	return g.westDeg, g.southDeg, g.eastDeg, g.northDeg
}

// UndulationM is the height of the geoid above the WGS 84 ellipsoid in metres at
// a longitude and latitude in degrees, bilinear between the four nodes around
// it. Longitudes may be any finite number of degrees. It is false outside the
// grid, and where a node that counts has no value.
func (g *Geoid) UndulationM(lon, lat float64) (float64, bool) {
	column, east, ok := g.column(lon)
	if !ok {
		return 0, false
	}
	row, north, ok := g.row(lat)
	if !ok {
		return 0, false
	}
	next := column + 1
	if next == g.columns { // only a grid that closes on itself asks for it
		next = 0
	}
	below, above := row*g.columns, (row+1)*g.columns
	sum := weighted(g.valuesM[below+column], (1-east)*(1-north)) +
		weighted(g.valuesM[below+next], east*(1-north)) +
		weighted(g.valuesM[above+column], (1-east)*north) +
		weighted(g.valuesM[above+next], east*north)
	return sum, !math.IsNaN(sum)
}

// weighted is a node's share. A node without weight does not count, so on a line
// of nodes it does not matter what is beside it.
func weighted(valueM float32, weight float64) float64 {
	if weight == 0 {
		return 0
	}
	return float64(valueM) * weight
}

// column is the column west of a longitude, or at it, and the way from there to
// the next one: 0 to 1.
func (g *Geoid) column(lon float64) (int, float64, bool) {
	offset := math.Mod(lon-g.westDeg, geoidWholeTurnDeg)
	if offset < 0 {
		offset += geoidWholeTurnDeg
	}
	if offset > geoidWholeTurnDeg-geoidRoundingDeg {
		offset = 0
	}
	if g.turn == 0 {
		return between(offset/g.stepLon, g.columns, geoidRoundingDeg/g.stepLon)
	}
	x := offset * float64(g.turn) / geoidWholeTurnDeg // a rounded step does not add up to a turn
	whole := math.Floor(x)
	return int(whole) % g.turn, x - whole, !math.IsNaN(x)
}

// row is the row south of a latitude, like column.
func (g *Geoid) row(lat float64) (int, float64, bool) {
	if !(math.Abs(lat) <= 90) {
		return 0, 0, false
	}
	slack := geoidRoundingDeg
	if math.Abs(lat) > 90-geoidSlackDeg { // steps are rounded: a grid that ends here ends at the pole
		slack = geoidSlackDeg
	}
	return between((lat-g.southDeg)/g.stepLat, g.rows, slack/g.stepLat)
}

// between is the node before x, counted in nodes, and the way from there to the
// next one. The last node is the end of the last gap.
func between(x float64, nodes int, slack float64) (int, float64, bool) {
	last := float64(nodes - 1)
	if !(x >= -slack && x <= last+slack) {
		return 0, 0, false
	}
	x = min(max(x, 0), last)
	whole := min(math.Floor(x), last-1)
	return int(whole), x - whole, true
}
