package drawing

import "math"

// drawnColumns times two is the most points of one profile line.
const drawnColumns = 500

// thin picks the samples to draw as a line. Few samples are all drawn. Of many,
// each column of the drawing keeps its lowest and its highest, so that no
// summit and no hollow is lost; a column without any value keeps one sample
// without, so that a line breaks there. The first and the last sample are kept.
func thin(distances, values []float64, lengthM float64) []int {
	n := len(values)
	picked := make([]int, 0, min(n, 2*drawnColumns+2))
	if n <= 2*drawnColumns {
		for i := range n {
			picked = append(picked, i)
		}
		return picked
	}
	picked = append(picked, 0)
	for i := 1; i < n-1; {
		column := columnOf(distances[i], lengthM)
		low, high := i, i
		for ; i < n-1 && columnOf(distances[i], lengthM) == column; i++ {
			if values[i] < values[low] || math.IsNaN(values[low]) {
				low = i
			}
			if values[i] > values[high] || math.IsNaN(values[high]) {
				high = i
			}
		}
		picked = append(picked, min(low, high))
		if low != high {
			picked = append(picked, max(low, high))
		}
	}
	return append(picked, n-1)
}

func columnOf(d, lengthM float64) int { return int(d / lengthM * drawnColumns) }

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

// excess is where one line of a picture lies above another: for each stretch
// the outline between the two, with the places where they cross. The lines
// share their x.
func excess(x, line, limit []float64) [][]point {
	var out [][]point
	var upper, lower []point
	finish := func() {
		if len(upper) > 0 {
			for i := len(lower) - 1; i >= 0; i-- {
				upper = append(upper, lower[i])
			}
			out = append(out, upper)
		}
		upper, lower = nil, nil
	}
	for i := range x {
		over := limit[i] - line[i] // y grows downwards
		if i > 0 {
			before := limit[i-1] - line[i-1]
			if (before > 0) != (over > 0) {
				t := before / (before - over)
				crossing := point{x[i-1] + t*(x[i]-x[i-1]), limit[i-1] + t*(limit[i]-limit[i-1])}
				upper = append(upper, crossing)
			}
		}
		if over > 0 {
			upper = append(upper, point{x[i], line[i]})
			lower = append(lower, point{x[i], limit[i]})
			continue
		}
		finish()
	}
	finish()
	return out
}
