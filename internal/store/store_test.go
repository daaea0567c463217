package store

import (
	"context"
	"errors"
	"os"
	"path/filepath"
	"sync"
	"testing"

	"github.com/google/go-cmp/cmp"
)

func open(t *testing.T, dir string) *Store {
	t.Helper()
	s, err := Open(t.Context(), dir)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { _ = s.Close() })
	return s
}

func TestAssessmentsOutliveAReopening(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "new", "data? dir#1")
	want := Assessment{ID: "as_1", Answer: []byte(`{"id":"as_1"}`), Record: []byte{0, 1, 2}}
	first := open(t, dir)
	if _, err := first.KeepAssessment(t.Context(), want); err != nil {
		t.Fatal(err)
	}
	if err := first.Close(); err != nil {
		t.Fatal(err)
	}
	got, err := open(t, dir).Assessment(t.Context(), "as_1")
	if err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff(got, want); diff != "" {
		t.Error(diff)
	}
	if _, err := os.Stat(filepath.Join(dir, fileName)); err != nil {
		t.Errorf("the database is not where it should be: %v", err)
	}
}

func TestAKeptAssessmentNeverChanges(t *testing.T) {
	s := open(t, t.TempDir())
	for _, answer := range []string{"first", "second"} {
		got, err := s.KeepAssessment(t.Context(), Assessment{ID: "as_1", Answer: []byte(answer), Record: []byte(answer)})
		if err != nil {
			t.Fatal(err)
		}
		if string(got) != "first" {
			t.Errorf("kept answer: got %q, want %q", got, "first")
		}
	}
}

func TestAssessmentNotFound(t *testing.T) {
	if _, err := open(t, t.TempDir()).Assessment(t.Context(), "as_none"); !errors.Is(err, ErrNotFound) {
		t.Errorf("got %v, want ErrNotFound", err)
	}
}

func TestManyWritersAtOnce(t *testing.T) {
	s := open(t, t.TempDir())
	var wg sync.WaitGroup
	for w := range 8 {
		wg.Go(func() {
			for i := range 50 {
				id := string(rune('a'+w)) + string(rune('A'+i))
				if _, err := s.KeepAssessment(t.Context(), Assessment{ID: id, Answer: []byte(id), Record: []byte(id)}); err != nil {
					t.Error(err)
				}
				if got, err := s.Assessment(t.Context(), id); err != nil || string(got.Answer) != id {
					t.Errorf("%s: got %q, %v", id, got.Answer, err)
				}
			}
		})
	}
	wg.Wait()
}

func TestUnusableDirectory(t *testing.T) {
	file := filepath.Join(t.TempDir(), "file")
	if err := os.WriteFile(file, nil, 0o600); err != nil {
		t.Fatal(err)
	}
	if _, err := Open(t.Context(), filepath.Join(file, "below")); !errors.Is(err, ErrUnavailable) {
		t.Errorf("got %v, want ErrUnavailable", err)
	}
	broken := t.TempDir()
	if err := os.WriteFile(filepath.Join(broken, fileName), []byte("this is not a database, but long enough to be looked at as one"), 0o600); err != nil {
		t.Fatal(err)
	}
	if _, err := Open(t.Context(), broken); !errors.Is(err, ErrUnavailable) {
		t.Errorf("foreign file: got %v, want ErrUnavailable", err)
	}
}

func TestPingAndCancellation(t *testing.T) {
	s := open(t, t.TempDir())
	if err := s.Ping(t.Context()); err != nil {
		t.Error(err)
	}
	gone, cancel := context.WithCancel(t.Context())
	cancel()
	if _, err := s.KeepAssessment(gone, Assessment{ID: "x", Answer: []byte{}, Record: []byte{}}); !errors.Is(err, context.Canceled) {
		t.Errorf("got %v, want context.Canceled", err)
	}
}

func BenchmarkKeepAssessment(b *testing.B) {
	s, err := Open(b.Context(), b.TempDir())
	if err != nil {
		b.Fatal(err)
	}
	defer func() { _ = s.Close() }()
	answer, record := make([]byte, 2500), make([]byte, 10000)
	n := 0
	for b.Loop() {
		n++
		id := string(rune('a'+n%26)) + string(rune(n+0x10000))
		if _, err := s.KeepAssessment(b.Context(), Assessment{ID: id, Answer: answer, Record: record}); err != nil {
			b.Fatal(err)
		}
	}
}
