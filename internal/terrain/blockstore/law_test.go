package blockstore

import (
	"bytes"
	"errors"
	"fmt"
	"math/rand/v2"
	"os"
	"slices"
	"sync"
	"testing"
	"time"

	"pgregory.net/rapid"
)

// kept is a value as the model knows it.
type kept struct {
	name    string
	value   []byte
	damaged bool
}

// model is a cache in memory that does by the plainest means what a Store is to
// do: values, the last used first, cut off where they pass the bound.
type model struct {
	max    int64
	recent []kept
}

func (m *model) bytes() (sum int64) {
	for _, k := range m.recent {
		sum += headerBytes + int64(len(k.value))
	}
	return sum
}

func (m *model) take(name string) (kept, bool) {
	at := slices.IndexFunc(m.recent, func(k kept) bool { return k.name == name })
	if at < 0 {
		return kept{}, false
	}
	k := m.recent[at]
	m.recent = slices.Delete(m.recent, at, at+1)
	return k, true
}

func (m *model) put(k kept) {
	m.take(k.name)
	m.recent = slices.Insert(m.recent, 0, k)
	m.cut()
}

func (m *model) cut() {
	for m.bytes() > m.max {
		m.recent = m.recent[:len(m.recent)-1]
	}
}

// Whatever is done to a Store: it has what the plain model has, byte by byte,
// and its files are within the bound after every step.
func TestStoreLikeItsModel(t *testing.T) {
	const most = 600
	names := []string{"a", "b", "c", "d", "e", "f"}
	rapid.Check(t, func(r *rapid.T) {
		dir, err := os.MkdirTemp(t.TempDir(), "")
		must(t, err)
		m := model{max: rapid.Int64Range(1, most).Draw(r, "max")}
		s, err := Open(dir, m.max)
		must(t, err)
		name := rapid.SampledFrom(names)
		r.Repeat(map[string]func(*rapid.T){
			"put": func(r *rapid.T) {
				k := kept{name: name.Draw(r, "name"), value: rapid.SliceOfN(rapid.Byte(), 0, 200).Draw(r, "value")}
				err := s.Put(k.name, k.value)
				if headerBytes+int64(len(k.value)) > m.max {
					if !errors.Is(err, ErrTooLarge) {
						r.Fatalf("got %v, want ErrTooLarge", err)
					}
					return
				}
				must(t, err)
				m.put(k)
			},
			"get": func(r *rapid.T) {
				name := name.Draw(r, "name")
				got, ok := s.Get(name, nil)
				want, there := m.take(name)
				there = there && !want.damaged
				if ok != there || there && !bytes.Equal(got, want.value) {
					r.Fatalf("%s: got %q, %t, want %q, %t", name, got, ok, want.value, there)
				}
				if there {
					m.put(want)
				}
			},
			"remove": func(r *rapid.T) {
				name := name.Draw(r, "name")
				must(t, s.Remove(name))
				m.take(name)
			},
			"damage": func(r *rapid.T) {
				if len(m.recent) == 0 {
					r.Skip()
				}
				k := &m.recent[rapid.IntRange(0, len(m.recent)-1).Draw(r, "which")]
				if k.damaged {
					r.Skip() // the same bit twice would mend it
				}
				k.damaged = true
				stat, err := os.Stat(place(dir, keyOf(k.name)))
				must(t, err)
				raw, err := os.ReadFile(place(dir, keyOf(k.name)))
				must(t, err)
				raw[rapid.IntRange(0, len(raw)-1).Draw(r, "at")] ^= 1 << rapid.IntRange(0, 7).Draw(r, "bit")
				must(t, os.WriteFile(place(dir, keyOf(k.name)), raw, 0o600))
				// A disk that damages a file does not say that it was just used.
				must(t, os.Chtimes(place(dir, keyOf(k.name)), stat.ModTime(), stat.ModTime()))
			},
			"reopen": func(r *rapid.T) {
				must(t, s.Close())
				for i, k := range m.recent { // the system's clock of files is coarse
					at := time.Now().Add(-time.Duration(i) * time.Hour)
					must(t, os.Chtimes(place(dir, keyOf(k.name)), at, at))
				}
				m.max = rapid.Int64Range(1, most).Draw(r, "max")
				m.cut()
				s, err = Open(dir, m.max)
				must(t, err)
			},
			"": func(r *rapid.T) {
				files, total := filesIn(t, dir)
				got := s.Stats()
				if total > m.max || total != m.bytes() || got.Bytes != total || got.Entries != len(files) || len(files) != len(m.recent) {
					r.Fatalf("got %d bytes in %d files and %+v, want %d in %d and at most %d", total, len(files), got, m.bytes(), len(m.recent), m.max)
				}
			},
		})
	})
}

// Two Stores on one folder: each gets what the other put, takes what the other
// evicted for a miss, and together they keep within a little of the bound.
func TestTwoStoresOnOneFolder(t *testing.T) {
	const (
		each  = 1000
		bound = 64 * each
	)
	dir := t.TempDir()
	stores := []*Store{opened(t, dir, bound), opened(t, dir, bound)}
	must(t, stores[0].Put("shared", fill("shared", 100)))
	has(t, stores[1], "shared", fill("shared", 100))
	must(t, stores[1].Remove("shared"))
	has(t, stores[0], "shared", nil)
	for i := range 500 {
		must(t, stores[i%2].Put(fmt.Sprint(i), fill(fmt.Sprint(i), each-headerBytes)))
		if i%10 < 9 {
			continue // listing the folder takes longest
		}
		if _, total := filesIn(t, dir); total > bound+2*bound/surveyShare {
			t.Fatalf("after %d: got %d bytes, want at most %d and two sixteenths", i, total, bound)
		}
	}
	hits := 0
	for i := range 500 {
		for _, s := range stores {
			if got, ok := s.Get(fmt.Sprint(i), nil); ok {
				hits++
				if !bytes.Equal(got, fill(fmt.Sprint(i), each-headerBytes)) {
					t.Fatalf("%d: got %.40q", i, got)
				}
			}
		}
	}
	if hits < bound/each { // each of the last ones by both, but for what was evicted on the way
		t.Errorf("got %d hits, want at least %d", hits, bound/each)
	}
	// One that has cleaned up takes what the other was about to finish for its.
	temporary, err := writeBlock(dir, keyOf("late"), nil)
	must(t, err)
	must(t, os.Remove(temporary))
	must(t, stores[0].admit(keyOf("late"), headerBytes, temporary))
	has(t, stores[0], "late", nil)
}

// Run with -race. Values are right whoever writes and evicts, and the bound
// holds whenever a Put has returned.
func TestConcurrentUse(t *testing.T) {
	const bound = 20_000
	dir := t.TempDir()
	stores := []*Store{opened(t, dir, bound), opened(t, dir, bound)}
	var all sync.WaitGroup
	for worker := range 8 {
		all.Go(func() {
			s, r := stores[worker%2], rand.New(rand.NewPCG(1, uint64(worker)))
			var into []byte
			for range 150 {
				name := fmt.Sprint(r.IntN(40))
				want := fill(name, 500+len(name)*400)
				switch r.IntN(8) {
				case 0, 1, 2:
					if err := s.Put(name, want); err != nil {
						t.Errorf("got %v, want it kept", err)
					}
				case 3:
					if err := s.Remove(name); err != nil {
						t.Errorf("got %v, want it removed", err)
					}
				default:
					got, ok := s.Get(name, into)
					if ok && !bytes.Equal(got, want) {
						t.Errorf("%s: got %.40q, want %.40q", name, got, want)
					}
					if ok {
						into = got
					}
				}
				if got := s.Stats().Bytes; got > bound {
					t.Errorf("got %d bytes, want at most %d", got, bound)
				}
			}
		})
	}
	all.Wait()
	for _, s := range stores { // the last to look evicts what both left
		must(t, s.Close())
		must(t, opened(t, dir, bound).Close())
	}
	if _, total := filesIn(t, dir); total > bound {
		t.Errorf("got %d bytes on disk, want at most %d", total, bound)
	}
	if hits := stores[0].Stats().Hits + stores[1].Stats().Hits; hits == 0 {
		t.Error("got no hit at all")
	}
}
