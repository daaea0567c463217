package island

import (
	"sync/atomic"
	"testing"
)

func TestEachVisitsEveryRowOnce(t *testing.T) {
	for _, n := range []int{0, 1, 3, 4, 17} {
		seen := make([]atomic.Int32, n)
		each(n, func(row int) { seen[row].Add(1) })
		for row := range seen {
			if got := seen[row].Load(); got != 1 {
				t.Errorf("row %d of %d visited %d times, want once", row, n, got)
			}
		}
	}
}

func TestLatticesCoverTheSameWindow(t *testing.T) {
	for _, scale := range []int{1, 2, 4} {
		l := newLattice(scale)
		x, y := l.at(0, 0)
		if wx, wy := -halfCols*postEastKM, halfRows*postNorthKM; !near(x, wx) || !near(y, wy) {
			t.Errorf("scale %d starts at %v, %v km, want %v, %v", scale, x, y, wx, wy)
		}
		x, y = l.at(l.cols-1, l.rows-1)
		if wx, wy := halfCols*postEastKM, -halfRows*postNorthKM; !near(x, wx) || !near(y, wy) {
			t.Errorf("scale %d ends at %v, %v km, want %v, %v", scale, x, y, wx, wy)
		}
	}
}

func near(a, b float64) bool { return a-b < 1e-9 && b-a < 1e-9 }

func TestSplineKeepsPlanes(t *testing.T) {
	l := newLattice(4)
	for i := range l.v {
		l.v[i] = 3*float64(i%l.cols) - 2*float64(i/l.cols) + 7
	}
	for _, p := range [][2]float64{{5, 5}, {5.25, 6.5}, {40.9, 30.1}} {
		if got, want := l.spline(p[0], p[1]), 3*p[0]-2*p[1]+7; !near(got, want) {
			t.Errorf("spline at %v is %v, want %v", p, got, want)
		}
	}
	for _, p := range [][2]float64{{0, 0}, {float64(l.cols - 1), float64(l.rows - 1)}} {
		l.spline(p[0], p[1]) // must not read past the edge
	}
}

func TestIsletStandsOffTheCoast(t *testing.T) {
	if depth, _ := inland(islet.x, islet.y); depth <= 0 {
		t.Errorf("the islet's middle lies %v km inland, want land", depth)
	}
	// Every way from the islet to 2 km out must cross the sea.
	for _, p := range [][2]float64{{2, 0}, {-2, 0}, {0, 2}, {0, -2}} {
		if depth, _ := inland(islet.x+p[0], islet.y+p[1]); depth > 0 {
			t.Errorf("land %v km from the islet, want sea", p)
		}
	}
}
