package groebner

import (
	"context"
	"errors"
	"fmt"
)

// Options of ComputeBasis. The zero value computes without limits, by sugar, and
// records no cofactors.
type Options struct {
	Strategy Strategy
	// Cofactors asks for Basis.Cofactors, which prove that every element lies in
	// the ideal. They cost several times the basis itself.
	Cofactors bool
	// MaxBasis bounds the number of elements held before the final reduction, 0
	// means no bound.
	MaxBasis int
	// MaxDegree bounds the total degree of the generators and of the least common
	// multiples of critical pairs that are treated, 0 means no bound. If pairs of
	// higher degree are left at the end, the result is a LimitError.
	MaxDegree int
}

// Statistics counts what a computation did.
type Statistics struct {
	Reductions       int // S-polynomials and generators reduced
	Zero             int // of these, to zero
	Steps            int // monomial multiples subtracted, final reduction not counted
	ProductCriterion int // pairs avoided by coprime leading monomials
	ChainCriterion   int // pairs avoided by the chain criterion
	MaxDegree        int // largest degree of a pair treated
}

// Basis is a finite list of polynomials of one ring. As ComputeBasis returns it,
// it is the reduced Groebner basis: monic, ascending by leading monomial, no term
// of an element being a multiple of the leading monomial of another. CheckBasis
// says whether a Basis from elsewhere is one. Users must not write to it.
type Basis struct {
	Elements []*Polynomial
	// Cofactors, if recorded, has one row for each element and one column for each
	// generator: Elements[i] = sum over j of Cofactors[i][j] generators[j].
	Cofactors  [][]*Polynomial
	Statistics Statistics
}

// element is a polynomial of the growing basis, monic.
type element struct {
	terms     []term
	sugar     int
	cofactors [][]term // by generator; nil if not recorded
}

func (e *element) lead() Monomial { return e.terms[0].m }

type engine struct {
	ring       *Ring
	generators []*Polynomial
	options    Options
	elements   []element
	active     *divisors // elements whose lead is not a multiple of a later one
	pairs      []pair
	bucket     *bucket
	statistics Statistics
}

// ComputeBasis returns the reduced Groebner basis of the ideal of the generators
// with respect to the order of their ring, by Buchberger's algorithm with the
// product and chain criteria. For a graded order its cost depends on the degree
// at which the ideal becomes regular; it can be doubly exponential in the number
// of variables, see Options for limits. Errors: ErrNoGenerators (none, or all
// zero), ErrMixedRings, a *LimitError with the partial result, and the cause of a
// cancellation. The basis is the same for every order of the generators.
func ComputeBasis(ctx context.Context, generators []*Polynomial, o Options) (*Basis, error) {
	r, err := sameRing(generators)
	if err != nil {
		return nil, err
	}
	e := &engine{ring: r, generators: generators, options: o, active: &divisors{ring: r}, bucket: newBucket(r)}
	for i, g := range generators {
		if !g.IsZero() {
			_, lead := g.Lead()
			e.pairs = append(e.pairs, pair{lcm: lead, sugar: g.Degree(), first: i, second: -1})
		}
	}
	if len(e.pairs) == 0 {
		return nil, fmt.Errorf("groebner: %w", ErrNoGenerators)
	}
	if err := e.run(ctx); err != nil {
		var limit *LimitError
		if !errors.As(err, &limit) {
			return nil, err
		}
		partial, failed := e.interreduce(ctx)
		if failed != nil && !errors.As(failed, new(*LimitError)) {
			return nil, failed
		}
		return nil, &LimitError{What: limit.What, Limit: limit.Limit, Pending: len(e.pairs), Partial: partial}
	}
	return e.interreduce(ctx)
}

// run treats pairs until none is left.
func (e *engine) run(ctx context.Context) error {
	for {
		if err := poll(ctx, "basis"); err != nil {
			return err
		}
		p, ok := e.choose()
		if !ok {
			break
		}
		e.statistics.Reductions++
		e.statistics.MaxDegree = max(e.statistics.MaxDegree, e.ring.Degree(p.lcm))
		e.load(p)
		out, err := e.active.reduce(ctx, e.bucket, p.sugar, e.options.Cofactors)
		e.statistics.Steps += out.count
		if err != nil {
			e.pairs = append(e.pairs, p)
			return err
		}
		if len(out.terms) == 0 {
			e.statistics.Zero++
			continue
		}
		if e.options.MaxBasis > 0 && len(e.active.labels) >= e.options.MaxBasis {
			e.pairs = append(e.pairs, p)
			return &LimitError{What: "basis elements", Limit: e.options.MaxBasis}
		}
		if err := e.insert(ctx, p, out); err != nil {
			return err
		}
	}
	if len(e.pairs) > 0 {
		return &LimitError{What: "degree", Limit: e.options.MaxDegree}
	}
	return nil
}

// load puts the polynomial of a pair into the bucket. In an S-polynomial the
// leading terms cancel and are left out.
func (e *engine) load(p pair) {
	e.bucket.reset()
	one := e.ring.field.One()
	if p.second < 0 {
		e.bucket.addMultiple(one, Monomial{}, e.generators[p.first].terms)
		return
	}
	a, b := &e.elements[p.first], &e.elements[p.second]
	e.bucket.addMultiple(one, p.lcm.minus(a.lead()), a.terms[1:])
	e.bucket.addMultiple(e.ring.field.Neg(one), p.lcm.minus(b.lead()), b.terms[1:])
}

// insert makes the outcome of reducing p monic and a new element.
func (e *engine) insert(ctx context.Context, p pair, out reduction) error {
	f := e.ring.field
	scale, _ := f.Inv(out.terms[0].c)
	for i := range out.terms {
		out.terms[i].c = f.Mul(scale, out.terms[i].c)
	}
	fresh := element{terms: out.terms, sugar: out.sugar}
	if e.options.Cofactors {
		var err error
		if fresh.cofactors, err = e.pairCofactors(ctx, p, out.steps, scale); err != nil {
			return err
		}
	}
	k := len(e.elements)
	e.elements = append(e.elements, fresh)
	if (fresh.lead() == Monomial{}) {
		// the whole ring: nothing more can be learnt
		e.pairs = nil
		e.active = &divisors{ring: e.ring}
		e.active.add(fresh.terms, k, fresh.sugar)
		return nil
	}
	return e.update(k)
}
