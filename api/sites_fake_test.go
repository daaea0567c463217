package api

import (
	"context"
	"maps"
	"slices"
	"sync"

	"ridgehop/internal/assess"
)

// siteShelf is a sites.Shelf in memory.
type siteShelf struct {
	mu     sync.Mutex
	kept   map[string][]byte
	err    error
	broken string // the name after which no entries can be read
}

func (s *siteShelf) Entry(_ context.Context, _, name string) ([]byte, error) {
	s.mu.Lock()
	defer s.mu.Unlock()
	if raw, ok := s.kept[name]; ok || s.err != nil {
		return raw, s.err
	}
	return nil, assess.ErrNoEntry
}

func (s *siteShelf) EntriesAfter(_ context.Context, _, after string, most int) (out [][]byte, err error) {
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.broken != "" && after == s.broken {
		return nil, errSecret
	}
	for _, name := range slices.Sorted(maps.Keys(s.kept)) {
		if name > after && len(out) < most {
			out = append(out, s.kept[name])
		}
	}
	return out, s.err
}

func (s *siteShelf) ChangeEntries(_ context.Context, _ string, names []string, change func(string, []byte) ([]byte, error)) error {
	s.mu.Lock()
	defer s.mu.Unlock()
	next := maps.Clone(s.kept)
	for _, name := range names {
		is, err := change(name, next[name])
		if err != nil {
			return err
		}
		if next[name] = is; is == nil {
			delete(next, name)
		}
	}
	if s.err == nil {
		s.kept = next
	}
	return s.err
}
