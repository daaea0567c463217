package store

import (
	"bytes"
	"errors"
	"fmt"
	"sync"
	"testing"

	"github.com/google/go-cmp/cmp"
)

func TestRegister(t *testing.T) {
	dir := t.TempDir()
	s := open(t, dir)
	for _, name := range []string{"b", "a"} {
		if err := s.KeepEntry(t.Context(), "antenna", name, []byte("document of "+name)); err != nil {
			t.Fatal(err)
		}
	}
	if err := s.KeepEntry(t.Context(), "antenna", "a", []byte("another")); !errors.Is(err, ErrExists) {
		t.Errorf("a name twice: got %v, want ErrExists", err)
	}
	if err := s.KeepEntry(t.Context(), "radio", "a", []byte("a radio")); err != nil {
		t.Errorf("the same name of another kind: %v", err)
	}
	if err := s.Close(); err != nil {
		t.Fatal(err)
	}
	s = open(t, dir)
	got, err := s.Entries(t.Context(), "antenna")
	if err != nil || len(got) != 2 || string(got[0]) != "document of a" || string(got[1]) != "document of b" {
		t.Errorf("by name: got %q, %v", got, err)
	}
	if one, err := s.Entry(t.Context(), "radio", "a"); err != nil || string(one) != "a radio" {
		t.Errorf("one: got %q, %v", one, err)
	}
	if err := s.DropEntry(t.Context(), "antenna", "a"); err != nil {
		t.Error(err)
	}
	if err := s.DropEntry(t.Context(), "antenna", "a"); !errors.Is(err, ErrNotFound) {
		t.Errorf("taken away twice: got %v, want ErrNotFound", err)
	}
	if _, err := s.Entry(t.Context(), "antenna", "a"); !errors.Is(err, ErrNotFound) {
		t.Errorf("after it is gone: got %v, want ErrNotFound", err)
	}
}

func TestChangeEntries(t *testing.T) {
	s := open(t, t.TempDir())
	for _, name := range []string{"kept", "changed", "gone"} {
		if err := s.KeepEntry(t.Context(), "site", name, []byte("old "+name)); err != nil {
			t.Fatal(err)
		}
	}
	if err := s.KeepEntry(t.Context(), "radio", "gone", []byte("a radio")); err != nil {
		t.Fatal(err)
	}
	seen := map[string]string{}
	err := s.ChangeEntries(t.Context(), "site", []string{"kept", "changed", "gone", "new", "never", "new"}, func(name string, was []byte) ([]byte, error) {
		seen[name] += "(" + string(was) + ")"
		switch name {
		case "kept":
			return was, nil
		case "changed", "new":
			return []byte("new " + name), nil
		}
		return nil, nil
	})
	if err != nil {
		t.Fatal(err)
	}
	// What is written is seen later in the same transaction.
	wantSeen := map[string]string{"kept": "(old kept)", "changed": "(old changed)", "gone": "(old gone)", "new": "()(new new)", "never": "()"}
	if diff := cmp.Diff(seen, wantSeen); diff != "" {
		t.Errorf("what change was given: %s", diff)
	}
	got, err := s.Entries(t.Context(), "site")
	if diff := cmp.Diff(words(got), []string{"new changed", "old kept", "new new"}); diff != "" || err != nil {
		t.Error(diff, err)
	}
	if _, err := s.Entry(t.Context(), "radio", "gone"); err != nil {
		t.Errorf("the same name of another kind: %v", err)
	}
}

func TestChangeEntriesIsAllOrNothing(t *testing.T) {
	s := open(t, t.TempDir())
	if err := s.KeepEntry(t.Context(), "site", "a", []byte("old")); err != nil {
		t.Fatal(err)
	}
	stop := errors.New("stop")
	err := s.ChangeEntries(t.Context(), "site", []string{"a", "b", "c"}, func(name string, _ []byte) ([]byte, error) {
		if name == "c" {
			return nil, stop
		}
		return []byte("new"), nil
	})
	if !errors.Is(err, stop) || errors.Is(err, ErrUnavailable) {
		t.Errorf("got %v, want the error of change itself", err)
	}
	got, err := s.Entries(t.Context(), "site")
	if diff := cmp.Diff(words(got), []string{"old"}); diff != "" || err != nil {
		t.Error(diff, err)
	}
	// The one connection that writes is free again.
	if err := s.KeepEntry(t.Context(), "site", "d", []byte("later")); err != nil {
		t.Error(err)
	}
}

// Of writers that each add to what they find, none is lost.
func TestChangeEntriesLosesNoChange(t *testing.T) {
	s := open(t, t.TempDir())
	var wg sync.WaitGroup
	for range 8 {
		wg.Go(func() {
			for range 10 {
				err := s.ChangeEntries(t.Context(), "site", []string{"a"}, func(_ string, was []byte) ([]byte, error) { return append(was, 'x'), nil })
				if err != nil {
					t.Error(err)
				}
			}
		})
	}
	wg.Wait()
	if got, err := s.Entry(t.Context(), "site", "a"); err != nil || len(got) != 80 {
		t.Errorf("got %d changes, %v, want 80", len(got), err)
	}
}

func TestEntriesAfter(t *testing.T) {
	s := open(t, t.TempDir())
	for _, name := range []string{"b", "Z", "a", "c"} {
		if err := s.KeepEntry(t.Context(), "site", name, []byte(name)); err != nil {
			t.Fatal(err)
		}
	}
	if err := s.KeepEntry(t.Context(), "radio", "bb", []byte("bb")); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		after string
		most  int
		want  []string
	}{
		{"", 3, []string{"Z", "a", "b"}},
		{"a", 3, []string{"b", "c"}},
		{"aa", 1, []string{"b"}},
		{"c", 3, []string{}},
	} {
		got, err := s.EntriesAfter(t.Context(), "site", c.after, c.most)
		if diff := cmp.Diff(words(got), c.want); diff != "" || err != nil {
			t.Errorf("after %q: %s %v", c.after, diff, err)
		}
	}
}

func words(documents [][]byte) []string {
	out := make([]string, len(documents))
	for i, document := range documents {
		out[i] = string(document)
	}
	return out
}

func BenchmarkChangeEntries(b *testing.B) {
	s, err := Open(b.Context(), b.TempDir())
	if err != nil {
		b.Fatal(err)
	}
	defer s.Close()
	names := make([]string, 10_000)
	for i := range names {
		names[i] = fmt.Sprintf("site-%06d", i)
	}
	turn := byte(0)
	for b.Loop() {
		turn++
		document := bytes.Repeat([]byte{'a' + turn%26}, 300)
		if err := s.ChangeEntries(b.Context(), "site", names, func(string, []byte) ([]byte, error) { return document, nil }); err != nil {
			b.Fatal(err)
		}
	}
}
