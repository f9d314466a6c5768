package main

import (
	"context"
	"encoding/json"
	"fmt"
	"slices"
	"strings"

	"eliminant/checks/amplitude"
	"eliminant/checks/claim"
	"eliminant/checks/diag"
	"eliminant/checks/formula"
	"eliminant/checks/report"
	"eliminant/rational/kinematics"

	"github.com/spf13/cobra"
)

// maxDigits bounds --digits.
const maxDigits = 10000

func (p *program) valueCommand() *cobra.Command {
	c := &cobra.Command{
		Use:   "value FORMULA",
		Short: "Compute the exact value of a formula, by one or several routes",
		Long: `Compute the exact value of a formula at exact points, its amplitudes by the
fastest route, by the routes named, or by all routes that reach it.

FORMULA is the formula, @FILE, or - for stdin. Without --points the points are
drawn. Exit code 3 if no route gives a value (a pole, degenerate kinematics),
4 if two routes disagree.

Routes: recursion (off-shell currents), diagrams (enumeration), elimination
(the scattering equations through a resultant), series (continuation of the
solutions from a solved point), groebner (elimination through a Groebner basis),
formula (no amplitude in the formula).`,
		Example: `  eliminant value 'BS(1,2,3,4|1,3,2,4)'
  eliminant value 'phi3(1,2,3,4,5) - BS(1,2,3,4,5|1,2,3,4,5)' --all-routes --seed 7
  eliminant value -s12 --legs 5 --digits 30
  eliminant point --legs 4 --kind invariants | eliminant value 's12+s13+s23' --points - --json`,
		RunE: func(cmd *cobra.Command, args []string) error { return p.value(cmd.Context(), p.intake(cmd), args) },
	}
	option(c.Flags(), "route", "R,...", "routes to take: "+strings.Join(routeNames(), ", "))
	c.Flags().Bool("all-routes", false, "take every route that reaches the formula")
	option(c.Flags(), "digits", "D", fmt.Sprintf("significant digits of decimals (default %d)", report.DefaultDigits))
	pointOptions(c.Flags())
	return c
}

// routeNames lists the routes that can be asked for.
func routeNames() []string {
	var names []string
	for _, r := range amplitude.Routes() {
		names = append(names, string(r))
	}
	return append(names, claim.FormulaRoute)
}

// routes reads --route.
func (in *intake) routes() []string {
	if !in.given("route") {
		return nil
	}
	if in.on("all-routes") {
		in.fail("option", "leave one of them out", "--route and --all-routes exclude each other")
	}
	var routes []string
	for _, r := range strings.Split(in.text("route"), ",") {
		r = strings.TrimSpace(r)
		switch {
		case !slices.Contains(routeNames(), r):
			hint := "routes: " + strings.Join(routeNames(), ", ")
			if near := nearest(r, routeNames()); near != "" {
				hint = "did you mean " + near + "? " + hint
			}
			in.fail("route", hint, "unknown route %q", short(r))
		case slices.Contains(routes, r):
			in.fail("route", "name it once", "route %s is named twice", r)
		default:
			routes = append(routes, r)
		}
	}
	return routes
}

// legs returns the number of legs read off a formula and whether it is exactly
// that; 0 if the formula does not tell.
func legs(f *formula.Formula) (n int, exact bool) {
	n, exact = f.Legs()
	if exact {
		return n, true
	}
	f.Walk(func(node formula.Node) {
		if _, sum := node.(*formula.Cyclic); sum {
			n = 0 // the sum runs over all legs, however many there are
		}
	})
	return n, false
}

// value evaluates a formula at points.
func (p *program) value(ctx context.Context, in *intake, args []string) error {
	options := claim.ValueOptions{Routes: in.routes(), AllRoutes: in.on("all-routes"), Workers: in.jobs()}
	digits := in.whole("digits", report.DefaultDigits, 1, maxDigits)
	d := in.drawing()
	var f *formula.Formula
	if argument, ok := in.one(args, "a formula", "eliminant value 'BS(1,2,3,4|1,3,2,4)'"); ok {
		f = in.formula(argument, false)
	}
	if f == nil {
		if in.given("points") && d.file != "-" {
			in.points(d.file) // its errors belong in the list
		}
		return in.err()
	}
	n, exact := legs(f)
	points, err := in.resolve(ctx, d, atLeastFour(f, n), exact)
	if err != nil {
		return err
	}
	out := &report.Value{Formula: f.Text, Decimals: in.given("digits"), Digits: digits}
	code := exitDone
	g := p.progress()
	defer g.stop()
	for i, q := range points {
		options.Progress = func(done, total int, what string) {
			g.update(done, total, fmt.Sprintf("%s, point %d of %d, %s", f.Text[:min(len(f.Text), 30)], i+1, len(points), what))
		}
		v, err := claim.ComputeValue(ctx, f, q, options)
		var undecided *diag.Undecided
		switch {
		case err != nil && ctx.Err() != nil:
			g.stop()
			return p.interrupted(out, digits, len(out.Values), len(points), "points")
		case asError(err, &undecided) && v != nil:
			code = exitUndecided
		case err != nil:
			return err
		case !v.Agree:
			return disagreement(f, q, v)
		case v.Value == nil:
			code = exitUndecided
		}
		out.Values = append(out.Values, v)
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

// atLeastFour is the number of legs of a formula without amplitudes: the
// largest leg it names, at least the least number of legs there is.
func atLeastFour(f *formula.Formula, n int) int {
	if n > 0 {
		return max(n, kinematics.MinLegs)
	}
	if largest, _ := f.Legs(); largest > 0 {
		return 0 // cyclic sums
	}
	return kinematics.MinLegs // numbers only
}

// interrupted writes what was finished and says what was kept.
func (p *program) interrupted(d report.Document, digits, finished, total int, what string) error {
	if finished == 0 {
		return context.Canceled
	}
	if err := p.show(d, digits); err != nil {
		return err
	}
	p.note("interrupted: %d of %d %s were finished, they are printed", finished, total, what)
	return exit(exitInterrupted)
}

// disagreement is the internal failure of two routes with different values.
func disagreement(f *formula.Formula, q *kinematics.Point, v *claim.PointValue) error {
	detail := map[string]string{"formula": f.String()}
	if b, err := json.Marshal(q); err == nil {
		detail["point"] = string(b)
	}
	for _, r := range v.Routes {
		if r.Value != nil {
			detail["route "+r.Route] = r.Value.RatString()
		}
	}
	return &diag.Internal{Message: fmt.Sprintf("routes disagree on %s at point %s", f.Text, q.Label), Detail: detail}
}
