package raster

import (
	"bufio"
	"encoding/json"
	"errors"
	"io"
	"os"
	"runtime"
	"time"
)

// childReply is the child's line for one file. One of OK and Problem is set.
type childReply struct {
	OK      bool         `json:"ok"`
	Problem string       `json:"problem,omitempty"`
	Summary ChildSummary `json:"summary"`
}

// ServeChild is the child's half of ChildCheck, for a process that does nothing
// else: it puts limits on the whole process, which no longer writes files
// afterwards. It reads the limits as a line of JSON, answers {"ok":true}, and
// then answers each path, a JSON string a line, with a line that says whether
// the file opened and could be read. It returns nil at the end of in.
func ServeChild(in io.Reader, out io.Writer) error {
	return serveChild(in, out, NewGDAL().childCheck)
}

func serveChild(in io.Reader, out io.Writer, check func(path string) childReply) error {
	// GDAL stays on one thread: the C library sets 64 MiB of addresses aside
	// for every other one.
	runtime.LockOSThread()
	defer runtime.UnlockOSThread()
	lines, replies := bufio.NewScanner(in), json.NewEncoder(out)
	lines.Buffer(nil, childLine)
	var limits childLimits
	if !lines.Scan() || json.Unmarshal(lines.Bytes(), &limits) != nil || limits.MemoryBytes == 0 {
		return errors.New("a line of limits must come first; this process is started by ridgehop itself")
	}
	if err := limits.apply(); err != nil {
		return replies.Encode(childReply{Problem: err.Error()})
	}
	if err := replies.Encode(childReply{OK: true}); err != nil {
		return err
	}
	for lines.Scan() {
		var path string
		if err := json.Unmarshal(lines.Bytes(), &path); err != nil {
			return errors.New("a path must be a JSON string")
		}
		if err := replies.Encode(limits.spend(path, check)); err != nil {
			return err
		}
	}
	return lines.Err()
}

// spend checks one file within its limits of time.
func (l childLimits) spend(path string, check func(path string) childReply) childReply {
	if err := l.grantCPU(); err != nil {
		return childReply{Problem: err.Error()}
	}
	// The parent ends a child that is late. Where the parent is gone, the child
	// ends itself: a call into GDAL cannot be broken off otherwise.
	late := time.AfterFunc(2*l.FileTimeout, func() { os.Exit(1) })
	defer late.Stop()
	return check(path)
}
