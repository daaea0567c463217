package raster

import (
	"bufio"
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
	"syscall"
	"time"
	"unicode"
)

const (
	// childStart bounds the start of a child, which is no file's fault.
	childStart = 30 * time.Second
	// childLine bounds a line either way. The longest path that Linux opens has
	// 4,096 bytes, of which JSON makes up to six times as many.
	childLine = 64 << 10
	// childLastWords bounds what is kept of what a child writes as it ends. What
	// it died of stands at the start; stacks follow.
	childLastWords = 4 << 10
	// childProblem bounds the text of a problem, in characters.
	childProblem = 500
)

// child is a running process that answers ServeChild's lines.
type child struct {
	how       ChildHow
	cmd       *exec.Cmd
	in        io.WriteCloser
	replies   chan []byte // closed when the child closes its end
	lastWords head
}

// startChild starts a child, hands it its limits and waits until it keeps them.
func startChild(ctx context.Context, how ChildHow) (*child, error) {
	c := &child{how: how, replies: make(chan []byte), lastWords: head{room: childLastWords}}
	c.cmd = exec.CommandContext(ctx, how.Command[0], how.Command[1:]...) //nolint:gosec // the caller's own program
	c.cmd.Stderr = &c.lastWords
	// A group of its own: an interrupt at the terminal ends this process, not
	// the child in the middle of a file that would be blamed for it.
	c.cmd.SysProcAttr = &syscall.SysProcAttr{Setpgid: true}
	in, errIn := c.cmd.StdinPipe()
	out, errOut := c.cmd.StdoutPipe()
	if err := errors.Join(errIn, errOut, c.cmd.Start()); err != nil {
		return nil, fmt.Errorf("the process that checks rasters, %q, does not start: %w", filepath.Base(how.Command[0]), withoutPath(err))
	}
	c.in = in
	go c.listen(out)
	limits := childLimits{MemoryBytes: how.MemoryBytes, CPUSeconds: how.CPUSeconds, FileTimeout: how.FileTimeout}
	reply, problem := c.ask(ctx, limits, childStart)
	if problem != "" || !reply.OK {
		c.stop()
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		return nil, fmt.Errorf("the process that checks rasters, %q, does not take its limits: %s", filepath.Base(how.Command[0]), plain(problem+reply.Problem))
	}
	return c, nil
}

// listen hands on each line until the child closes its end or writes one that
// is too long.
func (c *child) listen(out io.Reader) {
	defer close(c.replies)
	lines := bufio.NewScanner(out)
	lines.Buffer(nil, childLine)
	for lines.Scan() {
		c.replies <- []byte(lines.Text())
	}
}

// check has the child check a file. Where the child did not survive it, or did
// not answer in time, or ran short of memory, it is stopped and alive is false.
func (c *child) check(ctx context.Context, path string) (finding ChildFinding, alive bool) {
	reply, problem := c.ask(ctx, path, c.how.FileTimeout)
	if problem == "" && shortOfMemory(reply.Problem) {
		problem = c.how.tooGreedy()
	}
	if problem != "" {
		c.stop()
		return ChildFinding{Path: path, Problem: problem}, false
	}
	return ChildFinding{Path: path, Problem: plain(reply.Problem), Summary: reply.Summary}, true
}

// ask sends one line and waits for the reply. The problem says why there is
// none; the child is not to be asked again then.
func (c *child) ask(ctx context.Context, question any, within time.Duration) (reply childReply, problem string) {
	patience := time.NewTimer(within)
	defer patience.Stop()
	// A child that is gone does not read; why, is asked below.
	_ = json.NewEncoder(c.in).Encode(question)
	select {
	case <-ctx.Done():
		return reply, "the check was ended"
	case <-patience.C:
		return reply, tooLong(within)
	case line, ok := <-c.replies:
		if !ok {
			return reply, c.causeOfDeath()
		}
		if err := json.Unmarshal(line, &reply); err != nil || reply.OK == (reply.Problem != "") {
			return reply, crashed // it writes what no child of ours would
		}
		return reply, ""
	}
}

// causeOfDeath tells why a child closed its end.
func (c *child) causeOfDeath() string {
	c.stop()
	switch {
	case c.cmd.ProcessState.ExitCode() == childBusy:
		return c.how.tooBusy()
	case shortOfMemory(string(c.lastWords.kept)):
		return c.how.tooGreedy()
	}
	return crashed
}

// shortOfMemory knows what GDAL, the Go runtime and the C++ library say where
// an allocation failed.
func shortOfMemory(words string) bool {
	words = strings.ToLower(words)
	return slices.ContainsFunc([]string{
		"out of memory", "cannot allocate", "failed to allocate", "bad_alloc",
		"pthread_create failed", "failed to create new os thread", // for want of a stack
		"address space collisions", // with the race detector
	}, func(sign string) bool { return strings.Contains(words, sign) })
}

// stop ends the child, which has nothing to lose, and takes its exit status so
// that no zombie stays. A child that is stopped, or nil, may be stopped again.
func (c *child) stop() {
	if c == nil || c.cmd.ProcessState != nil {
		return
	}
	_ = c.cmd.Process.Kill() // it may have ended of itself
	for range c.replies {    // until listen is done: Wait closes what it reads
	}
	_ = c.cmd.Wait() // its status says "killed"
}

// head keeps the first bytes that are written to it.
type head struct {
	room int
	kept []byte
}

func (h *head) Write(p []byte) (int, error) {
	h.kept = append(h.kept, p[:min(len(p), h.room-len(h.kept))]...)
	return len(p), nil
}

// plain makes text that a file may have had a part in fit for a terminal.
func plain(text string) string {
	count := 0
	return strings.Map(func(r rune) rune {
		if count++; count > childProblem || !unicode.IsPrint(r) {
			return -1
		}
		return r
	}, text)
}

// withoutPath is the cause of an error of the file system, without the place.
func withoutPath(err error) error {
	if where, ok := errors.AsType[*fs.PathError](err); ok {
		return where.Err
	}
	if command, ok := errors.AsType[*exec.Error](err); ok {
		return command.Err
	}
	return err
}
