package store

import (
	"errors"
	"testing"
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
