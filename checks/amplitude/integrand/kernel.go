package integrand

import (
	"math/bits"

	"eliminant/rational/prime"
)

// twoProducts returns a x + b y.
// Range: two products are below 2 p^2 < 2^64 p/2, so Hi < p.
func twoProducts(a, x, b, y prime.Element) prime.Wide {
	h, l := bits.Mul64(uint64(a), uint64(x))
	k, m := bits.Mul64(uint64(b), uint64(y))
	lo, c := bits.Add64(l, m, 0)
	return prime.Wide{Hi: h + k + c, Lo: lo}
}

// Combine returns a x + b y with one reduction.
func (r *Ring) Combine(a, x, b, y prime.Element) prime.Element {
	return r.field.ReduceWide(twoProducts(a, x, b, y))
}

// Dot returns the sum of x_i y_i; y must be at least as long as x.
func (r *Ring) Dot(x, y []prime.Element) prime.Element {
	if slowcheck {
		r.checkCanonical(x, y[:len(x)])
	}
	p := r.field.Modulus()
	hi, lo := dotWide(0, 0, 2*p, x, y)
	return r.field.ReduceWide(settle(hi, lo, p))
}

// settle brings Hi from [0, 4p) to [0, p), the residue unchanged.
func settle(hi, lo, p uint64) prime.Wide {
	if hi >= 2*p {
		hi -= 2 * p
	}
	if hi >= p {
		hi -= p
	}
	return prime.Wide{Hi: hi, Lo: lo}
}

// dotWide adds the products x_i y_i to hi 2^64 + lo, for twice = 2p.
// Range: a product is below p^2 < 2^64 p/4. Entering a block of 8 below 2^64 2p
// the sum leaves it below 2^64 4p < 2^128 and is then brought below 2^64 2p
// again; the last at most 7 products leave hi < 4p.
func dotWide(hi, lo, twice uint64, x, y []prime.Element) (uint64, uint64) {
	var c, h, l uint64
	for len(x) >= 8 && len(y) >= 8 {
		a, b := (*[8]prime.Element)(x), (*[8]prime.Element)(y)
		h, l = bits.Mul64(uint64(a[0]), uint64(b[0]))
		lo, c = bits.Add64(lo, l, 0)
		hi, _ = bits.Add64(hi, h, c)
		h, l = bits.Mul64(uint64(a[1]), uint64(b[1]))
		lo, c = bits.Add64(lo, l, 0)
		hi, _ = bits.Add64(hi, h, c)
		h, l = bits.Mul64(uint64(a[2]), uint64(b[2]))
		lo, c = bits.Add64(lo, l, 0)
		hi, _ = bits.Add64(hi, h, c)
		h, l = bits.Mul64(uint64(a[3]), uint64(b[3]))
		lo, c = bits.Add64(lo, l, 0)
		hi, _ = bits.Add64(hi, h, c)
		h, l = bits.Mul64(uint64(a[4]), uint64(b[4]))
		lo, c = bits.Add64(lo, l, 0)
		hi, _ = bits.Add64(hi, h, c)
		h, l = bits.Mul64(uint64(a[5]), uint64(b[5]))
		lo, c = bits.Add64(lo, l, 0)
		hi, _ = bits.Add64(hi, h, c)
		h, l = bits.Mul64(uint64(a[6]), uint64(b[6]))
		lo, c = bits.Add64(lo, l, 0)
		hi, _ = bits.Add64(hi, h, c)
		h, l = bits.Mul64(uint64(a[7]), uint64(b[7]))
		lo, c = bits.Add64(lo, l, 0)
		hi, _ = bits.Add64(hi, h, c)
		if hi >= twice {
			hi -= twice
		}
		x, y = x[8:], y[8:]
	}
	y = y[:len(x)]
	for i, v := range x {
		h, l = bits.Mul64(uint64(v), uint64(y[i]))
		lo, c = bits.Add64(lo, l, 0)
		hi, _ = bits.Add64(hi, h, c)
	}
	return hi, lo
}

// convolve sets z[t] = w[t] + sum of x[i] y[i + stride (D-1-t)] over
// i < stride (t+1), for t = 0..D-1. With stride 1 and y reversed it is the
// truncated product w + x y; with stride k it is w plus a sum of k such products
// whose factors are interleaved, reduced once. z may be w, and may be x if
// stride is 1.
// Range: the sum starts at 2^64 w[t] < 2^64 p, see dotWide.
func (r *Ring) convolve(z, w, x, y []prime.Element, stride int) {
	f, d := r.field, r.depth
	p := f.Modulus()
	z, w = z[:d], w[:d]
	x, y = x[:stride*d], y[:stride*d]
	if slowcheck {
		r.checkCanonical(w, x, y)
	}
	// downwards, so that z may overlap x
	for t := d - 1; t >= 0; t-- {
		hi, lo := dotWide(uint64(w[t]), 0, 2*p, x[:stride*(t+1)], y[stride*(d-1-t):])
		if slowcheck {
			r.checkRange(hi, 4)
		}
		z[t] = f.ReduceWide(settle(hi, lo, p))
	}
}

// addTwoScaled sets z = z + a x + b y.
// Range: 2^64 z[t] < 2^64 p and two products below 2^64 p/2 together, so Hi < 2p.
func (r *Ring) addTwoScaled(z []prime.Element, a prime.Element, x []prime.Element, b prime.Element, y []prime.Element) {
	f, d := r.field, r.depth
	p := f.Modulus()
	z, x, y = z[:d], x[:d], y[:d]
	if slowcheck {
		r.checkCanonical(z, x, y, []prime.Element{a, b})
	}
	for t := range z {
		w := twoProducts(a, x[t], b, y[t])
		w.Hi += uint64(z[t])
		if w.Hi >= p {
			w.Hi -= p
		}
		z[t] = f.ReduceWide(w)
	}
}

// Square sets z = x^2; z must not overlap x. Cost: D^2/4 products.
func (r *Ring) Square(z, x []prime.Element) {
	f, d := r.field, r.depth
	p := f.Modulus()
	z, x = z[:d], x[:d]
	if slowcheck {
		r.checkCanonical(x)
	}
	back := r.reverse
	r.reversed(back, x)
	for t := range z {
		// twice the sum of x[i] x[t-i] over i < t-i, and the middle term
		h := (t + 1) / 2
		hi, lo := dotWide(0, 0, 2*p, x[:h], back[d-1-t:])
		v := f.ReduceWide(settle(hi, lo, p))
		v = f.Add(v, v)
		if t%2 == 0 {
			v = f.Add(v, f.Mul(x[h], x[h]))
		}
		z[t] = v
	}
}
