package screening

import (
	"slices"
	"testing"

	"pgregory.net/rapid"

	"ridgehop/internal/screening/intake"
)

// The first 4^6 steps fill the corner square of 64 cells a side, each cell once,
// and each step goes to a cell beside the last: that is what the curve is.
func TestHilbertGoesFromCellToCell(t *testing.T) {
	const side = 64
	at := make([][2]int, side*side)
	seen := make([]bool, side*side)
	for x := range side {
		for y := range side {
			d := hilbert(uint32(x), uint32(y))
			if d >= side*side || seen[d] {
				t.Fatalf("(%d, %d): got %d, want one of %d that no other cell has", x, y, d, side*side)
			}
			seen[d], at[d] = true, [2]int{x, y}
		}
	}
	for d := 1; d < len(at); d++ {
		dx, dy := at[d][0]-at[d-1][0], at[d][1]-at[d-1][1]
		if dx*dx+dy*dy != 1 {
			t.Fatalf("step %d: got %v after %v, want a cell beside it", d, at[d], at[d-1])
		}
	}
}

// Across the whole square a cell beside another has a step to some neighbour: the
// one before it and the one behind it on the curve lie beside it.
func TestHilbertStepsAnywhere(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x, y := rapid.Uint32Range(1, 65534).Draw(t, "x"), rapid.Uint32Range(1, 65534).Draw(t, "y")
		d := hilbert(x, y)
		around := []uint32{hilbert(x-1, y), hilbert(x+1, y), hilbert(x, y-1), hilbert(x, y+1)}
		if !slices.Contains(around, d-1) || !slices.Contains(around, d+1) {
			t.Fatalf("(%d, %d): got %d with %v around, want both steps", x, y, d, around)
		}
	})
}

func TestAlongCurveTakesEveryRowOnce(t *testing.T) {
	rows := []intake.Row{place(7, 46), {Problem: &intake.RowProblem{}}, place(8, 47), place(7.001, 46.001), place(7, 46)}
	order := alongCurve(rows)
	if want := []int32{1, 0, 4, 3, 2}; !slices.Equal(order, want) && !slices.Equal(order, []int32{0, 1, 4, 3, 2}) {
		t.Errorf("got %v, want %v", order, want)
	}
	if got := alongCurve([]intake.Row{place(7, 46)}); !slices.Equal(got, []int32{0}) {
		t.Errorf("a single place: got %v", got)
	}
}

func place(lon, lat float64) intake.Row {
	return intake.Row{Candidate: intake.Candidate{ID: "c", Lon: lon, Lat: lat}}
}
