package drawing

import (
	"math"
	"slices"
	"strings"
	"testing"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

func splitLines(s string) []string { return strings.Split(s, "\n") }

// linesOf draws a case after a change and returns its texts.
func linesOf(t *testing.T, number int, change func(*assess.Assessment)) []string {
	t.Helper()
	a := cases()[number].assessment(t)
	change(a)
	var lines []string
	for _, w := range walk(t, draw(t, a)).texts {
		lines = append(lines, spoken(w.text))
	}
	return lines
}

func TestSources(t *testing.T) {
	got := linesOf(t, 0, func(a *assess.Assessment) {
		a.Profile.Sources = nil
		for i := range 9 {
			a.Profile.Sources = append(a.Profile.Sources, profile.Source{Name: "tile" + string(rune('a'+i)), Version: "1", Kind: profile.KindSurface, Samples: 10})
		}
	})
	for _, want := range []string{"tilea", "tilef", "and 3 more", "version 1; file date not known; with roofs and trees; no error stated"} {
		if !slices.Contains(got, want) {
			t.Errorf("got no %q in %q", want, got)
		}
	}
	if slices.Contains(got, "tileg") {
		t.Error("got a seventh source")
	}
	none := linesOf(t, 0, func(a *assess.Assessment) { a.Profile.Sources, a.Profile.SourceIndex = nil, nil })
	if !slices.Contains(none, "no raster holds a height on this path") {
		t.Errorf("got %q, want it to say that no raster is there", none)
	}
}

func TestCriteriaNames(t *testing.T) {
	for _, c := range []struct {
		set  profile.CriteriaSet
		own  bool
		want string
	}{
		{profile.P530Temperate, false, "ITU-R P.530, temperate climate"},
		{profile.P530Tropical, false, "ITU-R P.530, tropical climate"},
		{profile.F160, false, "0.6 F1 at the median k"},
		{profile.F160, true, "set by the caller"},
		{"another", false, "another"},
	} {
		if got := criteriaName(c.set, c.own); got != c.want {
			t.Errorf("%s: got %q, want %q", c.set, got, c.want)
		}
	}
}

func TestCriteriaNotes(t *testing.T) {
	isolated := strings.Join(linesOf(t, 2, func(a *assess.Assessment) { a.Judgement.Clearance[1].Isolated = true }), " ")
	if want := "At k 0.387 the obstruction is isolated, so that the smaller fraction is enough."; !strings.Contains(isolated, want) {
		t.Errorf("got no %q in %q", want, isolated)
	}
	none := linesOf(t, 2, func(a *assess.Assessment) { a.Judgement.Diffraction = nil })
	if strings.Contains(strings.Join(none, " "), "iffraction") {
		t.Errorf("got %q, want no word of diffraction", none)
	}
}

func TestNoCautions(t *testing.T) {
	got := linesOf(t, 0, func(a *assess.Assessment) { a.Cautions = nil })
	if slices.Contains(got, "Before anyone acts on this") {
		t.Error("got the heading of cautions without any")
	}
}

func TestEightCriteria(t *testing.T) {
	linesOf(t, 2, func(a *assess.Assessment) {
		for len(a.Judgement.Clearance) < 8 {
			c := a.Judgement.Clearance[0]
			c.K = 0.3 + 0.2*float64(len(a.Judgement.Clearance))
			a.Judgement.Clearance = append(a.Judgement.Clearance, c)
			a.Link.Criteria = append(a.Link.Criteria, a.Link.Criteria[0])
		}
	})
}

// A criterion that asks for no part of the zone is drawn only if no other is
// there.
func TestDrawnCriterion(t *testing.T) {
	at := func(fractions ...float64) (out []profile.Clearance) {
		for _, f := range fractions {
			out = append(out, profile.Clearance{F1Fraction: f})
		}
		return out
	}
	for _, c := range []struct {
		all  []profile.Clearance
		want int
	}{{at(1, 0), 0}, {at(0, 0.6), 1}, {at(0, 0), 0}} {
		if got := drawnIndex(c.all); got != c.want {
			t.Errorf("%v: got %d, want %d", c.all, got, c.want)
		}
	}
}

func TestVoidSpans(t *testing.T) {
	v := newView(cases()[0].assessment(t))
	v.plot = box{left: 0, right: 1000, bottom: 100}
	n := len(v.ground)
	v.ground = slices.Repeat([]float64{100}, n)
	v.ground[0] = math.NaN()
	for i := 100; i < 120; i++ {
		v.ground[i] = math.NaN()
	}
	got := v.voidSpans()
	if len(got) != 2 {
		t.Fatalf("got %v, want the end and the stretch", got)
	}
	from, to := v.x(v.a.Profile.DistanceM[99]), v.x(v.a.Profile.DistanceM[120])
	if got[0].from != 0 || !near(got[1].from, from) || !near(got[1].to, to) {
		t.Errorf("got %v, want one from 0 and one from %g to %g, known sample to known sample", got, from, to)
	}
	v.ground[n-1] = math.NaN()
	if got := v.voidSpans(); got[len(got)-1].to != v.plot.right {
		t.Errorf("got %v, want the last to reach the end", got)
	}
}

// No point of the ground is drawn inside a void.
func TestVoidIsNotGround(t *testing.T) {
	for _, number := range []int{4, 5} {
		a := cases()[number].assessment(t)
		v := newView(a)
		v.plot = box{left: 0, right: 1000, bottom: 100}
		for _, area := range v.areas(thin(a.Profile.DistanceM, v.ground, allColumns), v.ground) {
			for _, gap := range v.voidSpans() {
				if first, last := area[0].x, area[len(area)-1].x; first < gap.to-2 && last > gap.from+2 {
					t.Errorf("case %d: got ground from %g to %g over the void from %g to %g", number, first, last, gap.from, gap.to)
				}
			}
		}
	}
}
