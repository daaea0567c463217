package api

import (
	"context"
	"encoding/json"
	"net/http"

	"ridgehop/internal/assess"
)

// Reassess judges a link anew, from the question that a kept assessment
// answered, and says what has changed.
func (h *handlers) Reassess(ctx context.Context, request ReassessRequestObject) (ReassessResponseObject, error) {
	before, err := h.Keeper.Assessment(ctx, request.Id)
	if err != nil {
		return nil, err
	}
	judged, err := assess.FromRecord(before.Record)
	if err != nil {
		return nil, err
	}
	id, after, err := h.judged(ctx, judged.Asked)
	if err != nil {
		return nil, err
	}
	out := reassessment{Before: request.Id, Assessment: after}
	if out.Changes, err = changesBetween(before.Answer, after); err != nil {
		return nil, err
	}
	body, err := encoded(out)
	return content{status: http.StatusCreated, kind: "application/json", body: body, location: selfLink(id)}, err
}

// reassessment is a Reassessment of the contract around the assessment as it is
// kept.
type reassessment struct {
	Before     string          `json:"before"`
	Assessment json.RawMessage `json:"assessment"`
	Changes    []Change        `json:"changes"`
}

// VisitReassessResponse implements ReassessResponseObject.
func (c content) VisitReassessResponse(w http.ResponseWriter) error { return c.write(w) }
