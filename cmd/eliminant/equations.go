package main

import (
	"context"
	"errors"
	"fmt"
	"strconv"
	"strings"
	"time"

	"eliminant/checks/diag"
	"eliminant/checks/report"
	"eliminant/rational/kinematics"
	"eliminant/rational/scattering"
	"eliminant/resultant"

	"github.com/spf13/cobra"
)

// maxEquationLegs bounds the legs of printed equations: they have 2^(n-2) terms
// together.
const maxEquationLegs = 16

func (p *program) equationsCommand() *cobra.Command {
	c := &cobra.Command{
		Use:   "equations",
		Short: "Print the polynomial scattering equations at exact points",
		Long: `Print the polynomial scattering equations h_1 = ... = h_(n-3) = 0 at exact
points, in the gauge z1 = infinity, z2 = 1, zn = 0, and with --eliminant the
characteristic polynomial of one puncture, of degree (n-3)!.

Exit code 3 if an invariant vanishes, so that solutions coincide or escape. With
masses the invariants are shifted along an ordering, 1,2,...,n unless --ordering
says otherwise.`,
		Example: `  eliminant equations --legs 5
  eliminant equations --legs 5 --eliminant --variable z4
  eliminant point --legs 6 --kind invariants | eliminant equations --points - --eliminant --json`,
		RunE: func(cmd *cobra.Command, args []string) error { return p.equations(cmd.Context(), p.intake(cmd), args) },
	}
	c.Flags().Bool("eliminant", false, "print the characteristic polynomial of a puncture")
	option(c.Flags(), "variable", "Z", "the puncture of the eliminant (default z3)")
	option(c.Flags(), "ordering", "LEGS", "with masses: ordering the invariants are shifted along (default 1,2,...,n)")
	pointOptions(c.Flags())
	return c
}

// variable reads --variable and returns its leg.
func (in *intake) variable() int {
	if !in.given("variable") {
		return 3
	}
	digits, ok := strings.CutPrefix(in.text("variable"), "z")
	leg, err := strconv.Atoi(digits)
	if !ok || err != nil {
		in.fail("option", "for instance --variable z3", "--variable is a puncture, found %q", short(in.text("variable")))
	}
	if !in.on("eliminant") {
		in.fail("option", "add --eliminant", "--variable belongs to --eliminant")
	}
	return leg
}

// equations prints the equations at points.
func (p *program) equations(ctx context.Context, in *intake, args []string) error {
	in.none(args)
	leg := in.variable()
	ordering := in.ordering("ordering")
	options := resultant.Options{Workers: in.jobs()}
	d := in.drawing()
	if err := in.err(); err != nil {
		return err
	}
	points, err := in.resolve(ctx, d, 0, false)
	if err != nil {
		return err
	}
	data := in.matrices(points, leg, ordering)
	if err := in.err(); err != nil {
		return err
	}
	g := p.progress()
	defer g.stop()
	options.Progress = func(done, total int) { g.update(done, total, "primes") }
	out := &report.Equations{Eliminants: in.on("eliminant")}
	code := exitDone
	for i, q := range points {
		e := newEquations(q, data[i], ordering)
		if in.on("eliminant") {
			err := addEliminant(ctx, e, data[i], leg, options)
			var undecided *diag.Undecided
			switch {
			case err != nil && ctx.Err() != nil:
				g.stop()
				return p.interrupted(out, 0, len(out.Points), len(points), "points")
			case asError(err, &undecided):
				e.Reason, code = undecided.Reason, exitUndecided
			case err != nil:
				return err
			}
		}
		out.Points = append(out.Points, *e)
	}
	g.stop()
	if err := p.show(out, 0); err != nil {
		return err
	}
	if code != exitDone {
		return exit(code)
	}
	return nil
}

// matrices returns the data of the equations at every point and checks what
// depends on the number of legs.
func (in *intake) matrices(points []*kinematics.Point, leg int, ordering []int) []*scattering.Data {
	var all []*scattering.Data
	if ordering != nil {
		in.orderingFits(ordering, points)
	}
	for _, q := range points {
		switch n := q.Legs(); {
		case n > maxEquationLegs:
			in.fail("range", "", "equations are printed for up to %d legs, point %s has %d", maxEquationLegs, q.Label, n)
			continue
		case in.on("eliminant") && n > resultant.DefaultMaxLegs:
			in.fail("range", "leave --eliminant out", "eliminants reach %d legs, point %s has %d", resultant.DefaultMaxLegs, q.Label, n)
			continue
		case leg < 3 || leg > n-1:
			in.fail("option", fmt.Sprintf("free punctures: z3 to z%d", n-1), "z%d is not a free puncture of %d legs in the gauge z1 = infinity, z2 = 1, z%d = 0", leg, n, n)
			continue
		case ordering != nil && len(ordering) != n:
			continue
		}
		v, err := q.Invariants()
		if err != nil {
			in.fail("points", "", "point %s: %v", q.Label, err)
			continue
		}
		d, err := matrix(v, ordering)
		if err != nil {
			in.fail("masses", "the scattering equations of massive legs need one common mass", "point %s: %v", q.Label, err)
			continue
		}
		all = append(all, d)
	}
	return all
}

// matrix returns the data of the equations, shifted along an ordering if there
// are masses.
func matrix(v *kinematics.Invariants, ordering []int) (*scattering.Data, error) {
	if v.Massless() {
		return scattering.FromInvariants(v)
	}
	return scattering.Shifted(v, identity(ordering, v.Legs()))
}

func newEquations(q *kinematics.Point, d *scattering.Data, ordering []int) *report.PointEquations {
	e := &report.PointEquations{Point: q.Label, Legs: d.Legs(), Solutions: 1}
	for k := int64(2); k <= int64(d.Legs()-3); k++ {
		e.Solutions *= k
	}
	for _, h := range d.Constraints(scattering.Gauge{}) {
		e.Polynomials = append(e.Polynomials, h.String())
	}
	for _, c := range d.Vanishing() {
		e.Vanishing = append(e.Vanishing, c.String())
	}
	if v, err := q.Invariants(); err == nil && !v.Massless() {
		e.Ordering = identity(ordering, d.Legs())
	}
	return e
}

// addEliminant computes the characteristic polynomial of a puncture. Where an
// invariant vanishes the error is a *diag.Undecided.
func addEliminant(ctx context.Context, e *report.PointEquations, d *scattering.Data, leg int, o resultant.Options) error {
	if len(e.Vanishing) > 0 {
		return &diag.Undecided{Reason: e.Vanishing[0] + " = 0: solutions of the scattering equations coincide or escape", Invariant: e.Vanishing[0]}
	}
	start := time.Now()
	x, err := resultant.ComputeEliminant(ctx, d, leg, o)
	var degenerate *resultant.DegenerateError
	var separate *resultant.NotSeparatingError
	switch {
	case errors.As(err, &degenerate):
		return &diag.Undecided{Reason: degenerate.Error(), Invariant: degenerate.Channel.String()}
	case errors.As(err, &separate):
		return &diag.Undecided{Reason: separate.Error()}
	case err != nil:
		return err
	}
	e.Eliminant = &report.Eliminant{Variable: "z" + strconv.Itoa(leg), Monic: x.Monic, Proof: string(x.Record.Proof),
		Primes: len(x.Record.Primes), Elapsed: time.Since(start)}
	return nil
}
