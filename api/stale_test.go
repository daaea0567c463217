package api

import (
	"encoding/json"
	"errors"
	"net/http"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"ridgehop/internal/assess"
	"ridgehop/internal/store"
)

// over is a service over a terrain, on a shelf of assessments that outlives it.
func over(t *testing.T, kept *memory, terrain hills) http.Handler {
	t.Helper()
	return service(t, func(d *Dependencies) {
		equipment := assess.Equipment{}
		equipment.Antennas, _ = d.Antennas.(*assess.Register[assess.Antenna])
		equipment.Radios, _ = d.Radios.(*assess.Register[assess.Radio])
		d.Keeper, d.Assessor = kept, assess.NewService(terrain).WithEquipment(equipment)
	})
}

func emptyMemory() *memory { return &memory{kept: map[string]store.Assessment{}} }

// decoded reads an answer.
func decoded[T any](t *testing.T, body []byte) T {
	t.Helper()
	var out T
	if err := json.Unmarshal(body, &out); err != nil {
		t.Fatalf("%v: %s", err, body)
	}
	return out
}

func TestAStaleAssessmentSaysSo(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	kept := emptyMemory()
	made := ask(over(t, kept, hills{}), http.MethodPost, "/v1/assessments", goodLink)
	self, tag := made.Header().Get("Location"), made.Header().Get("ETag")
	later := over(t, kept, hills{version: "2"})
	for _, path := range []string{self, self + "?include=samples"} {
		read := ask(later, http.MethodGet, path, "", "If-None-Match", tag)
		if read.Code != http.StatusOK {
			t.Fatalf("%s with the tag of the first answer: got %d, want 200, since the body is another", path, read.Code)
		}
		conforms(t, contract, "Assessment", read.Body.Bytes())
		got := decoded[Assessment](t, read.Body.Bytes())
		if got.Stale == nil || !*got.Stale || got.StaleBecause == nil || len(*got.StaleBecause) != 1 || !strings.Contains((*got.StaleBecause)[0], "Raster hills") {
			t.Errorf("%s: got stale %v because %v, want true because of hills", path, got.Stale, got.StaleBecause)
		}
		if withSamples := got.Samples != nil; withSamples != strings.Contains(path, "samples") {
			t.Errorf("%s: samples are there: %v", path, withSamples)
		}
		got.Stale, got.StaleBecause, got.Samples = nil, nil, nil
		if diff := cmp.Diff(got, decoded[Assessment](t, made.Body.Bytes())); diff != "" {
			t.Errorf("%s: the rest has changed: %s", path, diff)
		}
	}
	if read := ask(later, http.MethodGet, self, ""); ask(later, http.MethodGet, self, "", "If-None-Match", read.Header().Get("ETag")).Code != http.StatusNotModified {
		t.Error("the tag of the stale answer does not hold")
	}
}

// Whether an answer is stale may not be known; the answer is.
func TestAnAnswerStaysReadable(t *testing.T) {
	kept := emptyMemory()
	made := ask(over(t, kept, hills{}), http.MethodPost, "/v1/assessments", goodLink)
	self := made.Header().Get("Location")
	unread := over(t, kept, hills{err: &assess.UnreadableError{Raster: "hills", Err: errors.New("gone")}})
	if read := ask(unread, http.MethodGet, self, ""); read.Code != http.StatusOK || read.Body.String() != made.Body.String() {
		t.Errorf("over an unreadable terrain: got %d %s, want what was made", read.Code, read.Body)
	}
	a := kept.kept[strings.TrimPrefix(self, "/v1/assessments/")]
	a.Record = []byte("not a record")
	kept.kept[a.ID] = a
	h := over(t, kept, hills{version: "2"})
	if read := ask(h, http.MethodGet, self, ""); read.Code != http.StatusOK || read.Body.String() != made.Body.String() {
		t.Errorf("without its record: got %d %s, want what was made", read.Code, read.Body)
	}
	if read := ask(h, http.MethodGet, self+"?include=samples", ""); read.Code != http.StatusInternalServerError {
		t.Errorf("samples without a record: got %d, want 500", read.Code)
	}
}

// What an earlier version of the program answered stays as it is, whatever the
// ends are called.
func TestAdditionsLeaveTheRestAlone(t *testing.T) {
	const before, links = `{"id":"x","ends":{"a":{"name":"A\",\"links\":{<"}},"raise":{"a_m":1.50}`, `,"links":{"self":"s","svg":"v"}}` + "\n"
	got, err := additions{StaleBecause: []string{"Raster <a> & b has changed."}}.to([]byte(before + links))
	if err != nil {
		t.Fatal(err)
	}
	if want := before + `,"stale":true,"stale_because":["Raster <a> & b has changed."]` + links; string(got) != want {
		t.Errorf("got %s, want %s", got, want)
	}
	if got, err := (additions{}).to([]byte("whatever")); err != nil || string(got) != "whatever" {
		t.Errorf("nothing added: got %s, %v", got, err)
	}
	if got, err := (additions{StaleBecause: []string{"x"}}).to([]byte("{}\n")); err == nil {
		t.Errorf("an answer without links: got %s, want an error", got)
	}
}
