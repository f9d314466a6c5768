package poly

import (
	"errors"
	"math/bits"

	"eliminant/rational/prime"
)

// ErrModulus is returned by NewModulus for constants.
var ErrModulus = errors.New("a modulus must have positive degree")

// Modulus is a polynomial to reduce by many times, with what that needs worked
// out: the inverse of its reversal as a power series and, over fields with
// enough roots of unity, the transforms of both. It is immutable and safe for
// concurrent use.
type Modulus struct {
	m       *Poly
	f       *prime.Field
	inverse []prime.Element // of the reversed monic modulus, Degree terms
	// with transforms of length n: those of inverse and of m
	n             int
	transform     *prime.Transform
	tInverse, tM  []prime.Element
	transformable bool
}

// NewModulus prepares a modulus of positive degree.
func NewModulus(m *Poly) (*Modulus, error) {
	if m.Degree() < 1 {
		return nil, ErrModulus
	}
	r := &Modulus{m: new(Poly).Monic(m), f: m.f}
	d := m.Degree()
	r.inverse = inverseSeries(r.f, reversed(r.m.c), d)
	if d >= newtonSize {
		r.n = 1 << bits.Len(uint(2*d))
		if r.n <= prime.TransformLength(r.f) {
			t, err := prime.NewTransform(r.f, r.n)
			if err != nil {
				return nil, err
			}
			r.transform, r.transformable = t, true
			r.tInverse, r.tM = make([]prime.Element, r.n), make([]prime.Element, r.n)
			copy(r.tInverse, r.inverse)
			copy(r.tM, r.m.c)
			t.Forward(r.tInverse)
			t.Forward(r.tM)
		}
	}
	return r, nil
}

// Poly returns the monic modulus; it must not be modified.
func (r *Modulus) Poly() *Poly { return r.m }

// Rem sets z = x modulo the modulus.
func (r *Modulus) Rem(z, x *Poly) *Poly {
	d := r.m.Degree()
	if x.Degree() < d {
		return z.Set(x)
	}
	if x.Degree() > 2*d-1 || d < newtonSize {
		return z.Rem(x, r.m)
	}
	// quotient: the reversed head of x times the inverse series
	k := x.Degree() - d + 1
	head := reversed(x.c)[:k]
	var q []prime.Element
	if r.transformable {
		q = r.times(head, r.tInverse)[:k]
	} else {
		q = multiply(r.f, head, r.inverse[:k])[:k]
	}
	q = reversed(q)
	rest := append([]prime.Element(nil), x.c[:d]...)
	var p []prime.Element
	if r.transformable {
		p = r.times(q, r.tM)
	} else {
		p = multiply(r.f, q, r.m.c)
	}
	r.f.SubRow(rest, rest, p[:d])
	return z.set(r.f, rest)
}

// times multiplies a row by one whose transform is known.
func (r *Modulus) times(x, transformed []prime.Element) []prime.Element {
	a := make([]prime.Element, r.n)
	copy(a, x)
	r.transform.Forward(a)
	r.f.MulRow(a, a, transformed)
	r.transform.Inverse(a)
	return a
}

// Mul sets z = x y modulo the modulus. Operands need not be reduced, but are
// best so.
func (r *Modulus) Mul(z, x, y *Poly) *Poly {
	var p Poly
	p.Mul(x, y)
	if p.f == nil {
		p.f = r.f
	}
	return r.Rem(z, &p)
}

// Inverse sets z to the inverse of x and returns true, or returns false if x
// has a factor in common with the modulus.
func (r *Modulus) Inverse(z, x *Poly) bool {
	_, ok := z.InverseMod(x, r.m)
	return ok
}

// Pow sets z = x^e modulo the modulus.
func (r *Modulus) Pow(z, x *Poly, e uint64) *Poly {
	base := r.Rem(new(Poly), x)
	v := New(r.f, r.f.One())
	r.Rem(v, v)
	for i := bits.Len64(e) - 1; i >= 0; i-- {
		r.Mul(v, v, v)
		if e>>uint(i)&1 == 1 {
			r.Mul(v, v, base)
		}
	}
	return z.Set(v)
}

// Compose sets z = g(x) modulo the modulus, by Horner's rule.
func (r *Modulus) Compose(z, g, x *Poly) *Poly {
	v := New(r.f)
	base := r.Rem(new(Poly), x)
	for i := len(g.c) - 1; i >= 0; i-- {
		r.Mul(v, v, base)
		v.Add(v, New(r.f, g.c[i]))
	}
	return z.Set(v)
}
