package telemetry

import (
	"context"
	"sync/atomic"
	"time"
)

// Check is one thing that must be well for requests to be answered. It returns
// what it found, in words, and an error if that is not well.
type Check struct {
	Name string
	Run  func(context.Context) (string, error)
}

// Finding is what a check found.
type Finding struct {
	Name   string
	OK     bool
	Detail string
}

// Health runs the checks of a service and remembers whether it is draining.
type Health struct {
	checks   []Check
	draining atomic.Bool
}

// NewHealth makes a Health of the checks.
func NewHealth(checks ...Check) *Health { return &Health{checks: checks} }

// Drain makes the service unready, so that no new work is sent to it.
func (h *Health) Drain() { h.draining.Store(true) }

// checkTime bounds one round of checks.
const checkTime = 2 * time.Second

// Ready runs every check and reports whether all is well.
func (h *Health) Ready(ctx context.Context) (findings []Finding, ok bool) {
	ctx, cancel := context.WithTimeout(ctx, checkTime)
	defer cancel()
	ok = true
	if h.draining.Load() {
		findings, ok = append(findings, Finding{Name: "serving", Detail: "shutting down"}), false
	}
	for _, c := range h.checks {
		detail, err := c.Run(ctx)
		if err != nil {
			detail, ok = err.Error(), false
		}
		findings = append(findings, Finding{Name: c.Name, OK: err == nil, Detail: detail})
	}
	return findings, ok
}
