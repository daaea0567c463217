package terrain

import (
	"context"
	"errors"
	"math"
	"slices"

	"ridgehop/internal/raster"
	"ridgehop/profile"
)

// cursor reads heights of one mosaic along one path. It keeps the chunk that
// it read last at hand, so that most samples touch nothing but an array.
type cursor struct {
	ctx    context.Context
	m      *mosaic
	chunks *chunks

	// The chunk at hand, in the mosaic's columns and rows (of the turn that
	// the path is in), and the tile that it belongs to.
	i0, j0, columns, rows int
	heights               []float32
	chunk                 *chunk
	tile                  int32
	// The same as bounds for interpolation: its first pixel's column and row,
	// and how far from it the last four pixels begin.
	u0, v0, uEnd, vEnd float64

	found []int32                // scratch
	away  *[]profile.Unreachable // takes note of sources that do not answer
	dead  []int32                // tiles that did not: they are not asked again
}

// pixel states of a lookup.
const (
	absent = iota // no raster of the mosaic has this pixel
	void          // one has, without a height
	known
)

// height interpolates at (u, v), whole numbers being pixel centres. It returns
// NaN where the mosaic has no height there, and the tile that the nearest
// pixel belongs to.
func (c *cursor) height(u, v float64) (float64, int32, error) {
	if h, ok := c.inside(u, v); ok {
		return h, c.tile, nil
	}
	i, j := math.Floor(u), math.Floor(v)
	return c.corners(int(i), int(j), u-i, v-j)
}

// inside interpolates where all four pixels are known and lie in the chunk at
// hand. It is small, so that the loop over the samples holds it inline.
func (c *cursor) inside(u, v float64) (float64, bool) {
	x, y := u-c.u0, v-c.v0
	if !(x >= 0 && y >= 0 && x < c.uEnd && y < c.vEnd) {
		return 0, false
	}
	i, j := int(x), int(y)
	fx, fy := x-float64(i), y-float64(j)
	at := j*c.columns + i
	upper, lower := c.heights[at:at+2:at+2], c.heights[at+c.columns:at+c.columns+2]
	top := float64(upper[0]) + fx*(float64(upper[1])-float64(upper[0]))
	bottom := float64(lower[0]) + fx*(float64(lower[1])-float64(lower[0]))
	h := top + fy*(bottom-top)
	return h, h == h
}

// corners interpolates pixel by pixel: where the four lie in different chunks
// or tiles, at edges, and near voids. A corner with a part in the height must
// be known; one that no raster has drops out, so long as the pixel that the
// point lies in exists.
func (c *cursor) corners(i, j int, fx, fy float64) (float64, int32, error) {
	nan := math.NaN()
	home := [2]int{i + int(math.Round(fx)), j + int(math.Round(fy))}
	sum, weight := 0.0, 0.0
	homeTile := int32(-1)
	for k := range 4 {
		di, dj := k&1, k>>1
		w := lean(fx, di) * lean(fy, dj)
		atHome := home == [2]int{i + di, j + dj}
		if w == 0 && !atHome {
			continue
		}
		h, state, err := c.pixel(i+di, j+dj)
		if err != nil {
			return nan, -1, err
		}
		if state == void && w > 0 || state == absent && atHome {
			return nan, -1, nil
		}
		if state == known {
			sum += w * float64(h)
			weight += w
		}
		if atHome {
			homeTile = c.tile
		}
	}
	if weight == 0 {
		return nan, -1, nil
	}
	return sum / weight, homeTile, nil
}

// lean is the weight of the near (0) or far (1) pixel for a fraction.
func lean(f float64, side int) float64 {
	if side == 1 {
		return f
	}
	return 1 - f
}

// pixel is the height of one pixel. On shared rows and columns the first tile
// that knows it decides.
func (c *cursor) pixel(i, j int) (float32, int, error) {
	if h, ok := c.atHand(i, j); ok && h == h {
		return h, known, nil
	}
	c.found = c.m.tilesAt(i, j, c.found[:0])
	state := absent
	for _, n := range c.found {
		if err := c.fetch(n, i, j); err != nil {
			return 0, absent, err
		}
		if h, ok := c.atHand(i, j); ok && h == h {
			return h, known, nil
		}
		state = void
	}
	return 0, state, nil
}

func (c *cursor) atHand(i, j int) (float32, bool) {
	a, b := i-c.i0, j-c.j0
	if a < 0 || b < 0 || a >= c.columns || b >= c.rows {
		return 0, false
	}
	return c.heights[b*c.columns+a], true
}

// fetch takes the chunk of tile n that holds pixel (i, j) at hand.
func (c *cursor) fetch(n int32, i, j int) error {
	t := c.m.tiles[n]
	x := i - t.i
	if c.m.turn != 0 {
		x -= c.m.turn * floorDiv(x, c.m.turn)
	}
	var got *chunk
	err := error(raster.ErrUnreachable)
	if !slices.Contains(c.dead, n) {
		got, err = c.chunks.at(c.ctx, t.entry, x, j-t.j)
	}
	if unreachable(err) {
		if got == nil && !slices.Contains(c.dead, n) {
			c.noteAway(t.entry, err)
			c.dead = append(c.dead, n)
		}
		c.columns, c.rows, c.uEnd, c.vEnd, c.chunk = 0, 0, 0, 0, nil
		return nil
	}
	if err != nil {
		return err
	}
	c.i0, c.j0 = i-x+got.x, t.j+got.y
	c.columns, c.rows, c.heights, c.chunk = got.width, got.height, got.heights, got
	c.tile = n
	c.u0, c.v0 = float64(c.i0), float64(c.j0)
	c.uEnd, c.vEnd = float64(c.columns-1), float64(c.rows-1)
	return nil
}

// cell is the four corners of the cell whose upper left one is pixel (i, j):
// upper left, upper right, lower left, lower right; where all are known and lie
// in the chunk at hand.
func (c *cursor) cell(i, j int) (h [4]float64, tile int32, ok bool) {
	a, b := i-c.i0, j-c.j0
	if a < 0 || b < 0 || a+1 >= c.columns || b+1 >= c.rows {
		return h, -1, false
	}
	at := b*c.columns + a
	upper, lower := c.heights[at:at+2:at+2], c.heights[at+c.columns:at+c.columns+2]
	h = [4]float64{float64(upper[0]), float64(upper[1]), float64(lower[0]), float64(lower[1])}
	sum := h[0] + h[1] + h[2] + h[3]
	return h, c.tile, sum == sum
}

// distantCell is cell where the corners lie in more than one chunk or tile. It
// also reports whether any corner is known at all.
func (c *cursor) distantCell(i, j int) (h [4]float64, tile int32, corners int, err error) {
	for k := range h {
		pixel, state, err := c.pixel(i+k&1, j+k>>1)
		if err != nil {
			return h, -1, 0, err
		}
		if state != known {
			continue
		}
		h[k] = float64(pixel)
		if corners++; corners == 1 {
			tile = c.tile
		}
	}
	return h, tile, corners, nil
}

// unreachable reports whether a remote raster did not answer, which makes its
// part of the path void, rather than being at fault.
func unreachable(err error) bool { return errors.Is(err, raster.ErrUnreachable) }

func (c *cursor) noteAway(e *entry, err error) { noteAway(c.away, e.Name, err) }

func noteAway(away *[]profile.Unreachable, name string, err error) {
	if slices.ContainsFunc(*away, func(u profile.Unreachable) bool { return u.Source == name }) {
		return
	}
	*away = append(*away, profile.Unreachable{Source: name, Reason: err.Error()})
}
