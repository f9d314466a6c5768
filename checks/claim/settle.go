package claim

import (
	"context"
	"errors"
	"fmt"
	"time"

	"eliminant/checks/diag"
	"eliminant/rational/kinematics"

	"golang.org/x/sync/errgroup"
)

// Verdict is one of the three answers to a claim.
type Verdict string

// The verdicts.
const (
	Certified Verdict = "certified"
	Refuted   Verdict = "refuted"
	Undecided Verdict = "undecided"
)

// Options of Settle; the zero value works.
type Options struct {
	Jobs     int                                // claims settled at the same time, 0 means 1; never changes the report
	Progress func(done, total int, name string) // called as claims finish, one call at a time
}

// Report is what became of the claims of a file, in their order.
type Report struct {
	Title   string
	Claims  []Result
	Summary Summary
}

// Summary counts verdicts.
type Summary struct{ Certified, Refuted, Undecided int }

// Result is the verdict on one claim and why it can be trusted.
type Result struct {
	Name            string
	Kind            string
	Verdict         Verdict
	FalseAcceptance string // "2^-118", or "0" for exact evaluation at given points; "" if undecided
	Rounds          int    // random points (or given points) evaluated
	Reason          string
	Routes          []string // the fastest first, then the witness
	Counterexample  *Counterexample
	Elapsed         time.Duration
}

// Counterexample is an exact point at which the two sides of a claim differ.
type Counterexample struct {
	Point    *kinematics.Point
	Formulas [2]string
	Sides    [2]string // exact values
	Ratio    string    // left over right; "" where the right side is zero
}

// Settle settles every claim of a file. Claims run Jobs at a time; the report
// does not depend on it. Errors: diag.List for claims that turn out to make no
// sense (a divisor that vanishes identically), *diag.Internal where two routes
// disagree, and a cancelled context, with the report of the claims finished by
// then (Verdict "" marks the others).
func Settle(ctx context.Context, file *File, o Options) (*Report, error) {
	results := make([]Result, len(file.Claims))
	faults := make([]error, len(file.Claims))
	g, inner := errgroup.WithContext(ctx)
	g.SetLimit(max(1, o.Jobs))
	finished := make(chan int, len(file.Claims))
	reported := make(chan struct{})
	go func() {
		defer close(reported)
		done := 0
		for i := range finished {
			done++
			if o.Progress != nil {
				o.Progress(done, len(file.Claims), file.Claims[i].Name)
			}
		}
	}()
	for i := range file.Claims {
		g.Go(func() error {
			if inner.Err() != nil {
				return context.Cause(inner)
			}
			start := time.Now()
			r, err := settle(inner, file, &file.Claims[i])
			if err != nil {
				faults[i] = err
				var list diag.List
				var fault *diag.Internal
				if errors.As(err, &list) || errors.As(err, &fault) {
					return nil // the other claims still run: all faults are shown together
				}
				return err
			}
			r.Elapsed = time.Since(start)
			results[i] = *r
			finished <- i
			return nil
		})
	}
	stopped := g.Wait()
	close(finished)
	<-reported
	report := &Report{Title: file.Title, Claims: results}
	var list diag.List
	for i, err := range faults {
		var internal *diag.Internal
		if errors.As(err, &internal) {
			return report, err
		}
		var l diag.List
		if errors.As(err, &l) {
			list = append(list, l...)
		}
		if report.Claims[i].Name == "" {
			report.Claims[i].Name = file.Claims[i].Name
			report.Claims[i].Kind = file.Claims[i].Kind
		}
	}
	if len(list) > 0 {
		return report, list
	}
	for _, r := range results {
		switch r.Verdict {
		case Certified:
			report.Summary.Certified++
		case Refuted:
			report.Summary.Refuted++
		case Undecided:
			report.Summary.Undecided++
		}
	}
	return report, stopped
}

// settle settles one claim.
func settle(ctx context.Context, file *File, c *Claim) (*Result, error) {
	t, err := newTest(file, c)
	if err != nil {
		return nil, err
	}
	if c.Points != nil {
		return t.atPoints(ctx)
	}
	return t.everywhere(ctx)
}

// undecided is the result of a test that ran into its limits.
func (t *test) undecided(format string, a ...any) *Result {
	return &Result{Name: t.claim.Name, Kind: t.claim.Kind, Verdict: Undecided, Reason: fmt.Sprintf(format, a...), Routes: t.routeNames()}
}
