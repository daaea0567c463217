package telemetry

import (
	"net/http"
	"strconv"
	"time"

	"github.com/prometheus/client_golang/prometheus"
	"github.com/prometheus/client_golang/prometheus/promhttp"
)

// Metrics counts what the service does. Labels are bounded: route templates
// and status codes, never ids or addresses.
type Metrics struct {
	registry    *prometheus.Registry
	requests    *prometheus.HistogramVec
	assessments *prometheus.CounterVec
	shed        prometheus.Counter
}

// NewMetrics makes the metrics in a registry of their own.
func NewMetrics() *Metrics {
	m := &Metrics{
		registry: prometheus.NewRegistry(),
		requests: prometheus.NewHistogramVec(prometheus.HistogramOpts{
			Name:    "ridgehop_http_request_duration_seconds",
			Help:    "Time from a request's arrival to its answer, by route and status.",
			Buckets: []float64{.0005, .001, .0025, .005, .01, .025, .05, .1, .25, .5, 1, 2.5, 10},
		}, []string{"method", "route", "status"}),
		assessments: prometheus.NewCounterVec(prometheus.CounterOpts{
			Name: "ridgehop_assessments_total",
			Help: "Links judged, by verdict.",
		}, []string{"verdict"}),
		shed: prometheus.NewCounter(prometheus.CounterOpts{
			Name: "ridgehop_http_requests_shed_total",
			Help: "Requests refused because too many were under way.",
		}),
	}
	m.registry.MustRegister(m.requests, m.assessments, m.shed)
	return m
}

// Request counts one answered request. route is its template.
func (m *Metrics) Request(method, route string, status int, took time.Duration) {
	m.requests.WithLabelValues(boundedMethod(method), route, strconv.Itoa(status)).Observe(took.Seconds())
}

// boundedMethod keeps callers from making up methods, and with them series
// without end.
func boundedMethod(method string) string {
	switch method {
	case http.MethodGet, http.MethodHead, http.MethodPost, http.MethodPut, http.MethodPatch, http.MethodDelete, http.MethodOptions:
		return method
	}
	return "other"
}

// Assessment counts one link judged.
func (m *Metrics) Assessment(verdict string) { m.assessments.WithLabelValues(verdict).Inc() }

// Shed counts one request refused for overload.
func (m *Metrics) Shed() { m.shed.Inc() }

// Handler serves the metrics in the Prometheus text format.
func (m *Metrics) Handler() http.Handler {
	return promhttp.HandlerFor(m.registry, promhttp.HandlerOpts{})
}
