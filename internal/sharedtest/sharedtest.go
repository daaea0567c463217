// Package sharedtest finds the folder of real data that some tests read: real
// rasters, surveyed heights, links and published check values, which are not
// part of the project. Only tests import it.
package sharedtest

import (
	"os"
	"path/filepath"
	"testing"
)

// Dir is the data folder: the environment variable RIDGEHOP_SHARED, or else
// ../shared beside the repository. Where it is absent the test is skipped, and
// says so.
func Dir(t testing.TB) string {
	t.Helper()
	dir := os.Getenv("RIDGEHOP_SHARED")
	if dir == "" {
		dir = filepath.Join(root(t), "..", "shared")
	}
	if stat, err := os.Stat(dir); err != nil || !stat.IsDir() {
		t.Skipf("the shared data folder is absent (RIDGEHOP_SHARED, by default ../shared): this test reads real data from it")
	}
	return dir
}

// root is the repository's root: the nearest folder above with a go.mod.
func root(t testing.TB) string {
	t.Helper()
	dir, err := os.Getwd()
	if err != nil {
		t.Fatal(err)
	}
	for {
		if _, err := os.Stat(filepath.Join(dir, "go.mod")); err == nil {
			return dir
		}
		if parent := filepath.Dir(dir); parent != dir {
			dir = parent
			continue
		}
		t.Fatal("no go.mod above the test's folder")
	}
}
