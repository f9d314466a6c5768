package groebner

import (
	"context"
	"errors"
	"fmt"

	"eliminant/rational/prime"
)

// ErrNoCofactors says that a Basis passed every test of CheckBasis but the last
// one, for which it carries no cofactors: it is the reduced Groebner basis of an
// ideal that contains the generators, possibly of a larger one.
var ErrNoCofactors = errors.New("no cofactors: membership of the basis in the ideal is not decided")

// CheckError says why a Basis is not the reduced Groebner basis of the ideal, or
// that its cofactors do not prove it.
type CheckError struct {
	Reason string
	// Element and Other are the elements, or the element and the generator, it was
	// found at; -1 where there is none.
	Element, Other int
}

func (e *CheckError) Error() string {
	s := "groebner: not the reduced basis: " + e.Reason
	if e.Element >= 0 {
		s += fmt.Sprintf(" (element %d", e.Element)
		if e.Other >= 0 {
			s += fmt.Sprintf(", %d", e.Other)
		}
		s += ")"
	}
	return s
}

// CheckBasis decides whether b is the reduced Groebner basis of the ideal of the
// generators, without trust in how b was found and without code of ComputeBasis:
//
//  1. the elements are monic, ascending, and no term of one is a multiple of the
//     leading monomial of another;
//  2. every S-polynomial of two elements reduces to zero, no pair being left out
//     (Buchberger's criterion: b is a Groebner basis of its own ideal);
//  3. every generator reduces to zero (the ideal of b contains theirs);
//  4. every element is the sum of cofactors times generators, multiplied out (the
//     ideal of the generators contains that of b).
//
// It returns nil if so, a *CheckError if not. Any other error leaves the question
// open: ErrNoCofactors after tests 1 to 3, a *LimitError, ErrMixedRings,
// ErrNoGenerators, a cancellation. Cost: k^2/2 reductions for k elements.
func CheckBasis(ctx context.Context, generators []*Polynomial, b *Basis) error {
	r, err := sameRing(append(append([]*Polynomial{}, generators...), b.Elements...))
	if err != nil {
		return err
	}
	if r == nil || len(generators) == 0 {
		return fmt.Errorf("groebner: check: %w", ErrNoGenerators)
	}
	c := checker{r, generators, b}
	for _, test := range []func(context.Context) error{c.shape, c.pairs, c.contains, c.contained} {
		if err := test(ctx); err != nil {
			return err
		}
	}
	return nil
}

type checker struct {
	ring       *Ring
	generators []*Polynomial
	basis      *Basis
}

// shape is test 1.
func (c checker) shape(context.Context) error {
	elements := c.basis.Elements
	if len(elements) == 0 {
		return &CheckError{"it has no elements", -1, -1}
	}
	for i, p := range elements {
		if p.IsZero() {
			return &CheckError{"an element is zero", i, -1}
		}
		if p.terms[0].c != c.ring.field.One() {
			return &CheckError{"an element is not monic", i, -1}
		}
		if i > 0 && c.ring.Compare(elements[i-1].terms[0].m, p.terms[0].m) >= 0 {
			return &CheckError{"leading monomials do not ascend", i, i - 1}
		}
	}
	for i, p := range elements {
		for _, t := range p.terms {
			for j, q := range elements {
				if i != j && c.ring.Divides(q.terms[0].m, t.m) {
					return &CheckError{"a term of an element is a multiple of a leading monomial", i, j}
				}
			}
		}
	}
	return nil
}

// pairs is test 2.
func (c checker) pairs(ctx context.Context) error {
	minus := c.ring.field.Neg(c.ring.field.One())
	for j, q := range c.basis.Elements {
		for i, p := range c.basis.Elements[:j] {
			lcm, ok := c.ring.LCM(p.terms[0].m, q.terms[0].m)
			if !ok {
				return c.overflow()
			}
			pm, _ := c.ring.Quotient(lcm, p.terms[0].m)
			qm, _ := c.ring.Quotient(lcm, q.terms[0].m)
			s, err := c.addProduct(nil, c.ring.field.One(), pm, p.terms)
			if err == nil {
				s, err = c.addProduct(s, minus, qm, q.terms)
			}
			if err != nil {
				return err
			}
			zero, err := c.reducesToZero(ctx, c.ring.collect(s))
			if err != nil {
				return err
			}
			if !zero {
				return &CheckError{"an S-polynomial does not reduce to zero", i, j}
			}
		}
	}
	return nil
}

// contains is test 3.
func (c checker) contains(ctx context.Context) error {
	for j, g := range c.generators {
		zero, err := c.reducesToZero(ctx, append([]term{}, g.terms...))
		if err != nil {
			return err
		}
		if !zero {
			return &CheckError{fmt.Sprintf("generator %d does not reduce to zero", j), -1, -1}
		}
	}
	return nil
}

// contained is test 4.
func (c checker) contained(ctx context.Context) error {
	if c.basis.Cofactors == nil {
		return fmt.Errorf("groebner: check: %w", ErrNoCofactors)
	}
	if len(c.basis.Cofactors) != len(c.basis.Elements) {
		return &CheckError{"the cofactors are not one row for each element", -1, -1}
	}
	for i, row := range c.basis.Cofactors {
		if len(row) != len(c.generators) {
			return &CheckError{"the cofactors are not one for each generator", i, -1}
		}
		if ring, err := sameRing(row); err != nil {
			return err
		} else if ring != c.ring {
			return fmt.Errorf("groebner: check: %w", ErrMixedRings)
		}
		var sum []term
		for j, q := range row {
			if err := poll(ctx, "check"); err != nil {
				return err
			}
			for _, t := range q.terms {
				var err error
				if sum, err = c.addProduct(sum, t.c, t.m, c.generators[j].terms); err != nil {
					return err
				}
			}
			sum = c.ring.collect(sum)
		}
		if !(&Polynomial{c.ring, sum}).Equal(c.basis.Elements[i]) {
			return &CheckError{"cofactors times generators is another polynomial", i, -1}
		}
	}
	return nil
}

// reducesToZero divides the collected terms by the basis until its leading
// monomial is a multiple of none of theirs. It overwrites terms.
func (c checker) reducesToZero(ctx context.Context, terms []term) (bool, error) {
	for len(terms) > 0 {
		if err := poll(ctx, "check"); err != nil {
			return false, err
		}
		var divisor *Polynomial
		for _, p := range c.basis.Elements {
			if c.ring.Divides(p.terms[0].m, terms[0].m) {
				divisor = p
				break
			}
		}
		if divisor == nil {
			return false, nil
		}
		m, _ := c.ring.Quotient(terms[0].m, divisor.terms[0].m)
		sum, err := c.addProduct(terms, c.ring.field.Neg(terms[0].c), m, divisor.terms)
		if err != nil {
			return false, err
		}
		terms = c.ring.collect(sum)
	}
	return true, nil
}

// addProduct appends the terms of k m y to sum, uncollected.
func (c checker) addProduct(sum []term, k prime.Element, m Monomial, y []term) ([]term, error) {
	for _, t := range y {
		product, ok := c.ring.Product(m, t.m)
		if !ok {
			return nil, c.overflow()
		}
		sum = append(sum, term{product, c.ring.field.Mul(k, t.c)})
	}
	return sum, nil
}

func (c checker) overflow() error {
	return fmt.Errorf("groebner: check: %w", &LimitError{What: "exponent", Limit: c.ring.MaxDegree()})
}
