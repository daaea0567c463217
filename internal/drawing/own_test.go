package drawing

import (
	"math"
	"regexp"
	"slices"
	"strings"
	"testing"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

// street is the case of walls.
func street(t *testing.T) *assess.Assessment {
	t.Helper()
	all := cases()
	return all[slices.IndexFunc(all, func(c drawingCase) bool { return c.name == "walls" })].assessment(t)
}

// The samples that are judged are those that the judge takes: it finds the
// least clearance of all of them.
func TestJudgedRange(t *testing.T) {
	a := street(t)
	for _, c := range []struct {
		name       string
		ownA, ownB float64
	}{{"none", 0, 0}, {"both", 24.001, 28.02}, {"one", 0, 28.02}, {"all", 300, 300}} {
		a.Profile.OwnAM, a.Profile.OwnBM = c.ownA, c.ownB
		v := newView(a)
		judgement, err := profile.Assess(&a.Link, &a.Profile, new(profile.Workspace))
		if err != nil {
			t.Fatal(err)
		}
		least := math.Inf(1)
		for _, r := range v.ratio {
			if !math.IsNaN(r) {
				least = min(least, r)
			}
		}
		first, last := v.judged()
		if want := judgement.Clearance[0].MinRatio; first <= last && !near(least, want) || (first > last) != math.IsNaN(want) {
			t.Errorf("%s: got samples %d to %d with at least %g F1, want %g", c.name, first, last, least, want)
		}
	}
}

func TestOwnSpans(t *testing.T) {
	a := street(t)
	v := newView(a)
	v.plot = box{left: 100, right: 500}
	length := v.lengthM
	for _, c := range []struct {
		name       string
		ownA, ownB float64
		want       []span
	}{
		{"none", 0, 0, nil},
		{"both", length / 4, length / 8, []span{{100, 200}, {450, 500}}},
		{"narrow", 0.01, 0.01, []span{{100, 107}, {493, 500}}},
		{"all of a short path", length * 0.6, length * 0.6, []span{{100, 500}}},
		{"beyond the path", 2 * length, 0, []span{{100, 500}}},
	} {
		a.Profile.OwnAM, a.Profile.OwnBM = c.ownA, c.ownB
		got := v.ownSpans()
		same := func(p, q span) bool { return math.Abs(p.from-q.from) < 1e-6 && math.Abs(p.to-q.to) < 1e-6 }
		if !slices.EqualFunc(got, c.want, same) {
			t.Errorf("%s: got %v, want %v", c.name, got, c.want)
		}
	}
}

// What an antenna stands on is drawn, but not as being in the way.
func TestOwnIsNotInTheWay(t *testing.T) {
	for _, own := range []bool{false, true} {
		a := street(t)
		for i, d := range a.Profile.DistanceM {
			if d > 5 && d < 24 {
				a.Profile.CoverM[i] += 20 // a wall of the own building, above its antenna
			}
		}
		if !own {
			a.Profile.OwnAM, a.Profile.OwnBM = 0, 0
		}
		s := newSheet(a)
		s.view.plot = box{left: 0, right: a.Link.Path.LengthM, top: 0, bottom: 300}
		s.intrusion()
		found := false
		for _, start := range regexp.MustCompile(`M([0-9.]+) `).FindAllStringSubmatch(string(s.body), -1) {
			found = found || parsed(t, start[1]) < 25
		}
		if found == own {
			t.Errorf("own building %v: got something in the way there: %v", own, found)
		}
		svg := string(draw(t, a))
		if got := strings.Contains(svg, ">not judged<") && strings.Contains(svg, "own building, not judged"); got != own {
			t.Errorf("own building %v: got it marked: %v", own, got)
		}
	}
}

// The whole path under the antennas' own roofs still gives a sheet.
func TestNothingBetween(t *testing.T) {
	a := street(t)
	a.Profile.OwnAM, a.Profile.OwnBM = 300, 300
	var err error
	if a.Judgement, err = profile.Assess(&a.Link, &a.Profile, new(profile.Workspace)); err != nil {
		t.Fatal(err)
	}
	got := walk(t, draw(t, a))
	all := ""
	for _, w := range got.texts {
		all += spoken(w.text) + " "
	}
	for _, want := range []string{"nothing is left to judge", "Not known while the path cannot be judged.", "not judged"} {
		if !strings.Contains(all, want) {
			t.Errorf("got no %q in %q", want, all)
		}
	}
}

// A wall of a millimetre is drawn upright, to the roof's full height.
func TestWallsAreUpright(t *testing.T) {
	a := street(t)
	v := newView(a)
	v.plot = box{left: 134, right: 940, top: 0, bottom: 300}
	tall := 0
	for _, area := range v.areas(thin(a.Profile.DistanceM, v.top, allColumns), v.top) {
		for i := 2; i < len(area)-1; i++ {
			if p, q := area[i-1], area[i]; math.Abs(p.x-q.x) < 0.01 && math.Abs(p.y-q.y) > 30 {
				tall++
			}
		}
	}
	if want := 14; tall != want { // two of each of six blocks, and one of each that an end stands in
		t.Errorf("got %d walls, want %d", tall, want)
	}
}

// A kept profile's distances are rounded: the place found is the roof's edge,
// not the foot of its wall a millimetre on.
func TestSampleAtAWall(t *testing.T) {
	a := street(t)
	s := newSheet(a)
	for i, d := range a.Profile.DistanceM {
		for _, off := range []float64{-5e-5, 0, 5e-5} {
			if got := s.sampleAt(d + off); math.Abs(a.Profile.DistanceM[got]-d) > 2e-4 {
				t.Fatalf("at %.5f m: got sample %d at %.5f m, want %d", d+off, got, a.Profile.DistanceM[got], i)
			}
		}
	}
}
