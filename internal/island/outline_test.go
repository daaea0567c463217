package island

import "testing"

func TestAlongMeasuresFromTheTaperingSection(t *testing.T) {
	a, b := knot{0, 0, 2, 1}, knot{10, 0, 4, 0}
	tests := []struct {
		name         string
		x, y         float64
		inside, lift float64
	}{
		{"first knot", 0, 0, 2, 1},
		{"last knot", 10, 0, 4, 0},
		{"middle", 5, 0, 3, 0.5},
		{"edge of the middle", 5, 3, 0, 0.5},
		{"beyond the first knot", -3, 0, -1, 1},
		{"beyond the last knot", 10, 9, -5, 0},
	}
	for _, tt := range tests {
		inside, lift := along(a, b, tt.x, tt.y)
		if !near(inside, tt.inside) || !near(lift, tt.lift) {
			t.Errorf("%s: inside %v, lift %v, want %v, %v", tt.name, inside, lift, tt.inside, tt.lift)
		}
	}
}

func TestBaysAreSeaAndMassifsAreLand(t *testing.T) {
	for _, b := range bays {
		// Noise may shift a bay, not fill the whole of it.
		sea := false
		for _, step := range []float64{-1, 0, 1} {
			depth, _ := mainland(b.x+step, b.y)
			sea = sea || depth < 0
		}
		if !sea {
			t.Errorf("no sea in the bay at %v, %v km", b.x, b.y)
		}
	}
	for _, k := range backbone[1 : len(backbone)-1] {
		if depth, lift := mainland(k.x, k.y); depth < 1 || lift <= 0 {
			t.Errorf("knot at %v, %v km lies %v km inland with lift %v, want land", k.x, k.y, depth, lift)
		}
	}
}

func TestPlainRisesLess(t *testing.T) {
	_, low := mainland(plain.x, plain.y)
	_, high := mainland(backbone[2].x, backbone[2].y)
	if low > high/3 {
		t.Errorf("lift %v on the plain against %v on the massif, want under a third", low, high)
	}
}

func TestWindowEdgeIsOpenSea(t *testing.T) {
	l := newLattice(1)
	for row := range l.rows {
		for _, col := range []int{0, l.cols - 1} {
			x, y := l.at(col, row)
			if depth, _ := inland(x, y); depth > -0.5 {
				t.Fatalf("%v km inland at the window's edge, want open sea", depth)
			}
		}
	}
	for col := range l.cols {
		for _, row := range []int{0, l.rows - 1} {
			x, y := l.at(col, row)
			if depth, _ := inland(x, y); depth > -0.5 {
				t.Fatalf("%v km inland at the window's edge, want open sea", depth)
			}
		}
	}
}
