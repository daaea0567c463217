package telemetry

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"log/slog"
	"net/http/httptest"
	"strings"
	"testing"
	"time"
)

// Callers cannot make series without end: what they make up counts as one.
func TestMetricsAreBounded(t *testing.T) {
	m := NewMetrics()
	for i := range 50 {
		m.Request(fmt.Sprintf("METHOD%d", i), "/v1/assessments", 405, time.Millisecond)
	}
	m.Assessment("clear")
	m.Shed()
	w := httptest.NewRecorder()
	m.Handler().ServeHTTP(w, httptest.NewRequest("GET", "/metrics", nil))
	text := w.Body.String()
	if got := strings.Count(text, "ridgehop_http_request_duration_seconds_count{"); got != 1 {
		t.Errorf("series: got %d, want 1", got)
	}
	for _, want := range []string{
		`ridgehop_http_request_duration_seconds_count{method="other",route="/v1/assessments",status="405"} 50`,
		`ridgehop_assessments_total{verdict="clear"} 1`, `ridgehop_http_requests_shed_total 1`,
	} {
		if !strings.Contains(text, want) {
			t.Errorf("got no %s in\n%s", want, text)
		}
	}
}

func TestHealth(t *testing.T) {
	h := NewHealth(
		Check{"well", func(context.Context) (string, error) { return "fine", nil }},
		Check{"ill", func(context.Context) (string, error) { return "", errors.New("broken") }},
	)
	findings, ok := h.Ready(t.Context())
	if ok || len(findings) != 2 || !findings[0].OK || findings[1].OK || findings[1].Detail != "broken" {
		t.Errorf("got %+v, %v", findings, ok)
	}
	h = NewHealth()
	if _, ok := h.Ready(t.Context()); !ok {
		t.Error("without checks: got not ready")
	}
	h.Drain()
	if findings, ok := h.Ready(t.Context()); ok || findings[0].Name != "serving" {
		t.Errorf("while shutting down: got %+v, %v", findings, ok)
	}
}

func TestNewLogger(t *testing.T) {
	for asJSON, want := range map[bool]string{true: `"msg":"said","n":1`, false: `msg=said n=1`} {
		var out bytes.Buffer
		log := NewLogger(&out, slog.LevelWarn, asJSON)
		log.Info("unsaid")
		log.Warn("said", "n", 1)
		if got := out.String(); !strings.Contains(got, want) || strings.Contains(got, "unsaid") {
			t.Errorf("got %s, want %s", got, want)
		}
	}
}
