package screening

import (
	"cmp"
	"math"
	"slices"

	"github.com/paulmach/orb"

	"ridgehop/internal/screening/intake"
)

// hilbertBits is how often a side of the square is halved: 65,536 steps a side.
const hilbertBits = 16

// hilbert is how far along the Hilbert curve the cell (x, y) of a square of
// 2^hilbertBits cells a side lies. The curve goes through every cell, from each
// to one beside it, so that places near each other on it are near each other
// (D. Hilbert, Ueber die stetige Abbildung einer Linie auf ein Flaechenstueck,
// Mathematische Annalen 38, 1891).
//
// Each level takes the quarter that the cell lies in; the curve within it is that
// of the whole, mirrored about one diagonal in the first quarter and about the
// other in the last.
func hilbert(x, y uint32) uint32 {
	var along, turned uint32
	swapped := false
	for level := hilbertBits - 1; level >= 0; level-- {
		right, up := x>>level&1^turned, y>>level&1^turned
		if swapped {
			right, up = up, right
		}
		quarter := 3*right ^ up // left below, left above, right above, right below
		along = along<<2 | quarter
		swapped = swapped != (quarter == 0 || quarter == 3)
		if quarter == 3 {
			turned ^= 1
		}
	}
	return along
}

// alongCurve orders rows so that neighbours in the order are neighbours on the
// earth, and share blocks of rasters. Rows without a place come first.
func alongCurve(rows []intake.Row) []int32 {
	box := orb.Bound{Min: orb.Point{180, 90}, Max: orb.Point{-180, -90}}
	for i := range rows {
		if rows[i].Problem == nil {
			box = box.Extend(rows[i].Candidate.Point())
		}
	}
	side := max(box.Max[0]-box.Min[0], box.Max[1]-box.Min[1])
	scale := 0.0
	if side > 0 {
		scale = (1<<hilbertBits - 1) / side
	}
	places, order := make([]uint32, len(rows)), make([]int32, len(rows))
	for i := range rows {
		order[i] = int32(i)
		if rows[i].Problem == nil {
			p := rows[i].Candidate.Point()
			places[i] = hilbert(uint32(math.Floor((p[0]-box.Min[0])*scale)), uint32(math.Floor((p[1]-box.Min[1])*scale)))
		}
	}
	slices.SortStableFunc(order, func(a, b int32) int { return cmp.Compare(places[a], places[b]) })
	return order
}
