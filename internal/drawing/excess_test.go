package drawing

import (
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"
)

func TestExcess(t *testing.T) {
	// y grows downwards: "over" is a line at 0 where the limit is 5.
	under, touching, over := 10.0, 5.0, 0.0
	at := func(lines ...float64) []pair {
		out := make([]pair, len(lines))
		for i, line := range lines {
			out[i] = pair{x: 2 * float64(i), line: line, limit: 5}
		}
		return out
	}
	for _, c := range []struct {
		name  string
		pairs []pair
		want  [][]point
	}{
		{"none", nil, nil},
		{"under all along", at(under, under), nil},
		{"touching", at(under, touching, under), nil},
		{"a summit", at(under, over, under), [][]point{{{1, 5}, {2, 0}, {3, 5}, {2, 5}}}},
		{"over all along", at(over, over), [][]point{{{0, 0}, {2, 0}, {2, 5}, {0, 5}}}},
		{"from the beginning", at(over, under), [][]point{{{0, 0}, {1, 5}, {0, 5}}}},
		{"to the end", at(under, over), [][]point{{{1, 5}, {2, 0}, {2, 5}}}},
		{"two summits", at(under, over, under, over), [][]point{{{1, 5}, {2, 0}, {3, 5}, {2, 5}}, {{5, 5}, {6, 0}, {6, 5}}}},
	} {
		if got := excess(c.pairs); !slices.EqualFunc(got, c.want, slices.Equal) {
			t.Errorf("%s: got %v, want %v", c.name, got, c.want)
		}
	}
}

// The outlines hold as much as lies between the lines, by the trapezium rule.
func TestExcessArea(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		var pairs []pair
		for i := range rapid.IntRange(2, 40).Draw(r, "pairs") {
			pairs = append(pairs, pair{float64(i), rapid.Float64Range(0, 100).Draw(r, "line"), rapid.Float64Range(0, 100).Draw(r, "limit")})
		}
		want := 0.0
		for i := 1; i < len(pairs); i++ {
			p, q := pairs[i-1].over(), pairs[i].over()
			switch {
			case p > 0 && q > 0:
				want += (p + q) / 2
			case p > 0:
				want += p * p / (p - q) / 2
			case q > 0:
				want += q * q / (q - p) / 2
			}
		}
		got := 0.0
		for _, outline := range excess(pairs) {
			for i, a := range outline {
				b := outline[(i+1)%len(outline)]
				got += (a.x*b.y - b.x*a.y) / 2
			}
		}
		if math.Abs(got-want) > 1e-9*(1+want) {
			r.Fatalf("got an area of %g, want %g", got, want)
		}
	})
}
