package main

import (
	"fmt"
	"io"
	"math/big"
	"os"
	"runtime"
	"slices"
	"strconv"
	"strings"

	"eliminant/checks/claim"
	"eliminant/checks/diag"
	"eliminant/checks/formula"
	"eliminant/rational/kinematics"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"
)

// text is an option's value as written; intake reads it with messages of its
// own.
type text struct {
	value, kind string
}

func (t *text) String() string     { return t.value }
func (t *text) Set(s string) error { t.value = s; return nil }
func (t *text) Type() string       { return t.kind }

// option declares an option whose value is described by kind in the help.
func option(f *pflag.FlagSet, name, kind, usage string) {
	f.Var(&text{kind: kind}, name, usage)
}

// intake reads the options and arguments of one command and gathers everything
// wrong with them.
type intake struct {
	p    *program
	cmd  *cobra.Command
	errs diag.List
}

func (p *program) intake(cmd *cobra.Command) *intake { return &intake{p: p, cmd: cmd} }

func (in *intake) fail(code, hint, format string, a ...any) {
	in.errs = append(in.errs, diag.Diagnostic{Code: code, Message: fmt.Sprintf(format, a...), Hint: hint})
}

// err returns everything wrong so far, or nil.
func (in *intake) err() error {
	if len(in.errs) == 0 {
		return nil
	}
	return in.errs
}

// given tells whether an option is given.
func (in *intake) given(name string) bool { return in.cmd.Flags().Changed(name) }

// text returns the value of an option, "" if it is not given.
func (in *intake) text(name string) string {
	if f := in.cmd.Flags().Lookup(name); f != nil {
		return f.Value.String()
	}
	return ""
}

// on tells whether a switch is given.
func (in *intake) on(name string) bool { return in.given(name) }

// whole reads an integer option within limits.
func (in *intake) whole(name string, standard, least, most int) int {
	if !in.given(name) {
		return standard
	}
	n, err := strconv.Atoi(in.text(name))
	if err != nil || n < least || n > most {
		in.fail("option", "", "--%s must be an integer from %d to %d, found %q", name, least, most, short(in.text(name)))
		return standard
	}
	return n
}

// choice reads an option that is one of several words.
func (in *intake) choice(name, standard string, words []string) string {
	if !in.given(name) {
		return standard
	}
	t := in.text(name)
	if !slices.Contains(words, t) {
		hint := ""
		if near := nearest(t, words); near != "" {
			hint = "did you mean " + near + "?"
		}
		in.fail("option", hint, "--%s is one of %s, found %q", name, strings.Join(words, ", "), short(t))
		return standard
	}
	return t
}

// number reads an exact number.
func (in *intake) number(name string) *big.Rat {
	if !in.given(name) {
		return nil
	}
	r, err := kinematics.ParseRational(in.text(name))
	if err != nil {
		in.fail("number", "exact numbers: 2, 7/2, -3/4", "--%s: %v, found %q", name, err, short(in.text(name)))
	}
	return r
}

// seed reads --seed: an integer of any size, in canonical form.
func (in *intake) seed() string {
	if !in.given("seed") {
		return "1"
	}
	t := in.text("seed")
	n, ok := new(big.Int).SetString(t, 10)
	if !ok || len(t) > 1000 {
		in.fail("option", "for instance --seed 20261201", "--seed must be an integer, found %q", short(t))
		return "1"
	}
	return n.String()
}

// jobs reads --jobs.
func (in *intake) jobs() int { return in.whole("jobs", runtime.GOMAXPROCS(0), 1, 1024) }

// ordering reads a list of legs, checked against the number of legs later; nil
// if it is not given.
func (in *intake) ordering(name string) []int {
	if !in.given(name) {
		return nil
	}
	var legs []int
	for _, t := range strings.Split(in.text(name), ",") {
		l, err := strconv.Atoi(strings.TrimSpace(t))
		if err != nil {
			in.fail("option", "for instance --"+name+" 1,3,2,4", "--%s is a list of legs, found %q", name, short(in.text(name)))
			return nil
		}
		legs = append(legs, l)
	}
	sorted := slices.Clone(legs)
	slices.Sort(sorted)
	for i, l := range sorted {
		if l != i+1 {
			in.fail("option", fmt.Sprintf("name every leg 1..%d once", len(legs)), "--%s %s is not a permutation of 1..%d", name, short(in.text(name)), len(legs))
			return nil
		}
	}
	return legs
}

// one expects exactly one positional argument and returns it.
func (in *intake) one(args []string, what, example string) (string, bool) {
	switch {
	case len(args) == 1:
		return args[0], true
	case len(args) == 0:
		in.fail("argument", "for instance "+example, "%s needs %s", in.cmd.Name(), what)
	default:
		in.many(args, "put "+what+" in quotes if it has spaces, for instance "+example, 1)
	}
	return "", false
}

// none expects no positional argument.
func (in *intake) none(args []string) {
	if len(args) > 0 {
		in.many(args, "", 0)
	}
}

// many reports arguments beyond those expected, and options written with a
// single dash.
func (in *intake) many(args []string, hint string, expected int) {
	for _, a := range args {
		name, _, _ := strings.Cut(strings.TrimPrefix(a, "-"), "=")
		if strings.HasPrefix(a, "-") && in.cmd.Flags().Lookup(name) != nil {
			in.fail("argument", "write --"+name, "options have two dashes, found %s", short(a))
			return
		}
	}
	in.fail("argument", hint, "%s takes %d arguments, found %d, the last is %q", in.cmd.Name(), expected, len(args), short(args[len(args)-1]))
}

// formula reads a formula given as text, as @FILE or as - for the standard
// input; nil if it is wrong.
func (in *intake) formula(argument string, integrand bool) *formula.Formula {
	if argument == "-" && in.text("points") == "-" {
		in.fail("argument", "put one of them in a file", "the standard input cannot be both the formula and the points")
		return nil
	}
	o := formula.ParseOptions{Integrand: integrand}
	source := argument
	switch {
	case argument == "-":
		o.File = "<stdin>"
		b, ok := in.readAll(in.p.stdin, o.File)
		if !ok {
			return nil
		}
		source = b
	case strings.HasPrefix(argument, "@"):
		o.File = argument[1:]
		f, err := os.Open(o.File)
		if err != nil {
			in.unreadable(o.File, err)
			return nil
		}
		defer f.Close()
		b, ok := in.readAll(f, o.File)
		if !ok {
			return nil
		}
		source = b
	}
	f, errs := formula.Parse(source, o)
	in.errs = append(in.errs, errs...)
	if len(errs) > 0 {
		return nil
	}
	return f
}

func (in *intake) readAll(r io.Reader, name string) (string, bool) {
	b, err := io.ReadAll(io.LimitReader(r, formula.MaxText+1))
	if err != nil {
		in.unreadable(name, err)
		return "", false
	}
	return string(b), true
}

func (in *intake) unreadable(file string, err error) {
	in.errs = append(in.errs, diag.Diagnostic{Code: "unreadable", File: file, Message: plain(err), Hint: "give the path of a file that can be read"})
}

// plain drops the operation and the path from an error of the file system: the
// file is named anyway.
func plain(err error) string {
	var path *os.PathError
	if asError(err, &path) {
		return path.Err.Error()
	}
	return err.Error()
}

// points reads a points file, or the standard input for "-".
func (in *intake) points(name string) []*kinematics.Point {
	var points []*kinematics.Point
	var err error
	if name == "-" {
		points, err = kinematics.ReadPoints(in.p.stdin, "<stdin>")
	} else {
		points, err = kinematics.ReadPointsFile(name)
	}
	if err != nil {
		in.errs = append(in.errs, claim.PointDiagnostics(err, "", 0, 0, "")...)
	}
	return points
}

// pointFaults turns errors of points that came from no file into diagnostics.
func pointFaults(errs kinematics.InputErrors) diag.List {
	return claim.PointDiagnostics(errs, "", 0, 0, "")
}
