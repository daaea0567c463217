// Command ridgehop judges radio links over terrain: on the command line, or as
// a service over HTTP.
package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/signal"
	"strings"
	"syscall"

	"github.com/alecthomas/kong"
)

func main() {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	defer stop()
	os.Exit(run(ctx, os.Args[1:], streams{os.Stdin, os.Stdout, os.Stderr}))
}

// streams are where the program reads and writes.
type streams struct {
	in       io.Reader
	out, err io.Writer
}

// commands is the command line.
type commands struct {
	Serve   serveCommand   `cmd:"" help:"Serve the API, the drawings and the page of the contract over HTTP."`
	Assess  assessCommand  `cmd:"" help:"Judge the link that a JSON file, or standard input, describes."`
	Screen  screenCommand  `cmd:"" help:"Ask of a list of places which of a list of sites can serve each, and with what mast."`
	Rasters rastersCommand `cmd:"" help:"List and check the elevation rasters."`
	Pattern patternCommand `cmd:"" help:"Turn an antenna's pattern from CSV into the JSON of a description."`
	Version versionCommand `cmd:"" help:"Print the version of the program and of what it computes with."`
}

// Exit codes: bad input is the caller's to mend, a failure is ours.
const (
	exitOK     = 0
	exitFailed = 1
	exitInput  = 2
)

// inputError marks an error as bad input.
type inputError struct{ error }

func (e inputError) Unwrap() error { return e.error }

// run executes one command line and returns the exit code. Whatever goes wrong
// is one line on the error stream.
func run(ctx context.Context, args []string, s streams) int {
	var c commands
	exited := -1
	parser, err := kong.New(&c,
		kong.Name("ridgehop"),
		kong.Description("Will a radio link between two points work, before anyone climbs a roof?"),
		kong.Writers(s.out, s.err),
		kong.Exit(func(code int) { exited = code }),
		kong.BindTo(ctx, (*context.Context)(nil)),
		kong.Bind(s),
	)
	if err != nil {
		return s.report(err, exitFailed)
	}
	parsed, err := parser.Parse(args)
	if exited >= 0 { // --help was answered
		return exited
	}
	if err != nil {
		return s.report(err, exitInput)
	}
	err = parsed.Run()
	var input inputError
	switch {
	case err == nil:
		return exitOK
	case errors.As(err, &input):
		return s.report(err, exitInput)
	}
	return s.report(err, exitFailed)
}

// report says what went wrong in one line and returns the exit code.
func (s streams) report(err error, code int) int {
	// A closed error stream leaves nobody to tell.
	_, _ = fmt.Fprintln(s.err, "ridgehop:", strings.ReplaceAll(err.Error(), "\n", "; "))
	return code
}
