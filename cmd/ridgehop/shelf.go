package main

import (
	"context"
	"errors"

	"ridgehop/internal/assess"
	"ridgehop/internal/store"
)

// shelf is the store as the registers want it: it says the store's errors in
// their words.
type shelf struct {
	kept *store.Store
}

func (s shelf) Entry(ctx context.Context, kind, name string) ([]byte, error) {
	document, err := s.kept.Entry(ctx, kind, name)
	return document, inWords(err)
}

func (s shelf) Entries(ctx context.Context, kind string) ([][]byte, error) {
	return s.kept.Entries(ctx, kind)
}

func (s shelf) KeepEntry(ctx context.Context, kind, name string, document []byte) error {
	return inWords(s.kept.KeepEntry(ctx, kind, name, document))
}

func (s shelf) DropEntry(ctx context.Context, kind, name string) error {
	return inWords(s.kept.DropEntry(ctx, kind, name))
}

func (s shelf) EntriesAfter(ctx context.Context, kind, after string, most int) ([][]byte, error) {
	return s.kept.EntriesAfter(ctx, kind, after, most)
}

func (s shelf) ChangeEntries(ctx context.Context, kind string, names []string, change func(name string, was []byte) ([]byte, error)) error {
	return s.kept.ChangeEntries(ctx, kind, names, change)
}

func inWords(err error) error {
	switch {
	case errors.Is(err, store.ErrNotFound):
		return assess.ErrNoEntry
	case errors.Is(err, store.ErrExists):
		return assess.ErrNameTaken
	}
	return err
}
