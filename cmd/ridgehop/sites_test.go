package main

import (
	"encoding/json"
	"io"
	"net/http"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// asks sends one request of any kind; headers are names and values in turn.
func (s *server) asks(t *testing.T, method, path, body string, headers ...string) (*http.Response, string) {
	t.Helper()
	r, err := http.NewRequestWithContext(t.Context(), method, s.address+path, strings.NewReader(body))
	if err != nil {
		t.Fatal(err)
	}
	for pair := range slices.Chunk(headers, 2) {
		r.Header.Set(pair[0], pair[1])
	}
	response, err := http.DefaultClient.Do(r)
	if err != nil {
		t.Fatal(err)
	}
	defer response.Body.Close()
	text, err := io.ReadAll(response.Body)
	if err != nil {
		t.Fatal(err)
	}
	return response, string(text)
}

// siteIDs are the ids of all sites, page by page.
func (s *server) siteIDs(t *testing.T) (ids []string) {
	t.Helper()
	for token := ""; ; {
		var page struct {
			Sites []struct{ ID string }
			Next  string `json:"next_page_token"`
		}
		status, body := s.get(t, "/v1/sites?page_size=2"+token)
		if err := json.Unmarshal([]byte(body), &page); err != nil || status != http.StatusOK {
			t.Fatalf("got %d %s: %v", status, body, err)
		}
		for _, site := range page.Sites {
			ids = append(ids, site.ID)
		}
		if page.Next == "" {
			return ids
		}
		token = "&page_token=" + page.Next
	}
}

// Sites are made, imported, listed, exported and taken away, and outlive the
// process.
func TestSitesOfARunningServer(t *testing.T) {
	data := filepath.Join(t.TempDir(), "data")
	first := start(t, "--data", data)
	made, body := first.asks(t, http.MethodPost, "/v1/sites", `{"id":"mill","name":"Mill, east","lon":-20.5,"lat":-30.5,"antenna_height_m":25}`, "Content-Type", "application/json")
	if made.StatusCode != http.StatusCreated {
		t.Fatalf("made: got %d %s", made.StatusCode, body)
	}
	const rows = "id;lon;lat;height\nb;1,5;2;30\nbad;1,5;;30\na;1,5;2;40\n"
	imported, body := first.asks(t, http.MethodPost, "/v1/sites/import.csv", rows, "Content-Type", "text/csv")
	want := `{"created":2,"replaced":0,"unchanged":0,"problems":[{"line":3,"id":"bad","field":"lat","detail":"is missing"}],"warnings":[]}` + "\n"
	if imported.StatusCode != http.StatusOK || body != want {
		t.Errorf("imported: got %d %s, want %s", imported.StatusCode, body, want)
	}
	if got := first.siteIDs(t); !slices.Equal(got, []string{"a", "b", "mill"}) {
		t.Errorf("listed: got %v", got)
	}
	exported, list := first.asks(t, http.MethodGet, "/v1/sites/export.csv", "")
	if exported.StatusCode != http.StatusOK || strings.Count(list, "\n") != 4 || !strings.Contains(list, "\r\na,,1.5,2,40,ground,,,,0,360,0,,\r\n") || !strings.Contains(list, `mill,"Mill, east",`) {
		t.Errorf("exported: got %d %s", exported.StatusCode, list)
	}
	changed, body := first.asks(t, http.MethodPut, "/v1/sites/mill", `{"id":"mill","lon":-20.5,"lat":-30.5,"antenna_height_m":26}`, "Content-Type", "application/json", "If-Match", made.Header.Get("ETag"))
	if changed.StatusCode != http.StatusOK {
		t.Errorf("changed: got %d %s", changed.StatusCode, body)
	}
	if stale, body := first.asks(t, http.MethodDelete, "/v1/sites/mill", "", "If-Match", made.Header.Get("ETag")); stale.StatusCode != http.StatusPreconditionFailed {
		t.Errorf("delete what has changed: got %d %s", stale.StatusCode, body)
	}
	if gone, body := first.asks(t, http.MethodDelete, "/v1/sites/a", ""); gone.StatusCode != http.StatusNoContent {
		t.Errorf("delete: got %d %s", gone.StatusCode, body)
	}
	if err := first.process.Process.Kill(); err != nil {
		t.Fatal(err)
	}
	_ = first.process.Wait()

	second := start(t, "--data", data)
	if got := second.siteIDs(t); !slices.Equal(got, []string{"b", "mill"}) {
		t.Errorf("after a restart: got %v", got)
	}
	again, body := second.asks(t, http.MethodPost, "/v1/sites/import.csv?existing=replace", list, "Content-Type", "text/csv")
	if want := `{"created":1,"replaced":1,"unchanged":1,"problems":[],"warnings":[]}` + "\n"; again.StatusCode != http.StatusOK || body != want {
		t.Errorf("what was exported: got %d %s, want %s", again.StatusCode, body, want)
	}
	if _, back := second.asks(t, http.MethodGet, "/v1/sites/export.csv", ""); back != list {
		t.Errorf("exported again: got %s, want %s", back, list)
	}
}
