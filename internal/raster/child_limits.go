package raster

import (
	"bytes"
	"fmt"
	"os"
	"os/signal"
	"time"

	"golang.org/x/sys/unix"
)

// childLimits is the first line that a child reads.
type childLimits struct {
	MemoryBytes uint64        `json:"memory_bytes"`
	CPUSeconds  uint64        `json:"cpu_seconds"`
	FileTimeout time.Duration `json:"file_timeout_ns"`
}

// childBusy is the exit status of a child that has used its processor time.
const childBusy = 24 // SIGXCPU

// apply puts the limits on this process. They last until it ends.
func (l childLimits) apply() error {
	taken, err := addressSpace()
	if err != nil {
		return err
	}
	// A write beyond the limit of a file's size is to fail, not to end the
	// process.
	signal.Ignore(unix.SIGXFSZ)
	go endWhenBusy()
	for _, limit := range []struct {
		resource int
		most     uint64
		what     string
	}{
		{unix.RLIMIT_CORE, 0, "core files"},
		{unix.RLIMIT_FSIZE, 0, "written files"},
		{unix.RLIMIT_AS, taken + l.MemoryBytes, "memory"},
	} {
		if err := lower(limit.resource, limit.most); err != nil {
			return fmt.Errorf("limit of %s: %w", limit.what, err)
		}
	}
	return nil
}

// lower sets a limit for good, unless a stricter one holds already.
func lower(resource int, most uint64) error {
	var now unix.Rlimit
	if err := unix.Getrlimit(resource, &now); err != nil {
		return err
	}
	now.Max = min(now.Max, most)
	now.Cur = min(now.Cur, now.Max)
	return unix.Setrlimit(resource, &now)
}

// endWhenBusy ends the process at its limit of processor time. The Go runtime
// takes the kernel's signal, and does nothing about it by itself.
func endWhenBusy() {
	spent := make(chan os.Signal, 1)
	signal.Notify(spent, unix.SIGXCPU)
	<-spent
	os.Exit(childBusy)
}

// grantCPU lets the process use CPUSeconds more than it has used; the kernel
// then sends SIGXCPU. Only the soft limit moves: a lower hard one could not be
// raised again.
func (l childLimits) grantCPU() error {
	var used unix.Rusage
	if err := unix.Getrusage(unix.RUSAGE_SELF, &used); err != nil {
		return fmt.Errorf("used processor time: %w", err)
	}
	var now unix.Rlimit
	if err := unix.Getrlimit(unix.RLIMIT_CPU, &now); err != nil {
		return fmt.Errorf("limit of processor time: %w", err)
	}
	const roundedUp = 1 // the limit counts whole seconds
	now.Cur = min(now.Max, uint64(used.Utime.Sec+used.Stime.Sec)+roundedUp+l.CPUSeconds)
	if err := unix.Setrlimit(unix.RLIMIT_CPU, &now); err != nil {
		return fmt.Errorf("limit of processor time: %w", err)
	}
	return nil
}

// addressSpace is what this process has mapped, in bytes: what RLIMIT_AS
// counts. Go and the C library map far more than they use.
func addressSpace() (uint64, error) {
	sizes, err := os.ReadFile("/proc/self/statm")
	if err != nil {
		return 0, fmt.Errorf("size of this process: %w", withoutPath(err))
	}
	var pages uint64
	if _, err := fmt.Fscan(bytes.NewReader(sizes), &pages); err != nil {
		return 0, fmt.Errorf("size of this process: %w", err)
	}
	return pages * uint64(os.Getpagesize()), nil
}
