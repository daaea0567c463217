package terrain

import (
	"slices"
)

// block is a rectangle of whole columns and rows, its far sides excluded.
type block struct{ left, top, right, bottom int }

// corner is where four pixels meet.
type corner struct{ i, j int }

// mostUnionCells bounds the grid on which a union is drawn. Rectangles scattered
// so that it would be larger are outlined one by one.
const mostUnionCells = 4 << 20

// union outlines rectangles together: each shape is a ring that runs with its
// inside to the left, north being up, and the rings of its holes, the other way
// round. Rings end where they begin.
func union(blocks []block) [][][]corner {
	var xs, ys []int
	for _, b := range blocks {
		xs, ys = append(xs, b.left, b.right), append(ys, b.top, b.bottom)
	}
	xs, ys = sortedSet(xs), sortedSet(ys)
	if len(xs)*len(ys) > mostUnionCells {
		return apart(blocks)
	}
	g := unionGrid{xs: xs, ys: ys, filled: make([]bool, (len(xs)-1)*(len(ys)-1))}
	for _, b := range blocks {
		g.fill(b)
	}
	return shapes(g.rings())
}

func sortedSet(v []int) []int {
	slices.Sort(v)
	return slices.Compact(v)
}

func apart(blocks []block) [][][]corner {
	out := make([][][]corner, len(blocks))
	for n, b := range blocks {
		out[n] = [][]corner{{{b.left, b.bottom}, {b.right, b.bottom}, {b.right, b.top}, {b.left, b.top}, {b.left, b.bottom}}}
	}
	return out
}

// unionGrid is the plane cut at every side of every rectangle.
type unionGrid struct {
	xs, ys []int
	filled []bool
}

func (g *unionGrid) fill(b block) {
	left, _ := slices.BinarySearch(g.xs, b.left)
	right, _ := slices.BinarySearch(g.xs, b.right)
	top, _ := slices.BinarySearch(g.ys, b.top)
	bottom, _ := slices.BinarySearch(g.ys, b.bottom)
	for y := top; y < bottom; y++ {
		for x := left; x < right; x++ {
			g.filled[y*(len(g.xs)-1)+x] = true
		}
	}
}

func (g *unionGrid) has(x, y int) bool {
	return x >= 0 && y >= 0 && x < len(g.xs)-1 && y < len(g.ys)-1 && g.filled[y*(len(g.xs)-1)+x]
}

// side is one step along the outline, from a corner in a direction.
type side struct {
	from corner
	way  way
}

// way is a direction: east, north, west, south; each is a left turn from the
// one before.
type way int

func (w way) left() way  { return (w + 1) % 4 }
func (w way) right() way { return (w + 3) % 4 }

func (c corner) step(w way) corner {
	return corner{c.i + []int{1, 0, -1, 0}[w], c.j + []int{0, -1, 0, 1}[w]}
}

// outside reports whether the outline runs from a corner in a direction: there
// is something to the left of it and nothing to the right.
func (g *unionGrid) outside(c corner, w way) bool {
	// The cells around a corner: what lies ahead to the left and to the right.
	ahead := [4][2]corner{{{0, -1}, {0, 0}}, {{-1, -1}, {0, -1}}, {{-1, 0}, {-1, -1}}, {{0, 0}, {-1, 0}}}[w]
	left, right := ahead[0], ahead[1]
	return g.has(c.i+left.i, c.j+left.j) && !g.has(c.i+right.i, c.j+right.j)
}

// rings follows every outline once.
func (g *unionGrid) rings() [][]corner {
	var out [][]corner
	seen := map[side]bool{}
	for y := range g.ys {
		for x := range g.xs {
			for w := range way(4) {
				start := side{corner{x, y}, w}
				if g.outside(start.from, w) && !seen[start] {
					out = append(out, g.follow(start, seen))
				}
			}
		}
	}
	return out
}

// follow walks one outline. Where two shapes meet at a corner it turns left and
// so stays with its own.
func (g *unionGrid) follow(start side, seen map[side]bool) []corner {
	var ring []corner
	at, last := start, way(-1)
	for !seen[at] {
		seen[at] = true
		if at.way != last {
			ring = append(ring, corner{g.xs[at.from.i], g.ys[at.from.j]})
			last = at.way
		}
		next := at.from.step(at.way)
		for _, w := range []way{at.way.left(), at.way, at.way.right()} {
			if g.outside(next, w) {
				at = side{next, w}
				break
			}
		}
	}
	return append(ring, ring[0])
}

// shapes gives every hole to the smallest ring around it.
func shapes(rings [][]corner) [][][]corner {
	var out [][][]corner
	var holes [][]corner
	for _, r := range rings {
		if area(r) > 0 {
			out = append(out, [][]corner{r})
		} else {
			holes = append(holes, r)
		}
	}
	for _, hole := range holes {
		around := -1
		for n := range out {
			if encloses(out[n][0], hole[0]) && (around < 0 || area(out[n][0]) < area(out[around][0])) {
				around = n
			}
		}
		if around >= 0 {
			out[around] = append(out[around], hole)
		}
	}
	return out
}

// area is twice that of a ring, above 0 where its inside is to the left.
func area(ring []corner) int {
	sum := 0
	for k := range ring[:len(ring)-1] {
		a, b := ring[k], ring[k+1]
		sum -= a.i*b.j - b.i*a.j // rows run southward
	}
	return sum
}

// encloses reports whether the pixel to the south-east of a corner lies in a
// ring.
func encloses(ring []corner, c corner) bool {
	inside := false
	for k := range ring[:len(ring)-1] {
		a, b := ring[k], ring[k+1]
		if a.i == b.i && a.i > c.i && min(a.j, b.j) <= c.j && max(a.j, b.j) > c.j {
			inside = !inside
		}
	}
	return inside
}
