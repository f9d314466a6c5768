package main

import (
	"bytes"
	"context"
	"errors"
	"io"
	"math/big"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strings"
	"sync"
	"syscall"
	"testing"
	"time"

	"eliminant/checks/claim"
	"eliminant/checks/diag"
	"eliminant/checks/formula"
	"eliminant/rational/kinematics"
	"eliminant/rational/kinematics/generate"

	"github.com/stretchr/testify/require"
)

type panicking struct{}

func (panicking) Read([]byte) (int, error) { panic("the reader fell over") }

// A panic is an internal failure with everything needed to report it.
func TestPanicIsAnInternalFailure(t *testing.T) {
	var out, errs bytes.Buffer
	code := run(t.Context(), []string{"value", "-", "--json"}, panicking{}, &out, &errs)
	require.Equal(t, exitInternal, code)
	require.NoError(t, validate(schemaFile("error"), out.Bytes()))
	require.Contains(t, out.String(), "the reader fell over")
	require.Contains(t, out.String(), "failure_test.go")
	require.Contains(t, errs.String(), "please report it")
}

// Routes that disagree end with exit code 4, the point and both values.
func TestDisagreementIsAnInternalFailure(t *testing.T) {
	f, list := formula.Parse("BS(1,2,3,4|1,3,2,4)", formula.ParseOptions{})
	require.Empty(t, list)
	points, err := generate.ComputePoints(t.Context(), 4, 1, generate.Options{Kind: generate.Invariants, Seed: "1"})
	require.NoError(t, err)
	fault := disagreement(f, points[0], &claim.PointValue{Point: "p1", Routes: []claim.RouteValue{
		{Route: "recursion", Value: big.NewRat(1, 2)}, {Route: "elimination", Value: big.NewRat(-1, 2)}, {Route: "groebner", Reason: "s12 = 0"}}})
	var out, errs bytes.Buffer
	p := &program{stdout: &out, stderr: &errs, json: true}
	require.Equal(t, exitInternal, p.fail(t.Context(), fault))
	require.NoError(t, validate(schemaFile("error"), out.Bytes()))
	for _, want := range []string{`"code": "internal"`, `"route recursion": "1/2"`, `"route elimination": "-1/2"`, "invariants", "BS(1,2,3,4|1,3,2,4)"} {
		require.Contains(t, out.String(), want)
	}
	require.NotContains(t, out.String(), "route groebner")
}

// Where several exit codes apply to one error, 4 comes before 2 before 3.
func TestExitCodeOfErrors(t *testing.T) {
	cancelled, cancel := context.WithCancel(context.Background())
	cancel()
	list := diag.List{{Code: "c", Message: "m"}}
	for _, c := range []struct {
		ctx  context.Context
		err  error
		want int
	}{
		{t.Context(), list, exitInput},
		{t.Context(), kinematics.InputErrors{{Code: "c", Message: "m"}}, exitInput},
		{t.Context(), &diag.Undecided{Reason: "r"}, exitUndecided},
		{t.Context(), &diag.Internal{Message: "m"}, exitInternal},
		{t.Context(), errors.Join(list, &diag.Internal{Message: "m"}), exitInternal},
		{t.Context(), errors.Join(&diag.Undecided{Reason: "r"}, list), exitInput},
		{t.Context(), errors.New("what no one expected"), exitInternal},
		{cancelled, context.Canceled, exitInterrupted},
		{cancelled, &diag.Internal{Message: "m"}, exitInternal},
	} {
		p := &program{stdout: io.Discard, stderr: io.Discard}
		require.Equal(t, c.want, p.fail(c.ctx, c.err), "%v", c.err)
	}
}

type full struct{}

func (full) Write([]byte) (int, error) { return 0, syscall.ENOSPC }

func TestFullOutputIsReported(t *testing.T) {
	for _, args := range [][]string{{"point", "--legs", "4"}, {"value", "1/3"}, {"conventions", "--json"}, {}} {
		var errs bytes.Buffer
		require.Equal(t, exitInput, run(t.Context(), args, strings.NewReader(""), full{}, &errs))
		require.Contains(t, errs.String(), "cannot write to the standard output: no space left on device")
	}
}

// An interrupt in the middle of a claims file keeps the verdicts reached.
func TestInterruptKeepsFinishedClaims(t *testing.T) {
	path := file(t, "claims.toml", `
[[claim]]
name = "quick"
equal = ["BS(1,2,3,4|1,3,2,4)", "1/s23"]
[[claim]]
name = "slow"
relation = "routes"
of = "BS(1,2,3,4,5,6,7,8,9,10|1,2,3,4,5,6,7,8,9,10)"
`)
	results := t.TempDir()
	ctx, cancel := context.WithCancel(t.Context())
	var out, errs bytes.Buffer
	p := &program{stdin: strings.NewReader(""), stdout: &out, stderr: &errs, observe: func(done, total int, what string) { cancel() }}
	code := p.run(ctx, []string{"certify", path, "--json", "--jobs", "1", "--out", results})
	require.Equal(t, exitInterrupted, code, errs.String())
	require.NoError(t, validate(schemaFile("verdicts"), out.Bytes()))
	require.Contains(t, out.String(), `"name": "quick"`)
	require.Contains(t, out.String(), `"unfinished": ["slow"]`)
	require.Contains(t, errs.String(), "the verdicts on 1 of 2 claims are kept")
	kept, err := os.ReadFile(filepath.Join(results, "verdicts.json"))
	require.NoError(t, err)
	require.Equal(t, out.String(), string(kept))
}

// An interrupt between points keeps the values of the points before.
func TestInterruptKeepsFinishedValues(t *testing.T) {
	for _, args := range [][]string{
		{"value", "BS(1,2,3,4,5,6,7|1,2,3,4,5,6,7)", "--route", "elimination", "--count", "3", "--jobs", "1", "--json"},
		{"residues", "PT(1,2,3,4,5,6,7) PT(1,2,3,4,5,6,7)/detPhi", "--count", "3", "--jobs", "1", "--json"},
		{"equations", "--legs", "7", "--eliminant", "--count", "3", "--jobs", "1", "--json"},
	} {
		ctx, cancel := context.WithCancel(t.Context())
		last := 0
		var out, errs bytes.Buffer
		p := &program{stdin: strings.NewReader(""), stdout: &out, stderr: &errs, observe: func(done, total int, what string) {
			if done < last { // the second point has begun
				cancel()
			}
			last = done
		}}
		code := p.run(ctx, args)
		require.Equal(t, exitInterrupted, code, errs.String())
		require.NoError(t, validate(schemaFile(args[0]), out.Bytes()), out.String())
		require.Regexp(t, `interrupted: [12] of 3 points were finished, they are printed`, errs.String())
	}
}

// The signal itself: the process is busy once it has read the padding that does
// not fit into a pipe, so the signal finds it at work.
func TestSignalInterrupts(t *testing.T) {
	ordering := "1,2,3,4,5,6,7,8,9,10"
	c := exec.Command("eliminant", "value", "-", "--route", "elimination", "--json")
	stdin, err := c.StdinPipe()
	require.NoError(t, err)
	var out, errs bytes.Buffer
	c.Stdout, c.Stderr = &out, &errs
	require.NoError(t, c.Start())
	_, err = io.WriteString(stdin, strings.Repeat(" ", 1<<20)+"BS("+ordering+"|"+ordering+")")
	require.NoError(t, err)
	require.NoError(t, stdin.Close())
	require.NoError(t, c.Process.Signal(os.Interrupt))
	var failed *exec.ExitError
	require.ErrorAs(t, c.Wait(), &failed)
	require.Equal(t, exitInterrupted, failed.ExitCode(), errs.String())
	require.NoError(t, validate(schemaFile("error"), out.Bytes()), out.String())
	require.Contains(t, errs.String(), "interrupted: nothing was finished")
}

func TestHowToCallTheProgramAgain(t *testing.T) {
	for path, want := range map[string]string{
		"eliminant":                           "eliminant",
		"./eliminant":                         "./eliminant",
		"/home/a b/eliminant":                 "'/home/a b/eliminant'",
		"/tmp/go-build123/b001/exe/eliminant": "go run ./cmd/eliminant",
	} {
		require.Equal(t, want, called(path))
	}
}

// locked is a buffer written by one goroutine and read by another.
type locked struct {
	mu sync.Mutex
	b  bytes.Buffer
}

func (l *locked) Write(p []byte) (int, error) {
	l.mu.Lock()
	defer l.mu.Unlock()
	return l.b.Write(p)
}

func (l *locked) String() string {
	l.mu.Lock()
	defer l.mu.Unlock()
	return l.b.String()
}

func TestProgressBar(t *testing.T) {
	var screen locked
	p := &program{stderr: &screen, terminal: true, patience: time.Hour}
	g := p.progress()
	g.update(1, 10, "primes")
	require.Empty(t, screen.String(), "no bar before the work has lasted")
	g.appear()
	g.update(3, 10, "primes")
	require.Eventually(t, func() bool { return strings.Contains(screen.String(), "primes 3/10") }, time.Minute, time.Millisecond)
	g.update(4, 20, "claims")
	require.Eventually(t, func() bool { return strings.Contains(screen.String(), "claims 4/20") }, time.Minute, time.Millisecond)
	g.stop()
	g.update(5, 20, "late")
	g.stop()
}

func TestProgressAppearsByItself(t *testing.T) {
	var screen locked
	p := &program{stderr: &screen, terminal: true}
	g := p.progress()
	require.Eventually(t, func() bool { return strings.Contains(screen.String(), "working") }, time.Minute, time.Millisecond)
	g.stop()
}

func TestNoProgressWithoutTerminal(t *testing.T) {
	var screen locked
	g := (&program{stderr: &screen}).progress()
	require.Nil(t, g.timer)
	g.update(1, 2, "x")
	g.stop()
	require.Empty(t, screen.String())
}

// The commands printed for a refutation reproduce the two sides.
func TestPrintedCommandsReproduceTheSides(t *testing.T) {
	o := try(t, "", "certify", file(t, "claims.toml", `
[[claim]]
name = "wrong mass, and the point is the user's"
equal = ["BS(1,2,3,4,5|1,3,2,4,5)", "-msq/s23"]
masses_squared = "free"
[[claim]]
name = "wrong relation"
relation = "reflection"
of = "phi3(1,2,3,4,5)"
[[claim]]
name = "starts with a minus sign"
equal = ["-s12", "0-s23"]
legs = 4
`))
	require.Equal(t, exitDiffers, o.code, o.stderr)
	sides := regexp.MustCompile(`(?m)^    (?:left |right)  .* = (\S+)$`).FindAllStringSubmatch(o.stdout, -1)
	commands := regexp.MustCompile(`(?m)^      (echo .*)$`).FindAllStringSubmatch(o.stdout, -1)
	require.NotEmpty(t, sides)
	require.Equal(t, len(sides), len(commands), o.stdout)
	for i, c := range commands {
		out, err := exec.Command("sh", "-c", c[1]).CombinedOutput()
		require.NoError(t, err, "%s", out)
		require.Contains(t, string(out), " = "+sides[i][1]+"\n", c[1])
	}
}
