package drawing

import (
	"math"
	"strings"
	"testing"

	"ridgehop/internal/assess"
	"ridgehop/internal/radio"
	"ridgehop/profile"
)

// spoken is a text with plain spaces.
func spoken(s string) string { return strings.ReplaceAll(s, nbsp, " ") }

func TestHeadline(t *testing.T) {
	nan := math.NaN()
	c := profile.Clearance{K: 4.0 / 3, F1Fraction: 1, MinRatio: 1.5, AtM: 4210, ClearanceM: 15, F1M: 10}
	short, cut, none := c, c, profile.Clearance{K: 1, F1Fraction: 1, MinRatio: nan, AtM: nan, ClearanceM: nan, F1M: nan}
	short.MinRatio, short.ClearanceM = 0.68, 6.8
	cut.MinRatio, cut.ClearanceM = -1.42, -14.2
	meets, misses := &assess.RadioAnswer{Report: radio.Report{Meets: true}}, &assess.RadioAnswer{}
	groundless := profile.Link{AntennaAM: nan, AntennaBM: 20}
	for _, k := range []struct {
		name  string
		a     assess.Assessment
		wants string
	}{
		{"clear", assess.Assessment{Judgement: profile.Assessment{Verdict: profile.Clear, Clearance: []profile.Clearance{c}}},
			"All criteria met. Tightest 4.21 km from A: 1.50 F1 free, 1 F1 required (k 1.33)."},
		{"marginal", assess.Assessment{Judgement: profile.Assessment{Verdict: profile.Marginal, Clearance: []profile.Clearance{c, short}}},
			"Open, but 3.2 m short of 1 F1, 4.21 km from A (k 1.33). The radio's margin decides."},
		{"obstructed", assess.Assessment{Judgement: profile.Assessment{Verdict: profile.Obstructed, Clearance: []profile.Clearance{cut}}},
			"Ground or cover stands 14.2 m above the line, 4.21 km from A (k 1.33)."},
		{"obstructed over voids", assess.Assessment{Judgement: profile.Assessment{Verdict: profile.Obstructed, VoidShare: 0.2, Clearance: []profile.Clearance{cut}}},
			"Ground or cover stands 14.2 m above the line, 4.21 km from A (k 1.33). 20.0 % of the path has no data."},
		{"void", assess.Assessment{Judgement: profile.Assessment{Verdict: profile.Unknown, VoidShare: 0.2, Clearance: []profile.Clearance{c}}},
			"Cannot be judged: 20.0 % of the path has no data."},
		{"void and short", assess.Assessment{Judgement: profile.Assessment{Verdict: profile.Unknown, VoidShare: 0.2, Clearance: []profile.Clearance{none, short}}},
			"Cannot be judged: 20.0 % of the path has no data. What is known is 3.2 m short of 1 F1."},
		{"end without ground", assess.Assessment{Link: groundless, Judgement: profile.Assessment{Verdict: profile.Unknown, Clearance: []profile.Clearance{none}}},
			"Cannot be judged: no ground height at end A."},
		{"clear with radio", assess.Assessment{Radio: meets, Judgement: profile.Assessment{Verdict: profile.Clear, Clearance: []profile.Clearance{c}}},
			"All criteria met. Tightest 4.21 km from A: 1.50 F1 free, 1 F1 required (k 1.33). The radio meets its target."},
		{"clear path, radio misses", assess.Assessment{Radio: misses, Judgement: profile.Assessment{Verdict: profile.Marginal, Clearance: []profile.Clearance{c}}},
			"All criteria met. Tightest 4.21 km from A: 1.50 F1 free, 1 F1 required (k 1.33). The radio misses its target."},
		{"line cut, radio meets", assess.Assessment{Radio: meets, Judgement: profile.Assessment{Verdict: profile.Marginal, Clearance: []profile.Clearance{cut}}},
			"Ground or cover stands 14.2 m above the line, 4.21 km from A (k 1.33). The radio meets its target all the same."},
		{"short, radio misses", assess.Assessment{Radio: misses, Judgement: profile.Assessment{Verdict: profile.Obstructed, Clearance: []profile.Clearance{short}}},
			"Open, but 3.2 m short of 1 F1, 4.21 km from A (k 1.33). The radio misses its target."},
		{"nothing known", assess.Assessment{Judgement: profile.Assessment{Verdict: profile.Obstructed, Clearance: []profile.Clearance{none},
			Reasons: []profile.Reason{{Code: "another", Sentence: "For another reason."}}}},
			"For another reason."},
	} {
		if got := spoken(headline(&k.a)); got != k.wants {
			t.Errorf("%s: got %q, want %q", k.name, got, k.wants)
		}
	}
}

func TestRaiseInWords(t *testing.T) {
	nan := math.NaN()
	for _, c := range []struct {
		name  string
		raise profile.Raise
		void  float64
		want  string
	}{
		{"nothing", profile.Raise{CapM: 20000}, 0, "No antenna needs to be raised."},
		{"figures", profile.Raise{AM: 12.31, BM: 201, BothM: 7.1, CapM: 20000}, 0,
			"To meet every criterion raise A alone by 12.4 m, or B alone by over 200 m, or both by 7.1 m each."},
		{"out of reach", profile.Raise{AM: 900, BM: nan, BothM: 300, CapM: 20000}, 0,
			"Every raise is over 200 m, beyond any ordinary mast: choose another path."},
		{"none tried was enough", profile.Raise{AM: nan, BM: nan, BothM: nan, CapM: 60}, 0,
			"No raise up to 60 m, the most that was tried, is enough."},
		{"void", profile.Raise{AM: nan, BM: nan, BothM: nan, CapM: 20000}, 0.1, "What to raise is not known."},
	} {
		a := &assess.Assessment{Judgement: profile.Assessment{Verdict: profile.Obstructed, Raise: c.raise, VoidShare: c.void}}
		if got := spoken(raiseSentence(a)); got != c.want {
			t.Errorf("%s: got %q, want %q", c.name, got, c.want)
		}
	}
}

func TestResultWord(t *testing.T) {
	for _, c := range []struct {
		clearance profile.Clearance
		want      string
	}{
		{profile.Clearance{Met: true, MinRatio: 1, F1Fraction: 1}, "met"},
		{profile.Clearance{MinRatio: 0.2, F1Fraction: 1}, "missed"},
		{profile.Clearance{MinRatio: 2, F1Fraction: 1}, "not judged"},
		{profile.Clearance{MinRatio: math.NaN(), F1Fraction: 1}, "not judged"},
	} {
		if got := resultWord(c.clearance); got != c.want {
			t.Errorf("%+v: got %q, want %q", c.clearance, got, c.want)
		}
	}
}

// texts are the words of a case's drawing.
func texts(t *testing.T, name string) string {
	t.Helper()
	for _, c := range cases() {
		if c.name != name {
			continue
		}
		var all []string
		for _, w := range walk(t, draw(t, c.assessment(t))).texts {
			all = append(all, spoken(w.text))
		}
		return strings.Join(all, "\n")
	}
	t.Fatalf("no case %q", name)
	return ""
}

func TestSheetSays(t *testing.T) {
	for _, c := range []struct {
		name string
		want []string
	}{
		{"clear", []string{"CLEAR", "Nothing: the antennas are high enough.", "57.10321° N, 4.61234° W", "file of 2024-05-17", "met"}},
		{"obstructed", []string{"OBSTRUCTED", "over 200 m", "out of a mast's reach", "missed", "cover", "in the way"}},
		{"out_of_reach", []string{"Every raise is over 200 m, beyond any ordinary mast:"}},
		{"unknown_void", []string{"UNKNOWN", "no data", "Not known while heights are missing.", "not judged"}},
		{"unknown_end", []string{"no data", "not known", "18.0 m above ground"}},
		{"brought", []string{"no coordinates given", "a profile brought by the caller", "antenna above roof"}},
		{"radio", []string{"A to B", "−58.2 dBm", "13.8 dB", "16-QAM 3/4", "36.0 dBm", "none", "azimuth, magnetic", "53.0°",
			"target missed: 50 Mbit/s, 10.0 dB margin, 99.99 % of the year", "At A: Access point, 5 GHz; Dish, 0.6 m; vertical",
			"From B to A the fade margin is 7.4 dB; 10.0 dB are asked for."}},
		{"long", []string{"176.1 km", "file date not known", "50.0 % of the samples"}},
	} {
		all := texts(t, c.name)
		for _, want := range c.want {
			if !strings.Contains(all, want) {
				t.Errorf("%s: got no %q in\n%s", c.name, want, all)
			}
		}
	}
}
