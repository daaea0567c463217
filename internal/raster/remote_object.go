package raster

import (
	"errors"
	"fmt"
	"strings"
	"sync"
	"sync/atomic"
)

// object is one remote file, with what is known of the bytes that GDAL has
// cached of it. GDAL caches by name and for all its handles together, so
// without this a handle opened on one version could be given bytes that
// another handle, or a mere question after the version, has fetched since.
//
// The rule: bytes get into the cache only while use is held for reading, after
// the head of their answer has been compared with content. Whoever finds other
// content sets foul, which makes every call fail that was under way, and has
// the cache emptied before the next.
type object struct {
	path string

	use     sync.RWMutex             // held for reading by each call, for writing to empty the cache
	content atomic.Pointer[identity] // of the cached bytes; nil while there are none
	foul    atomic.Bool              // there may be bytes of other content, or wrong ones
	stale   atomic.Bool              // there may be a range cut short, or a note that the file is absent
}

// holds reports whether content of this identity may join the cached bytes.
func (o *object) holds(i identity) bool {
	return o.content.CompareAndSwap(nil, &i) || *o.content.Load() == i
}

// enter begins a call, after emptying the cache if that is due.
func (o *object) enter() {
	o.use.RLock()
	for o.foul.Load() || o.stale.Load() {
		o.use.RUnlock()
		o.forget()
		o.use.RLock()
	}
}

func (o *object) forget() {
	o.use.Lock()
	defer o.use.Unlock()
	purge(o.path)
	o.content.Store(nil)
	o.foul.Store(false)
	o.stale.Store(false)
}

// watched runs a call into GDAL that may read the object, and returns the
// identity that the server gave last. Whatever GDAL thinks of the call, it
// fails unless all it asked for came whole and of the expected content.
func (o *object) watched(expected *identity, call func() error) (identity, error) {
	o.enter()
	defer o.use.RUnlock()
	w := &watch{object: o, expected: expected, failed: map[span]bool{}}
	if !o.still(expected) {
		return w.seen, changed("its content has changed")
	}
	err := w.verdict(w.follow(call))
	if w.fault != nil && strings.HasPrefix(o.path, "/vsis3/") {
		purgeAll()
	}
	if err == nil && (o.foul.Load() || !o.still(expected)) {
		err = changed("its content has changed")
	}
	if errors.Is(err, ErrUnreachable) || errors.Is(err, ErrAbsent) {
		o.stale.Store(true)
	}
	return w.seen, err
}

// still reports whether the cache holds nothing but the expected content.
func (o *object) still(expected *identity) bool {
	content := o.content.Load()
	return expected == nil || content == nil || *content == *expected
}

// identify asks the server which content the object has now.
func (o *object) identify() (identity, error) {
	seen, err := o.watched(nil, func() error { askHead(o.path); return nil })
	if errors.Is(err, ErrChanged) {
		// The cached bytes are of other content. They go, and the question is
		// put again.
		seen, err = o.watched(nil, func() error { askHead(o.path); return nil })
	}
	if err == nil && !seen.known() {
		err = fmt.Errorf("%w: its server gives it no strong ETag, nor a Last-Modified and a size: a change would go unnoticed", ErrUnreadable)
	}
	return seen, err
}
