package blockstore

import (
	"bytes"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"syscall"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"golang.org/x/sys/unix"
)

func must(t testing.TB, err error) {
	t.Helper()
	if err != nil {
		t.Fatal(err)
	}
}

func opened(t testing.TB, dir string, maxBytes int64) *Store {
	t.Helper()
	s, err := Open(dir, maxBytes)
	must(t, err)
	t.Cleanup(func() { must(t, s.Close()) })
	return s
}

// fill is a value that tells its key.
func fill(name string, length int) []byte {
	return bytes.Repeat([]byte(name+"|"), length/(len(name)+1)+1)[:length]
}

// filesIn lists the folder's files, and the sum of their lengths.
func filesIn(t testing.TB, dir string) (names []string, total int64) {
	t.Helper()
	must(t, filepath.WalkDir(dir, func(path string, file fs.DirEntry, err error) error {
		if err != nil || file.IsDir() {
			return err
		}
		stat, err := file.Info()
		names, total = append(names, path), total+stat.Size()
		return err
	}))
	return names, total
}

func has(t testing.TB, s *Store, name string, want []byte) {
	t.Helper()
	got, ok := s.Get(name, nil)
	if ok != (want != nil) || !bytes.Equal(got, want) {
		t.Errorf("%s: got %.40q, %t, want %.40q", name, got, ok, want)
	}
}

func TestGetGivesWhatWasPut(t *testing.T) {
	s := opened(t, filepath.Join(t.TempDir(), "new", "cache"), 1<<20)
	has(t, s, "a", nil)
	for _, name := range []string{"", "a", "../../a", "dtm.tif\x00v1 3,4", strings.Repeat("long", 5000)} {
		for _, value := range [][]byte{{}, {0}, fill(name, 5000)} {
			must(t, s.Put(name, value))
			if got, ok := s.Get(name, make([]byte, 3, 8)); !ok || !bytes.Equal(got, value) {
				t.Errorf("%.20q: got %.40q, %t, want %.40q", name, got, ok, value)
			}
		}
	}
	must(t, s.Remove("a"))
	must(t, s.Remove("never put"))
	has(t, s, "a", nil)
	if got, want := s.Stats(), (Stats{Bytes: 4*headerBytes + 4*5000, Entries: 4, Hits: 15, Misses: 2}); got != want {
		t.Errorf("got %+v, want %+v", got, want)
	}
}

// The caller's memory is used where it is enough, so that a loop of Get
// allocates no block.
func TestGetUsesTheCallersMemory(t *testing.T) {
	s := opened(t, t.TempDir(), 1<<20)
	must(t, s.Put("a", fill("a", 1000)))
	into := make([]byte, 0, 1000)
	got, _ := s.Get("a", into)
	if &got[0] != &into[:1][0] {
		t.Error("got new memory, want the caller's")
	}
}

func TestReopenEvictsTheLeastRecentlyUsed(t *testing.T) {
	dir := t.TempDir()
	s := opened(t, dir, 1<<20)
	start := time.Now()
	clock := start
	s.now = func() time.Time { return clock }
	for _, name := range []string{"a", "b", "c"} {
		must(t, s.Put(name, fill(name, 1000-headerBytes)))
		clock = clock.Add(time.Second)
	}
	has(t, s, "a", fill("a", 1000-headerBytes)) // too soon to be written down
	clock = clock.Add(touchEvery)
	has(t, s, "b", fill("b", 1000-headerBytes))
	for name, want := range map[string]time.Time{"a": start, "b": clock, "c": start} {
		stat, err := os.Stat(place(dir, keyOf(name)))
		must(t, err)
		if late := stat.ModTime().Sub(want).Abs(); late > touchEvery/2 {
			t.Errorf("%s: got time %v, want about %v", name, stat.ModTime(), want)
		}
	}
	for i, name := range []string{"c", "a", "b"} { // the system's clock of files is coarse
		at := start.Add(time.Duration(i) * time.Hour)
		must(t, os.Chtimes(place(dir, keyOf(name)), at, at))
	}
	must(t, s.Close())
	s = opened(t, dir, 2999)
	if got, want := s.Stats(), (Stats{Bytes: 2000, Entries: 2, Evictions: 1}); got != want {
		t.Errorf("got %+v, want %+v", got, want)
	}
	has(t, s, "c", nil)
	has(t, s, "a", fill("a", 1000-headerBytes))
	if _, total := filesIn(t, dir); total != 2000 {
		t.Errorf("got %d bytes on disk, want 2000", total)
	}
}

// What lies under a block's name but is not that block is never given out, and
// is gone afterwards.
func TestDamagedAndForeignFiles(t *testing.T) {
	value := fill("a", 500)
	whole := append(header(keyOf("a"), value), value...)
	changed := func(at int) []byte {
		out := bytes.Clone(whole)
		out[at] ^= 0x10
		return out
	}
	cases := map[string]func(path string) error{
		"empty":           func(path string) error { return os.WriteFile(path, nil, 0o600) },
		"half a header":   func(path string) error { return os.WriteFile(path, whole[:headerBytes/2], 0o600) },
		"cut short":       func(path string) error { return os.WriteFile(path, whole[:len(whole)-1], 0o600) },
		"longer":          func(path string) error { return os.WriteFile(path, append(bytes.Clone(whole), 0), 0o600) },
		"of zeros":        func(path string) error { return os.WriteFile(path, make([]byte, len(whole)), 0o600) },
		"larger than all": func(path string) error { return os.WriteFile(path, make([]byte, 20000), 0o600) },
		"other magic":     func(path string) error { return os.WriteFile(path, changed(0), 0o600) },
		"other checksum":  func(path string) error { return os.WriteFile(path, changed(5), 0o600) },
		"other length":    func(path string) error { return os.WriteFile(path, changed(8), 0o600) },
		"other value":     func(path string) error { return os.WriteFile(path, changed(len(whole)-1), 0o600) },
		"another block": func(path string) error {
			return os.WriteFile(path, append(header(keyOf("b"), value), value...), 0o600)
		},
		"a link":   func(path string) error { return os.Symlink("/dev/zero", path) },
		"a pipe":   func(path string) error { return unix.Mkfifo(path, 0o600) },
		"a folder": func(path string) error { return os.Mkdir(path, 0o700) },
	}
	for name, damage := range cases {
		t.Run(name, func(t *testing.T) {
			dir := t.TempDir()
			s := opened(t, dir, 10000)
			must(t, s.Put("a", value))
			path := place(dir, keyOf("a"))
			must(t, os.Remove(path))
			must(t, damage(path))
			has(t, s, "a", nil)
			if _, err := os.Lstat(path); !errors.Is(err, fs.ErrNotExist) {
				t.Errorf("got %v, want the file removed", err)
			}
			if got, want := s.Stats(), (Stats{Misses: 1}); got != want {
				t.Errorf("got %+v, want %+v", got, want)
			}
			must(t, s.Put("a", value))
			has(t, s, "a", value)
		})
	}
}

// A file that was replaced by a whole one while it was found damaged stays.
func TestLoseKeepsAWholeFile(t *testing.T) {
	dir := t.TempDir()
	s := opened(t, dir, 10000)
	must(t, s.Put("a", fill("a", 10)))
	old, err := os.Stat(place(dir, keyOf("a")))
	must(t, err)
	must(t, s.Put("a", fill("a", 20)))
	s.lose(keyOf("a"), old, errDamaged)
	s.lose(keyOf("a"), nil, fs.ErrNotExist)
	s.lose(keyOf("a"), nil, syscall.EMFILE)
	has(t, s, "a", fill("a", 20))
}

// A crash leaves unfinished files; whatever else lies there is someone's.
func TestOpenCleansUp(t *testing.T) {
	dir := t.TempDir()
	s := opened(t, dir, 10000)
	must(t, s.Put("a", fill("a", 10)))
	folder := subfolder(dir, keyOf("a"))
	temporary, err := writeBlock(folder, keyOf("b"), fill("b", 10))
	must(t, err)
	kept := []string{filepath.Join(dir, "README"), filepath.Join(folder, "notes"), filepath.Join(dir, temporaryPrefix+"1")}
	for _, path := range kept {
		must(t, os.WriteFile(path, nil, 0o600))
	}
	must(t, os.Mkdir(filepath.Join(dir, "other"), 0o700))
	kept = append(kept, place(dir, keyOf("a")))
	s = opened(t, dir, 10000)
	got, _ := filesIn(t, dir)
	if diff := cmp.Diff(got, kept, cmpopts.SortSlices(strings.Compare)); diff != "" {
		t.Errorf("got -, want +\n%s", diff)
	}
	if _, err := os.Stat(temporary); err == nil {
		t.Error("got the unfinished file still there")
	}
	if got := s.Stats().Entries; got != 1 {
		t.Errorf("got %d entries, want 1", got)
	}
}

func TestPutThatCannotKeep(t *testing.T) {
	dir := t.TempDir()
	s := opened(t, dir, 1000)
	must(t, s.Put("a", fill("a", 900)))
	if err := s.Put("a", fill("a", 1001-headerBytes)); !errors.Is(err, ErrTooLarge) {
		t.Errorf("got %v, want ErrTooLarge", err)
	}
	has(t, s, "a", fill("a", 900))
	must(t, s.Put("b", fill("b", 1000-headerBytes))) // fits exactly
	has(t, s, "a", nil)

	blocked := subfolder(dir, keyOf("c"))
	must(t, os.WriteFile(blocked, nil, 0o600))
	err := s.Put("c", nil)
	if !errors.Is(err, syscall.ENOTDIR) || strings.Contains(err.Error(), dir) {
		t.Errorf("got %v, want ENOTDIR without the folder", err)
	}
	has(t, s, "c", nil)

	must(t, s.Close())
	if err := s.Put("b", nil); !errors.Is(err, fs.ErrClosed) {
		t.Errorf("got %v, want fs.ErrClosed", err)
	}
	has(t, s, "b", nil)
}

func TestOpenRefuses(t *testing.T) {
	file := filepath.Join(t.TempDir(), "file")
	must(t, os.WriteFile(file, nil, 0o600))
	for _, c := range []struct {
		dir  string
		max  int64
		want string
	}{
		{t.TempDir(), 0, "got 0 bytes"},
		{t.TempDir(), -1, "got -1 bytes"},
		{file, 1, "not a directory"},
		{filepath.Join(file, "below"), 1, "not a directory"},
	} {
		_, err := Open(c.dir, c.max)
		if err == nil || !strings.Contains(err.Error(), c.want) || strings.Contains(err.Error(), filepath.Dir(c.dir)) {
			t.Errorf("got %v, want %q without the folder", err, c.want)
		}
	}
}

// In a folder that cannot be written to, what is there serves, also where it is
// more than the bound.
func TestReadOnlyFolder(t *testing.T) {
	dir := t.TempDir()
	s := opened(t, dir, 10000)
	for i := range 5 {
		must(t, s.Put(fmt.Sprint(i), fill("a", 1000)))
	}
	must(t, s.Close())
	readOnly(t, dir)
	s = opened(t, dir, 3000)
	has(t, s, "1", fill("a", 1000))
	for _, name := range []string{"1", "new"} {
		if err := s.Put(name, fill("b", 10)); !errors.Is(err, fs.ErrPermission) || strings.Contains(err.Error(), dir) {
			t.Errorf("got %v, want fs.ErrPermission without the folder", err)
		}
	}
	if err := s.Remove("1"); !errors.Is(err, fs.ErrPermission) {
		t.Errorf("got %v, want fs.ErrPermission", err)
	}
	has(t, s, "1", fill("a", 1000))
}

// readOnly takes away the right to change dir from this test, which runs on one
// thread from then on. The superuser may always write, so such a thread is
// another user's to the file system until the test ends.
func readOnly(t *testing.T, dir string) {
	t.Helper()
	if os.Geteuid() == 0 {
		const nobody = 65534
		for d := filepath.Dir(dir); d != os.TempDir() && len(d) > len(os.TempDir()); d = filepath.Dir(d) {
			must(t, os.Chmod(d, 0o755))
		}
		files, _ := filesIn(t, dir)
		for _, path := range files {
			must(t, os.Chmod(path, 0o644))
		}
		runtime.LockOSThread()
		must(t, unix.Setfsuid(nobody))
		t.Cleanup(func() {
			must(t, unix.Setfsuid(0))
			runtime.UnlockOSThread()
		})
		return
	}
	must(t, filepath.WalkDir(dir, func(path string, d fs.DirEntry, err error) error {
		if err == nil && d.IsDir() {
			t.Cleanup(func() { must(t, os.Chmod(path, 0o755)) })
			err = os.Chmod(path, 0o555)
		}
		return err
	}))
}

func BenchmarkGet(b *testing.B) {
	s := opened(b, b.TempDir(), 64<<20)
	names := make([]string, 16)
	for i := range names {
		names[i] = fmt.Sprint(i)
		must(b, s.Put(names[i], fill(names[i], 1<<20)))
	}
	into := make([]byte, 1<<20)
	b.SetBytes(1 << 20)
	b.ReportAllocs()
	i := 0
	for b.Loop() {
		if _, ok := s.Get(names[i%len(names)], into); !ok {
			b.Fatal("got a miss")
		}
		i++
	}
}

func BenchmarkPut(b *testing.B) {
	s := opened(b, b.TempDir(), 16<<20)
	value := fill("a", 1<<20)
	b.SetBytes(1 << 20)
	i := 0
	for b.Loop() {
		must(b, s.Put(fmt.Sprint(i), value))
		i++
	}
}
