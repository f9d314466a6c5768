// Package poly is univariate polynomials over GF(p): arithmetic, fast
// multiplication and reduction, greatest common divisors, interpolation, roots
// and linear recurrences.
//
// Poly follows math/big: z.Mul(x, y) sets z to x y and returns it; z may be an
// operand and the zero value is a usable receiver that takes the field of its
// operands.
package poly

import (
	"fmt"
	"strings"

	"eliminant/rational/prime"
)

// Poly is a polynomial over GF(p), coefficients from low to high without
// leading zeros. The zero value is the zero polynomial of no field yet.
type Poly struct {
	f *prime.Field
	c []prime.Element
}

// New returns the polynomial with the given coefficients, lowest first.
func New(f *prime.Field, coefficients ...prime.Element) *Poly {
	p := &Poly{f: f, c: append([]prime.Element(nil), coefficients...)}
	return p.trim()
}

// FromInt64 returns the polynomial with the residues of integers as
// coefficients, lowest first.
func FromInt64(f *prime.Field, coefficients ...int64) *Poly {
	p := &Poly{f: f}
	for _, c := range coefficients {
		p.c = append(p.c, f.FromInt64(c))
	}
	return p.trim()
}

// X returns the polynomial x.
func X(f *prime.Field) *Poly { return New(f, 0, f.One()) }

func (z *Poly) trim() *Poly {
	for len(z.c) > 0 && z.c[len(z.c)-1] == 0 {
		z.c = z.c[:len(z.c)-1]
	}
	return z
}

// set makes z the polynomial of a field and coefficients it now owns.
func (z *Poly) set(f *prime.Field, c []prime.Element) *Poly {
	z.f, z.c = f, c
	return z.trim()
}

// Field returns the field of the coefficients.
func (z *Poly) Field() *prime.Field { return z.f }

// Degree returns the degree, -1 for the zero polynomial.
func (z *Poly) Degree() int { return len(z.c) - 1 }

// Coeff returns the coefficient of x^i, 0 beyond the degree.
func (z *Poly) Coeff(i int) prime.Element {
	if i < 0 || i >= len(z.c) {
		return 0
	}
	return z.c[i]
}

// Coeffs returns the coefficients, lowest first; they must not be modified.
func (z *Poly) Coeffs() []prime.Element { return z.c }

// Lead returns the leading coefficient, 0 for the zero polynomial.
func (z *Poly) Lead() prime.Element { return z.Coeff(len(z.c) - 1) }

// IsZero tells whether z is the zero polynomial.
func (z *Poly) IsZero() bool { return len(z.c) == 0 }

// Equal tells whether the coefficients of z and x are the same.
func (z *Poly) Equal(x *Poly) bool {
	if len(z.c) != len(x.c) {
		return false
	}
	for i, c := range z.c {
		if c != x.c[i] {
			return false
		}
	}
	return true
}

// String writes the representatives in [0, p), highest power first.
func (z *Poly) String() string {
	if z.IsZero() {
		return "0"
	}
	var terms []string
	for i := len(z.c) - 1; i >= 0; i-- {
		c := z.c[i]
		if c == 0 {
			continue
		}
		v := z.f.Uint64(c)
		switch {
		case i == 0:
			terms = append(terms, fmt.Sprint(v))
		case v == 1:
			terms = append(terms, power(i))
		default:
			terms = append(terms, fmt.Sprintf("%d*%s", v, power(i)))
		}
	}
	return strings.Join(terms, "+")
}

func power(i int) string {
	if i == 1 {
		return "x"
	}
	return fmt.Sprintf("x^%d", i)
}

// Eval returns the value at x. Cost: Degree products.
func (z *Poly) Eval(x prime.Element) prime.Element {
	var v prime.Element
	for i := len(z.c) - 1; i >= 0; i-- {
		v = z.f.Add(z.f.Mul(v, x), z.c[i])
	}
	return v
}

// Set sets z = x.
func (z *Poly) Set(x *Poly) *Poly {
	if z != x {
		z.f, z.c = x.f, append(z.c[:0], x.c...)
	}
	return z
}

func field(x, y *Poly) *prime.Field {
	if x.f == nil {
		return y.f
	}
	return x.f
}

// Add sets z = x + y.
func (z *Poly) Add(x, y *Poly) *Poly {
	f := field(x, y)
	if len(x.c) < len(y.c) {
		x, y = y, x
	}
	c := make([]prime.Element, len(x.c))
	if len(y.c) > 0 {
		f.AddRow(c[:len(y.c)], x.c[:len(y.c)], y.c)
	}
	copy(c[len(y.c):], x.c[len(y.c):])
	return z.set(f, c)
}

// Neg sets z = -x.
func (z *Poly) Neg(x *Poly) *Poly {
	c := make([]prime.Element, len(x.c))
	for i, v := range x.c {
		c[i] = x.f.Neg(v)
	}
	return z.set(x.f, c)
}

// Sub sets z = x - y.
func (z *Poly) Sub(x, y *Poly) *Poly {
	f := field(x, y)
	n := min(len(x.c), len(y.c))
	c := make([]prime.Element, max(len(x.c), len(y.c)))
	f.SubRow(c[:n], x.c[:n], y.c[:n])
	copy(c[n:], x.c[n:])
	for i := n; i < len(y.c); i++ {
		c[i] = f.Neg(y.c[i])
	}
	return z.set(f, c)
}

// Scale sets z = k x.
func (z *Poly) Scale(k prime.Element, x *Poly) *Poly {
	c := make([]prime.Element, len(x.c))
	if len(c) > 0 {
		x.f.ScaleRow(c, k, x.c)
	}
	return z.set(x.f, c)
}

// Shift sets z = x^k y for k >= 0.
func (z *Poly) Shift(y *Poly, k int) *Poly {
	if y.IsZero() {
		return z.set(y.f, nil)
	}
	c := make([]prime.Element, len(y.c)+k)
	copy(c[k:], y.c)
	return z.set(y.f, c)
}

// Derivative sets z to the derivative of x.
func (z *Poly) Derivative(x *Poly) *Poly {
	c := make([]prime.Element, max(0, len(x.c)-1))
	for i := range c {
		c[i] = x.f.Mul(x.f.FromUint64(uint64(i+1)), x.c[i+1])
	}
	return z.set(x.f, c)
}

// Monic sets z = x divided by its leading coefficient; 0 stays 0.
func (z *Poly) Monic(x *Poly) *Poly {
	if x.IsZero() {
		return z.set(x.f, nil)
	}
	inv, _ := x.f.Inv(x.Lead())
	return z.Scale(inv, x)
}
