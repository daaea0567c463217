package drawing

import (
	"fmt"
	"slices"
	"strings"
	"testing"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

func TestCredit(t *testing.T) {
	for _, c := range []struct{ attribution, licence, want string }{
		{"", "", ""},
		{"A survey", "", "Credit: A survey"},
		{"", "Open 1.0", "Licence: Open 1.0"},
		{"A survey", "Open 1.0", "Credit: A survey (licence: Open 1.0)"},
		{"A\u202e sur\x07vey ", "\n", "Credit: A survey"},
	} {
		if got := credit(profile.Source{Attribution: c.attribution, Licence: c.licence}); got != c.want {
			t.Errorf("%q, %q: got %q, want %q", c.attribution, c.licence, got, c.want)
		}
	}
}

// However many sources there are and however long their credits, each credit
// is on the sheet, whole, and once.
func TestEveryCreditIsShown(t *testing.T) {
	long := strings.Repeat("長", 480) + " end of the long one"
	got := strings.Join(linesOf(t, 0, func(a *assess.Assessment) {
		a.Profile.Sources = nil
		for i := range 30 {
			a.Profile.Sources = append(a.Profile.Sources, profile.Source{Name: fmt.Sprint("tile", i), Version: "1", Kind: profile.KindSurface,
				Attribution: fmt.Sprintf("Owner %02d", i/3), Licence: "Open 1.0"})
		}
		a.Profile.Sources[2].Attribution, a.Profile.Sources[29].Attribution = "", long
		a.Profile.Sources[2].Licence = ""
	}), "")
	for i := range 10 {
		if want := fmt.Sprintf("Credit: Owner %02d (licence: Open 1.0)", i); strings.Count(got, want) != 1 {
			t.Errorf("got %d times %q in %q, want it once", strings.Count(got, want), want, got)
		}
	}
	for _, want := range []string{strings.Repeat("長", 480), "end of the long one", "credit as for tile0", "and 24 more"} {
		if !strings.Contains(got, want) {
			t.Errorf("got no %q in %q", want, got)
		}
	}
}

func TestSourceDetail(t *testing.T) {
	for _, c := range []struct {
		source profile.Source
		want   string
	}{
		{profile.Source{Version: "1", DataDate: "2024-05-17", Kind: profile.KindCanopy, ErrorM: 0.15},
			"version 1; file of 2024-05-17; trees above ground; 1-sigma error 0.15 m"},
		{profile.Source{Version: "1", Kind: profile.KindBuildings, ErrorM: 4, ErrorAssumed: true},
			"version 1; file date not known; buildings above ground; 1-sigma error 4 m, assumed"},
		{profile.Source{Version: "1", Kind: profile.KindUnstated}, "version 1; file date not known; roofs and trees not stated; no error stated"},
		{profile.Source{Kind: profile.KindProfile, ErrorM: 0.5}, "taken as given, straight between its points; 1-sigma error 0.5 m"},
	} {
		if got := spoken(sourceDetail(c.source)); got != c.want {
			t.Errorf("got %q, want %q", got, c.want)
		}
	}
}

func TestDatum(t *testing.T) {
	for _, c := range []struct{ datum, want, axis, card string }{
		{"egm2008", "heights above egm2008", "metres above sea level", "antenna above sea level"},
		{"", "vertical datum not stated", "metres above sea level", "antenna above sea level"},
		{"ellipsoid", "heights above the ellipsoid", "metres above the ellipsoid", "antenna above the ellipsoid"},
	} {
		a := cases()[0].assessment(t)
		a.Profile.VerticalDatum = c.datum
		svg := spoken(string(draw(t, a)))
		for _, want := range []string{c.want, c.axis, c.card} {
			if !strings.Contains(svg, ">"+want+"<") {
				t.Errorf("%q: got no %q", c.datum, want)
			}
		}
	}
}

func TestSourceNotes(t *testing.T) {
	got := linesOf(t, 0, func(a *assess.Assessment) {
		a.Profile.DatumDoubts = []profile.DatumDoubt{{Source: "one", SizeM: 2.4}, {Source: "two", From: "egm96", SizeM: 107}}
		for i := range maxSources + 2 {
			a.Profile.Unreachable = append(a.Profile.Unreachable, profile.Unreachable{Source: fmt.Sprint("far", i), Reason: "no answer"})
		}
	})
	for _, want := range []string{"datum in doubt, by up to about 3 m: one", "datum in doubt, by up to about 107 m: two",
		"could not be read: far0 (no answer)", "could not be read: far5 (no answer)", "and 2 more that could not be read"} {
		if !slices.Contains(got, want) {
			t.Errorf("got no %q in %q", want, got)
		}
	}
}

func TestSampling(t *testing.T) {
	even, uneven := []float64{0, 10, 20, 30}, []float64{0, 10, 10.001, 30}
	for _, c := range []struct {
		name      string
		distances []float64
		spacingM  float64
		brought   bool
		void      float64
		want      string
	}{
		{"exact", uneven, 0, false, 0, "exact: 4 samples, where the path crosses the pixels"},
		{"exact over a void", uneven, 0, false, 0.25, "exact: 4 samples, where the path crosses the pixels; 25.0 % without a height"},
		{"a spacing", even, 10, false, 0, "4 samples, 20.0 m apart"},
		{"kept by an engine without the exact mode", even, 0, false, 0, "4 samples, 20.0 m apart"},
		{"brought", uneven, 0, true, 0, "4 samples, 20.0 m apart at most"},
	} {
		a := &assess.Assessment{Profile: profile.Profile{DistanceM: c.distances, SpacingM: 20}, Request: assess.Request{SpacingM: c.spacingM}}
		a.Judgement.VoidShare = c.void
		if c.brought {
			a.Request.Profile = make([]assess.Point, 4)
		}
		if got := spoken(sampling(a)); got != c.want {
			t.Errorf("%s: got %q, want %q", c.name, got, c.want)
		}
	}
}

func TestUnreachable(t *testing.T) {
	got := strings.ReplaceAll(texts(t, "unreachable"), "\n", " ")
	for _, want := range []string{"UNKNOWN", "no ground height at either end. 2 rasters could not be read.", "no height on this path could be read",
		"could not be read: mainland_canopy/n57w005.tif (404 Not Found)", "Not known while heights are missing."} {
		if !strings.Contains(got, want) {
			t.Errorf("got no %q in %q", want, got)
		}
	}
	for _, not := range []string{"Heights are drawn", "ground at k", " 100 ", "line between antennas"} {
		if strings.Contains(got, not) {
			t.Errorf("got %q in %q: nothing is known of that", not, got)
		}
	}
}

// A source that did not answer is what an unknown path is unknown for, though
// every sample has a height of another.
func TestUnreachableCause(t *testing.T) {
	a := cases()[1].assessment(t)
	a.Judgement.Verdict = profile.Unknown
	a.Profile.Unreachable = []profile.Unreachable{{Source: "far_canopy", Reason: "no answer"}}
	if got, want := spoken(headline(a)), "Cannot be judged: far_canopy could not be read. What is known is 6.2 m short of 0.6 F1."; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}
