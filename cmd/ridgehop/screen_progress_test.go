package main

import (
	"sync/atomic"
	"testing"
	"time"

	"ridgehop/internal/screening"
)

// A run that goes on behind half the file: the time left counts from what this
// run does, not from what it passed over.
func TestProgressSaysHowLongItTakes(t *testing.T) {
	var read atomic.Int64
	begun := time.Date(2026, 5, 1, 12, 0, 0, 0, time.UTC)
	p := new(screening.Progress)
	shown := shownProgress{progress: p, bytesRead: &read, size: 1000, begun: begun}
	for _, c := range []struct {
		second                  int
		read, done, pairs, size int64
		want                    string
	}{
		{1, 0, 0, 0, 0, "0 candidates, 0 pairs, 0 pairs/s"},
		{2, 500, 500, 0, 500, "500 candidates, 0 pairs, 0 pairs/s, 50 %"},
		{4, 1000, 500, 100, 1000, "500 candidates, 100 pairs, 25 pairs/s, 50 %"},
		{14, 1000, 600, 1400, 1000, "600 candidates, 1400 pairs, 100 pairs/s, 60 %, 40s left"},
	} {
		p.Read.Store(c.read)
		p.Done.Store(c.done)
		p.Pairs.Store(c.pairs)
		read.Store(c.size)
		if got := shown.line(begun.Add(time.Duration(c.second) * time.Second)); got != c.want {
			t.Errorf("second %d: got %q, want %q", c.second, got, c.want)
		}
	}
}
