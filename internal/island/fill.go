package island

// flood is a binary heap of nodes by height, lowest first. Equal heights come
// out by index, so the order is the same on every run.
type flood struct {
	nodes []int32
	v     []float64
}

func (f *flood) less(a, b int32) bool {
	if f.v[a] != f.v[b] {
		return f.v[a] < f.v[b]
	}
	return a < b
}

func (f *flood) push(n int32) {
	f.nodes = append(f.nodes, n)
	for i := len(f.nodes) - 1; i > 0; {
		up := (i - 1) / 2
		if !f.less(f.nodes[i], f.nodes[up]) {
			return
		}
		f.nodes[i], f.nodes[up] = f.nodes[up], f.nodes[i]
		i = up
	}
}

func (f *flood) pop() int32 {
	top, last := f.nodes[0], len(f.nodes)-1
	f.nodes[0] = f.nodes[last]
	f.nodes = f.nodes[:last]
	for i := 0; ; {
		child := 2*i + 1
		if child >= last {
			return top
		}
		if child+1 < last && f.less(f.nodes[child+1], f.nodes[child]) {
			child++
		}
		if !f.less(f.nodes[child], f.nodes[i]) {
			return top
		}
		f.nodes[i], f.nodes[child] = f.nodes[child], f.nodes[i]
		i = child
	}
}

// fill raises every pit to its outlet, so that all ground drains to the coast
// (priority-flood; Barnes, Lehman and Mulla 2014, Computers & Geosciences 62).
func (b *basin) fill() {
	const step = 1e-6 // keeps a filled pit sloping to its outlet
	f := flood{v: b.v}
	seen := make([]bool, len(b.v))
	for i, sea := range b.sea {
		if sea {
			seen[i] = true
			f.push(int32(i))
		}
	}
	for len(f.nodes) > 0 {
		i := int(f.pop())
		for _, j := range b.around(i) {
			if j >= 0 && j < len(b.v) && !seen[j] {
				seen[j] = true
				b.v[j] = max(b.v[j], b.v[i]+step)
				f.push(int32(j))
			}
		}
	}
}

// around lists the eight neighbours of node i. The rim is all sea, so nodes
// wrapped from one edge to the other are already seen and do no harm.
func (b *basin) around(i int) [8]int {
	n := b.cols
	return [8]int{i - n - 1, i - n, i - n + 1, i - 1, i + 1, i + n - 1, i + n, i + n + 1}
}
