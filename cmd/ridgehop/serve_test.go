package main

import (
	"bytes"
	"context"
	"io"
	"net/http"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strings"
	"sync"
	"syscall"
	"testing"
	"time"
)

// server is a running ridgehop serve.
type server struct {
	address string
	process *exec.Cmd
	log     *lines
}

// lines collects what a process prints.
type lines struct {
	mu   sync.Mutex
	text bytes.Buffer
}

func (l *lines) Write(p []byte) (int, error) {
	l.mu.Lock()
	defer l.mu.Unlock()
	return l.text.Write(p)
}

func (l *lines) String() string {
	l.mu.Lock()
	defer l.mu.Unlock()
	return l.text.String()
}

// start runs the program itself, on a free port, and waits until it serves.
func start(t *testing.T, args ...string) *server {
	t.Helper()
	s := &server{log: &lines{}}
	s.process = exec.Command(binary(t), append([]string{"serve", "--listen", "127.0.0.1:0"}, args...)...)
	s.process.Stderr = s.log
	if err := s.process.Start(); err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() {
		_ = s.process.Process.Kill()
		_ = s.process.Wait()
	})
	serving := regexp.MustCompile(`address=(http://127\.0\.0\.1:\d+)`)
	for deadline := time.Now().Add(20 * time.Second); time.Now().Before(deadline); time.Sleep(20 * time.Millisecond) {
		if found := serving.FindStringSubmatch(s.log.String()); found != nil {
			s.address = found[1]
			return s
		}
	}
	t.Fatalf("the server does not serve: %s", s.log)
	return nil
}

// binary is the test binary under the name by which testscript runs main.
func binary(t *testing.T) string {
	t.Helper()
	path, err := exec.LookPath("ridgehop")
	if err != nil {
		t.Fatal(err)
	}
	return path
}

func (s *server) get(t *testing.T, path string) (int, string) {
	t.Helper()
	response, err := http.Get(s.address + path)
	if err != nil {
		t.Fatal(err)
	}
	return read(t, response)
}

func (s *server) post(t *testing.T, body string) (int, string) {
	t.Helper()
	response, err := http.Post(s.address+"/v1/assessments", "application/json", strings.NewReader(body))
	if err != nil {
		t.Fatal(err)
	}
	return read(t, response)
}

func read(t *testing.T, response *http.Response) (int, string) {
	t.Helper()
	defer response.Body.Close()
	body, err := io.ReadAll(response.Body)
	if err != nil {
		t.Fatal(err)
	}
	return response.StatusCode, string(body)
}

const broughtLink = `{"a":{"name":"A","antenna_height_m":20},"b":{"name":"B","antenna_height_m":20},"frequency_ghz":6,
 "profile":[{"distance_m":0,"ground_m":3},{"distance_m":4000,"ground_m":9},{"distance_m":9000,"ground_m":1}]}`

var idIn = regexp.MustCompile(`as_[a-z2-7]{26}`)

// A killed server loses nothing that it has answered.
func TestRestartKeepsEveryAssessment(t *testing.T) {
	data := filepath.Join(t.TempDir(), "data")
	first := start(t, "--data", data)
	status, made := first.post(t, broughtLink)
	if status != http.StatusCreated {
		t.Fatalf("got %d %s", status, made)
	}
	_, picture := first.get(t, "/v1/assessments/"+idIn.FindString(made)+"/profile.svg")
	if err := first.process.Process.Kill(); err != nil {
		t.Fatal(err)
	}
	_ = first.process.Wait()

	second := start(t, "--data", data)
	if status, kept := second.get(t, "/v1/assessments/"+idIn.FindString(made)); status != http.StatusOK || kept != made {
		t.Errorf("after a restart: got %d %s, want %s", status, kept, made)
	}
	if _, again := second.get(t, "/v1/assessments/"+idIn.FindString(made)+"/profile.svg"); again != picture {
		t.Error("the drawing of a kept assessment has changed")
	}
}

// An unusable raster never stops the start, and says why it is not used.
func TestUnusableRastersAreShownNotFatal(t *testing.T) {
	folder := t.TempDir()
	if err := os.WriteFile(filepath.Join(folder, "broken.tif"), []byte("II*\x00 and then nonsense"), 0o600); err != nil {
		t.Fatal(err)
	}
	s := start(t, "--rasters", folder, "--data", t.TempDir())
	if _, list := s.get(t, "/v1/rasters"); !strings.Contains(list, `"name":"broken.tif","usable":false,"problem":"`) || strings.Contains(list, folder) {
		t.Errorf("got %s", list)
	}
	if !strings.Contains(s.log.String(), "raster not used") {
		t.Errorf("the log does not say so: %s", s.log)
	}
	if status, body := s.get(t, "/readyz"); status != http.StatusOK {
		t.Errorf("readyz: got %d %s", status, body)
	}
}

func TestServeStopsCleanly(t *testing.T) {
	s := start(t, "--data", t.TempDir())
	if err := s.process.Process.Signal(syscall.SIGTERM); err != nil {
		t.Fatal(err)
	}
	if err := s.process.Wait(); err != nil {
		t.Errorf("got %v, want a clean end: %s", err, s.log)
	}
}

func TestServeRefusesWhatItCannotUse(t *testing.T) {
	file := filepath.Join(t.TempDir(), "file")
	if err := os.WriteFile(file, nil, 0o600); err != nil {
		t.Fatal(err)
	}
	cases := map[string][]string{
		"--data " + file + "/x: the data directory cannot be used": {"serve", "--data", file + "/x", "--listen", "127.0.0.1:0"},
		"--listen nonsense: it must be a host and a port":          {"serve", "--listen", "nonsense"},
		"--rasters nowhere: there is no such folder":               {"serve", "--rasters", "nowhere"},
	}
	for want, args := range cases {
		var out, errs bytes.Buffer
		if code := run(context.Background(), args, streams{strings.NewReader(""), &out, &errs}); code == exitOK || !strings.Contains(errs.String(), want) {
			t.Errorf("%v: got %d %q, want %q", args, code, errs.String(), want)
		}
	}
}
