package island

import (
	"slices"
	"testing"
)

func TestEveryValleyDrainsToTheSea(t *testing.T) {
	b := newBasin(4)
	b.found()
	b.run(10)
	b.fill()
	for i, sea := range b.sea {
		if sea {
			continue
		}
		low := b.v[i]
		for _, j := range b.around(i) {
			low = min(low, b.v[j])
		}
		if low >= b.v[i] {
			t.Fatalf("node %d at %v has no lower neighbour", i, b.v[i])
		}
	}
}

func TestRiversGatherAllTheRain(t *testing.T) {
	b := newBasin(4)
	b.found()
	b.run(3)
	each(b.rows, b.drain)
	b.sort()
	b.gather()
	if len(b.order) != len(b.v) {
		t.Fatalf("%d nodes in order, want %d", len(b.order), len(b.v))
	}
	placed, mouths := make([]bool, len(b.v)), 0.0
	for _, i := range b.order {
		if d := b.down[i]; d == i {
			mouths += b.area[i]
		} else if !placed[d] {
			t.Fatalf("node %d comes before node %d, which it drains to", i, d)
		}
		placed[i] = true
	}
	want := b.dx * b.dy * float64(len(b.v))
	if off := mouths/want - 1; off > 1e-9 || off < -1e-9 {
		t.Errorf("mouths drain %v km^2, want %v", mouths, want)
	}
}

func TestCutLowersTowardsTheOutlet(t *testing.T) {
	b := newBasin(4)
	b.found()
	b.run(20)
	for i, sea := range b.sea {
		if sea && b.v[i] != shoreLevel {
			t.Fatalf("sea at %v, want %v", b.v[i], shoreLevel)
		}
		if !sea && b.v[i] < shoreLevel {
			t.Fatalf("land at %v, cut below the shore", b.v[i])
		}
	}
}

func TestFloodPopsLowestFirst(t *testing.T) {
	f := flood{v: []float64{5, 1, 4, 1, 3, 9, 2}}
	for i := range f.v {
		f.push(int32(i))
	}
	var got []int32
	for len(f.nodes) > 0 {
		got = append(got, f.pop())
	}
	if want := []int32{1, 3, 6, 4, 2, 0, 5}; !slices.Equal(got, want) {
		t.Errorf("order %v, want %v", got, want)
	}
}
