package raster

import (
	"errors"
	"fmt"
	"net/http"
	"os"
	"runtime"
	"slices"
	"sync"
	"testing"
	"time"
)

// changing is a server whose file can be put in the place of another of the
// same length, all of whose heights are 1000 m more.
type changing struct {
	*server
	files [2][]byte
}

func replaceable(t testing.TB) *changing {
	t.Helper()
	c := &changing{}
	for i := range c.files {
		c.files[i] = readFile(t, remoteTIFF(t, 1000*i, "COMPRESS=NONE", "OVERVIEWS=NONE"))
	}
	if len(c.files[0]) != len(c.files[1]) {
		t.Fatal("the files differ in length, want them alike but for the heights")
	}
	c.server = serve(t, c.files[0])
	return c
}

// put puts one of the two files in place, with a new ETag if the server gives
// one at all, and a later time.
func (c *changing) put(which int) { c.set(func() { c.putLocked(which) }) }

func (c *changing) putLocked(which int) {
	c.content = c.files[which]
	if c.etag != "" {
		c.etag = []string{`"one"`, `"two"`}[which]
	}
	c.modified = time.Date(2024, 5, 6+which, 7, 8, 9, 0, time.UTC)
}

func TestRemoteReplaced(t *testing.T) {
	for _, etag := range []string{`"one"`, ""} {
		c, library := replaceable(t), quick(t)
		c.set(func() { c.etag = etag })
		d := openRemote(t, library, c.file())
		before := d.Version()
		heights, err := readBlock(d, 0, 0)
		must(t, err)
		if wrong := rightBlock(heights, 0, 0, 0); wrong != "" {
			t.Error(wrong)
		}
		must(t, d.Unchanged())
		c.put(1)
		if err := d.Unchanged(); !errors.Is(err, ErrChanged) || !errors.Is(err, ErrUnreachable) {
			t.Errorf("ETag %s: got %v of the old file, want %v", etag, err, ErrChanged)
		}
		for range 2 {
			_, err = readBlock(d, 1, 0)
			checkFault(t, "the old file", err, ErrChanged)
		}
		after := openRemote(t, library, c.file())
		if after.Version() == before {
			t.Errorf("ETag %s: got version %s again, want another", etag, before)
		}
		heights, err = readBlock(after, 1, 0)
		must(t, err)
		if wrong := rightBlock(heights, 1, 0, 1000); wrong != "" {
			t.Error(wrong)
		}
	}
}

// Nobody asked whether the file is still the same: the bytes themselves tell.
func TestRemoteReplacedUnasked(t *testing.T) {
	c, library := replaceable(t), quick(t)
	d := openRemote(t, library, c.file())
	c.put(1)
	heights, err := readBlock(d, 1, 1)
	checkFault(t, "the old file", err, ErrChanged)
	if err == nil {
		t.Logf("got %v", heights[:3])
	}
	// GDAL has decoded the block of the new file for this handle, and would give
	// it without asking.
	c.put(0)
	_, err = readBlock(d, 1, 1)
	checkFault(t, "the same block again", err, ErrChanged)
	heights, err = readBlock(openRemote(t, library, c.file()), 1, 1)
	must(t, err)
	if wrong := rightBlock(heights, 1, 1, 0); wrong != "" {
		t.Errorf("opened anew: %s", wrong)
	}
}

// GDAL caches by name: what one handle fetches, another is given.
func TestRemoteReplacedBetweenHandles(t *testing.T) {
	c, library := replaceable(t), quick(t)
	old := openRemote(t, library, c.file())
	c.put(1)
	fresh := openRemote(t, library, c.file())
	heights, err := readBlock(fresh, 2, 2)
	must(t, err)
	if wrong := rightBlock(heights, 2, 2, 1000); wrong != "" {
		t.Error(wrong)
	}
	_, err = readBlock(old, 2, 2)
	checkFault(t, "the old handle", err, ErrChanged)
	if _, err := readBlock(fresh, 2, 2); err != nil {
		t.Errorf("the new handle: got %v, want it not to suffer", err)
	}
}

// A mere question fetches the first bytes too, or their length.
func TestRemoteReplacedAndAskedAfter(t *testing.T) {
	c, library := replaceable(t), quick(t)
	old := openRemote(t, library, c.file())
	_, err := readBlock(old, 0, 0)
	must(t, err)
	first := old.Version()
	c.put(1)
	second, err := library.RemoteVersion(c.file())
	must(t, err)
	if second == first {
		t.Errorf("got version %s twice, want another", second)
	}
	_, err = readBlock(old, 3, 0)
	checkFault(t, "the old handle", err, ErrChanged)
}

func TestRemoteAbsentThenThere(t *testing.T) {
	s, library := plainRemote(t), quick(t)
	s.set(func() { s.instead = status(404) })
	_, err := library.OpenRemote(s.file())
	checkFault(t, "open", err, ErrAbsent)
	s.set(func() { s.instead = nil })
	d := openRemote(t, library, s.file())
	s.set(func() { s.instead = status(404) })
	checkFault(t, "unchanged", d.Unchanged(), ErrChanged)
}

func TestForgetRemote(t *testing.T) {
	s, library := plainRemote(t), quick(t)
	d := openRemote(t, library, s.file())
	s.taken()
	other := openRemote(t, library, s.file())
	if requests, _ := s.taken(); len(requests) != 1 {
		t.Errorf("opening twice: got %v, want one HEAD", requests)
	}
	library.ForgetRemote(s.file())
	for _, one := range []*Dataset{d, other, openRemote(t, library, s.file())} {
		heights, err := readBlock(one, 1, 2)
		must(t, err)
		if wrong := rightBlock(heights, 1, 2, 0); wrong != "" {
			t.Error(wrong)
		}
	}
	requests, _ := s.taken()
	if !slices.Contains(requests, asked{"GET", "/dem/made.tif", "bytes=0-16383"}) {
		t.Errorf("got %v, want the first bytes fetched again", requests)
	}
}

// While the file is replaced to and fro, readers open it, read it and ask after
// it at once. What is read is of one content alone, the one that was opened.
func TestRemoteReplacedUnderReaders(t *testing.T) {
	c, library := replaceable(t), quick(t)
	versions := map[string]int{}
	for i := range c.files {
		c.put(i)
		version, err := library.RemoteVersion(c.file())
		must(t, err)
		versions[version] = 1000 * i
	}
	requests := 0
	c.set(func() {
		c.instead = func(http.ResponseWriter, *http.Request) bool {
			if requests++; requests%25 == 0 {
				c.putLocked(requests / 25 % 2)
			}
			return false
		}
	})
	var readers sync.WaitGroup
	var mu sync.Mutex
	sound, refused := 0, 0
	for reader := range 4 {
		readers.Go(func() {
			for range 12 {
				n, err := readThrice(library, c.file(), versions, reader)
				mu.Lock()
				sound += n
				if err != nil {
					refused++
				}
				if err != nil && !errors.Is(err, ErrUnreachable) {
					t.Errorf("got %v, want %v or heights", err, ErrUnreachable)
				}
				mu.Unlock()
			}
		})
	}
	readers.Wait()
	t.Logf("%d blocks read, %d times refused", sound, refused)
	if sound == 0 || refused == 0 {
		t.Errorf("got %d blocks read and %d times refused, want some of each", sound, refused)
	}
}

func readThrice(library *GDAL, path string, versions map[string]int, reader int) (int, error) {
	d, err := library.OpenRemote(path)
	if err != nil {
		return 0, err
	}
	defer d.Close()
	for i := range 3 {
		heights, err := readBlock(d, i, reader%3)
		if err != nil {
			return i, err
		}
		if wrong := rightBlock(heights, i, reader%3, versions[d.Version()]); wrong != "" {
			return i, fmt.Errorf("of version %s: %s", d.Version(), wrong)
		}
		if err := d.Unchanged(); err != nil {
			return i + 1, err
		}
	}
	return 3, nil
}

// GDAL keeps a connection for each thread of the system that ever asked; that
// is all that may stay.
func TestRemoteLeavesNothingOpen(t *testing.T) {
	s, library := plainRemote(t), quick(t)
	once := func() {
		d, err := library.OpenRemote(s.file())
		must(t, err)
		defer d.Close()
		_, err = readBlock(d, 0, 0)
		must(t, err)
		s.set(func() { s.instead = status(403) })
		if _, err := readBlock(d, 1, 1); err == nil {
			t.Error("got heights, want an error")
		}
		s.set(func() { s.instead = nil })
	}
	once()
	files, goroutines := openFiles(t), runtime.NumGoroutine()
	for range 30 {
		once()
	}
	const threads = 10 // for as many new threads, a connection's two ends and an epoll's
	if got := openFiles(t); got > files+3*threads {
		t.Errorf("got %d files open after 30 rounds, want about the %d after one", got, files)
	}
	if got := runtime.NumGoroutine(); got > goroutines+2*threads {
		t.Errorf("got %d goroutines after 30 rounds, want about the %d after one", got, goroutines)
	}
}

func openFiles(t testing.TB) int {
	t.Helper()
	entries, err := os.ReadDir("/proc/self/fd")
	if err != nil {
		t.Skipf("no list of open files here: %v", err)
	}
	return len(entries)
}
