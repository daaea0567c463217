package climate

import "math"

// grid is a map of the whole earth in even steps. The last column repeats the first;
// the first and last rows are the poles.
type grid struct {
	rows, columns int
	layout        layout
	// values are row by row as in the file; float32 keeps seven digits, more than any of
	// the maps means.
	values []float32
}

// at interpolates the grid bilinearly (ITU-R P.1144) at a longitude of any turn and a
// latitude of -90 to 90, in degrees; elsewhere it is NaN.
func (g *grid) at(lon, lat float64) float64 {
	if !(math.Abs(lat) <= 90) || math.IsNaN(lon) || math.IsInf(lon, 0) {
		return math.NaN()
	}
	column, east := cell(g.turn(lon)/360, g.columns)
	row, down := cell(g.fromFirstRow(lat)/180, g.rows)
	upper := g.values[row*g.columns+column:]
	lower := upper[g.columns:]
	return (1-down)*between(upper, east) + down*between(lower, east)
}

// turn is how far east of the first column the longitude lies, 0 to 360 degrees.
func (g *grid) turn(lon float64) float64 {
	turn := math.Mod(lon-g.layout.firstLongitude, 360)
	if turn < 0 {
		turn += 360
	}
	return turn
}

// fromFirstRow is how far from the first row the latitude lies, 0 to 180 degrees.
func (g *grid) fromFirstRow(lat float64) float64 {
	if g.layout.northFirst {
		return 90 - lat
	}
	return 90 + lat
}

// cell finds a share of 0 to 1 of an axis among its points: the point before, never
// the last one, and the share of the step that remains.
func cell(share float64, points int) (int, float64) {
	position := share * float64(points-1)
	before := min(int(position), points-2)
	return before, position - float64(before)
}

// between interpolates the first two values of a row.
func between(row []float32, share float64) float64 {
	return (1-share)*float64(row[0]) + share*float64(row[1])
}
