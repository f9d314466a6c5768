// Package residue sums rational integrands over the solutions of the
// scattering equations, exactly: the integrand is evaluated in the algebra of
// the solutions modulo primes, and the sum is a trace. Heights of the
// punctures as algebraic numbers give the number of primes that proves the
// rational value.
package residue

import (
	"context"
	"errors"
	"fmt"
	"math/big"

	"eliminant/checks/amplitude"
	"eliminant/checks/diag"
	"eliminant/checks/formula"
	"eliminant/rational/kinematics"
	"eliminant/rational/lift"
	"eliminant/rational/prime"
	"eliminant/rational/scattering"
	"eliminant/resultant"
)

// Options of ComputeResidue; the zero value works.
type Options struct {
	Ordering []int      // with masses: the ordering the matrix is shifted along; nil is 1..n
	Workers  int        // primes evaluated at the same time; never changes the result
	Proof    lift.Proof // lift.Agreement stops when further primes agree, and says so
	Progress func(done, total int)
}

// Result is a residue sum with its proof.
type Result struct {
	Value  *big.Rat
	Proof  lift.Proof
	Primes int
}

// primeBudget is how many primes a default computation may take: about a
// minute of one core at most.
func primeBudget(n int) int {
	budget := map[int]int{4: 200000, 5: 200000, 6: 100000, 7: 60000, 8: 20000, 9: 600, 10: 12}
	return budget[n]
}

// MaxLegs is the range of residue sums.
const MaxLegs = 10

// ComputeResidue returns the sum over the (n-3)! solutions of an integrand
// (formula.ParseOptions.Integrand) at a point.
//
// An integrand without bare punctures and J must be Moebius invariant: weight 0
// in every leg. With them the gauge is z_1 = infinity, z_2 = 1, z_n = 0.
//
// Errors: diag.List for an integrand that does not fit (weights, legs, masses),
// *diag.Undecided for degenerate points, an integrand with a pole on a
// solution, or a proof beyond the budget; a cancelled context.
func ComputeResidue(ctx context.Context, f *formula.Formula, v *kinematics.Invariants, o Options) (*Result, error) {
	n := v.Legs()
	if n > MaxLegs {
		return nil, diag.List{{Code: "range", Message: fmt.Sprintf("residue sums reach %d legs, the point has %d", MaxLegs, n)}}
	}
	if errs := check(ctx, f, v); len(errs) > 0 {
		return nil, errs
	}
	if r, coefficient, ok := biAdjoint(f, n); ok && v.Massless() && o.Proof != lift.Agreement {
		return viaAmplitude(ctx, r, coefficient, v, o)
	}
	data, err := matrix(v, o.Ordering)
	if err != nil {
		return nil, err
	}
	if c := data.Vanishing(); len(c) > 0 {
		return nil, &diag.Undecided{Reason: fmt.Sprintf("%s = 0: solutions of the scattering equations coincide or escape", c[0]), Invariant: c[0].String()}
	}
	t := &trace{f: f, n: n, data: data, point: v}
	if err := t.choose(ctx); err != nil {
		return nil, err
	}
	lo := lift.Options{Workers: o.Workers, Proof: o.Proof, Progress: o.Progress, MaxPrimes: primeBudget(n)}
	var num, den *big.Int
	if o.Proof != lift.Agreement {
		if num, den, err = t.bounds(ctx); err != nil {
			return nil, err
		}
	}
	x, record, err := lift.Rationals(ctx, 1, num, den, t.kernel, lo)
	var budget *lift.BudgetError
	if errors.As(err, &budget) {
		return nil, &diag.Undecided{Reason: fmt.Sprintf("a proof takes %d primes, the budget is %d; --proof agreement gives a value that further primes agree on", budget.Needed, budget.Allowed)}
	}
	if err != nil {
		return nil, err
	}
	return &Result{Value: x[0], Proof: record.Proof, Primes: len(record.Primes)}, nil
}

// matrix returns the data of the scattering equations at a point.
func matrix(v *kinematics.Invariants, ordering []int) (*scattering.Data, error) {
	if v.Massless() {
		return scattering.FromInvariants(v)
	}
	if ordering == nil {
		for a := 1; a <= v.Legs(); a++ {
			ordering = append(ordering, a)
		}
	}
	d, err := scattering.Shifted(v, ordering)
	if err != nil {
		return nil, diag.List{{Code: "masses", Message: err.Error(), Hint: "the scattering equations of massive legs need one common mass"}}
	}
	return d, nil
}

// check refuses integrands that make no sense for the legs of a point.
func check(ctx context.Context, f *formula.Formula, v *kinematics.Invariants) diag.List {
	n := v.Legs()
	var errs diag.List
	fail := func(at formula.Span, code, hint, format string, a ...any) {
		errs = append(errs, diag.Diagnostic{Code: code, File: at.File, Line: at.Line, Column: at.Column, Message: fmt.Sprintf(format, a...), Hint: hint})
	}
	if m, _ := f.Legs(); m > n {
		fail(f.Root.Span(), "legs", "", "the integrand names leg %d, the point has %d legs", m, n)
		return errs
	}
	bare := f.Bare()
	f.Walk(func(node formula.Node) {
		switch node := node.(type) {
		case *formula.Amplitude:
			fail(node.Span(), "integrand", "write PT(1,2,3,4) PT(1,2,3,4)/detPhi", "integrands have no amplitudes")
		case *formula.Puncture:
			if node.Leg == 1 {
				fail(node.Span(), "gauge", "z_1 is at infinity", "z1 has no value in the gauge z1 = infinity, z2 = 1, z%d = 0", n)
			}
		case *formula.Difference:
			if bare && (node.A == 1 || node.B == 1) {
				fail(node.Span(), "gauge", "z_1 is at infinity once a bare z or J fixes the gauge", "%s has no value in the gauge z1 = infinity, z2 = 1, z%d = 0", node, n)
			}
		}
	})
	if len(errs) > 0 {
		return errs
	}
	if zero := identicallyZero(ctx, f, n, v.Massless()); zero != nil {
		fail(zero.At, "division-by-zero", "correct the divisor", "the integrand divides by %s, which is identically zero", zero.Text)
		return errs
	}
	if bare {
		return errs
	}
	d := &weightDomain{legs: n}
	w, err := formula.Evaluate(ctx, f, n, d)
	var zero *formula.DivisionByZero
	switch {
	case errors.As(err, &zero):
		fail(zero.At, "division-by-zero", "correct the divisor", "the integrand divides by %s, which is zero", zero.Text)
	case err != nil:
		fail(f.Root.Span(), "integrand", "", "%v", err)
	case d.fault != nil:
		fail(f.Root.Span(), "weight", "every leg needs the same weight in all terms", "%v", d.fault)
	case !w.zero:
		for l := 1; l <= n; l++ {
			if w.w[l] != 0 {
				fail(f.Root.Span(), "weight", "PT counts 2 in its legs, z(a,b) -1 in both, detPhi 4 in every leg; a bare z3 or J fixes the gauge instead", "%v", &WeightError{Leg: l, Weight: w.w[l]})
			}
		}
	}
	return errs
}

// trace evaluates one integrand at one point.
type trace struct {
	f     *formula.Formula
	n     int
	data  *scattering.Data
	point *kinematics.Invariants
	order []int // roles, with a hidden leg that separates the solutions
}

// tries is how many primes are looked at before a failure counts as one of the
// integrand or the point.
const tries = 3

// choose finds a hidden variable that separates the solutions, and checks that
// the integrand is defined on all of them.
func (t *trace) choose(ctx context.Context) error {
	var last error
	for hidden := 3; hidden < t.n; hidden++ {
		t.order = []int{1, 2, hidden}
		for l := 3; l <= t.n; l++ {
			if l != hidden {
				t.order = append(t.order, l)
			}
		}
		for i := range tries {
			_, last = t.at(ctx, prime.TableField(i))
			if last == nil || !errors.Is(last, prime.ErrBadPrime) {
				break
			}
		}
		var zero *formula.DivisionByZero
		switch {
		case last == nil:
			return nil
		case errors.As(last, &zero):
			return &diag.Undecided{Reason: fmt.Sprintf("the integrand has a pole on a solution: %s vanishes there", zero.Text), Invariant: zero.Text}
		case ctx.Err() != nil:
			return context.Cause(ctx)
		}
	}
	return &diag.Undecided{Reason: "no puncture takes different values on all solutions: " + last.Error()}
}

// kernel is the residue sum modulo a prime.
func (t *trace) kernel(ctx context.Context, f *prime.Field, out []prime.Element) error {
	v, err := t.at(ctx, f)
	var zero *formula.DivisionByZero
	if errors.As(err, &zero) {
		err = fmt.Errorf("%w: %v", prime.ErrBadPrime, err)
	}
	out[0] = v
	return err
}

func (t *trace) at(ctx context.Context, f *prime.Field) (prime.Element, error) {
	s, err := t.data.Reduce(f)
	if err != nil {
		return 0, err
	}
	point, err := t.point.Reduce(f)
	if err != nil {
		return 0, err
	}
	pencil, err := resultant.NewPencil(f, t.n, s, t.order)
	if err != nil {
		return 0, fmt.Errorf("%w: %v", prime.ErrBadPrime, err)
	}
	rep, err := resultant.ComputeRepresentation(ctx, pencil, resultant.Options{})
	var separate *resultant.NotSeparatingError
	if errors.As(err, &separate) {
		return 0, fmt.Errorf("%w: %v", prime.ErrBadPrime, err)
	}
	if err != nil {
		return 0, err
	}
	if !rep.Separable() {
		return 0, fmt.Errorf("%w: multiple roots", prime.ErrBadPrime)
	}
	q, err := newQuotient(point, rep)
	if err != nil {
		return 0, err
	}
	x, err := formula.Evaluate(ctx, t.f, t.n, q)
	if err != nil {
		return 0, err
	}
	return q.sum(x)
}

// bounds returns proven bounds for the numerator and denominator of the sum.
func (t *trace) bounds(ctx context.Context) (num, den *big.Int, err error) {
	h, err := resultant.NewHeights(t.data)
	if err != nil {
		return nil, nil, err
	}
	size := 1
	for k := 2; k <= t.n-3; k++ {
		size *= k
	}
	x, err := formula.Evaluate(ctx, t.f, t.n, &heightDomain{h, t.point, t.n, size, t.order[2]})
	if err != nil {
		return nil, nil, err
	}
	num, den = h.ResidueBounds(x.h)
	return num, den, nil
}

// biAdjoint recognises c PT(a) PT(b)/detPhi with two orderings of all legs, the
// integrand of BS(a|b), whose poles are known.
func biAdjoint(f *formula.Formula, n int) (amplitude.Request, *big.Rat, bool) {
	c := big.NewRat(1, 1)
	var orderings [][]int
	determinants := 0
	var take func(node formula.Node, e int) bool
	take = func(node formula.Node, e int) bool {
		switch node := node.(type) {
		case *formula.Number:
			if node.Value.Sign() == 0 {
				return false
			}
			for range max(e, -e) {
				if e > 0 {
					c.Mul(c, node.Value)
				} else {
					c.Quo(c, node.Value)
				}
			}
			return true
		case *formula.Minus:
			if e%2 != 0 {
				c.Neg(c)
			}
			return take(node.X, e)
		case *formula.Binary:
			switch node.Op {
			case '*':
				return take(node.L, e) && take(node.R, e)
			case '/':
				return take(node.L, e) && take(node.R, -e)
			}
		case *formula.Power:
			return max(node.Exponent, -node.Exponent) <= 2 && take(node.Base, e*node.Exponent)
		case *formula.ParkeTaylor:
			if e < 1 || e > 2 || len(node.Ordering) != n {
				return false
			}
			for range e {
				orderings = append(orderings, node.Ordering)
			}
			return true
		case *formula.ReducedDeterminant:
			determinants += e
			return true
		}
		return false
	}
	if !take(f.Root, 1) || len(orderings) != 2 || determinants != -1 {
		return amplitude.Request{}, nil, false
	}
	r := amplitude.Request{Theory: amplitude.BiAdjoint, Orderings: orderings}
	return r, c, r.Validate() == nil
}

// viaAmplitude computes the sum of c PT PT/detPhi by elimination, with the
// bound of the amplitude.
func viaAmplitude(ctx context.Context, r amplitude.Request, c *big.Rat, v *kinematics.Invariants, o Options) (*Result, error) {
	x, err := amplitude.ComputeValue(ctx, r, v, amplitude.Elimination, amplitude.Options{Workers: o.Workers, Progress: o.Progress})
	var pole *amplitude.PoleError
	var degenerate *amplitude.DegenerateError
	switch {
	case errors.As(err, &pole):
		return nil, &diag.Undecided{Reason: pole.Error(), Invariant: pole.Invariant}
	case errors.As(err, &degenerate):
		return nil, &diag.Undecided{Reason: degenerate.Error(), Invariant: degenerate.Invariant}
	case err != nil:
		return nil, err
	}
	return &Result{Value: x.Value.Mul(x.Value, c), Proof: x.Proof, Primes: len(x.Record.Primes)}, nil
}
