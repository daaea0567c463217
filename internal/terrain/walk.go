package terrain

import (
	"context"
	"math"

	"ridgehop/profile"
)

// walk lays a layer's strip along a path: level by level, each mosaic cell by
// cell, and where one has no height the next.
type walk struct {
	ctx     context.Context
	levels  []level
	out     *strip
	sources *sources
	joined  *chunk // the chunk of the last stretch, if it lay within one
}

// level is one mosaic under the path.
type level struct {
	crossing
	cur cursor
}

// span is a stretch of the path.
type span struct{ from, to float64 }

// gap fills a stretch that the levels above l leave void.
func (w *walk) gap(l int, from, to float64) error {
	if !(to > from) {
		return nil
	}
	if l+1 < len(w.levels) {
		return w.run(l+1, from, to)
	}
	w.out.void(from, to)
	return nil
}

// run lays one level over a stretch. Where no raster of it lies nothing is
// walked: the cells of a town's fine model are not counted over a whole county.
func (w *walk) run(l int, from, to float64) error {
	at := from
	for _, s := range w.levels[l].spans {
		begin, end := max(s.from, at), min(s.to, to)
		if !(end > begin) {
			continue
		}
		if err := w.gap(l, at, begin); err != nil {
			return err
		}
		if err := w.cells(l, begin, end); err != nil {
			return err
		}
		at = end
	}
	return w.gap(l, at, to)
}

// leastStepM is the shortest stretch of a cell that counts: where a path cuts
// a corner it would have one of nothing.
const leastStepM = 1e-6

// cells lays one level over a stretch that lies over its rasters.
func (w *walk) cells(l int, from, to float64) error {
	if err := w.ctx.Err(); err != nil {
		return err
	}
	level := &w.levels[l]
	voidFrom := math.NaN()
	for _, part := range level.legs {
		t0 := max(part.from, (from-part.piece.from)*part.perM)
		t1 := min(part.to, (to-part.piece.from)*part.perM)
		if !(t1 > t0) {
			continue
		}
		var err error
		if voidFrom, err = w.leg(l, part.piece, t0, t1, voidFrom); err != nil {
			return err
		}
	}
	if voidFrom == voidFrom {
		return w.gap(l, voidFrom, to)
	}
	return nil
}

// leg walks from t0 to t1 of a piece. voidFrom is where the void began that
// reaches to t0, NaN if there is none; what is returned is the same for t1.
func (w *walk) leg(l int, p *piece, t0, t1, voidFrom float64) (float64, error) {
	var columns, rows lines
	columns.start(p.x, t0, t1)
	rows.start(p.y, t0, t1)
	level, length := &w.levels[l], p.to-p.from
	c, t := stretch{a: p.from + t0*length}, t0
	c.ua, c.va = p.at(c.a)
	for t < t1 {
		crossColumn, crossRow := columns.t <= rows.t, rows.t <= columns.t
		t = min(columns.t, rows.t, t1)
		b := p.from + t*length
		if t == t1 {
			b = min(p.to, p.from+t1*length)
		}
		if crossColumn && t < t1 {
			columns.pass()
		}
		if crossRow && t < t1 {
			rows.pass()
		}
		if b-c.a < leastStepM && t < t1 {
			continue
		}
		c.b = b
		c.ub, c.vb = p.at(b)
		if voidFrom == voidFrom || !w.cellAtHand(&level.cur, &c) {
			var err error
			if voidFrom, err = w.cell(l, &c, p, voidFrom); err != nil {
				return voidFrom, err
			}
		}
		c.a, c.ua, c.va = c.b, c.ub, c.vb
	}
	return voidFrom, nil
}

// stretch is a part of the path within one cell, and where it enters and
// leaves in the mosaic's columns and rows.
type stretch struct{ a, b, ua, va, ub, vb float64 }

// cellAtHand lays the stretch within one cell where all of its corners are known
// and lie in the chunk at hand, as those of the cell before did: all but a few. It
// is cell, short of everything else. The edge that both cells share has one
// height, so that only that of the far end is worked out.
func (w *walk) cellAtHand(cur *cursor, c *stretch) bool {
	i, j := math.Floor((c.ua+c.ub)*0.5), math.Floor((c.va+c.vb)*0.5)
	a, b, n := int(i)-cur.i0, int(j)-cur.j0, len(w.out.nodes)
	if a < 0 || b < 0 || a+1 >= cur.columns || b+1 >= cur.rows || w.joined != cur.chunk || n == 0 {
		return false
	}
	at := b*cur.columns + a
	upper, lower := cur.heights[at:at+2:at+2], cur.heights[at+cur.columns:at+cur.columns+2]
	north, south := float64(upper[0]), float64(lower[0])
	east := float64(upper[1]) - north
	twist := float64(lower[1]) - south - east
	last := &w.out.nodes[n-1]
	if twist != twist || last.at != c.a { // a corner is void
		return false
	}
	perM := 1 / (c.b - c.a)
	last.bend = -twist * ((c.ub - c.ua) * perM) * ((c.vb - c.va) * perM)
	x, y := c.ub-i, c.vb-j
	w.out.nodes = append(w.out.nodes, stripNode{at: c.b, height: north + x*east + y*(south-north+x*twist), source: last.source})
	return true
}

// cell lays the stretch within one cell.
func (w *walk) cell(l int, c *stretch, p *piece, voidFrom float64) (float64, error) {
	level := &w.levels[l]
	i, j := math.Floor((c.ua+c.ub)/2), math.Floor((c.va+c.vb)/2)
	h, tile, ok := level.cur.cell(int(i), int(j))
	if !ok {
		var corners int
		var err error
		h, tile, corners, err = level.cur.distantCell(int(i), int(j))
		switch {
		case err != nil:
			return voidFrom, err
		case corners == 0 && voidFrom == voidFrom:
			return voidFrom, nil
		case corners == 0:
			return c.a, nil
		case corners < len(h):
			return w.irregular(l, c, p, voidFrom)
		}
	}
	if voidFrom == voidFrom {
		if err := w.gap(l, voidFrom, c.a); err != nil {
			return voidFrom, err
		}
	}
	from, to, bend := across(h, c.ua-i, c.va-j, c.ub-i, c.vb-j)
	w.out.known(c.a, from, c.b, to, bend/((c.b-c.a)*(c.b-c.a)), w.sources.of(level.mosaic, tile))
	w.joined = nil
	if ok && w.out.nodes[len(w.out.nodes)-1].at == c.b {
		w.joined = level.cur.chunk
	}
	return math.NaN(), nil
}

// across is the bilinear surface of a cell along a straight line from (xa, ya)
// to (xb, yb), counted from the upper left corner: the heights at its ends and,
// t being the share of the line, what t (1 - t) is to be multiplied with to make
// up what the straight line between the two lacks. The surface is
//
//	h0 + x east + y south + x y twist
//
// and along a straight line x y is a square of t.
func across(h [4]float64, xa, ya, xb, yb float64) (from, to, bend float64) {
	east, south := h[1]-h[0], h[2]-h[0]
	twist := h[0] - h[1] - h[2] + h[3]
	from = h[0] + xa*east + ya*(south+xa*twist)
	to = h[0] + xb*east + yb*(south+xb*twist)
	return from, to, -twist * (xb - xa) * (yb - ya)
}

// partsOfCell is in how many parts a cell at the edge of the rasters, or beside
// a void, is looked at.
const partsOfCell = 16

// irregular lays a stretch within a cell that lacks a corner: in the half pixel
// outside the outermost centres, and beside voids.
func (w *walk) irregular(l int, c *stretch, p *piece, voidFrom float64) (float64, error) {
	level := &w.levels[l]
	a := c.a
	// On the outer edge itself the pixel that a place lies in may be the one
	// beyond it: both ends are looked at a little inwards.
	inward := (c.b - c.a) * 1e-7
	u, v := p.at(c.a + inward)
	ha, _, err := level.cur.height(u, v)
	if err != nil {
		return voidFrom, err
	}
	for k := 1; k <= partsOfCell; k++ {
		b := c.a + (c.b-c.a)*float64(k)/partsOfCell
		u, v := p.at(min(b, c.b-inward))
		hb, tile, err := level.cur.height(u, v)
		if err != nil {
			return voidFrom, err
		}
		switch known := ha == ha && hb == hb; {
		case known && voidFrom == voidFrom:
			if err := w.gap(l, voidFrom, a); err != nil {
				return voidFrom, err
			}
			voidFrom = math.NaN()
			fallthrough
		case known:
			w.out.known(a, ha, b, hb, 0, w.sources.of(level.mosaic, tile))
			w.joined = nil
		case voidFrom != voidFrom:
			voidFrom = a
		}
		a, ha = b, hb
	}
	return voidFrom, nil
}

// sources collects the rasters that give heights to a profile.
type sources struct {
	into     *profile.Profile
	entries  []*entry
	last     *mosaic
	lastTile int32
	lastAt   int16
}

// of is the place in the profile's list of the raster behind a mosaic's tile.
func (s *sources) of(m *mosaic, tile int32) int16 {
	if s.last == m && s.lastTile == tile {
		return s.lastAt
	}
	s.last, s.lastTile, s.lastAt = m, tile, s.entry(m.tiles[tile].entry)
	return s.lastAt
}

func (s *sources) entry(e *entry) int16 {
	for i, known := range s.entries {
		if known == e {
			return int16(i)
		}
	}
	s.entries = append(s.entries, e)
	return int16(len(s.entries) - 1)
}
