package main

import (
	"context"
	"time"

	"eliminant/checks/diag"
	"eliminant/checks/formula"
	"eliminant/checks/report"
	"eliminant/checks/residue"
	"eliminant/rational/kinematics"
	"eliminant/rational/lift"

	"github.com/spf13/cobra"
)

func (p *program) residuesCommand() *cobra.Command {
	c := &cobra.Command{
		Use:   "residues INTEGRAND",
		Short: "Sum a rational integrand over the solutions of the scattering equations",
		Long: `Sum a rational integrand in the punctures z_a over the (n-3)! solutions of the
scattering equations, exactly. Nothing is implied: the sum of
PT(1,2,3,4) PT(1,2,3,4)/detPhi is BS(1,2,3,4|1,2,3,4).

An integrand is made of z3, z(3,4) = z3-z4, PT(1,2,3,4), detPhi (reduced
determinant), J = det(dh_m/dz_a), invariants and numbers. A bare z3 or J means
the gauge z1 = infinity, z2 = 1, zn = 0; otherwise every leg must have Moebius
weight 0. INTEGRAND is the integrand, @FILE, or - for stdin.`,
		Example: `  eliminant residues 'PT(1,2,3,4,5) PT(1,3,2,4,5)/detPhi'
  eliminant residues '1/J' --legs 5
  eliminant residues 'z3^2 z4/J' --legs 5 --json`,
		RunE: func(cmd *cobra.Command, args []string) error { return p.residues(cmd.Context(), p.intake(cmd), args) },
	}
	option(c.Flags(), "ordering", "LEGS", "with masses: ordering the invariants are shifted along (default 1,2,...,n)")
	option(c.Flags(), "proof", "PROOF", "bound (proved number of primes, default) or agreement (further primes agree)")
	option(c.Flags(), "digits", "D", "significant digits of decimals (default 17)")
	pointOptions(c.Flags())
	return c
}

// residues sums an integrand at points.
func (p *program) residues(ctx context.Context, in *intake, args []string) error {
	options := residue.Options{Workers: in.jobs(), Ordering: in.ordering("ordering"),
		Proof: lift.Proof(in.choice("proof", string(lift.Bound), []string{string(lift.Bound), string(lift.Agreement)}))}
	digits := in.whole("digits", report.DefaultDigits, 1, maxDigits)
	d := in.drawing()
	var f *formula.Formula
	if argument, ok := in.one(args, "an integrand", "eliminant residues 'PT(1,2,3,4) PT(1,3,2,4)/detPhi'"); ok {
		f = in.formula(argument, true)
	}
	if f == nil {
		if in.given("points") && d.file != "-" {
			in.points(d.file)
		}
		return in.err()
	}
	n, _ := legs(f)
	if f.Bare() && !in.given("points") && d.legs == 0 {
		// punctures left out are legs too, so the integrand does not tell
		n = 0
	}
	points, err := in.resolve(ctx, d, n, false)
	if err != nil {
		return err
	}
	if options.Ordering != nil {
		in.orderingFits(options.Ordering, points)
		if err := in.err(); err != nil {
			return err
		}
	}
	out := &report.Residues{Integrand: f.Text}
	code := exitDone
	g := p.progress()
	defer g.stop()
	options.Progress = func(done, total int) { g.update(done, total, "primes") }
	for _, q := range points {
		start := time.Now()
		v, err := q.Invariants()
		if err != nil {
			return err
		}
		r := report.Residue{Point: q.Label}
		if !v.Massless() {
			r.Ordering = identity(options.Ordering, v.Legs())
		}
		x, err := residue.ComputeResidue(ctx, f, v, options)
		var undecided *diag.Undecided
		switch {
		case err != nil && ctx.Err() != nil:
			g.stop()
			return p.interrupted(out, digits, len(out.Values), len(points), "points")
		case asError(err, &undecided):
			code = exitUndecided
			r.Reason = undecided.Reason
		case err != nil:
			return err
		default:
			r.Value, r.Proof, r.Primes = x.Value, string(x.Proof), x.Primes
		}
		r.Elapsed = time.Since(start)
		out.Values = append(out.Values, r)
	}
	g.stop()
	if err := p.show(out, digits); err != nil {
		return err
	}
	if code != exitDone {
		return exit(code)
	}
	return nil
}

// identity returns the ordering, or 1..n for nil.
func identity(ordering []int, n int) []int {
	if ordering != nil {
		return ordering
	}
	for a := 1; a <= n; a++ {
		ordering = append(ordering, a)
	}
	return ordering
}

// orderingFits checks --ordering against the number of legs.
func (in *intake) orderingFits(ordering []int, points []*kinematics.Point) {
	for _, q := range points {
		if q.Legs() != len(ordering) {
			in.fail("option", "name every leg once", "--ordering names %d legs, point %s has %d", len(ordering), q.Label, q.Legs())
		}
	}
}
