package main

import (
	"encoding/json"
	"fmt"
	"net/http"
	"os"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"time"
)

// flatLand writes an Arc ASCII grid of one height around 1 E 1 N.
func flatLand(t *testing.T, folder, name string, heightM int) {
	t.Helper()
	const side = 60
	row := strings.Repeat(fmt.Sprintf("%d ", heightM), side) + "\n"
	grid := fmt.Sprintf("ncols %d\nnrows %d\nxllcorner 1.0\nyllcorner 1.0\ncellsize 0.001\nNODATA_value -9999\n", side, side) + strings.Repeat(row, side)
	const wgs84 = `GEOGCS["WGS 84",DATUM["WGS_1984",SPHEROID["WGS 84",6378137,298.257223563]],PRIMEM["Greenwich",0],UNIT["degree",0.0174532925199433],AUTHORITY["EPSG","4326"]]`
	for file, content := range map[string]string{name + ".asc": grid, name + ".prj": wgs84} {
		if err := os.WriteFile(filepath.Join(folder, file), []byte(content), 0o600); err != nil {
			t.Fatal(err)
		}
	}
}

const flatLink = `{"a":{"lon":1.01,"lat":1.01,"antenna_height_m":60},"b":{"lon":1.05,"lat":1.05,"antenna_height_m":60},"frequency_ghz":18}`

// catalogueFor is a catalogue of one folder.
func catalogueFor(t *testing.T, folder string) string {
	t.Helper()
	path := filepath.Join(folder, "rasters.yaml")
	text := `sources:
  - {name: town, kind: ground, folder: earth, datum: odn, vertical_error_m: 0.5, correlation_length_m: 100, attribution: Invented Survey, licence: OGL-UK-3.0}
`
	if err := os.WriteFile(path, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	return path
}

func (s *server) postTo(t *testing.T, path string) (int, string) {
	t.Helper()
	response, err := http.Post(s.address+path, "application/json", nil)
	if err != nil {
		t.Fatal(err)
	}
	return read(t, response)
}

// A raster that is replaced is used after a reload, by address or by signal; an
// assessment made before says that it is stale, keeps what it said, and made
// again says what has changed.
func TestReloadAndReassess(t *testing.T) {
	home := t.TempDir()
	earth := filepath.Join(home, "earth")
	if err := os.Mkdir(earth, 0o700); err != nil {
		t.Fatal(err)
	}
	flatLand(t, earth, "flat", 100)
	s := start(t, "--catalogue", catalogueFor(t, home), "--data", filepath.Join(home, "data"))
	status, made := s.post(t, flatLink)
	if status != http.StatusCreated || !strings.Contains(made, `"verdict":"clear"`) || !strings.Contains(made, `"attribution":"Invented Survey"`) || !strings.Contains(made, `"vertical_datum":"odn"`) {
		t.Fatalf("got %d %s", status, made)
	}
	address := "/v1/assessments/" + idIn.FindString(made)
	if _, kept := s.get(t, address); kept != made {
		t.Errorf("before any change: got %s, want %s", kept, made)
	}

	flatLand(t, earth, "flat", 150)
	if status, said := s.postTo(t, "/v1/rasters/reload"); status != http.StatusOK || !strings.Contains(said, `"changed":["town/flat.asc"]`) {
		t.Fatalf("reload: got %d %s", status, said)
	}
	if _, stale := s.get(t, address); !strings.Contains(stale, `"stale":true`) || !strings.Contains(stale, `"ground_m":100`) {
		t.Errorf("stale: got %s", stale)
	}
	status, said := s.postTo(t, address+"/reassess")
	var again struct {
		Before     string `json:"before"`
		Assessment struct {
			ID string `json:"id"`
		} `json:"assessment"`
		Changes []struct {
			Pointer       string `json:"pointer"`
			Before, After any
		} `json:"changes"`
	}
	if err := json.Unmarshal([]byte(said), &again); err != nil || status != http.StatusCreated {
		t.Fatalf("reassess: got %d %s", status, said)
	}
	changed := map[string]any{}
	for _, c := range again.Changes {
		changed[c.Pointer] = c.After
	}
	if again.Before != idIn.FindString(made) || again.Assessment.ID == again.Before || changed["/ends/a/ground_m"] != 150.0 || changed["/terrain/rasters"] == nil {
		t.Errorf("reassess: got %s", said)
	}
	if _, fresh := s.get(t, "/v1/assessments/"+again.Assessment.ID); strings.Contains(fresh, "stale") {
		t.Errorf("made just now: got %s", fresh)
	}

	flatLand(t, earth, "more", 150)
	if err := s.process.Process.Signal(syscall.SIGHUP); err != nil {
		t.Fatal(err)
	}
	for deadline := time.Now().Add(10 * time.Second); !strings.Contains(s.log.String(), "rasters reloaded"); time.Sleep(10 * time.Millisecond) {
		if time.Now().After(deadline) {
			t.Fatalf("after SIGHUP: got %s", s.log)
		}
	}
	if _, list := s.get(t, "/v1/rasters"); !strings.Contains(list, "town/more.asc") {
		t.Errorf("after SIGHUP: got %s", list)
	}

	if err := os.WriteFile(filepath.Join(home, "rasters.yaml"), []byte("sources: [{name: town, kind: dsm}]"), 0o600); err != nil {
		t.Fatal(err)
	}
	if status, said := s.postTo(t, "/v1/rasters/reload"); status != http.StatusUnprocessableEntity || !strings.Contains(said, "rasters.yaml line 1") {
		t.Errorf("a bad catalogue: got %d %s", status, said)
	}
	if status, _ := s.post(t, flatLink); status != http.StatusCreated {
		t.Errorf("after a bad catalogue: got %d, want the rasters in use to go on", status)
	}
	if status, said := s.get(t, "/v1/elevation?lon=1.02&lat=1.02"); status != http.StatusOK || !strings.Contains(said, `"ground_m":150`) {
		t.Errorf("elevation: got %d %s", status, said)
	}
	if status, said := s.get(t, "/v1/rasters/coverage.geojson"); status != http.StatusOK || !strings.Contains(said, `"source":"town"`) {
		t.Errorf("coverage: got %d %s", status, said)
	}
}

// What was found out about the files is kept for the next start.
func TestIndexIsKept(t *testing.T) {
	home := t.TempDir()
	flatLand(t, home, "flat", 100)
	data := filepath.Join(home, "data")
	start(t, "--rasters", home, "--data", data)
	if _, err := os.Stat(filepath.Join(data, indexName)); err != nil {
		t.Error(err)
	}
}
