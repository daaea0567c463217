package footprints

import (
	"cmp"
	"math"
	"slices"

	"github.com/paulmach/orb"
)

// fanOut is how many rectangles one above them covers: a few cache lines.
const fanOut = 16

// tree finds rectangles near a segment: a packed R-tree. Rectangle i of a level
// covers those from fanOut*i of the level below; level 0 are the leaves, and the
// top has fanOut at most. Unlike a table of cells of one size it does not care
// how large buildings are, or how long a segment is.
type tree struct {
	levels [][]orb.Bound
}

// newTree builds the levels above leaves that are in packed order.
func newTree(leaves []orb.Bound) tree {
	var t tree
	for level := leaves; len(level) > 0; level = above(level) {
		t.levels = append(t.levels, level)
		if len(level) <= fanOut {
			break
		}
	}
	return t
}

// above is the next level: the rectangle around each fanOut of a level.
func above(level []orb.Bound) []orb.Bound {
	next := make([]orb.Bound, 0, (len(level)+fanOut-1)/fanOut)
	for group := range slices.Chunk(level, fanOut) {
		next = append(next, union(group))
	}
	return next
}

func union(bounds []orb.Bound) orb.Bound {
	all := bounds[0]
	for _, b := range bounds[1:] {
		all = all.Union(b)
	}
	return all
}

// packedOrder is the order in which rectangles that are near each other follow
// each other: strips by longitude, in each by latitude. Source: S. Leutenegger,
// M. Lopez, J. Edgington, STR: A Simple and Efficient Algorithm for R-Tree
// Packing, ICDE 1997 (from memory).
func packedOrder(bounds []orb.Bound) []int32 {
	order := make([]int32, len(bounds))
	for i := range order {
		order[i] = int32(i)
	}
	by := func(axis int) func(a, b int32) int {
		middle := func(i int32) float64 { return bounds[i].Min[axis] + bounds[i].Max[axis] }
		return func(a, b int32) int { return cmp.Or(cmp.Compare(middle(a), middle(b)), cmp.Compare(a, b)) }
	}
	slices.SortFunc(order, by(0))
	strip := fanOut * int(math.Ceil(math.Sqrt(float64(len(bounds))/fanOut)))
	for from := 0; from < len(order); from += strip {
		slices.SortFunc(order[from:min(from+strip, len(order))], by(1))
	}
	return order
}

// search appends the leaves that the segment meets.
func (t *tree) search(s *segment, found []int32) []int32 {
	top := len(t.levels) - 1
	if top < 0 {
		return found
	}
	return t.searchLevel(s, top, 0, found)
}

// searchLevel searches the fanOut rectangles of a level that begin at first.
func (t *tree) searchLevel(s *segment, level, first int, found []int32) []int32 {
	bounds := t.levels[level]
	for i := first; i < min(first+fanOut, len(bounds)); i++ {
		switch {
		case !s.meets(&bounds[i]):
		case level == 0:
			found = append(found, int32(i))
		default:
			found = t.searchLevel(s, level-1, i*fanOut, found)
		}
	}
	return found
}

// bound is the rectangle around all leaves.
func (t *tree) bound() orb.Bound {
	if len(t.levels) == 0 {
		return orb.Bound{Min: orb.Point{1, 1}, Max: orb.Point{-1, -1}} // empty, as orb has it
	}
	return union(t.levels[len(t.levels)-1])
}
