package claim

import (
	"context"
	"errors"
	"fmt"
	"math/big"
	"slices"
	"strings"
	"time"

	"eliminant/checks/amplitude"
	"eliminant/checks/diag"
	"eliminant/checks/formula"
	"eliminant/rational/kinematics"
	"eliminant/rational/prime"
)

// ValueOptions chooses the routes of ComputeValue; the zero value takes the
// fastest.
type ValueOptions struct {
	Routes    []string // exactly these; one that does not apply is an input error
	AllRoutes bool     // all within their documented range
	Workers   int
	Progress  func(done, total int, what string)
}

// PointValue is the value of a formula at one point by every route run.
type PointValue struct {
	Point   string
	Value   *big.Rat // nil if no route gave one
	Routes  []RouteValue
	Skipped []Skip
	Agree   bool // all values that there are are equal
}

// RouteValue is what one route gave; a nil Value comes with the Reason.
type RouteValue struct {
	Route   string
	Value   *big.Rat
	Proof   string // "bound" or "agreement"
	Reason  string
	Elapsed time.Duration
}

// Skip says why a route was not run.
type Skip struct{ Route, Reason string }

// FormulaRoute is the route of formulas without amplitudes.
const FormulaRoute = "formula"

// ComputeValue evaluates a formula exactly at a point.
//
// Errors: diag.List for a route that does not apply, a formula that does not
// fit the point, a divisor that vanishes identically; *diag.Undecided where the
// formula is not defined at this point. A route stopped by degenerate data, or
// no route at all giving a value, is no error: see Value and Reason. Routes
// that disagree are no error either: see Agree.
func ComputeValue(ctx context.Context, f *formula.Formula, p *kinematics.Point, o ValueOptions) (*PointValue, error) {
	v, err := p.Invariants()
	if err != nil {
		return nil, PointDiagnostics(err, p.Label, 0, 0, "")
	}
	if n, tells := f.Legs(); tells && n != p.Legs() || n > p.Legs() {
		return nil, diag.List{{Code: "legs", Message: fmt.Sprintf("the formula has %d legs, point %s has %d", n, p.Label, p.Legs()),
			Hint: "give points with as many legs as the amplitudes name"}}
	}
	e := newEngine([]*formula.Formula{f}, p.Legs(), !v.Massless())
	out := &PointValue{Point: p.Label}
	routes, err := chooseRoutes(e, o, out)
	if err != nil {
		return nil, err
	}
	var undefined error
	for _, route := range routes {
		start := time.Now()
		known := map[string]*amplitude.Value{}
		ao := amplitude.Options{Workers: o.Workers}
		if o.Progress != nil {
			ao.Progress = func(done, total int) { o.Progress(done, total, route) }
		}
		x, err := exactBy(ctx, f, p, amplitude.Route(route), ao, known)
		rv := RouteValue{Route: route, Value: x, Proof: "bound"}
		var stuck *diag.Undecided
		switch {
		case errors.As(err, &stuck):
			rv.Proof, rv.Reason = "", stuck.Reason
			undefined = err
		case err != nil:
			return nil, inputError(err, diag.Diagnostic{}, "")
		}
		for _, a := range known {
			if a.Proof != "bound" {
				rv.Proof = string(a.Proof)
			}
		}
		rv.Elapsed = time.Since(start)
		out.Routes = append(out.Routes, rv)
	}
	out.Agree = true
	for _, r := range out.Routes {
		switch {
		case r.Value == nil:
		case out.Value == nil:
			out.Value = r.Value
		case out.Value.Cmp(r.Value) != 0:
			out.Agree = false
		}
	}
	if out.Value == nil && undefined != nil {
		return out, e.explain(ctx, f, undefined, !v.Massless())
	}
	return out, nil
}

// chooseRoutes fills in the skipped routes and returns those to run.
func chooseRoutes(e *engine, o ValueOptions, out *PointValue) ([]string, error) {
	if len(e.requests) == 0 {
		for _, r := range o.Routes {
			if r != FormulaRoute {
				return nil, diag.List{{Code: "route", Message: fmt.Sprintf("route %q does not apply: the formula has no amplitude", r), Hint: "routes that apply: formula"}}
			}
		}
		return []string{FormulaRoute}, nil
	}
	var names []string
	for _, r := range e.routes {
		names = append(names, string(r))
	}
	if o.AllRoutes {
		for _, s := range e.skipped {
			out.Skipped = append(out.Skipped, Skip{string(s.Route), s.Reason})
		}
		if len(names) > 0 {
			return names, nil
		}
	}
	if len(o.Routes) == 0 {
		if len(names) == 0 {
			return nil, diag.List{{Code: "range", Message: "no route reaches the formula: " + e.skipped[0].Reason, Hint: "fewer legs"}}
		}
		return names[:1], nil
	}
	var list diag.List
	for _, r := range o.Routes {
		if slices.Contains(names, r) {
			continue
		}
		why := "there is no such route"
		for _, s := range e.skipped {
			if string(s.Route) == r {
				why = s.Reason
			}
		}
		list = append(list, diag.Diagnostic{Code: "route", Message: fmt.Sprintf("route %q does not apply: %s", r, why),
			Hint: "routes that apply: " + strings.Join(names, ", ")})
	}
	if len(list) > 0 {
		return nil, list
	}
	return o.Routes, nil
}

// inputError turns the errors of amplitudes and formulas that the input is to
// blame for into a diagnostic at the given place; others are returned as they
// are.
func inputError(err error, place diag.Diagnostic, prefix string) error {
	var mass *amplitude.MassError
	var request *amplitude.RequestError
	var differ *formula.MassesDiffer
	var size *formula.SizeError
	var leg *formula.LegError
	switch {
	case errors.As(err, &mass):
		place.Code, place.Message = "masses", mass.Error()
		place.Hint = "give all legs the same masses_squared, or a shifted matrix of invariants with zero row sums and no masses"
	case errors.As(err, &differ):
		place.Code, place.Message = "masses", differ.Error()
	case errors.As(err, &request):
		place.Code, place.Message, place.Hint = "amplitude", request.Error(), request.Hint
	case errors.As(err, &size):
		place.Code, place.Message = "too-large", size.Error()
	case errors.As(err, &leg):
		place.Code, place.Message = "leg", leg.Error()
	default:
		return err
	}
	place.Message = prefix + place.Message
	return diag.List{place}
}

// explain refines "not defined at this point": a divisor that vanishes at
// random points too is an error of the formula.
func (e *engine) explain(ctx context.Context, f *formula.Formula, undefined error, massive bool) error {
	src := prime.NewSource("divisor", f.String())
	c := coordinates{e.legs, Masses{Free: massive}}
	var zero *formula.DivisionByZero
	for range maxRedraws {
		field := src.Field()
		point, err := c.reduced(field, c.draw(src))
		if err == nil {
			_, err = formula.Evaluate(ctx, f, e.legs, e.modular(ctx, point))
		}
		if !errors.As(err, &zero) {
			return undefined
		}
	}
	return diag.List{{Code: "division-by-zero", Message: fmt.Sprintf("the formula divides by %s, which is identically zero", zero.Text), Hint: "correct the divisor"}}
}
