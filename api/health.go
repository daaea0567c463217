package api

import (
	"context"

	"ridgehop/internal/telemetry"
)

// GetLive says that the process runs.
func (h *handlers) GetLive(context.Context, GetLiveRequestObject) (GetLiveResponseObject, error) {
	return GetLive200JSONResponse{Status: Ok, Checks: []HealthCheck{}}, nil
}

// GetReady says whether requests can be answered.
func (h *handlers) GetReady(ctx context.Context, _ GetReadyRequestObject) (GetReadyResponseObject, error) {
	findings, ok := h.Health.Ready(ctx)
	if !ok {
		return GetReady503JSONResponse{Status: Failing, Checks: checksOf(findings)}, nil
	}
	return GetReady200JSONResponse{Status: Ok, Checks: checksOf(findings)}, nil
}

func checksOf(findings []telemetry.Finding) []HealthCheck {
	out := make([]HealthCheck, 0, len(findings))
	for _, f := range findings {
		out = append(out, HealthCheck{Name: f.Name, Ok: f.OK, Detail: &f.Detail})
	}
	return out
}
