package prime

import (
	"fmt"
	"math/bits"
	"sync"
)

// OrderError says that a field has no root of unity of an order.
type OrderError struct{ Modulus, Order uint64 }

func (e *OrderError) Error() string {
	return fmt.Sprintf("GF(%d) has no root of unity of order %d", e.Modulus, e.Order)
}

// RootOfUnity returns an element of exact multiplicative order `order`, the
// same one at every call. The error is an *OrderError unless order divides p-1.
// Cost: the factorisation of order by trial division, a few powers.
func (f *Field) RootOfUnity(order uint64) (Element, error) {
	if order == 0 || (f.p-1)%order != 0 {
		return 0, &OrderError{f.p, order}
	}
	var factors []uint64
	rest := order
	for q := uint64(2); q*q <= rest; q++ {
		if rest%q == 0 {
			factors = append(factors, q)
			for rest%q == 0 {
				rest /= q
			}
		}
	}
	if rest > 1 {
		factors = append(factors, rest)
	}
	for g := uint64(2); ; g++ {
		w := f.Exp(f.FromUint64(g), (f.p-1)/order)
		exact := true
		for _, q := range factors {
			if f.Exp(w, order/q) == f.one {
				exact = false
				break
			}
		}
		if exact {
			return w, nil
		}
	}
}

// Transform is the number-theoretic transform of one length over one field:
// evaluation at all powers of a root of unity, in bit-reversed order (J. M.
// Pollard, The fast Fourier transform in a finite field, Math. Comp. 25 (1971)
// 365). It is immutable and safe for concurrent use.
type Transform struct {
	f        *Field
	n        int
	w, winv  []Element // at [h+j]: the 2h-th root to the power j, 0 <= j < h
	ninverse Element
}

var transforms sync.Map // [2]uint64{p, n} -> *Transform

// NewTransform returns the transform of length n, a power of two. The error is
// an *OrderError unless n divides p-1. Transforms are kept once made.
func NewTransform(f *Field, n int) (*Transform, error) {
	if n < 1 || n&(n-1) != 0 {
		return nil, &OrderError{f.p, uint64(max(n, 0))}
	}
	key := [2]uint64{f.p, uint64(n)}
	if t, ok := transforms.Load(key); ok {
		return t.(*Transform), nil
	}
	root, err := f.RootOfUnity(uint64(n))
	if err != nil {
		return nil, err
	}
	t := &Transform{f: f, n: n, w: make([]Element, n), winv: make([]Element, n)}
	t.ninverse, _ = f.Inv(f.FromUint64(uint64(n)))
	inverse, _ := f.Inv(root)
	for h := n / 2; h >= 1; h /= 2 {
		a, b := f.one, f.one
		for j := range h {
			t.w[h+j], t.winv[h+j] = a, b
			a, b = f.Mul(a, root), f.Mul(b, inverse)
		}
		root, inverse = f.Mul(root, root), f.Mul(inverse, inverse)
	}
	kept, _ := transforms.LoadOrStore(key, t)
	return kept.(*Transform), nil
}

// TransformLength returns the longest length of a transform over the field.
func TransformLength(f *Field) int { return 1 << min(bits.TrailingZeros64(f.p-1), 30) }

// Forward replaces a, of length n, by its values at the powers of the root, in
// bit-reversed order. Cost: n log2(n)/2 products.
func (t *Transform) Forward(a []Element) {
	f := t.f
	a = a[:t.n]
	if slowcheck {
		f.checkCanonical(a)
	}
	for h := t.n / 2; h >= 1; h /= 2 {
		w := t.w[h : 2*h]
		for s := 0; s < t.n; s += 2 * h {
			x, y := a[s:s+h], a[s+h:s+2*h]
			y = y[:len(x)]
			w := w[:len(x)]
			for j := range x {
				u, v := x[j], y[j]
				x[j] = f.Add(u, v)
				y[j] = f.Mul(f.Sub(u, v), w[j])
			}
		}
	}
}

// Inverse undoes Forward.
func (t *Transform) Inverse(a []Element) {
	f := t.f
	a = a[:t.n]
	if slowcheck {
		f.checkCanonical(a)
	}
	for h := 1; h < t.n; h *= 2 {
		w := t.winv[h : 2*h]
		for s := 0; s < t.n; s += 2 * h {
			x, y := a[s:s+h], a[s+h:s+2*h]
			y = y[:len(x)]
			w := w[:len(x)]
			for j := range x {
				u, v := x[j], f.Mul(y[j], w[j])
				x[j] = f.Add(u, v)
				y[j] = f.Sub(u, v)
			}
		}
	}
	f.ScaleRow(a, t.ninverse, a)
}
