package claim

import (
	"context"
	"errors"
	"fmt"
	"math/big"
	"slices"

	"eliminant/checks/amplitude"
	"eliminant/checks/diag"
	"eliminant/checks/formula"
	"eliminant/rational/kinematics"
	"eliminant/rational/prime"
	"eliminant/rational/scattering"
	"eliminant/resultant"
)

// engine evaluates formulas of a fixed number of legs: amplitudes by kernels
// that are worked out once.
type engine struct {
	legs     int
	requests []amplitude.Request // every amplitude that occurs, relabellings included
	routes   []amplitude.Route   // those that reach all requests, fastest first
	skipped  []amplitude.Skip
	kernels  map[string]amplitude.Kernel // by route and request
}

// newEngine gathers the amplitudes of formulas and the routes that reach all
// of them.
func newEngine(formulas []*formula.Formula, legs int, massive bool) *engine {
	e := &engine{legs: legs, kernels: map[string]amplitude.Kernel{}}
	seen := map[string]bool{}
	collect := formula.LeafDomain(func(n formula.Node) {
		a, ok := n.(*formula.Amplitude)
		if !ok {
			return
		}
		r, err := toRequest(a)
		if err != nil || seen[r.String()] {
			return
		}
		seen[r.String()] = true
		e.requests = append(e.requests, r)
	})
	for _, f := range formulas {
		// every leaf is visited; divisions and sums play no part
		formula.Evaluate(context.Background(), f, legs, collect)
	}
	e.routes = amplitude.Routes()
	for _, r := range e.requests {
		fits, skipped := amplitude.Applicable(r, massive)
		e.routes = slices.DeleteFunc(e.routes, func(x amplitude.Route) bool { return !slices.Contains(fits, x) })
		for _, s := range skipped {
			if !slices.ContainsFunc(e.skipped, func(o amplitude.Skip) bool { return o.Route == s.Route }) {
				e.skipped = append(e.skipped, s)
			}
		}
	}
	if len(e.requests) == 0 {
		e.routes = nil
	}
	return e
}

// toRequest translates an amplitude of a formula.
func toRequest(a *formula.Amplitude) (amplitude.Request, error) {
	r := amplitude.Request{Theory: amplitude.Theory(a.Theory), Braces: a.Braces}
	for _, o := range a.Orderings {
		labels := make([]int, len(o))
		for i, l := range o {
			labels[i] = l.Label
		}
		r.Orderings = append(r.Orderings, labels)
	}
	return r, r.Validate()
}

// kernel returns the kernel of a request, worked out on first use. Not safe
// for concurrent use: every claim has its own engine.
func (e *engine) kernel(r amplitude.Request, route amplitude.Route) (amplitude.Kernel, error) {
	key := string(route) + " " + r.String()
	if k, ok := e.kernels[key]; ok {
		return k, nil
	}
	k, err := amplitude.NewKernel(r, route)
	if err == nil {
		e.kernels[key] = k
	}
	return k, err
}

// modular is the evaluation domain at a point modulo a prime, amplitudes by the
// fastest route, each computed once.
func (e *engine) modular(ctx context.Context, p *kinematics.Reduced) *formula.ModularDomain {
	known := map[string]prime.Element{}
	return formula.NewModularDomain(p, func(a *formula.Amplitude) (prime.Element, error) {
		r, err := toRequest(a)
		if err != nil {
			return 0, err
		}
		key := r.String()
		if v, ok := known[key]; ok {
			return v, nil
		}
		k, err := e.kernel(r, e.routes[0])
		if err != nil {
			return 0, err
		}
		v, err := k(ctx, p)
		if err == nil {
			known[key] = v
		}
		return v, err
	})
}

// witness chooses the second route that the first point is computed by:
// elimination where it is quick, else diagrams.
func (e *engine) witness() (amplitude.Route, bool) {
	order := []amplitude.Route{amplitude.Diagrams, amplitude.Elimination}
	if e.legs <= 7 {
		order = []amplitude.Route{amplitude.Elimination, amplitude.Diagrams}
	}
	for _, w := range order {
		if len(e.routes) > 0 && w != e.routes[0] && slices.Contains(e.routes, w) {
			return w, true
		}
	}
	return "", false
}

// maxWitnesses is how many amplitudes of a claim the second route computes:
// those named first.
const maxWitnesses = 12

// checkWitness compares the fastest route with the witness, amplitude by
// amplitude. Disagreement is a *diag.Internal.
func (e *engine) checkWitness(ctx context.Context, p *kinematics.Reduced) error {
	w, ok := e.witness()
	if !ok {
		return nil
	}
	for _, r := range e.requests[:min(len(e.requests), maxWitnesses)] {
		if err := e.compareKernels(ctx, r, []amplitude.Route{e.routes[0], w}, p); err != nil {
			return err
		}
	}
	return nil
}

// compareKernels evaluates one amplitude by several routes.
func (e *engine) compareKernels(ctx context.Context, r amplitude.Request, routes []amplitude.Route, p *kinematics.Reduced) error {
	var first prime.Element
	for i, route := range routes {
		k, err := e.kernel(r, route)
		if err != nil {
			return err
		}
		v, err := k(ctx, p)
		if err != nil {
			return modularError(err)
		}
		if i == 0 {
			first = v
		} else if v != first {
			return disagreement(r, routes[0], route, map[string]string{
				"prime":            fmt.Sprint(p.Field.Modulus()),
				string(routes[0]):  fmt.Sprint(p.Field.Uint64(first)),
				string(route):      fmt.Sprint(p.Field.Uint64(v)),
				"invariants mod p": invariantsText(p),
			})
		}
	}
	return nil
}

func invariantsText(p *kinematics.Reduced) string {
	out := make([]uint64, len(p.S))
	for i, s := range p.S {
		out[i] = p.Field.Uint64(s)
	}
	return fmt.Sprint(out)
}

func disagreement(r amplitude.Request, a, b amplitude.Route, detail map[string]string) error {
	return &diag.Internal{Message: fmt.Sprintf("routes %s and %s disagree on %s", a, b, r), Detail: detail}
}

// modularError marks failures that another prime or point may avoid.
func modularError(err error) error {
	var degenerate *resultant.DegenerateError
	var separate *resultant.NotSeparatingError
	if errors.As(err, &degenerate) || errors.As(err, &separate) {
		return fmt.Errorf("%w: %v", prime.ErrBadPrime, err)
	}
	return err
}

// anyPrime lists the routes that work modulo any prime: series needs roots of
// unity that only table primes are sure to have.
func (e *engine) anyPrime() []amplitude.Route {
	return slices.DeleteFunc(slices.Clone(e.routes), func(r amplitude.Route) bool { return r == amplitude.Series })
}

// compareSeries compares the fastest route with series at a point modulo a
// table prime, amplitude by amplitude.
func (e *engine) compareSeries(ctx context.Context, p *kinematics.Reduced) error {
	if !slices.Contains(e.routes, amplitude.Series) {
		return nil
	}
	for _, r := range e.requests {
		if err := e.compareKernels(ctx, r, []amplitude.Route{e.routes[0], amplitude.Series}, p); err != nil {
			return err
		}
	}
	return nil
}

// compareRoutes evaluates every amplitude of a formula by all routes
// ("routes"), or its residue sum in several gauges and with several hidden
// variables ("moebius").
func (e *engine) compareRoutes(ctx context.Context, f *formula.Formula, p *kinematics.Reduced, kind string) error {
	for _, r := range e.requests {
		if kind == "routes" {
			if err := e.compareKernels(ctx, r, e.anyPrime(), p); err != nil {
				return err
			}
			continue
		}
		if err := e.compareGauges(ctx, r, p); err != nil {
			return err
		}
	}
	return nil
}

func (e *engine) compareGauges(ctx context.Context, r amplitude.Request, p *kinematics.Reduced) error {
	var first prime.Element
	for i, order := range amplitude.Gauges(r.Legs()) {
		v, err := amplitude.ResidueInGauge(ctx, r, p, order)
		if err != nil {
			return modularError(err)
		}
		if i == 0 {
			first = v
		} else if v != first {
			return &diag.Internal{Message: fmt.Sprintf("the residue sum of %s changes with the gauge", r),
				Detail: map[string]string{"prime": fmt.Sprint(p.Field.Modulus()), "roles": fmt.Sprint(order), "invariants mod p": invariantsText(p)}}
		}
	}
	return nil
}

// regular tells whether every route works at a point: no invariant of the
// equations vanishes.
func (e *engine) regular(p *kinematics.Point) bool {
	v, err := p.Invariants()
	if err != nil {
		return false
	}
	if v.Massless() {
		d, err := scattering.FromInvariants(v)
		return err == nil && len(d.Vanishing()) == 0
	}
	for _, r := range e.requests {
		d, err := scattering.Shifted(v, r.Orderings[0])
		if err != nil || len(d.Vanishing()) > 0 {
			return false
		}
	}
	return true
}

// exact evaluates a formula over Q, amplitudes by the fastest route.
func (e *engine) exact(ctx context.Context, f *formula.Formula, p *kinematics.Point) (*big.Rat, error) {
	var route amplitude.Route
	if len(e.routes) > 0 {
		route = e.routes[0]
	}
	return exactBy(ctx, f, p, route, amplitude.Options{}, nil)
}

// exactBy evaluates a formula over Q by one route. known, if not nil, keeps
// the amplitudes computed.
func exactBy(ctx context.Context, f *formula.Formula, p *kinematics.Point, route amplitude.Route, o amplitude.Options, known map[string]*amplitude.Value) (*big.Rat, error) {
	v, err := p.Invariants()
	if err != nil {
		return nil, err
	}
	if known == nil {
		known = map[string]*amplitude.Value{}
	}
	d := formula.NewRationalDomain(v, func(a *formula.Amplitude) (*big.Rat, error) {
		r, err := toRequest(a)
		if err != nil {
			return nil, err
		}
		key := r.String()
		if x, ok := known[key]; ok {
			return x.Value, nil
		}
		x, err := amplitude.ComputeValue(ctx, r, v, route, o)
		if err != nil {
			return nil, err
		}
		known[key] = x
		return x.Value, nil
	})
	x, err := formula.Evaluate(ctx, f, p.Legs(), d)
	if err != nil {
		return nil, undefinedAt(p, err)
	}
	return x, nil
}

// undefinedAt turns "not defined at this point" into diag.Undecided.
func undefinedAt(p *kinematics.Point, err error) error {
	var pole *amplitude.PoleError
	var degenerate *amplitude.DegenerateError
	var zero *formula.DivisionByZero
	switch {
	case errors.As(err, &pole):
		return &diag.Undecided{Reason: pole.Error(), Invariant: pole.Invariant}
	case errors.As(err, &degenerate):
		return &diag.Undecided{Reason: degenerate.Error(), Invariant: degenerate.Invariant}
	case errors.As(err, &zero):
		return &diag.Undecided{Reason: fmt.Sprintf("the divisor %s vanishes at point %s", zero.Text, p.Label), Invariant: zero.Text}
	}
	return err
}

// checkWitnessExact compares the fastest route with the witness at an exact
// point, where both work.
func (e *engine) checkWitnessExact(ctx context.Context, p *kinematics.Point) error {
	w, ok := e.witness()
	if !ok {
		return nil
	}
	v, err := p.Invariants()
	if err != nil {
		return err
	}
	for _, r := range e.requests[:min(len(e.requests), maxWitnesses)] {
		if err := e.compareValues(ctx, r, v, []amplitude.Route{e.routes[0], w}); err != nil {
			var stuck *amplitude.DegenerateError
			if errors.As(err, &stuck) {
				continue // the first route is proved; the witness cannot speak here
			}
			return undefinedAt(p, err)
		}
	}
	return nil
}

func (e *engine) compareValues(ctx context.Context, r amplitude.Request, v *kinematics.Invariants, routes []amplitude.Route) error {
	var first *amplitude.Value
	for _, route := range routes {
		x, err := amplitude.ComputeValue(ctx, r, v, route, amplitude.Options{})
		if err != nil {
			return err
		}
		if first == nil {
			first = x
		} else if first.Value.Cmp(x.Value) != 0 {
			return disagreement(r, first.Route, route, map[string]string{
				string(first.Route): first.Value.RatString(), string(route): x.Value.RatString()})
		}
	}
	return nil
}

// compareExact is compareRoutes at an exact point.
func (e *engine) compareExact(ctx context.Context, f *formula.Formula, p *kinematics.Point, kind string) error {
	v, err := p.Invariants()
	if err != nil {
		return err
	}
	for _, r := range e.requests {
		if kind == "routes" {
			if err := e.compareValues(ctx, r, v, e.routes); err != nil {
				return undefinedAt(p, err)
			}
			continue
		}
		var first *big.Rat
		for _, order := range amplitude.Gauges(r.Legs()) {
			x, err := amplitude.ComputeValue(ctx, r, v, amplitude.Elimination, amplitude.Options{Gauge: order})
			if err != nil {
				return undefinedAt(p, err)
			}
			if first == nil {
				first = x.Value
			} else if first.Cmp(x.Value) != 0 {
				return &diag.Internal{Message: fmt.Sprintf("the residue sum of %s changes with the gauge", r),
					Detail: map[string]string{"roles": fmt.Sprint(order), "values": first.RatString() + " " + x.Value.RatString()}}
			}
		}
	}
	return nil
}
