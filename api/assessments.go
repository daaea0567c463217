package api

import (
	"bytes"
	"context"
	"crypto/sha256"
	"encoding/hex"
	"net/http"
	"strings"

	"ridgehop/internal/assess"
	"ridgehop/internal/drawing"
	"ridgehop/internal/store"
)

// CreateAssessment judges a link and keeps the answer.
func (h *handlers) CreateAssessment(ctx context.Context, request CreateAssessmentRequestObject) (CreateAssessmentResponseObject, error) {
	id, kept, err := h.judged(ctx, request.Body.Asked())
	if err != nil {
		return nil, err
	}
	return content{status: http.StatusCreated, kind: "application/json", body: kept, location: selfLink(id)}, nil
}

// judged judges a link, keeps the answer, and returns its id and the answer
// that is kept.
func (h *handlers) judged(ctx context.Context, request assess.Request) (id string, kept []byte, err error) {
	judged, err := h.Assessor.Assess(ctx, request)
	if err != nil {
		return "", nil, err
	}
	answer, err := Encode(Answer(judged, false))
	if err != nil {
		return "", nil, err
	}
	record, err := judged.Record()
	if err != nil {
		return "", nil, err
	}
	kept, err = h.Keeper.KeepAssessment(ctx, store.Assessment{ID: judged.ID, Answer: answer, Record: record})
	if err != nil {
		return "", nil, err
	}
	h.Metrics.Assessment(string(judged.Judgement.Verdict))
	return judged.ID, kept, nil
}

// GetAssessment gives an assessment as it was first given, and says where it
// is stale.
func (h *handlers) GetAssessment(ctx context.Context, request GetAssessmentRequestObject) (GetAssessmentResponseObject, error) {
	include := request.Params.Include
	if include != nil && *include != GetAssessmentParamsIncludeSamples {
		return nil, badRequest.problem("include is %q; it may be samples.", string(*include))
	}
	kept, err := h.Keeper.Assessment(ctx, request.Id)
	if err != nil {
		return nil, err
	}
	out := content{status: http.StatusOK, kind: "application/json", body: kept.Answer, known: request.Params.IfNoneMatch}
	judged, err := assess.FromRecord(kept.Record)
	if err != nil && include == nil {
		h.Log.Warn("the record of an assessment cannot be read", "assessment", request.Id, "error", err)
		return out, nil // the answer itself stays readable
	}
	if err != nil {
		return nil, err
	}
	more := additions{StaleBecause: h.staleBecause(ctx, judged)}
	if include != nil {
		more.Samples = samplesOf(judged)
	}
	out.body, err = more.to(kept.Answer)
	return out, err
}

// GetAssessmentSVG draws an assessment.
func (h *handlers) GetAssessmentSVG(ctx context.Context, request GetAssessmentSVGRequestObject) (GetAssessmentSVGResponseObject, error) {
	kept, err := h.Keeper.Assessment(ctx, request.Id)
	if err != nil {
		return nil, err
	}
	judged, err := assess.FromRecord(kept.Record)
	if err != nil {
		return nil, err
	}
	var picture bytes.Buffer
	if err := drawing.SVG(&picture, judged); err != nil {
		return nil, err
	}
	return content{
		status: http.StatusOK, kind: "image/svg+xml", body: picture.Bytes(), known: request.Params.IfNoneMatch,
		file: judged.ID + ".svg",
	}, nil
}

// content is an answer of ready bytes, with an ETag that names them.
type content struct {
	status   int
	kind     string
	body     []byte
	location string
	file     string
	known    *string // the caller's If-None-Match
}

// etag is the strong tag of the body.
func (c content) etag() string {
	sum := sha256.Sum256(c.body)
	return `"` + hex.EncodeToString(sum[:12]) + `"`
}

func (c content) write(w http.ResponseWriter) error {
	etag := c.etag()
	w.Header().Set("ETag", etag)
	w.Header().Set("Cache-Control", "no-cache") // keep, but ask whether it still holds
	if c.location != "" {
		w.Header().Set("Location", c.location)
	}
	if c.known != nil && matches(*c.known, etag) {
		w.WriteHeader(http.StatusNotModified)
		return nil
	}
	if c.file != "" {
		w.Header().Set("Content-Disposition", `inline; filename="`+c.file+`"`)
	}
	w.Header().Set("Content-Type", c.kind)
	w.WriteHeader(c.status)
	_, err := w.Write(c.body)
	return err
}

// matches compares an If-None-Match with an ETag, weakly (RFC 9110 13.1.2).
func matches(known, etag string) bool {
	for candidate := range strings.SplitSeq(known, ",") {
		candidate = strings.TrimPrefix(strings.TrimSpace(candidate), "W/")
		if candidate == etag || candidate == "*" {
			return true
		}
	}
	return false
}

// VisitCreateAssessmentResponse implements CreateAssessmentResponseObject.
func (c content) VisitCreateAssessmentResponse(w http.ResponseWriter) error { return c.write(w) }

// VisitGetAssessmentResponse implements GetAssessmentResponseObject.
func (c content) VisitGetAssessmentResponse(w http.ResponseWriter) error { return c.write(w) }

// VisitGetAssessmentSVGResponse implements GetAssessmentSVGResponseObject.
func (c content) VisitGetAssessmentSVGResponse(w http.ResponseWriter) error { return c.write(w) }
