// Package telemetry is how the service is watched: log lines, metrics and
// health checks. Everything here is safe for concurrent use.
package telemetry
