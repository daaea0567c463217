package island

// How the rivers work. Heights are in arbitrary units until they are scaled to
// the summit, so only the ratio of rise, cutting and creep matters.
const (
	erodeTime  = 6.0   // length of one step
	cutting    = 1.0   // stream power: K in dz/dt = U - K sqrt(A) slope
	creep      = 0.012 // hillslope diffusion per step, as a share of curvature
	shoreLevel = 0.0   // height at which rivers end
)

// basin is the landscape while rivers shape it.
type basin struct {
	*lattice           // heights
	uplift   []float64 // rise per unit time; 0 at sea
	sea      []bool
	down     []int32   // the neighbour each node drains to, itself at an end
	order    []int32   // every node after the one it drains to
	area     []float64 // ground drained through each node, km^2
	first    []int32   // head of the list of nodes draining to this one, or -1
	next     []int32   // the rest of that list
	scratch  []float64
}

func newBasin(scale int) *basin {
	l := newLattice(scale)
	n := len(l.v)
	b := &basin{lattice: l, uplift: make([]float64, n), sea: make([]bool, n),
		down: make([]int32, n), order: make([]int32, 0, n), area: make([]float64, n),
		first: make([]int32, n), next: make([]int32, n), scratch: make([]float64, n)}
	each(l.rows, b.raise)
	return b
}

// raise sets the uplift and the sea of one row. Rock rises fastest under the
// backbone; ridged noise makes some of it harder, which bends the divides.
func (b *basin) raise(row int) {
	for col := range b.cols {
		x, y := b.at(col, row)
		depth, lift := inland(x, y)
		i := row*b.cols + col
		b.sea[i] = depth <= 0 || row == 0 || col == 0 || row == b.rows-1 || col == b.cols-1
		if !b.sea[i] {
			rise := 0.16 + float64(0.84*smooth(0, 4.5, depth))
			b.uplift[i] = lift * rise * (0.55 + float64(0.9*ridged(53, x/5, y/5, 3)))
		}
	}
}

// run lets the rivers work for a number of steps.
func (b *basin) run(steps int) {
	for range steps {
		each(b.rows, b.drain)
		b.sort()
		b.gather()
		b.cut()
		b.soften()
	}
}
