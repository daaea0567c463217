package island

import (
	"math"
	"slices"
)

// drain points each node of a row at its steepest lower neighbour.
func (b *basin) drain(row int) {
	diagonal := span(b.dx, b.dy)
	for col := range b.cols {
		i := row*b.cols + col
		b.down[i] = int32(i)
		if b.sea[i] {
			continue
		}
		best := 0.0
		for dr := -1; dr <= 1; dr++ {
			for dc := -1; dc <= 1; dc++ {
				j := i + dr*b.cols + dc
				slope := (b.v[i] - b.v[j]) / b.stride(dr, dc, diagonal) * fault(i, j)
				if slope > best {
					best, b.down[i] = slope, int32(j)
				}
			}
		}
	}
}

// fault weighs the way from node i to j by a chance of 0.7 to 1.3, as cracks in
// the rock would. Without it rivers run in parallel along the lattice.
func fault(i, j int) float64 {
	return 0.7 + float64(float64(hash(59, int64(i), int64(j))>>40)*(0.6/(1<<24)))
}

// stride is the distance to the neighbour dr rows and dc columns away, in km.
func (b *basin) stride(dr, dc int, diagonal float64) float64 {
	switch {
	case dr == 0:
		return b.dx
	case dc == 0:
		return b.dy
	}
	return diagonal
}

// sort lists every node after the one it drains to (Braun and Willett 2013,
// Geomorphology 180, section 3: the stack).
func (b *basin) sort() {
	for i := range b.first {
		b.first[i] = -1
	}
	b.order = b.order[:0]
	for i := len(b.down) - 1; i >= 0; i-- {
		if d := b.down[i]; int(d) == i {
			b.order = append(b.order, d)
		} else {
			b.next[i], b.first[d] = b.first[d], int32(i)
		}
	}
	for at := 0; at < len(b.order); at++ {
		for j := b.first[b.order[at]]; j >= 0; j = b.next[j] {
			b.order = append(b.order, j)
		}
	}
}

// gather sums the ground drained through each node, from the divides down.
func (b *basin) gather() {
	cell := b.dx * b.dy
	for i := range b.area {
		b.area[i] = cell
	}
	for _, i := range slices.Backward(b.order) {
		if b.down[i] != i {
			b.area[b.down[i]] += b.area[i]
		}
	}
}

// cut raises every node by its uplift and lowers it by the stream-power law,
// implicitly from the mouths up, which is stable for any step (the same paper,
// equation 22, with exponents m = 1/2 and n = 1).
func (b *basin) cut() {
	diagonal := span(b.dx, b.dy)
	for _, i := range b.order {
		if b.sea[i] {
			b.v[i] = shoreLevel
			continue
		}
		risen := b.v[i] + float64(erodeTime*b.uplift[i])
		d := int(b.down[i])
		if d == int(i) {
			b.v[i] = risen
			continue
		}
		dr, dc := d/b.cols-int(i)/b.cols, d%b.cols-int(i)%b.cols
		f := cutting * erodeTime * math.Sqrt(b.area[i]) / b.stride(dr, dc, diagonal)
		b.v[i] = (risen + float64(f*b.v[d])) / (1 + f)
	}
}

// soften lets soil creep downhill, which rounds the crests.
func (b *basin) soften() {
	each(b.rows, func(row int) {
		for i := row * b.cols; i < (row+1)*b.cols; i++ {
			b.scratch[i] = b.v[i]
			if !b.sea[i] {
				bend := b.v[i-1] + b.v[i+1] + b.v[i-b.cols] + b.v[i+b.cols] - float64(4*b.v[i])
				b.scratch[i] += float64(creep * bend)
			}
		}
	})
	b.v, b.scratch = b.scratch, b.v
}
