// Command eliminant checks tree-level scattering amplitudes exactly.
//
// It computes amplitudes at exact kinematic points by independent routes and
// settles the claims of a file: certified with a proven bound, refuted with an
// exact counterexample, or undecided. Run it without arguments to see where to
// start.
package main

import (
	"context"
	"io"
	"os"
	"os/signal"
	"strings"
	"syscall"
	"unicode"

	"eliminant/checks/report"

	"golang.org/x/term"
)

func main() {
	os.Exit(execute())
}

// execute runs the program on the real streams; an interrupt cancels its
// context, a second one ends the process at once.
func execute() int {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	defer stop()
	context.AfterFunc(ctx, stop)
	p := newProgram(os.Stdin, os.Stdout, os.Stderr)
	p.name = called(os.Args[0])
	return p.run(ctx, os.Args[1:])
}

// called returns how to call the program again from a shell.
func called(path string) string {
	switch {
	case strings.Contains(path, "go-build"): // built for this run only
		return "go run ./cmd/eliminant"
	case strings.ContainsFunc(path, func(r rune) bool {
		return unicode.IsSpace(r) || strings.ContainsRune(`'"\$&|;<>()*?[]#~!{}`, r) || r == '`'
	}):
		return report.ShellQuote(path)
	}
	return path
}

// run runs the program and returns its exit code.
func run(ctx context.Context, args []string, stdin io.Reader, stdout, stderr io.Writer) int {
	return newProgram(stdin, stdout, stderr).run(ctx, args)
}

// newProgram prepares a run on the given streams.
func newProgram(stdin io.Reader, stdout, stderr io.Writer) *program {
	p := &program{name: "eliminant", stdin: stdin, stdout: stdout, stderr: stderr, patience: patience}
	p.terminal = isTerminal(stderr)
	if _, off := os.LookupEnv("NO_COLOR"); !off {
		p.colourOut, p.colourErr = isTerminal(stdout), isTerminal(stderr)
	}
	return p
}

func isTerminal(w io.Writer) bool {
	f, ok := w.(*os.File)
	return ok && term.IsTerminal(int(f.Fd()))
}

// style is how text on stdout is written.
func (p *program) style(digits int) report.Style {
	return report.Style{Colour: p.colourOut, Digits: digits}
}
