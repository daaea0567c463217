package main

import (
	"bytes"
	"encoding/json"
	"fmt"
	"io"
	"sort"
	"strings"
)

// event is the part of a "go test -json" line that is read here; the fields
// are those of "go doc test2json" and, for builds, of "go help buildjson".
type event struct {
	Action      string
	Package     string
	ImportPath  string
	Test        string
	Elapsed     float64
	Output      string
	FailedBuild string
}

// counter adds up the events of all packages; their lines come interleaved.
type counter struct {
	out                     io.Writer
	passed, failed, skipped int
	packages                map[string]*packageCount
	builds                  map[string]*strings.Builder // compiler output by import path
	skips                   []string
}

// packageCount is one package under way. Output of a test is kept until its
// end is known, under the test's name; "" holds the package's own lines.
type packageCount struct {
	passed, failed, skipped int
	cached                  bool
	output                  map[string]*strings.Builder
	running                 map[string]bool
}

func newCounter(out io.Writer) *counter {
	return &counter{
		out:      out,
		packages: map[string]*packageCount{},
		builds:   map[string]*strings.Builder{},
	}
}

// line takes one line of the stream. What is no event, such as a message of
// the go command itself, is shown as it is.
func (c *counter) line(line []byte) {
	var e event
	if !bytes.HasPrefix(line, []byte("{")) || json.Unmarshal(line, &e) != nil {
		fmt.Fprint(c.out, string(line))
		return
	}
	switch {
	case e.Action == "build-output":
		write(c.builds, e.ImportPath, e.Output)
	case e.Package == "":
		return
	case e.Test != "":
		c.test(e)
	default:
		c.pkg(e)
	}
}

func (c *counter) test(e event) {
	p := c.get(e.Package)
	switch e.Action {
	case "run":
		p.running[e.Test] = true
	case "output":
		write(p.output, e.Test, e.Output)
	case "pass":
		p.passed++
		p.end(e.Test)
	case "skip":
		p.skipped++
		reason := skipReason(p.end(e.Test))
		c.skips = append(c.skips, fmt.Sprintf("skipped  %s %s: %s", e.Package, e.Test, reason))
	case "fail":
		p.failed++
		fmt.Fprint(c.out, p.end(e.Test))
	}
}

func (c *counter) pkg(e event) {
	p := c.get(e.Package)
	switch e.Action {
	case "output":
		p.cached = p.cached || strings.Contains(e.Output, "\t(cached)")
		write(p.output, "", e.Output)
	case "pass", "skip":
		c.close(e, "ok  ")
	case "fail":
		// A build that failed, a panic or an os.Exit leaves tests without an end.
		if b := c.builds[e.FailedBuild]; b != nil {
			fmt.Fprint(c.out, b)
		}
		for _, name := range sortedKeys(p.running) {
			p.failed++
			fmt.Fprint(c.out, p.end(name))
			fmt.Fprintf(c.out, "--- FAIL: %s (did not end)\n", name)
		}
		if p.failed == 0 {
			p.failed = 1
			fmt.Fprint(c.out, p.end(""))
		}
		c.close(e, "FAIL")
	}
}

// close adds a package to the totals and prints its line.
func (c *counter) close(e event, word string) {
	p := c.packages[e.Package]
	delete(c.packages, e.Package)
	c.passed += p.passed
	c.failed += p.failed
	c.skipped += p.skipped
	if p.passed+p.failed+p.skipped == 0 {
		fmt.Fprintf(c.out, "none %-40s no tests\n", e.Package)
		return
	}
	parts := []string{fmt.Sprintf("%d passed", p.passed)}
	if p.failed > 0 {
		parts = append(parts, fmt.Sprintf("%d failed", p.failed))
	}
	if p.skipped > 0 {
		parts = append(parts, fmt.Sprintf("%d skipped", p.skipped))
	}
	took := fmt.Sprintf("%.1f s", e.Elapsed)
	if p.cached {
		took = "cached"
	}
	fmt.Fprintf(c.out, "%s %-40s %s (%s)\n", word, e.Package, strings.Join(parts, ", "), took)
}

// finish counts packages that the stream left open, as it does when the go
// command is killed, as failed.
func (c *counter) finish() {
	for _, name := range sortedKeys(c.packages) {
		c.pkg(event{Action: "fail", Package: name})
	}
}

func (c *counter) summary() []byte {
	var b bytes.Buffer
	sort.Strings(c.skips)
	for _, s := range c.skips {
		fmt.Fprintln(&b, s)
	}
	fmt.Fprintf(&b, "%d passed, %d failed, %d skipped\n", c.passed, c.failed, c.skipped)
	return b.Bytes()
}

func (c *counter) get(name string) *packageCount {
	p := c.packages[name]
	if p == nil {
		p = &packageCount{output: map[string]*strings.Builder{}, running: map[string]bool{}}
		c.packages[name] = p
	}
	return p
}

// end forgets a test and returns what it printed.
func (p *packageCount) end(test string) string {
	out := ""
	if b := p.output[test]; b != nil {
		out = b.String()
	}
	delete(p.output, test)
	delete(p.running, test)
	return out
}

// skipReason is what a test logged, without the lines of the test runner and
// without the "file_test.go:12: " that the testing package puts in front.
func skipReason(output string) string {
	var words []string
	for line := range strings.Lines(output) {
		line = strings.TrimSpace(line)
		if line == "" || strings.HasPrefix(line, "=== ") || strings.HasPrefix(line, "--- ") {
			continue
		}
		if at, text, ok := strings.Cut(line, ": "); ok && strings.Contains(at, ".go:") {
			line = text
		}
		words = append(words, line)
	}
	if len(words) == 0 {
		return "no reason given"
	}
	return strings.Join(words, " ")
}

func write(to map[string]*strings.Builder, name, text string) {
	if to[name] == nil {
		to[name] = &strings.Builder{}
	}
	to[name].WriteString(text)
}

func sortedKeys[V any](m map[string]V) []string {
	names := make([]string, 0, len(m))
	for name := range m {
		names = append(names, name)
	}
	sort.Strings(names)
	return names
}
