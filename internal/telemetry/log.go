package telemetry

import (
	"io"
	"log/slog"
)

// NewLogger writes log lines to w: as JSON, or as plain text for a person at a
// terminal.
func NewLogger(w io.Writer, level slog.Level, asJSON bool) *slog.Logger {
	options := &slog.HandlerOptions{Level: level}
	if asJSON {
		return slog.New(slog.NewJSONHandler(w, options))
	}
	return slog.New(slog.NewTextHandler(w, options))
}
