// Package prime is arithmetic in GF(p) for odd primes p < 2^62: elements, row
// kernels, roots of unity and transforms, the fixed table of primes used to
// lift values, and the seeded source of random primes used to test identities.
//
// An Element is one machine word in Montgomery form with R = 2^64
// (P. L. Montgomery, Modular multiplication without trial division,
// Math. Comp. 44 (1985) 519). It has a meaning only together with its Field.
package prime

import (
	"errors"
	"fmt"
	"math/big"
	"math/bits"
)

// MaxBits bounds the size of a modulus: p < 2^MaxBits. Two spare bits let the
// row kernels add before they reduce.
const MaxBits = 62

// Element is a residue of GF(p) in Montgomery form, always canonical: in [0, p).
// The zero value is the element 0 of every field; elements of different fields
// must not be mixed.
type Element uint64

// Field is GF(p). It is immutable and safe for concurrent use.
type Field struct {
	p    uint64
	pinv uint64  // -p^{-1} mod 2^64
	one  Element // 2^64 mod p
	r2   Element // 2^128 mod p
}

// ErrModulus is wrapped by the errors of NewField.
var ErrModulus = errors.New("not an odd prime below 2^62")

// ErrBadPrime is returned by kernels for a prime at which they are not defined
// (it divides a denominator, or an invariant that is not zero over Q). Callers
// go on with another prime.
var ErrBadPrime = errors.New("prime divides a denominator or a nonzero invariant")

// NewField returns GF(p). It fails, wrapping ErrModulus, unless p is an odd
// prime below 2^62; primality is decided, not guessed (IsPrime).
func NewField(p uint64) (*Field, error) {
	if p < 3 || p>>MaxBits != 0 || !IsPrime(p) {
		return nil, fmt.Errorf("GF(%d): %w", p, ErrModulus)
	}
	return newField(p), nil
}

// newField skips the primality test.
func newField(p uint64) *Field {
	f := &Field{p: p}
	inv := p // Newton: doubles the number of correct low bits, 3 -> 96
	for range 5 {
		inv *= 2 - p*inv
	}
	f.pinv = -inv
	_, r := bits.Div64(1, 0, p) // 2^64 mod p
	f.one = Element(r)
	hi, lo := bits.Mul64(r, r)
	_, r2 := bits.Div64(hi, lo, p)
	f.r2 = Element(r2)
	return f
}

// Modulus returns p.
func (f *Field) Modulus() uint64 { return f.p }

// String returns "GF(p)".
func (f *Field) String() string { return fmt.Sprintf("GF(%d)", f.p) }

// One returns the unit element.
func (f *Field) One() Element { return f.one }

// reduce returns (hi 2^64 + lo) / 2^64 mod p, canonical.
// Invariant on entry: hi < p. Then the quotient is below 2p < 2^63.
func (f *Field) reduce(hi, lo uint64) Element {
	m := lo * f.pinv
	mh, ml := bits.Mul64(m, f.p)
	_, c := bits.Add64(lo, ml, 0)
	t := hi + mh + c // < 2p
	if t >= f.p {
		t -= f.p
	}
	return Element(t)
}

// Add returns x + y.
func (f *Field) Add(x, y Element) Element {
	t := uint64(x) + uint64(y)
	if t >= f.p {
		t -= f.p
	}
	return Element(t)
}

// Sub returns x - y.
func (f *Field) Sub(x, y Element) Element {
	t := uint64(x) - uint64(y)
	if t > uint64(x) {
		t += f.p
	}
	return Element(t)
}

// Neg returns -x.
func (f *Field) Neg(x Element) Element {
	if x == 0 {
		return 0
	}
	return Element(f.p - uint64(x))
}

// Mul returns x y.
func (f *Field) Mul(x, y Element) Element {
	if slowcheck {
		f.checkCanonical([]Element{x, y})
	}
	hi, lo := bits.Mul64(uint64(x), uint64(y)) // < p^2, so hi < p
	return f.reduce(hi, lo)
}

// Square returns x^2.
func (f *Field) Square(x Element) Element { return f.Mul(x, x) }

// Exp returns x^e; Exp(0, 0) = 1.
func (f *Field) Exp(x Element, e uint64) Element {
	z := f.one
	for i := bits.Len64(e) - 1; i >= 0; i-- {
		z = f.Mul(z, z)
		if e>>uint(i)&1 == 1 {
			z = f.Mul(z, x)
		}
	}
	return z
}

// Inv returns 1/x and true, or 0 and false for x = 0. Cost: about 90
// multiplications.
func (f *Field) Inv(x Element) (Element, bool) {
	if x == 0 {
		return 0, false
	}
	return f.Exp(x, f.p-2), true
}

// Div returns x/y and true, or 0 and false for y = 0.
func (f *Field) Div(x, y Element) (Element, bool) {
	i, ok := f.Inv(y)
	return f.Mul(x, i), ok
}

// FromUint64 returns the residue of v.
func (f *Field) FromUint64(v uint64) Element {
	if v >= f.p {
		v %= f.p
	}
	return f.Mul(Element(v), f.r2)
}

// FromInt64 returns the residue of v.
func (f *Field) FromInt64(v int64) Element {
	if v < 0 {
		return f.Neg(f.FromUint64(-uint64(v)))
	}
	return f.FromUint64(uint64(v))
}

// FromInt returns the residue of v.
func (f *Field) FromInt(v *big.Int) Element {
	if v.IsInt64() {
		return f.FromInt64(v.Int64())
	}
	var m, r big.Int
	m.SetUint64(f.p)
	r.Mod(v, &m)
	return f.FromUint64(r.Uint64())
}

// FromRat returns the residue of v and true, or 0 and false if p divides the
// denominator.
func (f *Field) FromRat(v *big.Rat) (Element, bool) {
	n := f.FromInt(v.Num())
	if v.IsInt() {
		return n, true
	}
	return f.Div(n, f.FromInt(v.Denom()))
}

// Uint64 returns the representative of x in [0, p).
func (f *Field) Uint64(x Element) uint64 {
	return uint64(f.reduce(0, uint64(x)))
}

// Int sets z to the representative of x in [0, p) and returns z.
func (f *Field) Int(z *big.Int, x Element) *big.Int { return z.SetUint64(f.Uint64(x)) }
