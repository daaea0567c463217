package raster

import (
	"bytes"
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"github.com/lukeroth/gdal"
	"golang.org/x/sys/unix"
	"ridgehop/internal/sharedtest"
)

// childVariable makes the test binary its own child.
const childVariable = "RIDGEHOP_TEST_CHILD"

func TestMain(m *testing.M) {
	switch os.Getenv(childVariable) {
	default:
		os.Exit(m.Run())
	case "serve":
		insist(serveChild(os.Stdin, os.Stdout, misbehaving(NewGDAL().childCheck)))
	case "deaf": // never answers
		time.Sleep(time.Hour)
	}
}

// insist is must where no test runs.
func insist(err error) {
	if err != nil {
		panic(err)
	}
}

// misbehaving does for some endings what GDAL may do for a hostile file.
func misbehaving(check func(string) childReply) func(string) childReply {
	poisoned := false
	return func(path string) childReply {
		if poisoned {
			panic("of what an earlier file did")
		}
		switch filepath.Ext(path) {
		case ".crash":
			insist(unix.Kill(os.Getpid(), unix.SIGABRT)) // as the C library aborts
			time.Sleep(time.Hour)
		case ".panic":
			panic("of Go")
		case ".exit":
			os.Exit(0)
		case ".poison":
			poisoned = true
		case ".hang":
			select {}
		case ".spin":
			for spun := 0; spun >= 0; spun &= 0xff {
				spun++
			}
		case ".greedy": // in Go
			return childReply{OK: len(bytes.Repeat([]byte{1}, 2<<30)) > 0}
		case ".greedy-c": // 14 GB, in GDAL
			driver, err := gdal.GetDriverByName("MEM")
			insist(err)
			err = guarded("", func() error {
				made := driver.Create("", 60000, 60000, 2, gdal.Int16, nil)
				if made.IsNull() {
					return errors.New("not made")
				}
				made.Close()
				return nil
			})
			return childReply{OK: err == nil, Problem: fmt.Sprint(err)}
		case ".writes":
			if err := os.WriteFile(strings.TrimSuffix(path, ".writes"), []byte("x"), 0o600); err != nil {
				return childReply{Problem: withoutPath(err).Error()}
			}
		case ".noise":
			fmt.Println(`{"what": "is this"}`)
		case ".long":
			fmt.Println(strings.Repeat("x", childLine+1))
		case ".rude":
			return childReply{Problem: "\x1b[2Jcleared\n" + strings.Repeat("x", 2*childProblem)}
		}
		return check(path)
	}
}

// checked runs ChildCheck with this binary as the child. The child does not
// outlast it.
func checked(t *testing.T, how ChildHow, paths ...string) []ChildFinding {
	t.Helper()
	how.Command = asChild(t, "serve")
	var found []ChildFinding
	must(t, ChildCheck(t.Context(), paths, how, func(f ChildFinding) { found = append(found, f) }))
	if left := childrenOf(t, os.Getpid()); len(left) > 0 {
		t.Errorf("got child processes %v after the end, want none, zombies included", left)
	}
	return found
}

func asChild(t *testing.T, what string) []string {
	t.Helper()
	own, err := os.Executable()
	must(t, err)
	t.Setenv(childVariable, what)
	return []string{own}
}

// childrenOf lists the processes whose parent is pid: the 4th field of
// /proc/PID/stat, behind the name in brackets.
func childrenOf(t *testing.T, pid int) (children []string) {
	t.Helper()
	files, err := filepath.Glob("/proc/[0-9]*/stat")
	must(t, err)
	for _, file := range files {
		stat, err := os.ReadFile(file)
		if err != nil {
			continue // it ended
		}
		fields := strings.Fields(string(stat[bytes.LastIndexByte(stat, ')')+1:]))
		if fields[1] == fmt.Sprint(pid) {
			children = append(children, strings.Fields(string(stat))[0])
		}
	}
	return children
}

// Sound and unsound files, and those that end the child: each has its finding,
// and the next file is checked all the same.
func TestChildCheckOfEachFile(t *testing.T) {
	folder := t.TempDir()
	sound := put(t, folder, "made.asc", []byte(arcASCII(true)))
	summary := ChildSummary{Driver: "AAIGrid", Width: 4, Height: 3, BlockWidth: 4, BlockHeight: 1, DataType: "Float32", CRS: "WGS 84"}
	cut, err := os.ReadFile(writeFile(t, "made.tif", rawTIFF{width: 60000, height: 60000, rowsPerStrip: 60000}.bytes()))
	must(t, err)
	cases := []struct {
		path string
		want string // part of the problem; empty is sound
	}{
		{sound, ""},
		{filepath.Join(folder, "missing.tif"), "cannot be read: no such file"},
		{writeFile(t, "strip.tif", rawTIFF{width: 60000, height: 60000, rowsPerStrip: 60000, deflated: true}.bytes()), "not the shape of an elevation raster"},
		{put(t, folder, "cut.tif", cut), "cut.tif"},
		{filepath.Join(folder, "a.crash"), "crashed the reader"},
		{filepath.Join(folder, "b.crash"), "crashed the reader"},
		{sound, ""},
		{filepath.Join(folder, "a.panic"), "crashed the reader"},
		{filepath.Join(folder, "a.exit"), "crashed the reader"},
		{filepath.Join(folder, "a.noise"), "crashed the reader"},
		{filepath.Join(folder, "a.long"), "crashed the reader"},
		{filepath.Join(folder, "a.greedy"), "wants more memory than allowed (1024 MiB)"},
		{filepath.Join(folder, "a.greedy-c"), "wants more memory than allowed (1024 MiB)"},
		{filepath.Join(folder, "a.poison"), "not an elevation format"},
		{sound, ""},
		{filepath.Join(folder, "new.writes"), "file too large"},
		{filepath.Join(folder, "a.rude"), "cleared"},
		{filepath.Join(folder, "caf\xe9.tif"), "not UTF-8"},
		{sound, ""},
	}
	var paths []string
	for _, c := range cases {
		paths = append(paths, c.path)
	}
	got := checked(t, ChildHow{}, paths...)
	if len(got) != len(cases) {
		t.Fatalf("got %d findings, want %d", len(got), len(cases))
	}
	for i, c := range cases {
		want := ChildFinding{Path: c.path}
		if c.want == "" {
			want.Summary = summary
		}
		if diff := cmp.Diff(got[i], want, cmpopts.IgnoreFields(ChildFinding{}, "Problem")); diff != "" {
			t.Errorf("%s: got -, want +\n%s", filepath.Base(c.path), diff)
		}
		if problem := got[i].Problem; (problem == "") != (c.want == "") || !strings.Contains(problem, c.want) {
			t.Errorf("%s: got %q, want %q in it", filepath.Base(c.path), problem, c.want)
		}
		if problem := got[i].Problem; strings.Contains(problem, folder) || strings.ContainsAny(problem, "\x1b\n") || len(problem) > childProblem {
			t.Errorf("%s: got %q, want at most %d printable characters and no folder", filepath.Base(c.path), problem, childProblem)
		}
	}
}

func TestChildThatTakesTooLong(t *testing.T) {
	sound := plainTIFF(t).write(t)
	var got []string
	for _, f := range append(
		checked(t, ChildHow{FileTimeout: 300 * time.Millisecond}, "a.hang", "b.spin"),
		checked(t, ChildHow{CPUSeconds: 1, FileTimeout: time.Minute}, sound, "a.spin", sound)...) {
		got = append(got, f.Problem)
	}
	want := []string{"took longer than 0.3 s", "took longer than 0.3 s", "", "took more than 1 s of processor time", ""}
	if diff := cmp.Diff(got, want); diff != "" {
		t.Errorf("got -, want +\n%s", diff)
	}
}

// A sound file of each format passes, and so do the real rasters, far below the
// limits that hold by default.
func TestChildPassesSoundFiles(t *testing.T) {
	folder := t.TempDir()
	var paths []string
	for _, s := range seeds(t) {
		if s.name != "raw.tif" && s.name != "packed.tif" { // their pixels are missing
			paths = append(paths, put(t, folder, s.name, s.content))
		}
	}
	unlimited := ChildHow{MemoryBytes: math.MaxUint64, CPUSeconds: math.MaxUint64, FileTimeout: math.MaxInt64}
	for _, how := range []ChildHow{{MemoryBytes: DefaultChildMemory / 4}, unlimited} {
		for _, f := range checked(t, how, paths...) {
			if f.Problem != "" {
				t.Errorf("%s: got %q, want it sound", filepath.Base(f.Path), f.Problem)
			}
		}
	}
}

func TestChildPassesRealRasters(t *testing.T) {
	entries, err := os.ReadDir(filepath.Join(sharedtest.Dir(t), "elevation"))
	must(t, err)
	var paths []string
	for _, entry := range entries {
		if path := filepath.Join(sharedtest.Dir(t), "elevation", entry.Name()); Recognised(path) {
			paths = append(paths, path)
		}
	}
	for _, f := range checked(t, ChildHow{MemoryBytes: DefaultChildMemory / 4}, paths...) {
		if f.Problem != "" {
			t.Errorf("%s: got %q, want it sound", filepath.Base(f.Path), f.Problem)
		}
	}
}

func TestChildCheckEndsWithItsContext(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	time.AfterFunc(300*time.Millisecond, cancel)
	start := time.Now()
	err := ChildCheck(ctx, []string{"a.hang"}, ChildHow{Command: asChild(t, "serve")}, func(f ChildFinding) {
		t.Errorf("got %+v, want no finding: the file is not to blame", f)
	})
	if !errors.Is(err, context.Canceled) {
		t.Errorf("got %v, want context.Canceled", err)
	}
	if took := time.Since(start); took > DefaultChildTimeout/2 {
		t.Errorf("took %v, want the child ended at once", took)
	}
	if left := childrenOf(t, os.Getpid()); len(left) > 0 {
		t.Errorf("got child processes %v, want none", left)
	}
}

func TestChildThatCannotServe(t *testing.T) {
	cases := []struct {
		name    string
		command []string
		want    string
	}{
		{"no command", nil, "needs its command"},
		{"no such program", []string{"/nowhere/ridgehop"}, `"ridgehop", does not start: no such file`},
		{"no such program in the search path", []string{"no-such-program"}, "does not start: executable file not found"},
		{"a program that says nothing", []string{"true"}, `"true", does not take its limits`},
		{"a program that says something else", []string{"echo", "hello"}, `"echo", does not take its limits`},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			err := ChildCheck(t.Context(), []string{"a.tif"}, ChildHow{Command: c.command}, func(f ChildFinding) {
				t.Errorf("got %+v, want no finding", f)
			})
			if err == nil || !strings.Contains(err.Error(), c.want) || strings.Contains(err.Error(), "/nowhere") {
				t.Errorf("got %v, want %q", err, c.want)
			}
		})
	}
	t.Run("a child that never answers", func(t *testing.T) {
		ctx, cancel := context.WithTimeout(t.Context(), 100*time.Millisecond)
		defer cancel()
		if err := ChildCheck(ctx, []string{"a.tif"}, ChildHow{Command: asChild(t, "deaf")}, nil); !errors.Is(err, context.DeadlineExceeded) {
			t.Errorf("got %v, want context.DeadlineExceeded", err)
		}
	})
}

// Neither end of the pipe trusts the other: what is no limit, or no path, ends
// the child before a file is opened. What sets limits is left out, since they
// would last for the tests that follow.
func FuzzServeChild(f *testing.F) {
	f.Add([]byte(``))
	f.Add([]byte("\n"))
	f.Add([]byte(`{"memory_bytes": 0}`))
	f.Add([]byte(`{"memory_bytes": -1, "cpu_seconds": 1e99}` + "\n" + `"a.tif"`))
	f.Add([]byte(`"a.tif"`))
	f.Fuzz(func(t *testing.T, in []byte) {
		line, _, _ := bytes.Cut(in, []byte("\n"))
		var limits childLimits
		if json.Unmarshal(line, &limits) == nil && limits.MemoryBytes > 0 {
			t.Skip()
		}
		var out bytes.Buffer
		err := serveChild(bytes.NewReader(in), &out, func(path string) childReply {
			t.Errorf("got %q checked, want nothing before the limits", path)
			return childReply{}
		})
		if err == nil || out.Len() > 0 {
			t.Errorf("got %v and %q, want an error and no reply", err, out.Bytes())
		}
	})
}
