package sites

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"maps"
	"slices"
	"testing"
	"time"

	"ridgehop/internal/assess"
	"ridgehop/internal/screening/intake"
)

// memory is a Shelf for one goroutine.
type memory struct {
	kept   map[string][]byte
	writes int
	err    error
}

func (m *memory) Entry(_ context.Context, kind, name string) ([]byte, error) {
	if raw, ok := m.kept[kind+"/"+name]; ok {
		return raw, m.err
	}
	return nil, errors.Join(m.err, fmt.Errorf("%w: %s", assess.ErrNoEntry, name))
}

func (m *memory) EntriesAfter(_ context.Context, kind, after string, most int) (out [][]byte, err error) {
	for _, key := range slices.Sorted(maps.Keys(m.kept)) {
		if key > kind+"/"+after && len(out) < most {
			out = append(out, m.kept[key])
		}
	}
	return out, m.err
}

func (m *memory) ChangeEntries(_ context.Context, kind string, names []string, change func(string, []byte) ([]byte, error)) error {
	next := maps.Clone(m.kept)
	for _, name := range names {
		was := next[kind+"/"+name]
		is, err := change(name, was)
		switch {
		case err != nil:
			return err
		case is == nil:
			delete(next, kind+"/"+name)
		case !bytes.Equal(is, was):
			next[kind+"/"+name] = is
			m.writes++
		}
	}
	if m.err == nil {
		m.kept = next
	}
	return m.err
}

// register is an empty one, whose clock goes on by a minute at each look.
func register() (*Register, *memory) {
	m := &memory{kept: map[string][]byte{}}
	r := NewRegister(m)
	at := time.Date(2031, 3, 4, 5, 6, 7, 8e8, time.FixedZone("", 3600))
	r.now = func() time.Time { at = at.Add(time.Minute); return at }
	return r, m
}

func place(id string) intake.Site {
	return intake.Site{ID: id, Lon: -20.5, Lat: -30.5, AntennaHeightM: 25}
}

// ids are those of every site.
func ids(t testing.TB, r *Register) (out []string) {
	t.Helper()
	for s, err := range r.All(t.Context()) {
		if err != nil {
			t.Fatal(err)
		}
		out = append(out, s.ID)
	}
	return out
}
