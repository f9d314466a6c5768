package poly

import "eliminant/rational/prime"

// newtonSize is the length of quotient and divisor from which division goes
// through an inverse power series.
const newtonSize = 128

// DivRem sets z to the quotient and r to the remainder of x by y. z and r must
// be different; either may be x or y. It panics if y is zero.
func (z *Poly) DivRem(x, y, r *Poly) *Poly {
	if y.IsZero() {
		panic("poly: division by the zero polynomial")
	}
	f := y.f
	n, m := len(x.c), len(y.c)
	if n < m {
		rest := append([]prime.Element(nil), x.c...)
		r.set(f, rest)
		return z.set(f, nil)
	}
	if n-m+1 >= newtonSize && m >= newtonSize {
		q := multiply(f, reversed(x.c)[:n-m+1], inverseSeries(f, reversed(y.c), n-m+1))[:n-m+1]
		q = reversed(q)
		rest := append([]prime.Element(nil), x.c[:m-1]...)
		f.SubRow(rest, rest, multiply(f, q, y.c)[:m-1])
		r.set(f, rest)
		return z.set(f, q)
	}
	rest := append([]prime.Element(nil), x.c...)
	q := make([]prime.Element, n-m+1)
	inv, _ := f.Inv(y.Lead())
	yc := append([]prime.Element(nil), y.c...)
	for i := n - m; i >= 0; i-- {
		q[i] = f.Mul(rest[i+m-1], inv)
		f.SubScaledRow(rest[i:i+m-1], q[i], yc[:m-1])
	}
	r.set(f, rest[:m-1])
	return z.set(f, q)
}

// Rem sets z to the remainder of x by y.
func (z *Poly) Rem(x, y *Poly) *Poly {
	var q Poly
	q.DivRem(x, y, z)
	return z
}

// inverseSeries returns the inverse of a power series with invertible constant
// term to n terms, by Newton's iteration.
func inverseSeries(f *prime.Field, x []prime.Element, n int) []prime.Element {
	c, ok := f.Inv(x[0])
	if !ok {
		panic("poly: the power series has no inverse")
	}
	z := []prime.Element{c}
	for len(z) < n {
		k := min(2*len(z), n)
		// z <- z (2 - x z) mod T^k
		e := multiply(f, z, x[:min(k, len(x))])
		if len(e) > k {
			e = e[:k]
		}
		for i := range e {
			e[i] = f.Neg(e[i])
		}
		e[0] = f.Add(e[0], f.Add(f.One(), f.One()))
		z = multiply(f, z, e)
		if len(z) > k {
			z = z[:k]
		}
		for len(z) < k {
			z = append(z, 0)
		}
	}
	return z
}

// GCD sets z to the monic greatest common divisor of x and y, 0 for two zeros.
// Cost: quadratic.
func (z *Poly) GCD(x, y *Poly) *Poly {
	f := field(x, y)
	a, b := New(f, x.c...), New(f, y.c...)
	for !b.IsZero() {
		a.Rem(a, b)
		a, b = b, a
	}
	return z.Monic(a)
}

// XGCD sets z to the monic greatest common divisor of x and y and returns s, t
// with s x + t y = z.
func (z *Poly) XGCD(x, y *Poly) (s, t *Poly) {
	f := field(x, y)
	a, b := New(f, x.c...), New(f, y.c...)
	s, t = New(f, f.One()), New(f)
	u, v := New(f), New(f, f.One())
	var q, r, p Poly
	for !b.IsZero() {
		q.DivRem(a, b, &r)
		s.Sub(s, p.Mul(&q, u))
		t.Sub(t, p.Mul(&q, v))
		s, u = u, s
		t, v = v, t
		a.Set(&r)
		a, b = b, a
	}
	if inv, ok := f.Inv(a.Lead()); ok {
		s.Scale(inv, s)
		t.Scale(inv, t)
	}
	z.Monic(a)
	return s, t
}

// InverseMod sets z to the inverse of x modulo m and returns it and true, or
// returns false, z unchanged, if they have a common factor. Cost: quadratic.
func (z *Poly) InverseMod(x, m *Poly) (*Poly, bool) {
	f := m.f
	// rows of Euclid's algorithm, with the cofactor of x only
	a, b := append([]prime.Element(nil), m.c...), new(Poly).Rem(x, m).c
	b = append([]prime.Element(nil), b...)
	u, v := []prime.Element{}, []prime.Element{f.One()}
	for len(b) > 1 {
		a, u = reduceRow(f, a, b, u, v)
		a, b = b, a
		u, v = v, u
	}
	if len(b) == 0 {
		return z, false
	}
	inv, _ := f.Inv(b[0])
	f.ScaleRow(v, inv, v)
	z.set(f, v)
	return z, true
}

// reduceRow returns a mod b and u - (a div b) v, in the space of a and u.
func reduceRow(f *prime.Field, a, b, u, v []prime.Element) ([]prime.Element, []prime.Element) {
	inv, _ := f.Inv(b[len(b)-1])
	for len(a) >= len(b) {
		s := len(a) - len(b)
		q := f.Mul(a[len(a)-1], inv)
		f.SubScaledRow(a[s:s+len(b)-1], q, b[:len(b)-1])
		a = a[:len(a)-1]
		for len(u) < len(v)+s {
			u = append(u, 0)
		}
		f.SubScaledRow(u[s:s+len(v)], q, v)
		for len(a) > 0 && a[len(a)-1] == 0 {
			a = a[:len(a)-1]
		}
	}
	return a, u
}
