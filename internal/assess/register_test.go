package assess

import (
	"context"
	"errors"
	"slices"
	"testing"

	"ridgehop/internal/radio"
)

type (
	radioPolarisation = radio.Polarisation
	radioPattern      = radio.PatternSource
)

// books is a Shelf in memory.
type books map[string][]byte

func (b books) Entry(_ context.Context, kind, name string) ([]byte, error) {
	if document, ok := b[kind+name]; ok {
		return document, nil
	}
	return nil, ErrNoEntry
}

func (b books) Entries(context.Context, string) ([][]byte, error) {
	var out [][]byte
	for _, document := range b {
		out = append(out, document)
	}
	return out, nil
}

func (b books) KeepEntry(_ context.Context, kind, name string, document []byte) error {
	if _, taken := b[kind+name]; taken {
		return ErrNameTaken
	}
	b[kind+name] = document
	return nil
}

func (b books) DropEntry(_ context.Context, kind, name string) error {
	if _, ok := b[kind+name]; !ok {
		return ErrNoEntry
	}
	delete(b, kind+name)
	return nil
}

func TestRegister(t *testing.T) {
	ctx := context.Background()
	settings := radio.Catalogue()[0]
	settings.Name = "from settings"
	r, err := NewAntennaRegister([]Antenna{settings}, books{})
	if err != nil {
		t.Fatal(err)
	}
	own := radio.Catalogue()[0]
	own.Name = "own"
	if err := r.Add(ctx, own); err != nil {
		t.Fatal(err)
	}
	list, err := r.List(ctx)
	if err != nil {
		t.Fatal(err)
	}
	origins := map[Origin]int{}
	for _, e := range list {
		origins[e.Origin]++
	}
	if origins[Generic] != len(radio.Catalogue()) || origins[FromSettings] != 1 || origins[Own] != 1 {
		t.Errorf("got %v", origins)
	}
	for name, want := range map[string]Origin{"own": Own, "from settings": FromSettings, radio.Catalogue()[0].Name: Generic} {
		if e, err := r.Get(ctx, name); err != nil || e.Origin != want || e.Model.Name != name {
			t.Errorf("%s: got %+v, %v", name, e, err)
		}
	}
	if err := r.Add(ctx, own); !errors.Is(err, ErrNameTaken) {
		t.Errorf("own name twice: got %v", err)
	}
	if err := r.Add(ctx, settings); !errors.Is(err, ErrNameTaken) {
		t.Errorf("name of the settings: got %v", err)
	}
	if err := r.Drop(ctx, "from settings"); !errors.Is(err, ErrNotOwn) {
		t.Errorf("taking the settings' away: got %v", err)
	}
	if err := r.Drop(ctx, "own"); err != nil {
		t.Error(err)
	}
	if _, err := r.Get(ctx, "own"); !errors.Is(err, ErrNoEntry) {
		t.Errorf("after it is gone: got %v", err)
	}
}

func TestRegisterRefusesWhatDoesNotHoldTogether(t *testing.T) {
	r, err := NewRadioRegister(nil, books{})
	if err != nil {
		t.Fatal(err)
	}
	broken := radio.DemoRadios()[0]
	broken.Name = "broken"
	broken.Modulations = slices.Clone(broken.Modulations)
	slices.Reverse(broken.Modulations)
	fault, ok := errors.AsType[*InvalidError](r.Add(context.Background(), broken))
	if !ok || len(fault.Fields) == 0 || fault.Fields[0].Pointer[0] != '/' {
		t.Errorf("thresholds out of order: got %v", fault)
	}
	if _, err := NewRadioRegister([]Radio{radio.DemoRadios()[0]}, nil); !errors.Is(err, ErrNameTaken) {
		t.Errorf("settings that take a generic name: got %v", err)
	}
}
