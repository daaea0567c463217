package checks

import (
	"encoding/json"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"slices"
	"testing"
)

// elsewhere names the operations that other rooms of the project answer for.
var elsewhere = map[string]string{
	"geodesic": "internal/geodesy",
	"wmm":      "internal/geodesy",
	"egm96":    "internal/geodesy",
	"pol":      "internal/radio",
}

// dataFiles are the files that hold inputs of checks and no operation.
var dataFiles = []string{"profiles_shared.json", "wmm2025_coefficients.json"}

// operation computes the quantities of one check case.
type operation func(in inputs) (outputs, error)

type outputs map[string]float64

type checkFile struct {
	Op      string             `json:"op"`
	Tol     map[string]float64 `json:"tol"`
	TolRel  map[string]float64 `json:"tol_rel"`
	Derived bool               `json:"derived"`
	Cases   []checkCase        `json:"cases"`
}

type checkCase struct {
	ID     string             `json:"id"`
	In     map[string]any     `json:"in"`
	Expect map[string]float64 `json:"expect"`
	Tol    map[string]float64 `json:"tol"`
}

func TestSharedChecks(t *testing.T) {
	folder := checksFolder(t)
	names, err := filepath.Glob(filepath.Join(folder, "*.json"))
	if err != nil || len(names) == 0 {
		t.Fatalf("got %d check files in the shared data folder (%v), want some", len(names), err)
	}
	operations := allOperations(readProfiles(t, folder))
	var summary []string
	for _, path := range names {
		summary = append(summary, runFile(t, path, operations))
	}
	slices.Sort(summary)
	for _, line := range summary {
		t.Log(line)
	}
}

// runFile runs one file of check values and returns a line for the summary.
func runFile(t *testing.T, path string, operations map[string]operation) string {
	name := filepath.Base(path)
	if slices.Contains(dataFiles, name) {
		return "data: " + name
	}
	var file checkFile
	readJSON(t, path, &file)
	if room, ok := elsewhere[file.Op]; ok {
		return fmt.Sprintf("elsewhere: %s (operation %q) belongs to %s", name, file.Op, room)
	}
	run, ok := operations[file.Op]
	if !ok {
		t.Errorf("%s: got the unknown operation %q, want one that is implemented or registered elsewhere", name, file.Op)
		return fmt.Sprintf("UNKNOWN: %s (operation %q)", name, file.Op)
	}
	if len(file.Cases) == 0 {
		t.Errorf("%s: got no cases, want some", name)
	}
	worst := 0.0
	passed := t.Run(name, func(t *testing.T) {
		for _, c := range file.Cases {
			worst = max(worst, runCase(t, file, c, run))
		}
	})
	verdict := "pass"
	if !passed {
		verdict = "FAIL"
	}
	return fmt.Sprintf("%s: %s (operation %q, %d cases, worst error %.2g of its tolerance)",
		verdict, name, file.Op, len(file.Cases), worst)
}

// runCase compares one case, and returns its largest error as a part of the tolerance.
func runCase(t *testing.T, file checkFile, c checkCase, run operation) float64 {
	t.Helper()
	got, err := run(inputs(c.In))
	if err != nil {
		t.Errorf("%s: got the error %q, want values", c.ID, err)
		return math.Inf(1)
	}
	worst := 0.0
	for quantity, want := range c.Expect {
		value, ok := got[quantity]
		if !ok {
			t.Errorf("%s: got no %s, want %v", c.ID, quantity, want)
			continue
		}
		tolerance := file.tolerance(c, quantity, want)
		miss := math.Abs(value - want)
		if !(miss <= tolerance) {
			t.Errorf("%s: %s: got %.12g, want %.12g (within %.3g)", c.ID, quantity, value, want, tolerance)
		}
		if miss > 0 {
			worst = max(worst, miss/tolerance)
		}
	}
	return worst
}

// tolerance is the larger of the absolute and the relative tolerance; those of the
// case come first, then those of the quantity, then those for all quantities.
func (f checkFile) tolerance(c checkCase, quantity string, want float64) float64 {
	absolute, ok := c.Tol[quantity]
	if !ok {
		absolute, ok = f.Tol[quantity]
	}
	if !ok {
		absolute = f.Tol["*"]
	}
	relative, ok := f.TolRel[quantity]
	if !ok {
		relative = f.TolRel["*"]
	}
	return max(absolute, relative*math.Abs(want))
}

func readJSON(t *testing.T, path string, into any) {
	t.Helper()
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(data, into); err != nil {
		t.Fatalf("%s: %v", filepath.Base(path), err)
	}
}

// checksFolder finds the check values, or skips the test.
func checksFolder(t *testing.T) string {
	t.Helper()
	shared := os.Getenv("RIDGEHOP_SHARED")
	if shared == "" {
		shared = filepath.Join(repositoryRoot(t), "..", "shared")
	}
	folder := filepath.Join(shared, "standards", "checks")
	if _, err := os.Stat(folder); err != nil {
		t.Skip("the shared data folder (environment variable RIDGEHOP_SHARED) is absent: its check values were not compared")
	}
	return folder
}

// repositoryRoot walks up to the folder that holds go.mod.
func repositoryRoot(t *testing.T) string {
	t.Helper()
	folder, err := os.Getwd()
	if err != nil {
		t.Fatal(err)
	}
	for {
		if _, err := os.Stat(filepath.Join(folder, "go.mod")); err == nil {
			return folder
		}
		parent := filepath.Dir(folder)
		if parent == folder {
			t.Fatal("got no go.mod above the test, want the root of the repository")
		}
		folder = parent
	}
}
