package groebner

import (
	"fmt"
	"slices"
	"strconv"

	"eliminant/rational/prime"
)

// term is c m with c != 0.
type term struct {
	m Monomial
	c prime.Element
}

// Polynomial is an element of a Ring: its terms with nonzero coefficients by
// descending monomial. The zero value can be used as a receiver: it takes the
// ring of the operands. Methods with a receiver z set z, which may be an operand,
// and return it; they panic, wrapping ErrMixedRings, if the operands belong to
// different rings, and wrapping ErrExponent if a degree exceeds Ring.MaxDegree.
type Polynomial struct {
	ring  *Ring
	terms []term
}

// Ring returns the ring of p; nil for the zero value.
func (p *Polynomial) Ring() *Ring { return p.ring }

// IsZero reports p = 0.
func (p *Polynomial) IsZero() bool { return len(p.terms) == 0 }

// IsConstant reports whether p has no term with a variable.
func (p *Polynomial) IsConstant() bool {
	return len(p.terms) == 0 || len(p.terms) == 1 && p.terms[0].m == Monomial{}
}

// Len returns the number of terms.
func (p *Polynomial) Len() int { return len(p.terms) }

// Term returns the i-th term, 0 <= i < Len, the leading one first.
func (p *Polynomial) Term(i int) (prime.Element, Monomial) { return p.terms[i].c, p.terms[i].m }

// Lead returns the leading term. Panics for p = 0.
func (p *Polynomial) Lead() (prime.Element, Monomial) {
	if p.IsZero() {
		panic("groebner: leading term of the zero polynomial")
	}
	return p.terms[0].c, p.terms[0].m
}

// Coefficient returns the coefficient of m.
func (p *Polynomial) Coefficient(m Monomial) prime.Element {
	if p.ring == nil {
		return 0
	}
	i, ok := slices.BinarySearchFunc(p.terms, m, func(t term, m Monomial) int {
		return p.ring.layout.compare(m, t.m)
	})
	if !ok {
		return 0
	}
	return p.terms[i].c
}

// Degree returns the total degree, -1 for p = 0.
func (p *Polynomial) Degree() int {
	d := -1
	for _, t := range p.terms {
		d = max(d, p.ring.Degree(t.m))
		if p.ring.order.Graded() {
			break
		}
	}
	return d
}

// Equal reports p = q. Polynomials of different rings are different.
func (p *Polynomial) Equal(q *Polynomial) bool {
	return p.ring == q.ring && slices.Equal(p.terms, q.terms)
}

// common returns the ring of both operands.
func common(x, y *Polynomial) *Ring {
	if x.ring != y.ring || x.ring == nil {
		panic(fmt.Errorf("groebner: %w: %v and %v", ErrMixedRings, ringName(x.ring), ringName(y.ring)))
	}
	return x.ring
}

func ringName(r *Ring) string {
	if r == nil {
		return "no ring"
	}
	return r.String()
}

// Set sets z = x.
func (z *Polynomial) Set(x *Polynomial) *Polynomial {
	if z != x {
		z.ring, z.terms = x.ring, append(z.terms[:0], x.terms...)
	}
	return z
}

// Add sets z = x + y.
func (z *Polynomial) Add(x, y *Polynomial) *Polynomial {
	r := common(x, y)
	z.terms = r.addMultiple(nil, x.terms, y.terms, r.field.One(), Monomial{})
	z.ring = r
	return z
}

// Sub sets z = x - y.
func (z *Polynomial) Sub(x, y *Polynomial) *Polynomial {
	r := common(x, y)
	z.terms = r.addMultiple(nil, x.terms, y.terms, r.field.Neg(r.field.One()), Monomial{})
	z.ring = r
	return z
}

// Neg sets z = -x.
func (z *Polynomial) Neg(x *Polynomial) *Polynomial {
	z.Set(x)
	for i := range z.terms {
		z.terms[i].c = z.ring.field.Neg(z.terms[i].c)
	}
	return z
}

// Scale sets z = c x.
func (z *Polynomial) Scale(c prime.Element, x *Polynomial) *Polynomial {
	z.Set(x)
	if c == 0 {
		z.terms = z.terms[:0]
		return z
	}
	for i := range z.terms {
		z.terms[i].c = z.ring.field.Mul(c, z.terms[i].c)
	}
	return z
}

// Monic sets z = x divided by its leading coefficient; z = 0 for x = 0.
func (z *Polynomial) Monic(x *Polynomial) *Polynomial {
	if x.IsZero() {
		return z.Set(x)
	}
	inverse, _ := x.ring.field.Inv(x.terms[0].c)
	return z.Scale(inverse, x)
}

// MulTerm sets z = c m x.
func (z *Polynomial) MulTerm(c prime.Element, m Monomial, x *Polynomial) *Polynomial {
	z.Scale(c, x)
	for i := range z.terms {
		z.terms[i].m = z.terms[i].m.plus(m)
		if z.ring.layout.overflows(z.terms[i].m) {
			panic(fmt.Errorf("groebner: product: %w: total degree above %d", ErrExponent, z.ring.MaxDegree()))
		}
	}
	return z
}

// Mul sets z = x y. Cost: of the order of k l log k, k <= l the numbers of terms.
func (z *Polynomial) Mul(x, y *Polynomial) *Polynomial {
	r := common(x, y)
	if len(x.terms) > len(y.terms) {
		x, y = y, x
	}
	sum := newBucket(r)
	for _, t := range x.terms {
		sum.addMultiple(t.c, t.m, y.terms)
	}
	if sum.overflow {
		panic(fmt.Errorf("groebner: product: %w: total degree above %d", ErrExponent, r.MaxDegree()))
	}
	z.ring, z.terms = r, sum.drain(nil)
	return z
}

// Pow sets z = x^e, e >= 0; x^0 = 1. Panics for e < 0.
func (z *Polynomial) Pow(x *Polynomial, e int) *Polynomial {
	if e < 0 {
		panic("groebner: negative power")
	}
	if x.ring == nil {
		panic(fmt.Errorf("groebner: %w: power of a polynomial without a ring", ErrMixedRings))
	}
	result, base := x.ring.One(), new(Polynomial).Set(x)
	for ; e > 0; e >>= 1 {
		if e&1 == 1 {
			result.Mul(result, base)
		}
		if e > 1 {
			base.Mul(base, base)
		}
	}
	return z.Set(result)
}

// Eval returns p at x_i = values[i]. Panics if their number is wrong.
func (p *Polynomial) Eval(values []prime.Element) prime.Element {
	if p.IsZero() {
		return 0
	}
	r := p.ring
	if len(values) != len(r.names) {
		panic(fmt.Sprintf("groebner: %d values for %d variables", len(values), len(r.names)))
	}
	var sum prime.Element
	for _, t := range p.terms {
		c := t.c
		for i, at := range r.layout.places {
			if e := r.layout.get(t.m, at); e > 0 {
				c = r.field.Mul(c, r.field.Exp(values[i], uint64(e)))
			}
		}
		sum = r.field.Add(sum, c)
	}
	return sum
}

// Derivative sets z = dx/dx_i.
func (z *Polynomial) Derivative(x *Polynomial, i int) *Polynomial {
	if x.IsZero() {
		return z.Set(x)
	}
	r := x.ring
	v := r.variable(i)
	var terms []term
	for _, t := range x.terms {
		e := r.layout.get(t.m, r.layout.places[i])
		if e == 0 {
			continue
		}
		if c := r.field.Mul(t.c, r.field.FromInt64(int64(e))); c != 0 {
			terms = append(terms, term{t.m.minus(v), c}) // keeps the order: both sides divided by x_i
		}
	}
	z.ring, z.terms = r, terms
	return z
}

// String returns p like "x^2-3*x*y+1", coefficients by their representatives in
// (-p/2, p/2).
func (p *Polynomial) String() string {
	if p.IsZero() {
		return "0"
	}
	f := p.ring.field
	var b []byte
	for _, t := range p.terms {
		v := f.Uint64(t.c)
		if v > f.Modulus()/2 {
			v = f.Modulus() - v
			b = append(b, '-')
		} else if len(b) > 0 {
			b = append(b, '+')
		}
		if (t.m == Monomial{}) {
			b = strconv.AppendUint(b, v, 10)
			continue
		}
		if v != 1 {
			b = append(strconv.AppendUint(b, v, 10), '*')
		}
		b = p.ring.appendMonomial(b, t.m)
	}
	return string(b)
}

// sameRing returns the ring of the polynomials, or an error wrapping
// ErrMixedRings.
func sameRing(ps []*Polynomial) (*Ring, error) {
	var r *Ring
	for i, p := range ps {
		if p == nil || p.ring == nil {
			return nil, fmt.Errorf("groebner: %w: polynomial %d has no ring", ErrMixedRings, i)
		}
		if r == nil {
			r = p.ring
		}
		if p.ring != r {
			return nil, fmt.Errorf("groebner: %w: polynomial %d is in %v, polynomial 0 in %v", ErrMixedRings, i, p.ring, r)
		}
	}
	return r, nil
}
