package groebner

import (
	"context"
	"fmt"
	"slices"

	"eliminant/rational/prime"
)

// QuotientOptions of ComputeQuotient. The zero value sets no limit.
type QuotientOptions struct {
	// MaxDimension bounds the dimension, 0 means no bound.
	MaxDimension int
}

// Quotient is the algebra A = GF(p)[x_1..x_n]/I of a zero-dimensional ideal I
// with the basis of its standard monomials b_0 < b_1 < ..., those that are no
// multiple of a leading monomial of I. Elements of A are given by their
// coordinates, slices of length Dimension. A Quotient is immutable and safe for
// concurrent use.
type Quotient struct {
	ring      *Ring
	basis     *Basis
	monomials []Monomial
	index     map[Monomial]int
	// x_k b_i is b_next[k][i] if that is not negative, else it has the coordinates
	// border[k][i]
	next   [][]int
	border [][][]prime.Element
	// b_i = x_through[i] b_parent[i] for i > 0
	through, parent []int
}

// ComputeQuotient returns the quotient algebra of the ideal of which b is the
// reduced Groebner basis; that is CheckBasis's to test, here only what would break
// the computation is met with a *CheckError. It fails with a
// *NotZeroDimensionalError if the dimension is infinite and with a *LimitError
// above o.MaxDimension. Cost: the coordinates of each of the at most n D products
// of a variable and a standard monomial are found from those of a smaller one in
// D^2 products (J. Faugere, P. Gianni, D. Lazard, T. Mora, Efficient computation
// of zero-dimensional Groebner bases by change of ordering, J. Symbolic Comput.
// 16 (1993) 329, section 2).
func ComputeQuotient(ctx context.Context, b *Basis, o QuotientOptions) (*Quotient, error) {
	r, err := sameRing(b.Elements)
	if err != nil {
		return nil, err
	}
	if err := b.zeroDimensional(); err != nil {
		return nil, err
	}
	q := &Quotient{ring: r, basis: b}
	if err := q.enumerate(ctx, o.MaxDimension); err != nil {
		return nil, err
	}
	if err := q.products(ctx); err != nil {
		return nil, err
	}
	return q, nil
}

// IsZeroDimensional reports whether the quotient by the ideal of which b is a
// Groebner basis has finite dimension (0 for the ideal of 1): whether every
// variable has a power among the leading monomials.
func (b *Basis) IsZeroDimensional() bool { return b.zeroDimensional() == nil }

func (b *Basis) zeroDimensional() error {
	if len(b.Elements) == 0 {
		return fmt.Errorf("groebner: %w", ErrNoGenerators)
	}
	r := b.Elements[0].ring
	power := make([]bool, r.Variables())
	for _, p := range b.Elements {
		if p.IsZero() {
			continue
		}
		if (p.terms[0].m == Monomial{}) {
			return nil
		}
		if k, ok := r.layout.variablePower(p.terms[0].m); ok {
			power[k] = true
		}
	}
	if k := slices.Index(power, false); k >= 0 {
		return &NotZeroDimensionalError{Variable: r.Name(k)}
	}
	return nil
}

// enumerate lists the standard monomials, ascending.
func (q *Quotient) enumerate(ctx context.Context, limit int) error {
	r := q.ring
	divisors := newDivisors(r, q.basis.Elements)
	// each monomial is reached once, variables in ascending number
	type entry struct {
		m    Monomial
		last int
	}
	var queue []entry
	if divisors.find(Monomial{}) < 0 {
		queue = append(queue, entry{})
	}
	for i := 0; i < len(queue); i++ {
		if err := poll(ctx, "quotient"); err != nil {
			return err
		}
		if limit > 0 && len(queue) > limit {
			return &LimitError{What: "dimension", Limit: limit}
		}
		e := queue[i]
		q.monomials = append(q.monomials, e.m)
		for k := e.last; k < r.Variables(); k++ {
			m, ok := r.Product(e.m, r.variable(k))
			if !ok {
				return &LimitError{What: "exponent", Limit: r.MaxDegree()}
			}
			if divisors.find(m) < 0 {
				queue = append(queue, entry{m, k})
			}
		}
	}
	slices.SortFunc(q.monomials, r.Compare)
	q.index = make(map[Monomial]int, len(q.monomials))
	for i, m := range q.monomials {
		q.index[m] = i
	}
	return nil
}

// products fills in the products of variables and standard monomials.
func (q *Quotient) products(ctx context.Context) error {
	r, size := q.ring, len(q.monomials)
	variables := make([]Monomial, r.Variables())
	q.next = make([][]int, r.Variables())
	q.border = make([][][]prime.Element, r.Variables())
	for k := range variables {
		variables[k] = r.variable(k)
		q.next[k] = make([]int, size)
		q.border[k] = make([][]prime.Element, size)
	}
	q.through, q.parent = make([]int, size), make([]int, size)

	type product struct {
		m    Monomial
		k, i int
	}
	var outside []product
	for i, b := range q.monomials {
		for k, x := range variables {
			m, ok := r.Product(b, x)
			if !ok {
				return &LimitError{What: "exponent", Limit: r.MaxDegree()}
			}
			if j, standard := q.index[m]; standard {
				q.next[k][i], q.through[j], q.parent[j] = j, k, i
				continue
			}
			q.next[k][i] = -1
			outside = append(outside, product{m, k, i})
		}
	}
	slices.SortStableFunc(outside, func(a, b product) int { return r.Compare(a.m, b.m) })

	leads := make(map[Monomial]*Polynomial, len(q.basis.Elements))
	for i, p := range q.basis.Elements {
		if p.terms[0].c != r.field.One() {
			return &CheckError{"an element is not monic", i, -1}
		}
		leads[p.terms[0].m] = p
	}
	known := make(map[Monomial][]prime.Element, len(outside))
	for _, o := range outside {
		if known[o.m] == nil {
			if err := poll(ctx, "quotient"); err != nil {
				return err
			}
			v := make([]prime.Element, size)
			if p := leads[o.m]; p != nil {
				// b reduced and monic: the tail is a combination of standard monomials
				for _, t := range p.terms[1:] {
					j, standard := q.index[t.m]
					if !standard {
						return &CheckError{"a term of an element is a multiple of a leading monomial", -1, -1}
					}
					v[j] = r.field.Neg(t.c)
				}
			} else {
				// o.m = x_l m' with m' = x_k b_j outside too and smaller; all that m' is
				// a combination of is smaller than m', so its products with x_l are known
				for l, x := range variables {
					if l == o.k || !r.Divides(x, q.monomials[o.i]) {
						continue
					}
					if w := known[o.m.minus(x)]; w != nil {
						q.MulVariable(v, w, l)
						break
					}
				}
			}
			known[o.m] = v
		}
		q.border[o.k][o.i] = known[o.m]
	}
	return nil
}

// Ring returns the polynomial ring.
func (q *Quotient) Ring() *Ring { return q.ring }

// Dimension returns D, the number of zeros of the ideal in an algebraic closure
// counted with multiplicity.
func (q *Quotient) Dimension() int { return len(q.monomials) }

// Monomials returns the standard monomials in ascending order.
func (q *Quotient) Monomials() []Monomial { return slices.Clone(q.monomials) }

// Polynomial returns the combination of standard monomials with coordinates x.
func (q *Quotient) Polynomial(x []prime.Element) *Polynomial {
	return q.ring.FromTerms(x, q.monomials)
}
