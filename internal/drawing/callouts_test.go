package drawing

import (
	"strings"
	"testing"

	"ridgehop/profile"

	"pgregory.net/rapid"
)

func TestSpread(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		const left, right = 100.0, 900.0
		at := left
		var boxes []callout
		for range rapid.IntRange(1, maxCallouts).Draw(r, "boxes") {
			at += rapid.Float64Range(0, 200).Draw(r, "apart")
			boxes = append(boxes, callout{centre: min(at, right), width: rapid.Float64Range(80, 190).Draw(r, "width")})
		}
		spread(boxes, left, right)
		edge := left
		for i, b := range boxes {
			if b.centre-b.width/2 < edge-1e-9 {
				r.Fatalf("box %d of %+v begins before %g", i, boxes, edge)
			}
			edge = b.centre + b.width/2 + calloutGap
		}
		if edge-calloutGap > right+1e-9 {
			r.Fatalf("the last box of %+v ends at %g, after %g", boxes, edge-calloutGap, right)
		}
	})
}

func TestGrouped(t *testing.T) {
	got := grouped([]profile.Obstruction{
		{K: 1.33, FromM: 100, ToM: 200, ShortM: 3}, {K: 1.33, FromM: 900, ToM: 950, ShortM: 1},
		{K: 0.6, FromM: 150, ToM: 400, ShortM: 8}, {K: 0.6, FromM: 390, ToM: 410, ShortM: 2},
	})
	if len(got) != 2 || got[0].ShortM != 8 || got[1].ShortM != 1 {
		t.Errorf("got %+v, want the worst of the first three, and the one apart", got)
	}
}

func TestFitting(t *testing.T) {
	boxes := []callout{{width: 100}, {width: 100}, {width: 100}}
	for _, c := range []struct {
		room float64
		want int
	}{{400, 3}, {320, 3}, {319, 2}, {100, 1}, {99, 0}} {
		if got := len(fitting(boxes, c.room)); got != c.want {
			t.Errorf("room of %g: got %d boxes, want %d", c.room, got, c.want)
		}
	}
}

func TestManyObstructions(t *testing.T) {
	a := cases()[2].assessment(t)
	a.Judgement.Obstructions = nil
	for i := range 9 {
		at := 1000 * float64(i+1)
		a.Judgement.Obstructions = append(a.Judgement.Obstructions, profile.Obstruction{
			K: profile.MedianK, F1Fraction: 1, FromM: at, ToM: at + 10, PeakAtM: at, TopM: 200, ShortM: float64(i + 1)})
	}
	got := walk(t, draw(t, a))
	named, more := 0, false
	for _, w := range got.texts {
		if strings.HasSuffix(w.text, " short") {
			named++
		}
		more = more || w.text == "and 5 more places that fall short by less"
	}
	if named != maxCallouts || !more {
		t.Errorf("got %d named and the rest told: %v, want %d and true", named, more, maxCallouts)
	}
}
