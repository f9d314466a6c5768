package poly

import (
	"math/bits"
	"slices"

	"eliminant/rational/prime"
)

// Thresholds in coefficients of the shorter factor, measured by
// TestCalibrate: below karatsubaSize products are by columns, from
// transformSize on by transforms where the field has the roots.
const (
	karatsubaSize = 64
	transformSize = 96
)

// Mul sets z = x y. Cost: quadratic for short factors, n^1.59 by Karatsuba's
// method, n log n over fields with enough roots of unity.
func (z *Poly) Mul(x, y *Poly) *Poly {
	f := field(x, y)
	if x.IsZero() || y.IsZero() {
		return z.set(f, nil)
	}
	return z.set(f, multiply(f, x.c, y.c))
}

// multiply returns the coefficients of the product of two nonempty rows.
func multiply(f *prime.Field, x, y []prime.Element) []prime.Element {
	if len(x) < len(y) {
		x, y = y, x
	}
	out := len(x) + len(y) - 1
	if len(y) >= transformSize {
		if n := 1 << bits.Len(uint(out-1)); n <= prime.TransformLength(f) {
			return transformed(f, x, y, n)
		}
	}
	z := make([]prime.Element, out)
	if len(y) < karatsubaSize {
		columns(f, z, x, reversed(y))
		return z
	}
	// cut the longer factor into pieces as long as the shorter
	for s := 0; s < len(x); s += len(y) {
		piece := x[s:min(s+len(y), len(x))]
		var p []prime.Element
		if len(piece) == len(y) {
			p = karatsuba(f, piece, y)
		} else {
			p = multiply(f, y, piece)
		}
		f.AddRow(z[s:s+len(p)], z[s:s+len(p)], p)
	}
	return z
}

func reversed(x []prime.Element) []prime.Element {
	r := slices.Clone(x)
	slices.Reverse(r)
	return r
}

// columns sets z to the product of x and the factor whose reversal is r, one
// reduction a coefficient.
func columns(f *prime.Field, z, x, r []prime.Element) {
	m := len(r)
	for k := range z {
		// z_k = sum of x_i y_{k-i}, i from lo to hi; y_{k-i} = r_{m-1-k+i}
		lo, hi := max(0, k-m+1), min(k, len(x)-1)
		z[k] = f.Dot(x[lo:hi+1], r[m-1-k+lo:])
	}
}

// karatsuba multiplies rows of equal length (A. Karatsuba, Yu. Ofman, Soviet
// Physics Doklady 7 (1963) 595).
func karatsuba(f *prime.Field, x, y []prime.Element) []prime.Element {
	n := len(x)
	z := make([]prime.Element, 2*n-1)
	if n < karatsubaSize {
		columns(f, z, x, reversed(y))
		return z
	}
	h := (n + 1) / 2
	low := karatsuba(f, x[:h], y[:h])
	high := karatsuba(f, x[h:], y[h:])
	sx, sy := make([]prime.Element, h), make([]prime.Element, h)
	copy(sx, x[:h])
	copy(sy, y[:h])
	f.AddRow(sx[:n-h], sx[:n-h], x[h:])
	f.AddRow(sy[:n-h], sy[:n-h], y[h:])
	mid := karatsuba(f, sx, sy)
	f.SubRow(mid, mid, low)
	f.SubRow(mid[:len(high)], mid[:len(high)], high)
	copy(z, low)
	copy(z[2*h:], high)
	f.AddRow(z[h:h+len(mid)], z[h:h+len(mid)], mid)
	return z
}

// transformed multiplies by transforms of length n.
func transformed(f *prime.Field, x, y []prime.Element, n int) []prime.Element {
	t, err := prime.NewTransform(f, n)
	if err != nil {
		panic("poly: " + err.Error()) // the caller has looked at TransformLength
	}
	a := make([]prime.Element, n)
	copy(a, x)
	t.Forward(a)
	if &x[0] == &y[0] && len(x) == len(y) {
		f.MulRow(a, a, a)
	} else {
		b := make([]prime.Element, n)
		copy(b, y)
		t.Forward(b)
		f.MulRow(a, a, b)
	}
	t.Inverse(a)
	return a[:len(x)+len(y)-1]
}
