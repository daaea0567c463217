package island

// Heights in metres that fix the scale of the island.
const (
	summitM = 870 // highest rock before the sea rises and detail is added
	drownM  = 22  // how far the sea then rises up the valleys
)

// grow shapes the island on ever finer lattices and returns its heights in
// metres, negative at sea. Rivers choose their courses on the coarse ones,
// where a step is cheap; the fine ones only have to carve what is new.
func grow() *lattice {
	b := newBasin(4)
	b.found()
	b.run(90)
	for _, stage := range []struct{ scale, steps int }{{2, 30}, {1, 12}} {
		finer := newBasin(stage.scale)
		finer.inherit(b.lattice)
		finer.run(stage.steps)
		b = finer
	}
	b.fill()
	b.metres()
	return b.lattice
}

// found lays the first surface: a low dome, rough enough that rivers part.
func (b *basin) found() {
	for i := range b.v {
		if x, y := b.at(i%b.cols, i/b.cols); !b.sea[i] {
			depth, _ := inland(x, y)
			b.v[i] = float64(0.2*depth) + float64(0.1*fractal(67, x, y, 3)) + 0.1
		}
	}
}

// inherit takes the heights of a lattice with cells twice as large.
func (b *basin) inherit(coarse *lattice) {
	each(b.rows, func(row int) {
		for col := range b.cols {
			if i := row*b.cols + col; !b.sea[i] {
				b.v[i] = coarse.spline(float64(col)/2, float64(row)/2)
			}
		}
	})
}

// metres scales the heights so that the highest is summitM, then drowns them.
func (b *basin) metres() {
	top := 0.0
	for _, v := range b.v {
		top = max(top, v)
	}
	for i, v := range b.v {
		b.v[i] = float64(v*summitM/top) - drownM
	}
}
