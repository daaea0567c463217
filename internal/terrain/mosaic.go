package terrain

import (
	"iter"
	"math"

	"github.com/paulmach/orb"

	"ridgehop/internal/raster"
)

// mosaic is a set of rasters on one pixel grid, which do not overlap by more
// than a shared row or column. Pixels are counted over the whole grid: the
// centre of column i lies at left + (i+0.5)*pixelX, of row j at
// top - (j+0.5)*pixelY.
type mosaic struct {
	crs    raster.CRS
	source *source
	grid   raster.Grid
	turn   int // columns in 360 degrees; 0 where the grid does not close
	pixelM float64
	bound  orb.Bound // longitude and latitude
	tiles  []tile
	index  map[cell][]int32 // tiles that touch a cell
	*projectors
}

// tile is one raster's place in its mosaic: its first pixel's column and row.
type tile struct {
	*entry
	i, j int
}

// cell is a square of the mosaic's index.
type cell struct{ i, j int }

// cellPixels is the side of a cell: a one-degree tile of 1" touches four.
const cellPixels = 4096

func cellOf(i, j int) cell { return cell{floorDiv(i, cellPixels), floorDiv(j, cellPixels)} }

func floorDiv(a, b int) int {
	q := a / b
	if a%b < 0 {
		q--
	}
	return q
}

// contains reports whether pixel (i, j) of the mosaic belongs to the tile.
func (t tile) contains(i, j int) bool {
	return i >= t.i && j >= t.j && i < t.i+t.info.Width && j < t.j+t.info.Height
}

func newMosaic(e *entry, own *projectors) *mosaic {
	m := &mosaic{
		crs: e.info.CRS, source: e.source, grid: e.info.Grid, pixelM: e.PixelM, bound: e.Bound,
		index: map[cell][]int32{}, projectors: own,
	}
	if m.crs.Geographic {
		if columns := 360 / m.grid.PixelX; math.Abs(columns-math.Round(columns)) < gridTolerance {
			m.turn = int(math.Round(columns))
		}
	}
	m.add(e, 0, 0)
	return m
}

// gridTolerance is how far, in pixels, two grids may be apart and still be one:
// producers' rounding, far below what moves a height.
const gridTolerance = 1e-3

// accept adds the raster if it lies on the mosaic's grid and overlaps none of
// its tiles by more than a shared row or column.
func (m *mosaic) accept(e *entry) bool {
	g := e.info.Grid
	sameSystem := m.source == e.source && (m.crs.WKT == e.info.CRS.WKT || m.crs.EPSG != 0 && m.crs.EPSG == e.info.CRS.EPSG)
	if !sameSystem || !sameStep(m.grid.PixelX, g.PixelX) || !sameStep(m.grid.PixelY, g.PixelY) {
		return false
	}
	i := (g.Left - m.grid.Left) / m.grid.PixelX
	j := (m.grid.Top - g.Top) / m.grid.PixelY
	if math.Abs(i-math.Round(i)) > gridTolerance || math.Abs(j-math.Round(j)) > gridTolerance {
		return false
	}
	column, row := m.wrapped(int(math.Round(i))), int(math.Round(j))
	if m.overlaps(column, row, e.info) {
		return false
	}
	m.add(e, column, row)
	return true
}

// sameStep holds two pixel sizes equal if a million pixels of each end within
// a hundredth of a pixel of one another.
func sameStep(a, b float64) bool { return math.Abs(a-b) <= 1e-8*a }

// wrapped brings a column into the one turn that the mosaic counts.
func (m *mosaic) wrapped(i int) int {
	if m.turn == 0 {
		return i
	}
	return i - m.turn*floorDiv(i, m.turn)
}

func (m *mosaic) overlaps(i, j int, info raster.Info) bool {
	for n := range m.near(i, j, info) {
		t := m.tiles[n]
		width := min(i+info.Width, t.i+t.info.Width) - max(i, t.i)
		height := min(j+info.Height, t.j+t.info.Height) - max(j, t.j)
		if width > 1 && height > 1 {
			return true
		}
	}
	return false
}

func (m *mosaic) add(e *entry, i, j int) {
	n := int32(len(m.tiles)) // #nosec G115 -- a folder holds far fewer files
	m.tiles = append(m.tiles, tile{entry: e, i: i, j: j})
	m.bound = m.bound.Union(e.Bound)
	for c := range cells(i, j, i+e.info.Width-1, j+e.info.Height-1) {
		m.index[c] = append(m.index[c], n)
	}
}

// near yields the tiles that share a cell of the index with a raster at (i, j).
func (m *mosaic) near(i, j int, info raster.Info) iter.Seq[int32] {
	return func(yield func(int32) bool) {
		for c := range cells(i, j, i+info.Width-1, j+info.Height-1) {
			for _, n := range m.index[c] {
				if !yield(n) {
					return
				}
			}
		}
	}
}

// cells yields the cells that a rectangle of pixels touches.
func cells(i0, j0, i1, j1 int) iter.Seq[cell] {
	return func(yield func(cell) bool) {
		first, last := cellOf(i0, j0), cellOf(i1, j1)
		for i := first.i; i <= last.i; i++ {
			for j := first.j; j <= last.j; j++ {
				if !yield(cell{i, j}) {
					return
				}
			}
		}
	}
}

// tilesAt appends the tiles that hold pixel (i, j): one, or up to four on
// shared rows and columns. i may count any number of turns.
func (m *mosaic) tilesAt(i, j int, found []int32) []int32 {
	i = m.wrapped(i)
	for range 2 {
		for _, n := range m.index[cellOf(i, j)] {
			if m.tiles[n].contains(i, j) {
				found = append(found, n)
			}
		}
		if m.turn == 0 {
			break
		}
		i += m.turn // a tile may begin before the turn's end and reach beyond it
	}
	return found
}
