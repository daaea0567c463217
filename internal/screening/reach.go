package screening

import (
	"math"
	"slices"

	"ridgehop/internal/screening/intake"
)

// reach finds the sites that may serve a place: a grid of cells by degrees, each
// with the sites whose range touches it. Safe for concurrent use.
type reach struct {
	stations []station
	sideDeg  float64 // of a cell; it divides 360
	columns  int
	cells    map[cell][]int32
	// everywhere are sites whose range takes too many cells, as at a pole.
	everywhere []int32
}

// cell is one cell, counted from the south and from the date line.
type cell struct{ row, column int32 }

const (
	// leastSideDeg keeps the columns countable where all ranges are short.
	leastSideDeg = 0.02
	// mostCells is how many cells one site may take.
	mostCells = 2000
)

func newReach(stations []station) *reach {
	longest := 0.0
	for i := range stations {
		longest = max(longest, stations[i].rangeM)
	}
	side := max(leastSideDeg, degrees(mostAngle(longest))/2)
	columns := int(360 / side)
	r := &reach{stations: stations, columns: columns, sideDeg: 360 / float64(columns), cells: map[cell][]int32{}}
	for i := range stations {
		r.add(int32(i))
	}
	return r
}

func degrees(radians float64) float64 { return radians * 180 / math.Pi }

// add enters a site into every cell that the box around its range touches.
func (r *reach) add(i int32) {
	s := &r.stations[i]
	angle := mostAngle(s.rangeM)
	low, high := r.row(s.lat-degrees(angle)), r.row(s.lat+degrees(angle))
	wide := 180.0
	if lat := math.Abs(s.lat) * math.Pi / 180; lat+angle < math.Pi/2 {
		// Where the meridian touches the circle around the site.
		wide = degrees(math.Asin(math.Sin(angle) / math.Cos(lat)))
	}
	west, east := math.Floor((s.lon-wide+180)/r.sideDeg), math.Floor((s.lon+wide+180)/r.sideDeg)
	if (east-west+1)*float64(high-low+1) > mostCells || int(east-west) >= r.columns {
		r.everywhere = append(r.everywhere, i)
		return
	}
	for row := low; row <= high; row++ {
		for column := west; column <= east; column++ {
			at := cell{row, r.wrapped(column)}
			r.cells[at] = append(r.cells[at], i)
		}
	}
}

func (r *reach) row(latDeg float64) int32 { return int32(math.Floor((latDeg + 90) / r.sideDeg)) }

// wrapped brings a column east or west of the date line back to its number.
func (r *reach) wrapped(column float64) int32 {
	n := r.columns
	return int32(((int(column) % n) + n) % n)
}

// near appends the sites that serve a candidate, rising.
func (r *reach) near(c *intake.Candidate, into []int32) []int32 {
	direction := toward(c.Lon, c.Lat)
	at := cell{r.row(c.Lat), r.wrapped(math.Floor((c.Lon + 180) / r.sideDeg))}
	for _, list := range [...][]int32{r.cells[at], r.everywhere} {
		for _, i := range list {
			if r.stations[i].serves(c, direction) {
				into = append(into, i)
			}
		}
	}
	slices.Sort(into)
	return into
}
