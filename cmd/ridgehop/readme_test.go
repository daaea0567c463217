package main

import (
	"bytes"
	"context"
	"encoding/json"
	"flag"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"

	"ridgehop/internal/island"
)

var update = flag.Bool("update", false, "rewrite the README's picture")

// The README's request, its answer and its picture are what the program gives.
func TestREADMEIsTrue(t *testing.T) {
	readme, err := os.ReadFile("../../README.md")
	if err != nil {
		t.Fatal(err)
	}
	request := between(t, string(readme), "-d '", "}'") + "}"
	excerpt := between(t, string(readme), "```json\n", "```")
	catalogue := islandCatalogue(t)
	picture := filepath.Join(t.TempDir(), "picture.svg")
	var out, errs bytes.Buffer
	code := run(context.Background(), []string{"assess", "--catalogue", catalogue, "--svg", picture}, streams{strings.NewReader(request), &out, &errs})
	if code != exitOK {
		t.Fatalf("got %d %s", code, errs.String())
	}
	var want, answer, got map[string]any
	for text, into := range map[string]*map[string]any{excerpt: &want, out.String(): &answer} {
		if err := json.Unmarshal([]byte(text), into); err != nil {
			t.Fatalf("%v: %s", err, text)
		}
	}
	got = map[string]any{}
	for name := range want {
		got[name] = answer[name]
	}
	if diff := cmp.Diff(got, want); diff != "" {
		t.Errorf("the README's answer is not the program's (-got +want):\n%s", diff)
	}
	comparePicture(t, picture, "../../testdata/grazing.svg")
}

func between(t *testing.T, text, before, after string) string {
	t.Helper()
	found := regexp.MustCompile(`(?s)` + regexp.QuoteMeta(before) + `(.*?)` + regexp.QuoteMeta(after)).FindStringSubmatch(text)
	if found == nil {
		t.Fatalf("the README has nothing between %q and %q", before, after)
	}
	return found[1]
}

// islandCatalogue is the quickstart's catalogue over the demo terrain, which has a
// fixed file date, since the drawing shows it.
func islandCatalogue(t *testing.T) string {
	t.Helper()
	home := t.TempDir()
	folder := filepath.Join(home, "rasters")
	if err := os.Mkdir(folder, 0o700); err != nil {
		t.Fatal(err)
	}
	path, err := island.Write(folder)
	if err != nil {
		t.Fatal(err)
	}
	date := time.Date(2026, 12, 1, 0, 0, 0, 0, time.UTC)
	if err := os.Chtimes(path, date, date); err != nil {
		t.Fatal(err)
	}
	text, err := os.ReadFile("../../deploy/catalogues/demo-island.yaml")
	if err != nil {
		t.Fatal(err)
	}
	catalogue := filepath.Join(home, "rasters.yaml")
	if err := os.WriteFile(catalogue, text, 0o600); err != nil {
		t.Fatal(err)
	}
	return catalogue
}

func comparePicture(t *testing.T, got, want string) {
	t.Helper()
	drawn, err := os.ReadFile(got)
	if err != nil {
		t.Fatal(err)
	}
	if *update {
		if err := os.WriteFile(want, drawn, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	kept, err := os.ReadFile(want)
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(drawn, kept) {
		t.Errorf("the README's picture is not what is drawn now; look at it, then go test ./cmd/ridgehop -run README -update")
	}
}
