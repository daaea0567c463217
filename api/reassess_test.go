package api

import (
	"errors"
	"math"
	"net/http"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"ridgehop/internal/assess"
)

func TestReassessingWhereNothingHasChanged(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	h := service(t, nil)
	for name, link := range map[string]string{"a path": goodLink, "with a radio": radioLink} {
		t.Run(name, func(t *testing.T) {
			made := ask(h, http.MethodPost, "/v1/assessments", link)
			self := made.Header().Get("Location")
			for _, body := range []string{"", "{}", "not JSON"} { // none is needed, none refused
				again := ask(h, http.MethodPost, self+"/reassess", body)
				if again.Code != http.StatusCreated {
					t.Fatalf("got %d %s", again.Code, again.Body)
				}
				conforms(t, contract, "Reassessment", again.Body.Bytes())
				got := decoded[Reassessment](t, again.Body.Bytes())
				if selfLink(got.Before) != self || got.Assessment.Id != got.Before || len(got.Changes) != 0 || again.Header().Get("Location") != self {
					t.Errorf("got %s of %s, changes %v, at %s; want the same and none", got.Assessment.Id, got.Before, got.Changes, again.Header().Get("Location"))
				}
				if diff := cmp.Diff(got.Assessment, decoded[Assessment](t, made.Body.Bytes())); diff != "" {
					t.Errorf("the answer differs: %s", diff)
				}
			}
		})
	}
}

func TestReassessingSaysWhatHasChanged(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	kept := emptyMemory()
	made := ask(over(t, kept, hills{}), http.MethodPost, "/v1/assessments", goodLink)
	self := made.Header().Get("Location")
	h := over(t, kept, hills{version: "2", liftM: 30, void: true})
	again := ask(h, http.MethodPost, self+"/reassess", "")
	if again.Code != http.StatusCreated {
		t.Fatalf("got %d %s", again.Code, again.Body)
	}
	conforms(t, contract, "Reassessment", again.Body.Bytes())
	before, got := decoded[Assessment](t, made.Body.Bytes()), decoded[Reassessment](t, again.Body.Bytes())
	changed := map[string][2]any{}
	for _, c := range got.Changes {
		changed[c.Pointer] = [2]any{orNil(c.Before), orNil(c.After)}
	}
	want := map[string][2]any{
		"/ends/a/ground_m": {*before.Ends.A.GroundM, math.Round(1000*(*before.Ends.A.GroundM+30)) / 1000},
		"/ends/b/ground_m": {*before.Ends.B.GroundM, math.Round(1000*(*before.Ends.B.GroundM+30)) / 1000},
		"/terrain/rasters": {"hills 1", "hills 2"},
		// 9 of the 101 samples of the fake terrain are void.
		"/terrain/void_share": {0.0, 0.089109},
	}
	for pointer, values := range want {
		if diff := cmp.Diff(changed[pointer], values); diff != "" {
			t.Errorf("%s: %s", pointer, diff)
		}
	}
	for _, c := range got.Changes {
		if orNil(c.Before) == orNil(c.After) {
			t.Errorf("%s has not changed: %v", c.Pointer, orNil(c.Before))
		}
	}
	if _, same := changed["/terrain/vertical_datum"]; same {
		t.Error("the datum has not changed, and is listed")
	}
	if location := again.Header().Get("Location"); location == self || location != got.Assessment.Links.Self {
		t.Errorf("location: got %s, want the new assessment's, %s", location, got.Assessment.Links.Self)
	}
	if read := ask(h, http.MethodGet, got.Assessment.Links.Self, ""); read.Code != http.StatusOK || decoded[Assessment](t, read.Body.Bytes()).Stale != nil {
		t.Errorf("the new assessment: got %d %s", read.Code, read.Body)
	}
	if read := ask(h, http.MethodGet, self, ""); decoded[Assessment](t, read.Body.Bytes()).Verdict != before.Verdict {
		t.Error("the old assessment has changed")
	}
}

func TestReassessingProblems(t *testing.T) {
	kept := emptyMemory()
	self := ask(over(t, kept, hills{}), http.MethodPost, "/v1/assessments", goodLink).Header().Get("Location")
	unread := over(t, kept, hills{err: &assess.UnreadableError{Raster: "N01E001.hgt", Err: errors.New("cut short")}})
	if got := ask(unread, http.MethodPost, self+"/reassess", ""); got.Code != 503 || !strings.HasSuffix(problemIn(t, got).Type, "raster-unreadable") {
		t.Errorf("unreadable: got %d %s", got.Code, got.Body)
	}
	if got := ask(unread, http.MethodPost, "/v1/assessments/as_aaaaaaaaaaaaaaaaaaaaaaaaaa/reassess", ""); got.Code != 404 || problemIn(t, got).Title == "" {
		t.Errorf("unknown: got %d %s", got.Code, got.Body)
	}
}

// An answer of an earlier version has none of the figures that came since.
func TestChangesFromAnEarlierVersion(t *testing.T) {
	const before = `{"verdict":"clear","clearance":[{"met":true,"min_ratio":1.5},{"met":true,"min_ratio":2}],"raise":{"a_m":0,"b_m":0,"both_m":0},
		"ends":{"a":{"ground_m":1,"antenna_amsl_m":2},"b":{"ground_m":1,"antenna_amsl_m":2}},"terrain":{"rasters":[{"name":"a","version":"1"},{"name":"b","version":"2"}],"void_share":0}}`
	const after = `{"verdict":"marginal","confidence":0.5,"clearance":[{"met":true,"min_ratio":1.5}],"raise":{"a_m":null,"b_m":0,"both_m":0},
		"ends":{"a":{"ground_m":1,"antenna_amsl_m":2},"b":{"ground_m":1,"antenna_amsl_m":2}},"terrain":{"vertical_datum":"egm96","rasters":[{"name":"a","version":"1"}],"void_share":0}}`
	changes, err := changesBetween([]byte(before), []byte(after))
	if err != nil {
		t.Fatal(err)
	}
	var got []scalar
	for _, c := range changes {
		got = append(got, scalar{c.Pointer, orNil(c.Before)}, scalar{"", orNil(c.After)})
	}
	want := []scalar{
		{"/verdict", "clear"}, {"", "marginal"}, {"/confidence", nil}, {"", 0.5}, {"/raise/a_m", 0.0}, {"", nil},
		{"/terrain/rasters", "a 1, b 2"}, {"", "a 1"}, {"/terrain/vertical_datum", nil}, {"", "egm96"},
		{"/clearance/1/met", true}, {"", nil}, {"/clearance/1/min_ratio", 2.0}, {"", nil},
	}
	if diff := cmp.Diff(got, want, cmp.AllowUnexported(scalar{})); diff != "" {
		t.Error(diff)
	}
	if _, err := changesBetween([]byte(before), []byte("[")); err == nil {
		t.Error("a broken answer: got no error")
	}
}
