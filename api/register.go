package api

import (
	"context"
	"net/url"

	"ridgehop/internal/assess"
)

// Register holds the models of one kind. assess.Register is one.
type Register[T any] interface {
	// Get reads one entry; assess.ErrNoEntry if the name is not known.
	Get(ctx context.Context, name string) (assess.Entry[T], error)
	// List reads every entry.
	List(ctx context.Context) ([]assess.Entry[T], error)
	// Add keeps a model; *assess.InvalidError or assess.ErrNameTaken if not.
	Add(ctx context.Context, model T) error
	// Drop takes a model away; assess.ErrNoEntry or assess.ErrNotOwn if not.
	Drop(ctx context.Context, name string) error
}

// ListAntennas lists the register of antennas.
func (h *handlers) ListAntennas(ctx context.Context, _ ListAntennasRequestObject) (ListAntennasResponseObject, error) {
	entries, err := h.Antennas.List(ctx)
	out := AntennaList{Antennas: []AntennaEntry{}}
	for _, e := range entries {
		out.Antennas = append(out.Antennas, antennaEntry(e))
	}
	return ListAntennas200JSONResponse(out), err
}

// CreateAntenna adds an antenna of one's own.
func (h *handlers) CreateAntenna(ctx context.Context, request CreateAntennaRequestObject) (CreateAntennaResponseObject, error) {
	model := same[assess.Antenna](*request.Body)
	if err := h.Antennas.Add(ctx, model); err != nil {
		return nil, err
	}
	return CreateAntenna201JSONResponse{
		Headers: CreateAntenna201ResponseHeaders{Location: new("/v1/antennas/" + url.PathEscape(model.Name))},
		Body:    antennaEntry(assess.Entry[assess.Antenna]{Origin: assess.Own, Model: model}),
	}, nil
}

// GetAntenna reads an antenna.
func (h *handlers) GetAntenna(ctx context.Context, request GetAntennaRequestObject) (GetAntennaResponseObject, error) {
	e, err := h.Antennas.Get(ctx, request.Name)
	if err != nil {
		return nil, err
	}
	return GetAntenna200JSONResponse(antennaEntry(e)), nil
}

// DeleteAntenna takes an antenna of one's own away.
func (h *handlers) DeleteAntenna(ctx context.Context, request DeleteAntennaRequestObject) (DeleteAntennaResponseObject, error) {
	return DeleteAntenna204Response{}, h.Antennas.Drop(ctx, request.Name)
}

// ListRadios lists the register of radios.
func (h *handlers) ListRadios(ctx context.Context, _ ListRadiosRequestObject) (ListRadiosResponseObject, error) {
	entries, err := h.Radios.List(ctx)
	out := RadioList{Radios: []RadioEntry{}}
	for _, e := range entries {
		out.Radios = append(out.Radios, radioEntry(e))
	}
	return ListRadios200JSONResponse(out), err
}

// CreateRadio adds a radio of one's own.
func (h *handlers) CreateRadio(ctx context.Context, request CreateRadioRequestObject) (CreateRadioResponseObject, error) {
	model := same[assess.Radio](*request.Body)
	if err := h.Radios.Add(ctx, model); err != nil {
		return nil, err
	}
	return CreateRadio201JSONResponse{
		Headers: CreateRadio201ResponseHeaders{Location: new("/v1/radios/" + url.PathEscape(model.Name))},
		Body:    radioEntry(assess.Entry[assess.Radio]{Origin: assess.Own, Model: model}),
	}, nil
}

// GetRadio reads a radio.
func (h *handlers) GetRadio(ctx context.Context, request GetRadioRequestObject) (GetRadioResponseObject, error) {
	e, err := h.Radios.Get(ctx, request.Name)
	if err != nil {
		return nil, err
	}
	return GetRadio200JSONResponse(radioEntry(e)), nil
}

// DeleteRadio takes a radio of one's own away.
func (h *handlers) DeleteRadio(ctx context.Context, request DeleteRadioRequestObject) (DeleteRadioResponseObject, error) {
	return DeleteRadio204Response{}, h.Radios.Drop(ctx, request.Name)
}

func antennaEntry(e assess.Entry[assess.Antenna]) AntennaEntry {
	return AntennaEntry{Origin: AntennaEntryOrigin(e.Origin), Antenna: same[Antenna](e.Model)}
}

func radioEntry(e assess.Entry[assess.Radio]) RadioEntry {
	return RadioEntry{Origin: RadioEntryOrigin(e.Origin), Radio: same[Radio](e.Model)}
}
