package main

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"runtime/debug"
	"time"

	"eliminant/checks/amplitude"
	"eliminant/checks/diag"
	"eliminant/checks/formula"
	"eliminant/checks/report"
	"eliminant/rational/kinematics"

	"github.com/spf13/cobra"
)

// The exit codes.
const (
	exitDone        = 0
	exitDiffers     = 1 // refuted
	exitInput       = 2
	exitUndecided   = 3
	exitInternal    = 4
	exitInterrupted = 130
)

// program is one run: its streams and how it writes to them.
type program struct {
	name                 string // how a shell calls it
	stdin                io.Reader
	stdout, stderr       io.Writer
	terminal             bool // progress bars may be drawn on stderr
	colourOut, colourErr bool
	json                 bool
	patience             time.Duration // work shorter than this shows no progress

	observe func(done, total int, what string) // told of all progress; may be nil
}

// exit ends a command that has written its document with an exit code other
// than 0.
type exit int

func (e exit) Error() string { return fmt.Sprintf("exit code %d", int(e)) }

// run parses the arguments, runs the command and returns the exit code.
func (p *program) run(ctx context.Context, args []string) (code int) {
	defer func() {
		if r := recover(); r != nil {
			code = p.fail(ctx, &diag.Internal{Message: fmt.Sprint("panic: ", r), Detail: map[string]string{"stack": string(debug.Stack())}})
		}
	}()
	root := p.root()
	clean, json, errs := arrange(root, args)
	p.json = json
	if len(errs) > 0 {
		return p.fail(ctx, errs)
	}
	root.SetArgs(clean)
	root.SetIn(p.stdin)
	root.SetOut(p.stdout)
	root.SetErr(p.stderr)
	err := root.ExecuteContext(ctx)
	var done exit
	switch {
	case err == nil:
		return exitDone
	case errors.As(err, &done):
		return int(done)
	}
	return p.fail(ctx, err)
}

// fail reports an error that ended a command without a document of its own and
// returns the exit code.
func (p *program) fail(ctx context.Context, err error) int {
	var list diag.List
	var points kinematics.InputErrors
	var undecided *diag.Undecided
	var internal *diag.Internal
	if d, ok := refusal(err); ok {
		err = errors.Join(err, diag.List{d})
	}
	switch {
	case errors.As(err, &internal):
	case errors.As(err, &list):
		return p.faulty(&report.Fault{Diagnostics: list}, exitInput)
	case errors.As(err, &points):
		return p.faulty(&report.Fault{Diagnostics: pointFaults(points)}, exitInput)
	case errors.As(err, &undecided):
		return p.faulty(&report.Fault{Diagnostics: diag.List{{Code: "undecided", Message: undecided.Reason}}}, exitUndecided)
	case ctx.Err() != nil:
		return p.stopped()
	default:
		internal = &diag.Internal{Message: err.Error()}
	}
	return p.faulty(report.InternalFault(internal), exitInternal)
}

// stopped reports an interrupt before anything was finished.
func (p *program) stopped() int {
	const message = "interrupted: nothing was finished"
	p.note(message)
	if p.json {
		f := report.Fault{Diagnostics: diag.List{{Code: "interrupted", Message: message}}}
		if err := f.WriteJSON(p.stdout); err != nil {
			p.note("%v", err)
		}
	}
	return exitInterrupted
}

// refusal turns the typed errors of lower packages that mean wrong input into a
// diagnostic.
func refusal(err error) (diag.Diagnostic, bool) {
	var size *formula.SizeError
	var leg *formula.LegError
	var differ *formula.MassesDiffer
	var mass *amplitude.MassError
	var request *amplitude.RequestError
	switch {
	case errors.As(err, &size):
		return diag.Diagnostic{Code: "too-large", Message: size.Error(), Hint: "write the formula with fewer terms"}, true
	case errors.As(err, &leg):
		return diag.Diagnostic{Code: "leg", File: leg.At.File, Line: leg.At.Line, Column: leg.At.Column, Message: leg.Error()}, true
	case errors.As(err, &differ):
		return diag.Diagnostic{Code: "masses", File: differ.At.File, Line: differ.At.Line, Column: differ.At.Column, Message: differ.Error(),
			Hint: "msq3 is the mass squared of leg 3"}, true
	case errors.As(err, &mass):
		return diag.Diagnostic{Code: "masses", Message: mass.Error(), Hint: "give all legs the same masses_squared"}, true
	case errors.As(err, &request):
		return diag.Diagnostic{Code: "amplitude", Message: request.Error(), Hint: request.Hint}, true
	}
	return diag.Diagnostic{}, false
}

// faulty writes a fault: to stderr for a person, and with --json to stdout.
func (p *program) faulty(f *report.Fault, code int) int {
	if p.json {
		if err := f.WriteJSON(p.stdout); err != nil {
			p.note("%v", err)
		}
	}
	if err := f.WriteText(p.stderr, report.Style{Colour: p.colourErr}); err != nil {
		return exitInternal
	}
	return code
}

// note writes a line to stderr.
func (p *program) note(format string, a ...any) {
	fmt.Fprintf(p.stderr, format+"\n", a...)
}

// show writes a document to stdout, whole or not at all.
func (p *program) show(d report.Document, digits int) error {
	var b bytes.Buffer
	var err error
	if p.json {
		err = d.WriteJSON(&b)
	} else {
		err = d.WriteText(&b, p.style(digits))
	}
	if err != nil {
		return err
	}
	return p.write(b.Bytes())
}

// write writes bytes to stdout.
func (p *program) write(b []byte) error {
	if _, err := p.stdout.Write(b); err != nil {
		return diag.List{{Code: "unwritable", Message: fmt.Sprintf("cannot write to the standard output: %v", err)}}
	}
	return nil
}

// root builds the command tree.
func (p *program) root() *cobra.Command {
	root := &cobra.Command{
		Use:           "eliminant",
		Short:         "Check tree-level scattering amplitudes exactly",
		Long:          introduction,
		Args:          cobra.ArbitraryArgs,
		SilenceErrors: true,
		SilenceUsage:  true,
		RunE: func(*cobra.Command, []string) error {
			if p.json {
				return diag.List{{Code: "command", Message: "no command is given", Hint: "commands: " + commandNames(p.root())}}
			}
			return p.write([]byte(introduction + "\n"))
		},
	}
	root.CompletionOptions.HiddenDefaultCmd = true
	root.SetHelpCommand(&cobra.Command{Use: "no-help", Hidden: true})
	root.PersistentFlags().Bool("json", false, "write exactly one JSON document to stdout")
	root.AddCommand(p.certifyCommand(), p.valueCommand(), p.pointCommand(), p.equationsCommand(), p.residuesCommand(), p.conventionsCommand())
	for _, c := range root.Commands() {
		c.Flags().SortFlags = false
	}
	return root
}

// introduction is what the program prints when asked for nothing.
const introduction = `eliminant checks tree-level scattering amplitudes exactly.

You have derived or coded an amplitude, or suspect an identity. Write it down as
a claim; eliminant evaluates both sides at exact on-shell points by independent
routes and answers certified (with a proven bound on being wrong), refuted (with
an exact point at which the sides differ) or undecided (and why).

Start with

  eliminant certify claims.toml          settle the claims of a file
  eliminant value 'BS(1,2,3,4|1,3,2,4)'  the exact value of a formula
  eliminant point --legs 5               make exact kinematic points

"eliminant COMMAND --help" explains a command by example; further commands are
equations, residues and conventions.`
