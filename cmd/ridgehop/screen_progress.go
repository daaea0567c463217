package main

import (
	"fmt"
	"io"
	"os"
	"sync"
	"sync/atomic"
	"time"

	"ridgehop/internal/screening"
)

// showProgress says at intervals how far a screening has come, until stop is
// called: every second on a terminal, in place, otherwise every ten seconds.
func showProgress(to io.Writer, progress *screening.Progress, bytesRead *atomic.Int64, size int64) (stop func()) {
	shown := shownProgress{progress: progress, bytesRead: bytesRead, size: size, begun: time.Now()}
	every, form := 10*time.Second, "%s\n"
	if isTerminal(to) {
		every, form = time.Second, "\r%s\x1b[K"
	}
	done := make(chan struct{})
	var group sync.WaitGroup
	group.Go(func() {
		ticks := time.NewTicker(every)
		defer ticks.Stop()
		for {
			select {
			case <-done:
				return
			case now := <-ticks.C:
				_, _ = fmt.Fprintf(to, form, shown.line(now))
			}
		}
	})
	return func() {
		close(done)
		group.Wait()
		if isTerminal(to) {
			_, _ = fmt.Fprint(to, "\r\x1b[K")
		}
	}
}

// isTerminal says whether somebody is likely to watch.
func isTerminal(to io.Writer) bool {
	f, ok := to.(*os.File)
	if !ok {
		return false
	}
	stat, err := f.Stat()
	return err == nil && stat.Mode()&os.ModeCharDevice != 0
}

// shownProgress is how far a screening has come.
type shownProgress struct {
	progress  *screening.Progress
	bytesRead *atomic.Int64
	size      int64 // of the file; 0 is not known
	begun     time.Time
	// share is that of the first line with a pair: what an earlier run did
	// took no time of this one.
	share float64
	since time.Time
}

// line says how far it is now. A chunk is read before it is judged, so the share
// of the file that is done is that of the rows that were read.
func (s *shownProgress) line(now time.Time) string {
	read, done, pairs := s.progress.Read.Load(), s.progress.Done.Load(), s.progress.Pairs.Load()
	text := fmt.Sprintf("%d candidates, %d pairs, %.0f pairs/s", done, pairs, float64(pairs)/now.Sub(s.begun).Seconds())
	if s.size <= 0 || read == 0 {
		return text
	}
	share := min(1, float64(s.bytesRead.Load())/float64(s.size)*float64(done)/float64(read))
	text += fmt.Sprintf(", %.0f %%", 100*share)
	switch {
	case pairs > 0 && s.since.IsZero():
		s.share, s.since = share, now
	case share > s.share && !s.since.IsZero():
		left := now.Sub(s.since).Seconds() * (1 - share) / (share - s.share)
		text += ", " + (time.Duration(left) * time.Second).String() + " left"
	}
	return text
}
