package integrand

import "eliminant/rational/prime"

// Ring is the ring GF(p)[e]/e^D of truncated power series. An element is a row
// of D coefficients, lowest order first; D = 1 is GF(p) itself. A Ring carries
// scratch space: one per goroutine.
type Ring struct {
	field   *prime.Field
	depth   int
	zero    []prime.Element
	reverse []prime.Element // of the second factor, in use within one method
	scratch []prime.Element
	inverse []prime.Element // of a pivot
}

// NewRing returns GF(p)[e]/e^depth, depth >= 1.
func NewRing(f *prime.Field, depth int) *Ring {
	if depth < 1 {
		panic("integrand.NewRing: depth below 1")
	}
	return &Ring{
		field:   f,
		depth:   depth,
		zero:    make([]prime.Element, depth),
		reverse: make([]prime.Element, depth),
		scratch: make([]prime.Element, depth),
		inverse: make([]prime.Element, depth),
	}
}

// Field returns GF(p).
func (r *Ring) Field() *prime.Field { return r.field }

// Depth returns D, the length of every row.
func (r *Ring) Depth() int { return r.depth }

// SetConstant sets z = c.
func (r *Ring) SetConstant(z []prime.Element, c prime.Element) {
	z = z[:r.depth]
	z[0] = c
	clear(z[1:])
}

// Add sets z = x + y; z may be x or y.
func (r *Ring) Add(z, x, y []prime.Element) { r.field.AddRow(z[:r.depth], x, y) }

// Sub sets z = x - y; z may be x or y.
func (r *Ring) Sub(z, x, y []prime.Element) { r.field.SubRow(z[:r.depth], x, y) }

// Mul sets z = x y; z may be x or y. Cost: D(D+1)/2 products, D reductions.
func (r *Ring) Mul(z, x, y []prime.Element) {
	r.reversed(r.reverse, y)
	r.convolve(z, r.zero, x, r.reverse, 1)
}

// MulAdd sets z = z + x y; z may be x or y.
func (r *Ring) MulAdd(z, x, y []prime.Element) {
	r.reversed(r.reverse, y)
	r.convolve(z, z, x, r.reverse, 1)
}

// negate sets x = -x.
func (r *Ring) negate(x []prime.Element) {
	for t, v := range x {
		x[t] = r.field.Neg(v)
	}
}

// MulLinear sets z = (c0 + c1 e) x; z may be x.
func (r *Ring) MulLinear(z []prime.Element, c0, c1 prime.Element, x []prime.Element) {
	f := r.field
	z, x = z[:r.depth], x[:r.depth]
	for t := len(z) - 1; t > 0; t-- {
		z[t] = f.ReduceWide(twoProducts(c0, x[t], c1, x[t-1]))
	}
	z[0] = f.Mul(c0, x[0])
}

// Invert sets z = 1/x and reports whether x is a unit, that is x[0] != 0; if it
// is not, z is unspecified. z must not overlap x. Cost: one inversion in GF(p)
// and D(D+1)/2 products.
func (r *Ring) Invert(z, x []prime.Element) bool {
	f, d := r.field, r.depth
	x, z = x[:d], z[:d]
	c, ok := f.Inv(x[0])
	if !ok {
		return false
	}
	minus := f.Neg(c)
	// back[d-1-i] = z[i], so that sum_{i=1..t} x[i] z[t-i] runs upwards in both
	back := r.reverse
	z[0], back[d-1] = c, c
	for t := 1; t < d; t++ {
		v := f.Mul(minus, r.Dot(x[1:t+1], back[d-t:]))
		z[t], back[d-1-t] = v, v
	}
	return true
}

// reversed sets z[D-1-t] = x[t].
func (r *Ring) reversed(z, x []prime.Element) {
	x = x[:r.depth]
	z = z[:len(x)]
	for i, v := range x {
		z[len(z)-1-i] = v
	}
}

// isConstant tells whether x has no term of positive order.
func isConstant(x []prime.Element) bool {
	for _, v := range x[1:] {
		if v != 0 {
			return false
		}
	}
	return true
}
