package island

import "math"

// Tile is the finished island: heights in whole metres above mean sea level,
// rows from the north, columns from the west. The sea is 0; there are no voids.
type Tile struct {
	posts []int16
}

// New makes the tile. It takes a second or so on two cores and always returns
// the same heights.
func New() *Tile {
	t := &Tile{posts: make([]int16, Side*Side)}
	rock, coast := grow(), shore()
	each(2*halfRows+1, func(r int) {
		line := t.posts[(centre-halfRows+r)*Side:]
		for c := range 2*halfCols + 1 {
			line[centre-halfCols+c] = int16(math.Floor(dress(rock, coast, c, r) + 0.5))
		}
	})
	return t
}

// Post returns the height in metres at a row from the north and a column from
// the west, each 0 to Side-1; it panics outside.
func (t *Tile) Post(row, col int) int16 {
	if row < 0 || row >= Side || col < 0 || col >= Side {
		panic("island: post outside the tile")
	}
	return t.posts[row*Side+col]
}

// Height returns the height in metres above mean sea level at a position in
// degrees, bilinear between the four posts round it. Outside the tile there is
// only ocean: 0.
func (t *Tile) Height(lon, lat float64) float64 {
	x, y := float64((lon-West)*perDegree), float64((South+1-lat)*perDegree)
	if !(x >= 0 && x <= perDegree && y >= 0 && y <= perDegree) {
		return 0
	}
	col, row := min(int(x), perDegree-1), min(int(y), perDegree-1)
	at := row*Side + col
	north := lerp(float64(t.posts[at]), float64(t.posts[at+1]), x-float64(col))
	south := lerp(float64(t.posts[at+Side]), float64(t.posts[at+Side+1]), x-float64(col))
	return lerp(north, south, y-float64(row))
}
