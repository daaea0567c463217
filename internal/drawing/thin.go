package drawing

import "math"

// How many columns a profile line is thinned to. Each is drawn with two points
// at most.
const (
	allColumns = 500
	fewColumns = 120 // for a line that only goes along with another
)

// thin picks the samples to draw as a line. Where they are few, all are. Of many,
// each column of the drawing keeps its lowest and its highest, so that no
// summit and no hollow is lost; a column without any value keeps one sample
// without, so that a line breaks there. The first and the last sample are kept,
// and so are those on either side of columns without any, across which a line
// would else start from a summit that it does not. Samples may lie at any
// distances from each other.
func thin(distances, values []float64, columns int) []int {
	n := len(values)
	picked := make([]int, 0, min(n, 2*columns+2))
	if n <= 2*columns {
		for i := range n {
			picked = append(picked, i)
		}
		return picked
	}
	columnOf := func(i int) int { return int(distances[i] / distances[n-1] * float64(columns)) }
	picked = append(picked, 0)
	before := 0
	for i := 1; i < n-1; {
		column, from := columnOf(i), i
		for ; i < n-1 && columnOf(i) == column; i++ {
		}
		low, high := extremes(values, from, i)
		low, high = min(low, high), max(low, high)
		if column > before+1 && low > from {
			picked = append(picked, from)
		}
		picked = append(picked, low)
		if high > low {
			picked = append(picked, high)
		}
		if columnOf(i) > column+1 && i-1 > high {
			picked = append(picked, i-1)
		}
		before = column
	}
	return append(picked, n-1)
}

// extremes are the lowest and the highest of the values from one index to
// before another; of those without one, the first.
func extremes(values []float64, from, to int) (low, high int) {
	low, high = from, from
	for i := from; i < to; i++ {
		if values[i] < values[low] || math.IsNaN(values[low]) {
			low = i
		}
		if values[i] > values[high] || math.IsNaN(values[high]) {
			high = i
		}
	}
	return low, high
}

// runs splits the picked samples where values has none.
func runs(picked []int, values []float64) [][]int {
	var out [][]int
	from := -1
	for at, i := range picked {
		switch {
		case math.IsNaN(values[i]):
			if from >= 0 {
				out = append(out, picked[from:at])
			}
			from = -1
		case from < 0:
			from = at
		}
	}
	if from >= 0 {
		out = append(out, picked[from:])
	}
	return out
}

// span is a stretch of the plot, from left to right.
type span struct{ from, to float64 }

// joinSpans joins stretches, given from left to right by their beginning, that
// overlap or lie closer than gap.
func joinSpans(spans []span, gap float64) []span {
	var out []span
	for _, s := range spans {
		if last := len(out) - 1; last >= 0 && s.from-out[last].to < gap {
			out[last].to = max(out[last].to, s.to)
			continue
		}
		out = append(out, s)
	}
	return out
}
