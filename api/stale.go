package api

import (
	"bytes"
	"context"
	"errors"
	"slices"
	"time"

	"ridgehop/internal/assess"
)

// staleTime bounds the look at what has changed since an answer was given: a
// remote raster that does not answer must not hold a ready answer back.
const staleTime = 5 * time.Second

// staleBecause says what has changed under an assessment. An answer that was
// given stays readable, so nothing is said where that cannot be told.
func (h *handlers) staleBecause(ctx context.Context, judged *assess.Assessment) []string {
	ctx, cancel := context.WithTimeout(ctx, staleTime)
	defer cancel()
	reasons, err := h.Assessor.Stale(ctx, judged)
	if err != nil {
		h.Log.Warn("whether an assessment is stale cannot be told", "assessment", judged.ID, "error", err)
		return nil
	}
	return reasons
}

// additions are what a stored answer may be given with.
type additions struct {
	StaleBecause []string
	Samples      *Samples
}

// beforeLinks is where they go, as the contract orders them: links is the last
// field of every answer. With its quotation marks it cannot stand inside a
// JSON string.
var beforeLinks = []byte(`,"links":{`)

// to puts the additions into a stored answer. The rest of it stays byte for
// byte, also where an earlier version of the program made it.
func (a additions) to(answer []byte) ([]byte, error) {
	stale := len(a.StaleBecause) > 0
	if !stale && a.Samples == nil {
		return answer, nil
	}
	at := bytes.LastIndex(answer, beforeLinks)
	if at < 0 {
		return nil, errors.New("the stored answer has no links")
	}
	added, err := encoded(struct {
		Stale        bool     `json:"stale,omitempty"`
		StaleBecause []string `json:"stale_because,omitempty"`
		Samples      *Samples `json:"samples,omitempty"`
	}{stale, a.StaleBecause, a.Samples})
	if err != nil {
		return nil, err
	}
	added = bytes.TrimSuffix(bytes.TrimPrefix(added, []byte("{")), []byte("}\n"))
	return slices.Concat(answer[:at], []byte(","), added, answer[at:]), nil
}
