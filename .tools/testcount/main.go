// Command testcount reads the event stream of "go test -json" on standard
// input and tells a person what happened: one line per package, the output of
// what failed as soon as it failed, and nothing of what passed.
//
//	go test -json ./... | testcount SUMMARY
//
// SUMMARY is written at the end: every skipped test with its reason, then the
// line "N passed, N failed, N skipped". It goes to a file because further
// checks follow the tests, and the count is to be the last line of them all.
// The exit status is 1 when anything failed, also a package that did not build.
package main

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"os"
)

func main() {
	if err := run(os.Args[1:], os.Stdin, os.Stdout); err != nil {
		fmt.Fprintln(os.Stderr, "testcount:", err)
		os.Exit(1)
	}
}

func run(args []string, in io.Reader, out io.Writer) error {
	if len(args) != 1 {
		return errors.New("usage: go test -json ./... | testcount SUMMARY")
	}
	c := newCounter(out)
	lines := bufio.NewReader(in)
	for {
		line, err := lines.ReadBytes('\n')
		if len(line) > 0 {
			c.line(line)
		}
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			return fmt.Errorf("read events: %w", err)
		}
	}
	c.finish()
	if err := os.WriteFile(args[0], c.summary(), 0o600); err != nil {
		return fmt.Errorf("write summary: %w", err)
	}
	if c.failed > 0 {
		return fmt.Errorf("%d failed", c.failed)
	}
	if c.passed == 0 {
		return errors.New("no test ran")
	}
	return nil
}
