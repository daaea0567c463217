package drawing

import "slices"

// pair is two lines of a picture at one x.
type pair struct{ x, line, limit float64 }

// over is how far the line lies above the limit: y grows downwards.
func (p pair) over() float64 { return p.limit - p.line }

// excess is where the line lies above the limit: for each stretch the outline
// between the two, from where they cross to where they cross again.
func excess(pairs []pair) [][]point {
	var out [][]point
	var upper, lower []point
	finish := func() {
		if len(upper) > 0 {
			slices.Reverse(lower)
			out = append(out, append(upper, lower...))
		}
		upper, lower = nil, nil
	}
	for i, here := range pairs {
		if i > 0 {
			if before := pairs[i-1]; (before.over() > 0) != (here.over() > 0) {
				upper = append(upper, crossing(before, here))
			}
		}
		if here.over() > 0 {
			upper = append(upper, point{here.x, here.line})
			lower = append(lower, point{here.x, here.limit})
			continue
		}
		finish()
	}
	finish()
	return out
}

// crossing is where line and limit meet between two pairs of which one is over.
func crossing(before, after pair) point {
	t := before.over() / (before.over() - after.over())
	return point{before.x + t*(after.x-before.x), before.limit + t*(after.limit-before.limit)}
}
