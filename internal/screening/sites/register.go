package sites

import (
	"context"
	"encoding/json"
	"errors"
	"iter"
	"reflect"
	"time"

	"ridgehop/internal/assess"
	"ridgehop/internal/screening/intake"
)

// kind is that of the documents on the shelf.
const kind = "site"

// Shelf keeps the documents of a register by kind and name. It is safe for
// concurrent use.
type Shelf interface {
	// Entry reads one document, or an error that wraps assess.ErrNoEntry.
	Entry(ctx context.Context, kind, name string) ([]byte, error)
	// EntriesAfter reads the first documents whose names come after one, at most
	// so many, by name in the order of its bytes.
	EntriesAfter(ctx context.Context, kind, after string, most int) ([][]byte, error)
	// ChangeEntries gives change each name and the document kept under it, nil if
	// there is none, and keeps what it returns, nil for nothing: all of it or, at
	// the first error of change, which it returns, none. Nobody else changes the
	// shelf meanwhile.
	ChangeEntries(ctx context.Context, kind string, names []string, change func(name string, was []byte) (is []byte, err error)) error
}

// The errors of a register.
var (
	ErrNoSite  = errors.New("no site has this id")
	ErrIDTaken = errors.New("the id is taken")
	// ErrChanged means that a site is not what the caller holds it to be.
	ErrChanged = errors.New("the site is another than the one that was read")
)

// Condition says whether a site, nil if there is none, is what a caller holds it
// to be. A nil Condition always holds.
type Condition func(kept *Site) bool

func (c Condition) check(kept *Site) error {
	if c == nil || c(kept) {
		return nil
	}
	return ErrChanged
}

// Register holds the sites. It is safe for concurrent use.
type Register struct {
	shelf Shelf
	now   func() time.Time
}

// NewRegister is the register on a shelf.
func NewRegister(shelf Shelf) *Register { return &Register{shelf: shelf, now: time.Now} }

// Get reads one site; an unknown id is ErrNoSite.
func (r *Register) Get(ctx context.Context, id string) (Site, error) {
	raw, err := r.shelf.Entry(ctx, kind, id)
	if errors.Is(err, assess.ErrNoEntry) {
		return Site{}, ErrNoSite
	}
	if err != nil {
		return Site{}, err
	}
	return fromDocument(raw)
}

// Page reads the first sites whose ids come after one, at most so many, in the
// order of the bytes of their ids, and says whether there are more. No id comes
// before the empty one.
func (r *Register) Page(ctx context.Context, after string, most int) (page []Site, more bool, err error) {
	documents, err := r.shelf.EntriesAfter(ctx, kind, after, most+1)
	if err != nil {
		return nil, false, err
	}
	for _, raw := range documents[:min(most, len(documents))] {
		s, err := fromDocument(raw)
		if err != nil {
			return nil, false, err
		}
		page = append(page, s)
	}
	return page, len(documents) > most, nil
}

// pageSize is how many sites All holds at once.
const pageSize = 500

// All yields every site in the order of the bytes of their ids, an error last.
// One that comes or goes meanwhile may be missed; no other is, and none comes
// twice. The sequence can be ranged over again.
func (r *Register) All(ctx context.Context) iter.Seq2[Site, error] {
	return func(yield func(Site, error) bool) {
		for after, more := "", true; more; {
			var page []Site
			var err error
			if page, more, err = r.Page(ctx, after, pageSize); err != nil {
				yield(Site{}, err)
				return
			}
			for _, s := range page {
				if after = s.ID; !yield(s, nil) {
					return
				}
			}
		}
	}
}

// Create adds a site and returns it as it is kept. A site that does not hold
// together is an *assess.InvalidError, an id that is in use ErrIDTaken.
func (r *Register) Create(ctx context.Context, site intake.Site) (Site, error) {
	kept, _, err := r.keep(ctx, site, func(was *Site) error {
		if was != nil {
			return ErrIDTaken
		}
		return nil
	})
	return kept, err
}

// Put keeps a site in place of the one of its id, if there is one, and returns
// it as it is kept. The same site once more changes nothing. A site that does
// not hold together is an *assess.InvalidError; where the condition does not
// hold the error is ErrChanged.
func (r *Register) Put(ctx context.Context, site intake.Site, holds Condition) (kept Site, created bool, err error) {
	return r.keep(ctx, site, holds.check)
}

func (r *Register) keep(ctx context.Context, site intake.Site, allowed func(was *Site) error) (kept Site, created bool, err error) {
	site = whole(site)
	if faults := validate(site); len(faults) > 0 {
		return kept, false, &assess.InvalidError{Fields: faults}
	}
	err = r.change(ctx, []string{site.ID}, func(_ string, was *Site) (*Site, error) {
		if err := allowed(was); err != nil {
			return nil, err
		}
		is := r.revised(site, was)
		kept, created = *is, was == nil
		return is, nil
	})
	return kept, created, err
}

// Drop takes a site away; an unknown id is ErrNoSite. Where the condition does
// not hold the error is ErrChanged.
func (r *Register) Drop(ctx context.Context, id string, holds Condition) error {
	return r.change(ctx, []string{id}, func(_ string, was *Site) (*Site, error) {
		if was == nil {
			return nil, ErrNoSite
		}
		return nil, holds.check(was)
	})
}

// revised is a whole site in place of the one that was kept, if any; was itself
// where nothing changes.
func (r *Register) revised(site intake.Site, was *Site) *Site {
	now := r.now().UTC().Truncate(time.Second)
	switch {
	case was == nil:
		return &Site{Site: site, CreatedAt: now, ChangedAt: now}
	case reflect.DeepEqual(was.Site, site):
		return was
	}
	return &Site{Site: site, CreatedAt: was.CreatedAt, ChangedAt: now}
}

// change changes sites together or not at all. The function gets what is kept,
// nil if nothing is, and returns what is to be kept; the same pointer leaves the
// document as it is.
func (r *Register) change(ctx context.Context, ids []string, to func(id string, was *Site) (*Site, error)) error {
	return r.shelf.ChangeEntries(ctx, kind, ids, func(id string, raw []byte) ([]byte, error) {
		was, err := earlier(raw)
		if err != nil {
			return nil, err
		}
		is, err := to(id, was)
		switch {
		case err != nil:
			return nil, err
		case is == was:
			return raw, nil
		case is == nil:
			return nil, nil
		}
		return json.Marshal(is)
	})
}

// earlier is the site of a document; nil where there is none.
func earlier(raw []byte) (*Site, error) {
	if raw == nil {
		return nil, nil
	}
	s, err := fromDocument(raw)
	return &s, err
}
