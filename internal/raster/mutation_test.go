package raster

import (
	"bytes"
	"context"
	"encoding/binary"
	"fmt"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
	"time"

	"github.com/lukeroth/gdal"
	"golang.org/x/sys/unix"
)

// mutated changes, cuts, zeroes or fills some of the bytes, more often near
// the start, where the formats keep what they declare.
func mutated(r *rand.Rand, content []byte) []byte {
	out := append([]byte(nil), content...)
	for range 1 + r.IntN(6) {
		if len(out) == 0 {
			break
		}
		at := r.IntN(len(out))
		if r.IntN(2) == 0 {
			at = r.IntN(1 + r.IntN(min(len(out), 1024)))
		}
		switch r.IntN(8) {
		case 0, 1:
			out[at] = byte(r.IntN(256))
		case 2:
			out[at] ^= 1 << r.IntN(8)
		case 3:
			out = out[:at]
		case 4:
			clear(out[at:min(len(out), at+r.IntN(16))])
		case 5:
			for i := at; i < min(len(out), at+4); i++ {
				out[i] = 0xff
			}
		case 6: // a size, a count or an offset of some other order
			word := binary.LittleEndian.AppendUint32(nil, uint32(r.IntN(1<<(1+r.IntN(31)))))
			copy(out[at&^1:], word[:2+2*r.IntN(2)])
		case 7: // or some powers of two more than it was
			var word [4]byte
			copy(word[:], out[at&^1:])
			grown := binary.LittleEndian.Uint32(word[:]) << (1 + r.IntN(12))
			copy(out[at&^1:], binary.LittleEndian.AppendUint32(nil, grown))
		}
	}
	return out
}

// What one broken file may cost.
const (
	mutationTime   = time.Second // generous: a whole file takes milliseconds, one of 65,535 bands 0.1 s
	mutationMemory = 256 << 20   // of address space: what is asked for, used or not
	// mutationBackstop keeps the machine from what goes beyond. GDAL is told no
	// then, and says so.
	mutationBackstop = 2 << 30
)

// mutationRounds is how often a seed is broken. Unpacking a zip takes longest.
func mutationRounds(name string) int {
	zip := strings.HasSuffix(name, ".zip")
	switch {
	case testing.Short() && zip:
		return 12
	case testing.Short():
		return 48
	case zip:
		return 110
	}
	return 315
}

// Broken files of every format are refused or read: none ends the process,
// takes long or asks for much memory. They are tried in a process of their own,
// so that what ends it has a name.
func TestMutatedFiles(t *testing.T) {
	if os.Getenv(childVariable) == "mutate" {
		useMutatedFiles(t)
		return
	}
	want := 2000
	if testing.Short() {
		want = 300
	}
	ctx, cancel := context.WithTimeout(t.Context(), 5*time.Minute)
	defer cancel()
	child := exec.CommandContext(ctx, asChild(t, "mutate")[0], "-test.run=^TestMutatedFiles$", fmt.Sprintf("-test.short=%t", testing.Short()))
	var told, said bytes.Buffer
	child.Stdout, child.Stderr = &told, &said
	err := child.Run()
	at, files := "before the first file", 0
	for line := range strings.Lines(told.String()) {
		if now, ok := strings.CutPrefix(line, "now: "); ok {
			at = strings.TrimSpace(now)
			files++
		}
		if sum, ok := strings.CutPrefix(line, "sum: "); ok {
			t.Logf("%d files: %s", files, sum)
		}
	}
	if err != nil {
		t.Errorf("the last file was %s: %v\n%.4000s%.4000s", at, err, withoutProgress(told.String()), said.String())
	}
	if files != want {
		t.Errorf("got %d files tried, want %d", files, want)
	}
}

// withoutProgress leaves out the lines that only tell how far the child got.
func withoutProgress(told string) string {
	var rest strings.Builder
	for line := range strings.Lines(told) {
		if !strings.HasPrefix(line, "now: ") {
			rest.WriteString(line)
		}
	}
	return rest.String()
}

// useMutatedFiles is the child's half. Seed and round alone make a file.
func useMutatedFiles(t *testing.T) {
	runtime.LockOSThread() // each thread in C would have 64 MiB set aside
	defer runtime.UnlockOSThread()
	library, folders := NewGDAL(), t.TempDir()
	seeds := seeds(t)
	for _, s := range seeds { // what is loaded once is no file's cost
		_ = useAll(t, library, put(t, folders, s.name, s.content))
	}
	taken, err := addressSpace()
	must(t, err)
	must(t, lower(unix.RLIMIT_AS, taken+mutationBackstop))
	var slowest time.Duration
	var largest int64
	for which, s := range seeds {
		for round := range mutationRounds(s.name) {
			fmt.Printf("now: %s, round %d\n", s.name, round)
			// A folder each: GDAL remembers what a zip of one name holds.
			folder := filepath.Join(folders, fmt.Sprintf("%d-%d", which, round))
			must(t, os.Mkdir(folder, 0o755))
			r := rand.New(rand.NewPCG(uint64(which), uint64(round)))
			path := put(t, folder, s.name, mutated(r, s.content))
			took, grown := cost(t, func() error { return useAll(t, library, path) })
			if took > mutationTime {
				t.Errorf("%s, round %d: took %v, want at most %v", s.name, round, took, mutationTime)
			}
			if grown > mutationMemory {
				t.Errorf("%s, round %d: asked for %d MiB or more, want at most %d", s.name, round, grown>>20, mutationMemory>>20)
			}
			slowest, largest = max(slowest, took), max(largest, grown)
			must(t, os.RemoveAll(folder))
		}
	}
	fmt.Printf("sum: at most %v and %d KiB a file\n", slowest.Round(time.Millisecond), largest>>10)
}

// cost is the least time of three tries, since others may use the machine, and
// the most address space that one of them took. What GDAL was refused counts as
// mutationBackstop.
func cost(t *testing.T, use func() error) (took time.Duration, grown int64) {
	took = mutationTime + 1
	for try := 0; try < 3 && took > mutationTime; try++ {
		before, err := addressSpace()
		must(t, err)
		start := time.Now()
		refused := use()
		took = time.Since(start)
		grown = max(grown, peakMemory(t)-int64(before))
		if refused != nil && shortOfMemory(refused.Error()) {
			t.Logf("got %v", refused)
			grown = max(grown, mutationBackstop)
		}
	}
	return took, grown
}

// The measure sees memory that was asked for, used or not, and given back.
func TestCostSeesAnAllocation(t *testing.T) {
	driver, err := gdal.GetDriverByName("MEM")
	must(t, err)
	const side = 13000 // 2 bytes a pixel: 338 MB
	_, grown := cost(t, func() error {
		driver.Create("", side, side, 1, gdal.Int16, nil).Close()
		return nil
	})
	if grown < 2*side*side {
		t.Errorf("got %d bytes, want at least %d", grown, 2*side*side)
	}
}
