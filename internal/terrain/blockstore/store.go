package blockstore

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"sync"
	"time"
)

const (
	// touchEvery is how often at most a use is written to a file's time, by
	// which the next Open orders the files.
	touchEvery = time.Minute
	// surveyShare is the part of the bound after which a Store looks again for
	// what others have written: one over this.
	surveyShare = 16
)

// ErrTooLarge means that a value alone would pass the bound of the Store.
var ErrTooLarge = errors.New("larger than the whole cache")

// Stats is the state of a Store and what it has done since Open.
type Stats struct {
	Bytes     int64 // lengths of the files that are known of, headers included
	Entries   int
	Hits      uint64
	Misses    uint64 // damaged files included
	Evictions uint64 // to keep the bound; not those of Remove or of damage
}

// Store is a cache of values in a folder. It is safe for concurrent use, also
// by several Stores on one folder, in this process or in others of the same
// user.
type Store struct {
	dir string
	max int64
	now func() time.Time

	mu      sync.Mutex // held while files get or lose their names, not while they are read or written
	known   *order
	written int64 // bytes since the last survey
	stats   Stats // but Bytes and Entries
	closed  bool
}

// Open opens the cache in dir, which it makes if need be, and removes what
// exceeds maxBytes, the least recently used first. maxBytes must be positive.
// Files and folders in dir that bear no name of a block are left alone. In a
// folder that cannot be written to, Get works and Put fails.
func Open(dir string, maxBytes int64) (*Store, error) {
	if maxBytes <= 0 {
		return nil, fmt.Errorf("block cache: got %d bytes, want more than 0", maxBytes)
	}
	if err := os.MkdirAll(dir, 0o755); err != nil {
		return nil, withoutPlace("its folder cannot be made", err)
	}
	found, err := survey(dir, true)
	if err != nil {
		return nil, withoutPlace("its folder cannot be listed", err)
	}
	s := &Store{dir: dir, max: maxBytes, now: time.Now, known: sorted(found)}
	// Where files cannot be removed, those that are there still serve.
	_ = s.makeRoom(0, key{})
	return s, nil
}

// Get returns the value that was put under the key, and whether there is one.
// The value lies in into where its capacity is enough, and in new memory
// otherwise; it is the caller's. A file that is damaged or not of this cache is
// a miss, and is removed.
func (s *Store) Get(name string, into []byte) ([]byte, bool) {
	id := keyOf(name)
	if s.isClosed() {
		return nil, false
	}
	value, stat, err := s.read(id, into)
	s.mu.Lock()
	defer s.mu.Unlock()
	if err != nil {
		s.stats.Misses++
		s.lose(id, stat, err)
		return nil, false
	}
	s.stats.Hits++
	s.use(id, stat)
	return value, true
}

// read returns the value of a key. stat is of the file that was opened, or nil.
func (s *Store) read(id key, into []byte) ([]byte, os.FileInfo, error) {
	f, stat, err := openBlock(place(s.dir, id), s.max)
	if err != nil {
		return nil, stat, err
	}
	defer f.Close()
	value, err := readBlock(f, stat.Size(), id, into)
	return value, stat, err
}

// lose forgets a key whose file is gone, and removes a file that is not the one
// that was put, unless a whole one has replaced it since.
func (s *Store) lose(id key, read os.FileInfo, why error) {
	now, err := os.Lstat(place(s.dir, id))
	switch {
	case errors.Is(err, fs.ErrNotExist):
		s.known.drop(id)
	case err != nil || !notOurs(why) || read != nil && !os.SameFile(read, now):
	case os.Remove(place(s.dir, id)) == nil:
		s.known.drop(id)
	}
}

// use marks a key as used just now, and admits it if another process put it.
func (s *Store) use(id key, stat os.FileInfo) {
	e := s.known.find(id)
	if e == nil {
		if now, err := os.Lstat(place(s.dir, id)); err != nil || !os.SameFile(stat, now) {
			return // evicted or replaced while it was read
		}
		e = &entry{name: id, bytes: stat.Size(), touched: stat.ModTime()}
	}
	e.used = s.now()
	if e.used.Sub(e.touched) >= touchEvery {
		// A folder that cannot be changed keeps its order.
		_ = os.Chtimes(place(s.dir, id), e.used, e.used)
		e.touched = e.used
	}
	s.known.first(e)
	_ = s.makeRoom(0, id) // where files cannot be removed, Put says so
}

// Put keeps the value under the key in place of the one before, and evicts the
// least recently used until the files' lengths are within the bound again. An
// error is for the log: it says why the value is not kept, and the value before
// may still be. It is ErrTooLarge, fs.ErrClosed, or the file system's, without
// the folder's name.
func (s *Store) Put(name string, value []byte) error {
	id, size := keyOf(name), headerBytes+int64(len(value))
	if s.isClosed() {
		return withoutPlace("a block cannot be kept", fs.ErrClosed)
	}
	if size > s.max {
		return fmt.Errorf("block cache: %d bytes are %w of %d", size, ErrTooLarge, s.max)
	}
	if err := os.MkdirAll(subfolder(s.dir, id), 0o755); err != nil {
		return withoutPlace("a block cannot be kept", err)
	}
	temporary, err := writeBlock(subfolder(s.dir, id), id, value)
	if err != nil {
		return withoutPlace("a block cannot be written", err)
	}
	s.mu.Lock()
	defer s.mu.Unlock()
	if err := s.admit(id, size, temporary); err != nil {
		_ = os.Remove(temporary) // it may have been renamed
		return withoutPlace("a block cannot be kept", err)
	}
	return nil
}

// admit makes room and gives a written file its name.
func (s *Store) admit(id key, size int64, temporary string) error {
	if s.written += size; s.written > s.max/surveyShare {
		s.surveyAgain()
	}
	if err := s.makeRoom(size, id); err != nil {
		return err
	}
	err := os.Rename(temporary, place(s.dir, id))
	if errors.Is(err, fs.ErrNotExist) {
		return nil // another process opened the folder and cleaned it: evicted at once
	}
	if err != nil {
		return err
	}
	now := s.now()
	s.known.first(&entry{name: id, bytes: size, used: now, touched: now})
	return nil
}

// makeRoom evicts until size more bytes for the key fit in place of what it has
// now. The error says why a file could not be removed.
func (s *Store) makeRoom(size int64, id key) error {
	if before := s.known.find(id); before != nil && size > 0 {
		size -= before.bytes
	}
	for s.known.bytes+size > s.max {
		e := s.known.last(id)
		if e == nil {
			e = s.known.find(id) // it alone is too much: the bound has shrunk
		}
		if err := os.Remove(place(s.dir, e.name)); err != nil && !errors.Is(err, fs.ErrNotExist) {
			return err
		}
		s.known.drop(e.name)
		s.stats.Evictions++
	}
	return nil
}

// surveyAgain learns what other processes have put and removed. What this one
// has used keeps its place.
func (s *Store) surveyAgain() {
	found, err := survey(s.dir, false)
	if err != nil {
		return // what is known still holds; the next write tries again
	}
	for _, e := range found {
		if before := s.known.find(e.name); before != nil && before.used.After(e.used) {
			e.used = before.used
		}
	}
	s.known, s.written = sorted(found), 0
}

// Remove removes the value of a key, if there is one. The error is the file
// system's, without the folder's name.
func (s *Store) Remove(name string) error {
	id := keyOf(name)
	s.mu.Lock()
	defer s.mu.Unlock()
	if err := os.Remove(place(s.dir, id)); err != nil && !errors.Is(err, fs.ErrNotExist) {
		return withoutPlace("a block cannot be removed", err)
	}
	s.known.drop(id)
	return nil
}

// Stats returns the state of the Store.
func (s *Store) Stats() Stats {
	s.mu.Lock()
	defer s.mu.Unlock()
	now := s.stats
	now.Bytes, now.Entries = s.known.bytes, len(s.known.byName)
	return now
}

// Close ends the use of the Store: from then on Get finds nothing and Put
// fails. The files stay for the next Open. Calls that are under way finish.
func (s *Store) Close() error {
	s.mu.Lock()
	defer s.mu.Unlock()
	s.closed = true
	return nil
}

func (s *Store) isClosed() bool {
	s.mu.Lock()
	defer s.mu.Unlock()
	return s.closed
}
