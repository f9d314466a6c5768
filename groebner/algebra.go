package groebner

import (
	"context"
	"fmt"

	"eliminant/rational/prime"
)

// MulVariable sets z = x_k x in coordinates; z must not overlap x. Cost: at most
// D^2 products, one row operation for each product x_k b_i that is not a
// standard monomial.
func (q *Quotient) MulVariable(z, x []prime.Element, k int) {
	f := q.ring.field
	clear(z)
	next, border := q.next[k], q.border[k]
	for i, c := range x {
		switch j := next[i]; {
		case c == 0:
		case j >= 0:
			z[j] = f.Add(z[j], c)
		default:
			f.AddScaledRow(z, c, border[i])
		}
	}
}

// Coordinates returns those of the class of p. It fails, wrapping ErrMixedRings,
// if p is of another ring, and on cancellation. Degrees are not limited.
func (q *Quotient) Coordinates(ctx context.Context, p *Polynomial) ([]prime.Element, error) {
	one := make([]prime.Element, q.Dimension())
	if len(one) > 0 {
		one[0] = q.ring.field.One() // 1 is the smallest monomial
	}
	return q.MulPolynomial(ctx, one, p)
}

// MulPolynomial returns the coordinates of x p. A factor with few terms of low
// degree, like a difference of two variables, costs a few calls of MulVariable.
// Errors as for Coordinates.
func (q *Quotient) MulPolynomial(ctx context.Context, x []prime.Element, p *Polynomial) ([]prime.Element, error) {
	if p.ring != q.ring {
		return nil, fmt.Errorf("groebner: %w: %v and %v", ErrMixedRings, q.ring, ringName(p.ring))
	}
	q.wantCoordinates(x)
	return q.horner(ctx, x, p.terms, 0)
}

// horner returns x times the sum of the terms, whose exponents of the variables
// before k are ignored, by Horner's rule in x_k, x_{k+1}, ...
func (q *Quotient) horner(ctx context.Context, x []prime.Element, terms []term, k int) ([]prime.Element, error) {
	if err := poll(ctx, "quotient"); err != nil {
		return nil, err
	}
	f, l := q.ring.field, &q.ring.layout
	sum := make([]prime.Element, len(x))
	if k == q.ring.Variables() {
		var c prime.Element
		for _, t := range terms {
			c = f.Add(c, t.c)
		}
		f.ScaleRow(sum, c, x)
		return sum, nil
	}
	byExponent := map[int][]term{}
	top := 0
	for _, t := range terms {
		e := l.get(t.m, l.places[k])
		byExponent[e] = append(byExponent[e], t)
		top = max(top, e)
	}
	shifted := make([]prime.Element, len(x))
	for e := top; e >= 0; e-- {
		if part := byExponent[e]; part != nil {
			v, err := q.horner(ctx, x, part, k+1)
			if err != nil {
				return nil, err
			}
			f.AddRow(sum, sum, v)
		}
		if e > 0 {
			q.MulVariable(shifted, sum, k)
			sum, shifted = shifted, sum
		}
	}
	return sum, nil
}

// VariableMatrix returns the companion matrix M of multiplication by x_k: row i
// holds the coordinates of x_k b_i. So M acts on row vectors of coordinates from
// the right. Panics unless 0 <= k < the number of variables.
func (q *Quotient) VariableMatrix(k int) *Matrix {
	m := NewMatrix(q.ring.field, q.Dimension(), q.Dimension())
	for i, j := range q.next[k] {
		if j >= 0 {
			m.Row(i)[j] = q.ring.field.One()
		} else {
			copy(m.Row(i), q.border[k][i])
		}
	}
	return m
}

// Matrix returns the matrix of multiplication by the element with coordinates x,
// laid out as in VariableMatrix: row i holds x b_i. Cost: D calls of MulVariable.
func (q *Quotient) Matrix(ctx context.Context, x []prime.Element) (*Matrix, error) {
	q.wantCoordinates(x)
	m := NewMatrix(q.ring.field, q.Dimension(), q.Dimension())
	for i := range q.monomials {
		if err := poll(ctx, "multiplication matrix"); err != nil {
			return nil, err
		}
		if i == 0 {
			copy(m.Row(0), x)
			continue
		}
		q.MulVariable(m.Row(i), m.Row(q.parent[i]), q.through[i])
	}
	return m, nil
}

// Product returns the coordinates of x y. Cost: D calls of MulVariable.
func (q *Quotient) Product(ctx context.Context, x, y []prime.Element) ([]prime.Element, error) {
	q.wantCoordinates(y)
	m, err := q.Matrix(ctx, x)
	if err != nil {
		return nil, err
	}
	z := make([]prime.Element, q.Dimension())
	for i, c := range y {
		if c != 0 {
			q.ring.field.AddScaledRow(z, c, m.Row(i))
		}
	}
	return z, nil
}

// Divide returns the coordinates of the unique z with z y = x. It fails with a
// *ZeroDivisorError if y is a zero divisor, that is if it vanishes at some zero
// of the ideal. Cost: a multiplication matrix and D^3/3 products.
func (q *Quotient) Divide(ctx context.Context, x, y []prime.Element) ([]prime.Element, error) {
	q.wantCoordinates(x)
	m, err := q.Matrix(ctx, y)
	if err != nil {
		return nil, err
	}
	z, rank, err := m.SolveLeft(ctx, x)
	if err != nil {
		return nil, err
	}
	if rank < q.Dimension() {
		return nil, &ZeroDivisorError{Rank: rank, Dimension: q.Dimension()}
	}
	return z, nil
}

// Trace returns the trace of multiplication by x, the sum of its values at the
// zeros of the ideal with their multiplicities. Cost: D calls of MulVariable.
func (q *Quotient) Trace(ctx context.Context, x []prime.Element) (prime.Element, error) {
	m, err := q.Matrix(ctx, x)
	if err != nil {
		return 0, err
	}
	return m.Trace(), nil
}

// TraceQuotient returns Tr(M_N M_D^{-1}), the sum of N/D over the zeros of the
// ideal with their multiplicities. It fails with a *ZeroDivisorError if D
// vanishes at one of them, whatever N is. Cost: two multiplication matrices and
// D^3/3 products, D here the dimension.
func (q *Quotient) TraceQuotient(ctx context.Context, numerator, denominator *Polynomial) (prime.Element, error) {
	x, err := q.Coordinates(ctx, numerator)
	if err != nil {
		return 0, err
	}
	y, err := q.Coordinates(ctx, denominator)
	if err != nil {
		return 0, err
	}
	z, err := q.Divide(ctx, x, y)
	if err != nil {
		return 0, err
	}
	return q.Trace(ctx, z)
}

// CharacteristicPolynomial returns the coefficients, from the constant one on, of
// the monic characteristic polynomial of multiplication by x. Its roots are the
// values of x at the zeros of the ideal; for x a variable it generates, up to
// multiplicities, the elimination ideal. Cost: about D^3 products.
func (q *Quotient) CharacteristicPolynomial(ctx context.Context, x []prime.Element) ([]prime.Element, error) {
	m, err := q.Matrix(ctx, x)
	if err != nil {
		return nil, err
	}
	return m.CharacteristicPolynomial(ctx)
}

func (q *Quotient) wantCoordinates(x []prime.Element) {
	if len(x) != q.Dimension() {
		panic(fmt.Sprintf("groebner: %d coordinates in a quotient of dimension %d", len(x), q.Dimension()))
	}
}
