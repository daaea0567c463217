package intake

import (
	"bytes"
	"errors"
	"io"
)

// windowBytes leaves room to hold one longest line while reading on.
const windowBytes = 2 * MaxLineBytes

// lookAhead is how much more a scan asks for when it runs out.
const lookAhead = 4 << 10

var errLongLine = errors.New("line over the limit")

// window is the stretch of a stream that is held in memory. What it hands out
// is valid until the next more, fill, line or skipLine.
type window struct {
	r          io.Reader
	buf        []byte
	start, end int
	err        error // why nothing more comes: io.EOF, or the reader's failure
}

func newWindow(r io.Reader) *window {
	return &window{r: r, buf: make([]byte, windowBytes)}
}

// bytes is what is held and not yet consumed.
func (w *window) bytes() []byte { return w.buf[w.start:w.end] }

// consume drops the first n bytes held.
func (w *window) consume(n int) { w.start += n }

// more reads on; false where nothing more comes or the window is full.
func (w *window) more() bool {
	if w.err != nil {
		return false
	}
	if w.end == len(w.buf) {
		if w.start == 0 {
			return false
		}
		w.end, w.start = copy(w.buf, w.bytes()), 0
	}
	for range 100 {
		n, err := w.r.Read(w.buf[w.end:])
		w.end += n
		w.err = err
		if n > 0 || err != nil {
			return n > 0
		}
	}
	w.err = io.ErrNoProgress
	return false
}

// fill reads on until n bytes are held or nothing more comes.
func (w *window) fill(n int) {
	for len(w.bytes()) < n && w.more() {
	}
}

// line finds the next line: its text without its end, and its length with it.
// Nothing is consumed. The error is io.EOF at the end, errLongLine, or the
// reader's own.
func (w *window) line() (text []byte, n int, err error) {
	for searched := 0; ; {
		held := w.bytes()
		if i := bytes.IndexByte(held[searched:], '\n'); i >= 0 && searched+i <= MaxLineBytes {
			return held[:searched+i], searched + i + 1, nil
		} else if i >= 0 || len(held) > MaxLineBytes {
			return nil, 0, errLongLine
		}
		searched = len(held)
		if w.more() {
			continue
		}
		if searched > 0 && w.err == io.EOF { //nolint:errorlint // a reader's own io.EOF is bare, by io.Reader
			return w.bytes(), searched, nil
		}
		return nil, 0, w.err
	}
}

// skipLine consumes the rest of a line, however long.
func (w *window) skipLine() {
	for {
		if i := bytes.IndexByte(w.bytes(), '\n'); i >= 0 {
			w.consume(i + 1)
			return
		}
		w.consume(len(w.bytes()))
		if !w.more() {
			return
		}
	}
}

// preamble consumes a UTF-8 byte order mark and refuses UTF-16.
func (w *window) preamble(f Format) error {
	w.fill(4)
	head := w.bytes()[:min(4, len(w.bytes()))]
	switch {
	case bytes.HasPrefix(head, []byte("\xef\xbb\xbf")):
		w.consume(3)
	case bytes.HasPrefix(head, []byte("\xff\xfe")), bytes.HasPrefix(head, []byte("\xfe\xff")), bytes.IndexByte(head, 0) >= 0:
		return unreadable(f, 0, "the list is UTF-16, or not text: save it as UTF-8, which spreadsheets offer as \"CSV UTF-8\"")
	}
	return nil
}
