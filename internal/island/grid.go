package island

// The tile is the one-degree square whose south-west corner is 39°S 120°W, in
// posts one second of arc apart, the edges included.
const (
	// West and South are the degrees of the tile's south-west corner.
	West  = -120
	South = -39
	// Side is the number of posts along each edge.
	Side = 3601

	perDegree = Side - 1
)

// Kilometres on the ground between neighbouring posts at 38.5°S, on WGS 84,
// rounded: they shape an invention and measure nothing.
const (
	postEastKM  = 0.0242
	postNorthKM = 0.0308
)

// The island is worked out on a lattice of cells four posts wide and three
// high (97 m by 92 m), inside a window round the middle of the tile. Coarser
// lattices that come first have cells 2 and 4 times as large.
const (
	cellCols = 4
	cellRows = 3
	halfCols = 832 // posts from the middle to the window's east and west edge
	halfRows = 528 // the same to its north and south edge
	centre   = perDegree / 2
)

// lattice is a rectangle of values over the window, row 0 in the north.
type lattice struct {
	cols, rows int
	dx, dy     float64 // spacing, km
	v          []float64
}

// newLattice returns a zeroed lattice whose cells are scale times the finest.
func newLattice(scale int) *lattice {
	l := &lattice{
		cols: 2*halfCols/(cellCols*scale) + 1,
		rows: 2*halfRows/(cellRows*scale) + 1,
		dx:   postEastKM * cellCols * float64(scale),
		dy:   postNorthKM * cellRows * float64(scale),
	}
	l.v = make([]float64, l.cols*l.rows)
	return l
}

// at returns the ground position of a node in km east and north of the middle.
func (l *lattice) at(col, row int) (x, y float64) {
	return float64(float64(col-l.cols/2) * l.dx), float64(float64(l.rows/2-row) * l.dy)
}

// each calls f for every row of n, several at a time, and waits. Rows must not
// depend on one another, which is what keeps the result free of scheduling.
func each(n int, f func(row int)) {
	const workers = 4
	done := make(chan struct{}, workers)
	for w := range workers {
		go func() {
			defer func() { done <- struct{}{} }()
			for row := w; row < n; row += workers {
				f(row)
			}
		}()
	}
	for range workers {
		<-done
	}
}
