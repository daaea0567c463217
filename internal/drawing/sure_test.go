package drawing

import (
	"math"
	"slices"
	"strings"
	"testing"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

func TestSureWords(t *testing.T) {
	for _, c := range []struct {
		p    float64
		want string
	}{
		{1, "over 99 % sure"}, {0.9901, "over 99 % sure"}, {0.99, "99 % sure"}, {0.9799, "97 % sure"}, {0.9, "90 % sure"},
		{math.Nextafter(0.9, 0) - 1e-9, "89 % sure"}, {0.29, "29 % sure"}, {0.01, "1 % sure"}, {0.0099, "under 1 % sure"}, {0, "under 1 % sure"},
	} {
		if got := spoken(sureWords(c.p)); got != c.want {
			t.Errorf("%v: got %q, want %q", c.p, got, c.want)
		}
	}
}

// judged is a met or missed path of a confidence.
func judgedWith(confidence float64, raise profile.Raise, extra profile.ExtraHeight) *assess.Assessment {
	return &assess.Assessment{
		Profile:   profile.Profile{Sources: []profile.Source{{ErrorM: 1}}},
		Judgement: profile.Assessment{Verdict: profile.Marginal, Confidence: confidence, Raise: raise, ExtraHeight: extra},
	}
}

func TestSureness(t *testing.T) {
	nan := math.NaN()
	met, more := profile.Raise{CapM: 20000}, profile.ExtraHeight{AM: 5, BM: 7, BothM: 3}
	exact := judgedWith(1, met, profile.ExtraHeight{})
	exact.Profile.Sources[0].ErrorM = 0
	for _, c := range []struct {
		name       string
		a          *assess.Assessment
		met, every string
	}{
		{"sure", judgedWith(0.973, met, profile.ExtraHeight{}), "All criteria met, 97 % sure.", "97 % sure that every criterion holds, given the errors of the heights."},
		{"very sure", judgedWith(1, met, profile.ExtraHeight{}), "All criteria met, over 99 % sure.", "Over 99 % sure that every criterion holds, given the errors of the heights."},
		{"unsure", judgedWith(0.71, met, more), "All criteria met, but only 71 % sure; a clear path is 90 % sure.", "71 % sure that every criterion holds, given the errors of the heights."},
		{"over voids", judgedWith(nan, met, profile.ExtraHeight{AM: nan, BM: nan, BothM: nan}), "All criteria met.", ""},
		{"heights taken as exact", exact, "All criteria met.", ""},
		{"a judgement of an engine that did not ask", judgedWith(0, met, profile.ExtraHeight{}), "All criteria met.", ""},
	} {
		if got := spoken(metWords(c.a)); got != c.met {
			t.Errorf("%s: got %q, want %q", c.name, got, c.met)
		}
		if got := spoken(sureSentence(c.a)); got != c.every {
			t.Errorf("%s: got %q, want %q", c.name, got, c.every)
		}
	}
}

func TestRaiseToBeSure(t *testing.T) {
	nan := math.NaN()
	met := profile.Raise{CapM: 20000}
	for _, c := range []struct {
		name string
		a    *assess.Assessment
		want string
	}{
		{"sure already", judgedWith(0.95, met, profile.ExtraHeight{}), "No antenna needs to be raised."},
		{"some", judgedWith(0.71, met, profile.ExtraHeight{AM: 5.21, BM: nan, BothM: 3.1}),
			"To be 90 % sure raise A alone by 5.3 m, or B alone by over 200 m, or both by 3.1 m each."},
		{"none up to the cap", judgedWith(0.71, profile.Raise{CapM: 60}, profile.ExtraHeight{AM: nan, BM: nan, BothM: nan}),
			"Nothing to meet the criteria; no raise up to 60 m makes that 90 % sure."},
		{"beyond a mast", judgedWith(0.71, met, profile.ExtraHeight{AM: 900, BM: 900, BothM: 400}),
			"Nothing to meet the criteria; no raise up to 200 m makes that 90 % sure."},
	} {
		if got := spoken(raiseSentence(c.a)); got != c.want {
			t.Errorf("%s: got %q, want %q", c.name, got, c.want)
		}
	}
}

// A path that misses a criterion shows what meets it, and what more is sure.
func TestSureCells(t *testing.T) {
	change := func(extra profile.ExtraHeight) func(*assess.Assessment) {
		return func(a *assess.Assessment) { a.Judgement.Confidence, a.Judgement.ExtraHeight = 0.2, extra }
	}
	got := linesOf(t, 1, change(profile.ExtraHeight{AM: 12.01, BM: 250, BothM: 7}))
	for _, want := range []string{"90 % sure: +12.1 m", "90 % sure: over 200 m", "90 % sure: +7.0 m"} {
		if !slices.Contains(got, want) {
			t.Errorf("got no %q in %q", want, got)
		}
	}
	nan := math.NaN()
	none := strings.Join(linesOf(t, 1, change(profile.ExtraHeight{AM: nan, BM: nan, BothM: nan})), "\n")
	if strings.Contains(none, "90 % sure") {
		t.Errorf("got %q, want nothing of what no height makes sure", none)
	}
}

// What is met but not sure is never told to be high enough, or left to a radio.
func TestUnsureSheet(t *testing.T) {
	got := texts(t, "unsure")
	for _, want := range []string{"MARGINAL", "extra antenna height to be 90 % sure", "met"} {
		if !strings.Contains(got, want) {
			t.Errorf("got no %q in\n%s", want, got)
		}
	}
	for _, not := range []string{"high enough", "margin decides", "meets every criterion"} {
		if strings.Contains(got, not) {
			t.Errorf("got %q in\n%s", not, got)
		}
	}
}
