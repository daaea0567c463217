package raster

import (
	"context"
	"errors"
	"fmt"
	"math"
	"time"
	"unicode/utf8"
)

// ChildHow says how files are checked in a child process, and what one file
// may cost there. Zero values take the defaults.
type ChildHow struct {
	// Command starts a process that calls ServeChild: program and arguments.
	Command []string
	// MemoryBytes is the address space that the child may take beyond what it
	// has when it starts; by default DefaultChildMemory.
	MemoryBytes uint64
	// CPUSeconds is the processor time that one file may take; by default
	// DefaultChildCPU.
	CPUSeconds uint64
	// FileTimeout is the time by the clock that one file may take; by default
	// DefaultChildTimeout. It must not be negative.
	FileTimeout time.Duration
}

// What one file may cost where ChildHow says nothing else.
const (
	// DefaultChildMemory is ample: files with blocks of MaxBlockBytes were
	// measured to need 384 MiB, everyday files 48 MiB, GDAL's cache and what Go
	// and the C library set aside included.
	DefaultChildMemory = 1 << 30
	// DefaultChildCPU is in seconds. A text grid of 90 MB was measured to take
	// three, everyday files take hundredths.
	DefaultChildCPU = 10
	// DefaultChildTimeout is the clock's limit for one file.
	DefaultChildTimeout = 10 * time.Second
)

// ChildFinding is what the child found out about one file.
type ChildFinding struct {
	// Path is the file as the caller named it.
	Path string
	// Problem says why the file is not to be opened, and never names a folder.
	// It is empty where the file is sound.
	Problem string
	// Summary is what a sound file declares.
	Summary ChildSummary
}

// ChildSummary is the part of a raster's Info that a reader of a list wants to
// see.
type ChildSummary struct {
	Driver      string `json:"driver"`
	Width       int    `json:"width"`        // pixels
	Height      int    `json:"height"`       // pixels
	BlockWidth  int    `json:"block_width"`  // pixels
	BlockHeight int    `json:"block_height"` // pixels
	DataType    string `json:"data_type"`
	CRS         string `json:"crs"`  // its name
	EPSG        int    `json:"epsg"` // 0 if not known
}

// ChildCheck opens each file and reads some of it in a child process under
// limits, and reports what was found, in the order of paths and on the
// caller's goroutine. A file that ends, fills or holds up the child is marked
// as that, and a new child goes on with the rest. This process opens none of
// the files, so one that is made to crash a reader does not crash it.
//
// At most one child runs at a time, and none is left when ChildCheck returns.
// The error is ctx's where that ended, or says why no child could be started;
// what is wrong with a file is a finding. Safe for concurrent use.
func ChildCheck(ctx context.Context, paths []string, how ChildHow, report func(ChildFinding)) error {
	if len(how.Command) == 0 || how.FileTimeout < 0 {
		return errors.New("checking rasters in a child process needs its command and a time limit that is not negative")
	}
	check := childRun{how: how.withDefaults()}
	defer func() { check.running.stop() }()
	for _, path := range paths {
		finding, err := check.file(ctx, path)
		if err != nil {
			return err
		}
		report(finding)
	}
	return nil
}

// childRun is one run of ChildCheck: its child of the moment, or nil.
type childRun struct {
	how     ChildHow
	running *child
}

// file checks one file. Where a child ends that had seen other files before,
// one of those may be to blame, so a new child is asked again.
func (r *childRun) file(ctx context.Context, path string) (ChildFinding, error) {
	if !utf8.ValidString(path) {
		return ChildFinding{Path: path, Problem: "its name is not UTF-8; rename it"}, nil
	}
	for {
		fresh := r.running == nil
		if err := r.start(ctx); err != nil {
			return ChildFinding{}, err
		}
		finding, alive := r.running.check(ctx, path)
		if alive {
			return finding, nil
		}
		r.running = nil
		if err := ctx.Err(); err != nil {
			return ChildFinding{}, err // the child may have ended of it
		}
		if fresh || finding.Problem != crashed && finding.Problem != r.how.tooGreedy() {
			return finding, nil
		}
	}
}

func (r *childRun) start(ctx context.Context) (err error) {
	if r.running == nil {
		r.running, err = startChild(ctx, r.how)
	}
	return err
}

func (how ChildHow) withDefaults() ChildHow {
	if how.MemoryBytes == 0 {
		how.MemoryBytes = DefaultChildMemory
	}
	if how.CPUSeconds == 0 {
		how.CPUSeconds = DefaultChildCPU
	}
	if how.FileTimeout == 0 {
		how.FileTimeout = DefaultChildTimeout
	}
	// Whoever wants no limit may give the largest number: no sum may pass it, nor
	// the kernel's count of processor time in nanoseconds.
	how.MemoryBytes = min(how.MemoryBytes, math.MaxInt64)
	how.CPUSeconds = min(how.CPUSeconds, math.MaxInt32)
	how.FileTimeout = min(how.FileTimeout, math.MaxInt64/4)
	return how
}

// The problems that the child cannot tell of itself.

const crashed = "crashed the reader"

func tooLong(limit time.Duration) string {
	return fmt.Sprintf("took longer than %g s", limit.Seconds())
}

func (how ChildHow) tooBusy() string {
	return fmt.Sprintf("took more than %d s of processor time", how.CPUSeconds)
}

func (how ChildHow) tooGreedy() string {
	return fmt.Sprintf("wants more memory than allowed (%d MiB)", how.MemoryBytes>>20)
}
