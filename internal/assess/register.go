package assess

import (
	"cmp"
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"slices"

	"ridgehop/internal/radio"
)

type (
	// Antenna describes one model of antenna.
	Antenna = radio.Antenna
	// Radio describes one model of radio.
	Radio = radio.Radio
)

// Shelf keeps the documents of a register by kind and name. It is safe for
// concurrent use.
type Shelf interface {
	// Entry reads one document, or an error that wraps ErrNoEntry.
	Entry(ctx context.Context, kind, name string) ([]byte, error)
	// Entries reads every document of a kind, by name.
	Entries(ctx context.Context, kind string) ([][]byte, error)
	// KeepEntry keeps a document, or an error that wraps ErrNameTaken.
	KeepEntry(ctx context.Context, kind, name string, document []byte) error
	// DropEntry takes a document away, or an error that wraps ErrNoEntry.
	DropEntry(ctx context.Context, kind, name string) error
}

// The errors of a register.
var (
	ErrNoEntry   = errors.New("nothing in the register has this name")
	ErrNameTaken = errors.New("the name is taken")
	// ErrNotOwn means that a generic entry, or one of the settings, was to be
	// taken away.
	ErrNotOwn = errors.New("only entries of one's own can be taken away")
)

// Origin says where an entry comes from.
type Origin string

// The origins.
const (
	Generic      Origin = "generic"
	FromSettings Origin = "settings"
	Own          Origin = "own"
)

// Entry is one model in a register.
type Entry[T any] struct {
	Origin Origin
	Model  T
}

// Register holds the models of one kind: generic ones, those of the settings
// files, and the operator's own on a Shelf. It is safe for concurrent use.
type Register[T any] struct {
	kind     string
	fixed    []Entry[T]
	nameOf   func(T) string
	validate func(T) []radio.Fault
	shelf    Shelf // nil keeps none
}

// NewAntennaRegister is the register of antennas: the catalogue, those of the
// settings, and the shelf, which may be nil.
func NewAntennaRegister(settings []Antenna, shelf Shelf) (*Register[Antenna], error) {
	r := &Register[Antenna]{
		kind: "antenna", shelf: shelf, validate: Antenna.Validate,
		nameOf: func(a Antenna) string { return a.Name },
	}
	return r, r.hold(radio.Catalogue(), settings)
}

// NewRadioRegister is the register of radios: the generic set, those of the
// settings, and the shelf, which may be nil.
func NewRadioRegister(settings []Radio, shelf Shelf) (*Register[Radio], error) {
	r := &Register[Radio]{
		kind: "radio", shelf: shelf, validate: Radio.Validate,
		nameOf: func(r Radio) string { return r.Name },
	}
	return r, r.hold(radio.DemoRadios(), settings)
}

// hold takes in the entries that stay.
func (r *Register[T]) hold(generic, settings []T) error {
	for _, model := range generic {
		r.fixed = append(r.fixed, Entry[T]{Generic, model})
	}
	sorted := slices.SortedFunc(slices.Values(settings), func(a, b T) int { return cmp.Compare(r.nameOf(a), r.nameOf(b)) })
	for _, model := range sorted {
		if _, taken := r.inFixed(r.nameOf(model)); taken {
			return fmt.Errorf("%s %q of the settings: %w", r.kind, r.nameOf(model), ErrNameTaken)
		}
		r.fixed = append(r.fixed, Entry[T]{FromSettings, model})
	}
	return nil
}

func (r *Register[T]) inFixed(name string) (Entry[T], bool) {
	i := slices.IndexFunc(r.fixed, func(e Entry[T]) bool { return r.nameOf(e.Model) == name })
	if i < 0 {
		return Entry[T]{}, false
	}
	return r.fixed[i], true
}

// Get reads one entry; an unknown name is ErrNoEntry.
func (r *Register[T]) Get(ctx context.Context, name string) (Entry[T], error) {
	if e, ok := r.inFixed(name); ok {
		return e, nil
	}
	e := Entry[T]{Origin: Own}
	if r.shelf == nil {
		return e, ErrNoEntry
	}
	document, err := r.shelf.Entry(ctx, r.kind, name)
	if err != nil {
		return e, err
	}
	return e, r.read(document, &e.Model)
}

func (r *Register[T]) read(document []byte, into *T) error {
	if err := json.Unmarshal(document, into); err != nil {
		return fmt.Errorf("%s in the register: %w", r.kind, err)
	}
	return nil
}

// List reads every entry.
func (r *Register[T]) List(ctx context.Context) ([]Entry[T], error) {
	out := slices.Clone(r.fixed)
	if r.shelf == nil {
		return out, nil
	}
	documents, err := r.shelf.Entries(ctx, r.kind)
	if err != nil {
		return nil, err
	}
	for _, document := range documents {
		e := Entry[T]{Origin: Own}
		if err := r.read(document, &e.Model); err != nil {
			return nil, err
		}
		out = append(out, e)
	}
	return out, nil
}

// Add keeps a model of one's own. A model that does not hold together is an
// *InvalidError, a name that is in use ErrNameTaken.
func (r *Register[T]) Add(ctx context.Context, model T) error {
	if err := invalidFaults("/", r.validate(model)); err != nil {
		return err
	}
	if name := r.nameOf(model); name == "." || name == ".." {
		return invalid("/name", "is %q, which is no address of its own; give it a word", name)
	}
	if _, taken := r.inFixed(r.nameOf(model)); taken || r.shelf == nil {
		return ErrNameTaken
	}
	document, err := json.Marshal(model)
	if err != nil {
		return err
	}
	return r.shelf.KeepEntry(ctx, r.kind, r.nameOf(model), document)
}

// Drop takes an entry of one's own away.
func (r *Register[T]) Drop(ctx context.Context, name string) error {
	if _, fixed := r.inFixed(name); fixed {
		return ErrNotOwn
	}
	if r.shelf == nil {
		return ErrNoEntry
	}
	return r.shelf.DropEntry(ctx, r.kind, name)
}

// invalidFaults says a model's faults as field errors below a pointer; nil if
// there are none.
func invalidFaults(pointer string, faults []radio.Fault) error {
	var f findings
	for _, fault := range faults {
		f.add(pointer+fault.Pointer, "%s", fault.Detail)
	}
	return f.err()
}
