package claim

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/big"
	"slices"
	"strconv"

	"eliminant/checks/amplitude"
	"eliminant/checks/diag"
	"eliminant/checks/formula"
	"eliminant/rational/kinematics"
	"eliminant/rational/prime"
)

// test is a claim made ready for evaluation.
type test struct {
	file       *File
	claim      *Claim
	identities []identity
	engine     *engine
	compare    bool // "routes", "moebius": amplitudes against themselves
}

func newTest(file *File, c *Claim) (*test, error) {
	t := &test{file: file, claim: c}
	massive := c.Masses.Free || c.Masses.Squared != nil
	for _, p := range c.Points {
		v, err := p.Invariants()
		if err != nil {
			return nil, PointDiagnostics(err, p.Label, c.Line, 1, c.File)
		}
		massive = massive || !v.Massless()
	}
	switch c.Kind {
	case "equal":
		t.identities = []identity{{c.Sides[0], c.Sides[1]}}
	case "routes", "moebius":
		t.identities = []identity{{c.Of, c.Of}}
		t.compare = true
	default:
		var err error
		if t.identities, err = relationIdentities(c.Kind, c.Of, massive); err != nil {
			return nil, err
		}
	}
	var formulas []*formula.Formula
	for _, id := range t.identities {
		formulas = append(formulas, id.left, id.right)
	}
	t.engine = newEngine(formulas, c.Legs, massive)
	short := len(t.engine.requests) > 0 && len(t.engine.routes) == 0
	short = short || c.Kind == "routes" && len(t.engine.routes) < 2
	short = short || c.Kind == "moebius" && !slices.Contains(t.engine.routes, amplitude.Elimination)
	if short {
		return nil, diag.List{{Code: "range", File: c.File, Line: c.Line, Column: 1,
			Message: fmt.Sprintf("claim %q: too few routes reach its amplitudes", c.Name), Hint: t.engine.skipped[0].Reason}}
	}
	return t, nil
}

// text is what the random draws of a claim are hashed from, with the seed.
func (t *test) text() string {
	s := t.claim.Kind
	for _, id := range t.identities {
		s += "\n" + id.left.String() + " = " + id.right.String()
	}
	m := "massless"
	switch {
	case t.claim.Masses.Free:
		m = "free mass"
	case t.claim.Masses.Squared != nil:
		m = "mass squared " + t.claim.Masses.Squared.RatString()
	}
	return s + "\nlegs " + strconv.Itoa(t.claim.Legs) + "\n" + m
}

func (t *test) routeNames() []string {
	var out []string
	for _, r := range t.used() {
		out = append(out, string(r))
	}
	if len(out) == 0 {
		out = []string{"formula"}
	}
	return out
}

// used lists the routes that a settled claim has compared.
func (t *test) used() []amplitude.Route {
	switch {
	case len(t.engine.routes) == 0:
		return nil
	case t.claim.Kind == "routes":
		return t.engine.routes
	case t.claim.Kind == "moebius":
		return []amplitude.Route{amplitude.Elimination}
	}
	if w, ok := t.engine.witness(); ok {
		return []amplitude.Route{t.engine.routes[0], w}
	}
	return t.engine.routes[:1]
}

// bound bounds, as a base-2 logarithm, the chance that one round accepts the
// claim though one of its identities is false (formula.Delta states the theorem).
// A draw is discarded where a divisor of any identity vanishes, so the divisors
// of all of them count together.
func (t *test) bound() (float64, error) {
	var all formula.Bound
	for _, id := range t.identities {
		b, err := t.difference(id)
		if err != nil {
			return 0, err
		}
		all.NumeratorDegree = max(all.NumeratorDegree, b.NumeratorDegree)
		all.NumeratorBits = max(all.NumeratorBits, b.NumeratorBits)
		all.DenominatorDegree += b.DenominatorDegree
		all.DenominatorBits += b.DenominatorBits
	}
	return formula.Delta(all), nil
}

// difference bounds the difference of the two sides of an identity.
func (t *test) difference(id identity) (formula.Bound, error) {
	d := formula.NewBoundDomain(t.claim.Legs, t.massKind(), func(a *formula.Amplitude) (formula.Bound, error) {
		r, err := toRequest(a)
		if err != nil {
			return formula.Bound{}, err
		}
		g := amplitude.NewGrowth(r)
		if t.compare {
			g = amplitude.NewResidueGrowth(r.Legs())
		}
		return formula.Bound(g), nil
	})
	left, err := formula.Evaluate(context.Background(), id.left, t.claim.Legs, d)
	if err != nil {
		return left, err
	}
	right, err := formula.Evaluate(context.Background(), id.right, t.claim.Legs, d)
	if err != nil {
		return right, err
	}
	return d.Sub(left, right), nil
}

func (t *test) massKind() formula.Masses {
	switch {
	case t.claim.Masses.Free:
		return formula.Masses{Free: true}
	case t.claim.Masses.Squared != nil:
		return formula.Masses{Squared: t.claim.Masses.Squared}
	}
	return formula.Masses{}
}

// minRoundBits is the least that one round must give. Formulas large enough to
// miss it are undecided.
const minRoundBits = 20

// maxRedraws is how many draws in a row may hit a vanishing divisor. A divisor
// that is not identically zero vanishes at a draw with a chance that the bound
// of a round includes, so below 2^-minRoundBits: this many in a row mean that it
// is identically zero, with chance below 2^-120 of being wrong.
const maxRedraws = 6

// everywhere tests the claim over all kinematics.
func (t *test) everywhere(ctx context.Context) (*Result, error) {
	delta, err := t.bound()
	if err != nil {
		return nil, t.located(err)
	}
	if delta > -minRoundBits {
		return t.undecided("the formula is too large for a bound: one round accepts a false claim with chance up to 2^%.0f", delta), nil
	}
	rounds := max(1, int(math.Ceil(t.file.Bits/-delta)))
	c := coordinates{t.claim.Legs, t.claim.Masses}
	text := t.text()
	for round := range rounds {
		if ctx.Err() != nil {
			return nil, context.Cause(ctx)
		}
		src := prime.NewSource("identity", t.file.Seed, text, strconv.Itoa(round))
		equal, values, err := t.round(ctx, src, c, round == 0)
		if err != nil {
			return nil, err
		}
		if !equal {
			return t.refute(ctx, c, values, round+1)
		}
	}
	return &Result{Name: t.claim.Name, Kind: t.claim.Kind, Verdict: Certified, Rounds: rounds, Routes: t.routeNames(),
		FalseAcceptance: fmt.Sprintf("2^-%d", int(math.Floor(-delta*float64(rounds))))}, nil
}

// round tests every identity at one fresh point modulo one fresh prime. A
// vanishing divisor discards both.
func (t *test) round(ctx context.Context, src *prime.Source, c coordinates, first bool) (equal bool, values []uint64, err error) {
	var last error
	for range maxRedraws {
		f := src.Field()
		values = c.draw(src)
		point, err := c.reduced(f, values)
		if err == nil {
			equal, err = t.sidesAgree(ctx, point, first)
		}
		if err == nil && first && t.claim.Kind == "routes" {
			// series joins at the same integer point, modulo a table prime
			if point, err = c.reduced(prime.TableField(0), values); err == nil {
				err = t.engine.compareSeries(ctx, point)
			}
		}
		if err == nil {
			return equal, values, nil
		}
		var zero *formula.DivisionByZero
		if !errors.Is(err, prime.ErrBadPrime) && !errors.As(err, &zero) {
			return false, nil, t.located(err)
		}
		last = err
	}
	var zero *formula.DivisionByZero
	if errors.As(last, &zero) {
		return false, nil, t.located(last)
	}
	return false, nil, &diag.Internal{Message: fmt.Sprintf("claim %q: no route works at %d random points in a row", t.claim.Name, maxRedraws),
		Detail: map[string]string{"last": last.Error(), "claim": t.text()}}
}

// sidesAgree compares the sides of all identities at a point modulo a prime.
func (t *test) sidesAgree(ctx context.Context, point *kinematics.Reduced, first bool) (bool, error) {
	if t.compare {
		return true, t.engine.compareRoutes(ctx, t.identities[0].left, point, t.claim.Kind)
	}
	if first {
		if err := t.engine.checkWitness(ctx, point); err != nil {
			return false, err
		}
	}
	d := t.engine.modular(ctx, point)
	for _, id := range t.identities {
		left, err := formula.Evaluate(ctx, id.left, t.claim.Legs, d)
		if err != nil {
			return false, err
		}
		right, err := formula.Evaluate(ctx, id.right, t.claim.Legs, d)
		if err != nil {
			return false, err
		}
		if left != right {
			return false, nil
		}
	}
	return true, nil
}

// maxSearch is how many small points are tried before a refutation falls back
// on the large integer point of the round that found the difference.
const maxSearch = 60

// refute looks for an exact point at which the sides differ, small numbers
// first. The values of the refuting round are such a point themselves: the
// sides differ there modulo a prime, so they differ.
func (t *test) refute(ctx context.Context, c coordinates, values []uint64, rounds int) (*Result, error) {
	src := prime.NewSource("counterexample", t.file.Seed, t.text())
	for try := range maxSearch {
		size := uint64(7 + 4*try)
		small := make([]*big.Int, len(values))
		for i := range small {
			small[i] = big.NewInt(int64(1 + src.Below(size)))
			if src.Below(3) == 0 && !(c.masses.Free && i == len(small)-1) {
				small[i].Neg(small[i])
			}
		}
		r, err := t.counterexample(ctx, c, small, true)
		if err != nil {
			return nil, err
		}
		if r != nil {
			r.Rounds = rounds
			return r, nil
		}
	}
	large := make([]*big.Int, len(values))
	for i, v := range values {
		large[i] = new(big.Int).SetUint64(v)
	}
	r, err := t.counterexample(ctx, c, large, false)
	if err != nil {
		return nil, err
	}
	if r == nil {
		return nil, &diag.Internal{Message: fmt.Sprintf("claim %q: the sides differ modulo a prime but agree over the rationals", t.claim.Name),
			Detail: map[string]string{"claim": t.text(), "seed": t.file.Seed}}
	}
	r.Rounds = rounds
	return r, nil
}

// counterexample evaluates the sides at an exact point; nil if they agree or
// are not defined there. regular asks for points at which every route works.
func (t *test) counterexample(ctx context.Context, c coordinates, values []*big.Int, regular bool) (*Result, error) {
	p, err := c.point("counterexample", values)
	if err != nil {
		return nil, nil // the small numbers happen to allow no point
	}
	if regular && !t.engine.regular(p) {
		return nil, nil
	}
	r, err := t.exactAt(ctx, p)
	var undefined *diag.Undecided
	if errors.As(err, &undefined) {
		return nil, nil
	}
	return r, err
}

// exactAt compares the sides exactly at one point and returns a refutation, or
// nil if they agree.
func (t *test) exactAt(ctx context.Context, p *kinematics.Point) (*Result, error) {
	for _, id := range t.identities {
		left, err := t.engine.exact(ctx, id.left, p)
		if err != nil {
			return nil, t.located(err)
		}
		right, err := t.engine.exact(ctx, id.right, p)
		if err != nil {
			return nil, t.located(err)
		}
		if left.Cmp(right) == 0 {
			continue
		}
		x := &Counterexample{Point: p, Formulas: [2]string{id.left.String(), id.right.String()},
			Sides: [2]string{left.RatString(), right.RatString()}}
		if right.Sign() != 0 {
			x.Ratio = new(big.Rat).Quo(left, right).RatString()
		}
		return &Result{Name: t.claim.Name, Kind: t.claim.Kind, Verdict: Refuted, FalseAcceptance: "0",
			Reason: "the two sides differ at an exact point" + t.dimensions(id), Routes: t.routeNames(), Counterexample: x}, nil
	}
	return nil, nil
}

// atPoints tests the claim exactly at the points of its file.
func (t *test) atPoints(ctx context.Context) (*Result, error) {
	for i, p := range t.claim.Points {
		if ctx.Err() != nil {
			return nil, context.Cause(ctx)
		}
		var r *Result
		var err error
		switch {
		case t.compare:
			err = t.engine.compareExact(ctx, t.identities[0].left, p, t.claim.Kind)
		default:
			if i == 0 {
				err = t.engine.checkWitnessExact(ctx, p)
			}
			if err == nil {
				r, err = t.exactAt(ctx, p)
			}
		}
		var stuck *diag.Undecided
		if errors.As(err, &stuck) {
			return t.undecided("at point %s: %s", p.Label, stuck.Reason), nil
		}
		if err != nil {
			return nil, t.located(err)
		}
		if r != nil {
			r.Rounds = i + 1
			return r, nil
		}
	}
	return &Result{Name: t.claim.Name, Kind: t.claim.Kind, Verdict: Certified, FalseAcceptance: "0",
		Rounds: len(t.claim.Points), Routes: t.routeNames()}, nil
}

// located turns errors of evaluation into messages about the claim.
func (t *test) located(err error) error {
	place := diag.Diagnostic{File: t.claim.File, Line: t.claim.Line, Column: 1}
	var zero *formula.DivisionByZero
	if errors.As(err, &zero) {
		place.Code, place.Hint = "division-by-zero", "correct the divisor"
		place.Message = fmt.Sprintf("claim %q divides by %s, which is identically zero", t.claim.Name, zero.Text)
		return diag.List{place}
	}
	return inputError(err, place, fmt.Sprintf("claim %q: ", t.claim.Name))
}

// dimensions explains a refutation by mass dimensions that do not match; "" if
// they do.
func (t *test) dimensions(id identity) string {
	d := &formula.DimensionDomain{}
	left, err := formula.Evaluate(context.Background(), id.left, t.claim.Legs, d)
	if err != nil {
		return ""
	}
	right, err := formula.Evaluate(context.Background(), id.right, t.claim.Legs, d)
	switch {
	case err != nil:
	case d.Mismatch != nil:
		return ": " + d.Mismatch.Error()
	case !left.Any && !right.Any && left.Value != right.Value:
		return fmt.Sprintf(": the sides have mass dimensions %d and %d", left.Value, right.Value)
	}
	return ""
}
