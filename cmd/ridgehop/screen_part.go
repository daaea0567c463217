package main

import (
	"bufio"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"hash"
	"io"
	"os"
	"path/filepath"
	"syscall"

	"ridgehop/internal/screening"
	"ridgehop/internal/screening/intake"
)

// part is an output that is not complete yet: OUT.part holds the results, and
// OUT.part.journal says how much of it counts, and what it was made from. It is
// the sink of a screening.
//
// Results are on disk before the journal says so, and the journal is replaced
// whole, so whatever stops the program leaves a part to go on from. Whatever
// follows in the file behind what the journal knows is cut off.
type part struct {
	*screening.Writer
	out    string
	file   *os.File
	buffer *bufio.Writer
	sum    hash.Hash // of all that was written
	bytes  int64
	inputs inputs
	done   screening.Summary
}

// journal is what OUT.part.journal holds.
type journal struct {
	Format  string            `json:"format"`
	Inputs  inputs            `json:"inputs"`
	Bytes   int64             `json:"bytes"`  // of the part that count
	SHA256  string            `json:"sha256"` // of those bytes
	Summary screening.Summary `json:"summary"`
}

// journalFormat names this way to keep a part.
const journalFormat = "ridgehop screen 1"

// openPart opens the part of an output, and goes on with it where it was made
// from the same inputs. It is locked until it is closed.
func openPart(out string, format intake.Format, in inputs, restart bool) (*part, error) {
	f, err := os.OpenFile(out+".part", os.O_RDWR|os.O_CREATE, 0o644)
	if err != nil {
		return nil, fileError(filepath.Base(out)+".part", err)
	}
	p := &part{out: out, file: f, inputs: in, sum: sha256.New()}
	if err := p.open(format, restart); err != nil {
		return nil, errors.Join(err, f.Close())
	}
	return p, nil
}

func (p *part) open(format intake.Format, restart bool) error {
	if err := syscall.Flock(int(p.file.Fd()), syscall.LOCK_EX|syscall.LOCK_NB); err != nil {
		return inputError{fmt.Errorf("%s.part is being written by another run", filepath.Base(p.out))}
	}
	if !restart {
		if err := p.resume(); err != nil {
			return inputError{fmt.Errorf("%s.part cannot be gone on with: %w; --restart starts anew", filepath.Base(p.out), err)}
		}
	}
	if err := p.file.Truncate(p.bytes); err != nil {
		return err
	}
	if _, err := p.file.Seek(p.bytes, io.SeekStart); err != nil {
		return err
	}
	p.buffer = bufio.NewWriterSize(io.MultiWriter(p.file, p.sum, (*byteCount)(&p.bytes)), 1<<16)
	var err error
	if p.Writer, err = screening.NewWriter(p.buffer, format, p.done.Rows); err != nil {
		return err
	}
	return p.note()
}

// byteCount counts what is written to it.
type byteCount int64

// Write implements io.Writer.
func (n *byteCount) Write(b []byte) (int, error) {
	*n += byteCount(len(b))
	return len(b), nil
}

// resume finds how far the part goes that is there. An empty one is a new one.
func (p *part) resume() error {
	stat, err := p.file.Stat()
	if err != nil || stat.Size() == 0 {
		return err
	}
	raw, err := os.ReadFile(p.journal())
	if err != nil {
		return errors.New("its journal is missing")
	}
	var j journal
	if err := json.Unmarshal(raw, &j); err != nil || j.Format != journalFormat {
		return errors.New("its journal is damaged, or of another version")
	}
	if changed := j.Inputs.changed(p.inputs); changed != "" {
		return fmt.Errorf("since it was begun the %s changed", changed)
	}
	n, err := io.Copy(p.sum, io.LimitReader(p.file, j.Bytes))
	if err != nil {
		return err
	}
	if n != j.Bytes || hex.EncodeToString(p.sum.Sum(nil)) != j.SHA256 {
		return errors.New("it is not as it was written")
	}
	p.bytes, p.done = j.Bytes, j.Summary
	return nil
}

func (p *part) journal() string { return p.out + ".part.journal" }

// Commit implements screening.Sink.
func (p *part) Commit(s screening.Summary) error {
	p.done = s
	return p.note()
}

// note brings the part to disk and the journal up to date.
func (p *part) note() error {
	if err := p.sync(); err != nil {
		return err
	}
	raw, err := json.Marshal(journal{journalFormat, p.inputs, p.bytes, hex.EncodeToString(p.sum.Sum(nil)), p.done})
	if err != nil {
		return err
	}
	fresh := p.journal() + ".new"
	if err := os.WriteFile(fresh, raw, 0o644); err != nil {
		return err
	}
	return os.Rename(fresh, p.journal())
}

func (p *part) sync() error {
	if err := p.buffer.Flush(); err != nil {
		return err
	}
	return p.file.Sync()
}

// finish makes the output of the part.
func (p *part) finish(s screening.Summary) error {
	if err := p.Writer.Close(s); err != nil {
		return err
	}
	if err := p.sync(); err != nil {
		return err
	}
	if err := os.Rename(p.file.Name(), p.out); err != nil {
		return err
	}
	return os.Remove(p.journal())
}

// discard removes a part that nobody can go on with.
func (p *part) discard() error {
	return errors.Join(os.Remove(p.file.Name()), os.Remove(p.journal()))
}

// Close gives the part free for another run.
func (p *part) Close() error { return p.file.Close() }
