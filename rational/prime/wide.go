package prime

import "math/bits"

// Wide is a sum of products of elements that has not been reduced yet:
// Hi 2^64 + Lo. Every method of this file keeps Hi < p, so sums can be carried
// from row to row; Field.ReduceWide gives the element. The zero value is 0.
type Wide struct{ Hi, Lo uint64 }

// wideBlock is how many products are added between two corrections. A product
// is below p^2 < 2^62 p, so starting from a sum below 2^64 p the block ends below
// 2^64 p (1 + wideBlock/4) = 2^64 4p < 2^128.
const wideBlock = 12

// settle returns the same residue with Hi < p, for Hi < 4p.
func (f *Field) settle(hi, lo uint64) Wide {
	p := f.p
	if hi >= 2*p {
		hi -= 2 * p
	}
	if hi >= p {
		hi -= p
	}
	return Wide{hi, lo}
}

// ReduceWide returns the element that w stands for.
func (f *Field) ReduceWide(w Wide) Element { return f.reduce(w.Hi, w.Lo) }

// DotWide returns w + the sum of x_i y_i; y must be at least as long as x.
func (f *Field) DotWide(w Wide, x, y []Element) Wide {
	if slowcheck {
		f.checkCanonical(x, y[:len(x)])
	}
	hi, lo := w.Hi, w.Lo
	var c uint64
	for len(x) > 0 {
		m := min(len(x), wideBlock)
		b, d := x[:m], y[:m]
		x, y = x[m:], y[m:]
		for i, v := range b {
			h, l := bits.Mul64(uint64(v), uint64(d[i]))
			lo, c = bits.Add64(lo, l, 0)
			hi, _ = bits.Add64(hi, h, c)
		}
		w = f.settle(hi, lo)
		hi, lo = w.Hi, w.Lo
	}
	return Wide{hi, lo}
}

// GatherDotWide returns w + the sum of x_i y[at_i]: a sparse row x with columns
// at, times the vector y. at must be at least as long as x; panics if an index
// is out of range.
func (f *Field) GatherDotWide(w Wide, x []Element, at []int32, y []Element) Wide {
	if slowcheck {
		f.checkCanonical(x)
		for _, j := range at[:len(x)] {
			f.checkCanonical(y[j : j+1])
		}
	}
	hi, lo := w.Hi, w.Lo
	twice := 2 * f.p
	var c, h, l uint64
	// the sum is below 2^64 2p before a block of 8, so below 2^64 4p after it
	for len(x) >= 8 && len(at) >= 8 {
		a, j := (*[8]Element)(x), (*[8]int32)(at)
		h, l = bits.Mul64(uint64(a[0]), uint64(y[j[0]]))
		lo, c = bits.Add64(lo, l, 0)
		hi, _ = bits.Add64(hi, h, c)
		h, l = bits.Mul64(uint64(a[1]), uint64(y[j[1]]))
		lo, c = bits.Add64(lo, l, 0)
		hi, _ = bits.Add64(hi, h, c)
		h, l = bits.Mul64(uint64(a[2]), uint64(y[j[2]]))
		lo, c = bits.Add64(lo, l, 0)
		hi, _ = bits.Add64(hi, h, c)
		h, l = bits.Mul64(uint64(a[3]), uint64(y[j[3]]))
		lo, c = bits.Add64(lo, l, 0)
		hi, _ = bits.Add64(hi, h, c)
		h, l = bits.Mul64(uint64(a[4]), uint64(y[j[4]]))
		lo, c = bits.Add64(lo, l, 0)
		hi, _ = bits.Add64(hi, h, c)
		h, l = bits.Mul64(uint64(a[5]), uint64(y[j[5]]))
		lo, c = bits.Add64(lo, l, 0)
		hi, _ = bits.Add64(hi, h, c)
		h, l = bits.Mul64(uint64(a[6]), uint64(y[j[6]]))
		lo, c = bits.Add64(lo, l, 0)
		hi, _ = bits.Add64(hi, h, c)
		h, l = bits.Mul64(uint64(a[7]), uint64(y[j[7]]))
		lo, c = bits.Add64(lo, l, 0)
		hi, _ = bits.Add64(hi, h, c)
		if hi >= twice {
			hi -= twice
		}
		x, at = x[8:], at[8:]
	}
	at = at[:len(x)]
	for i, v := range x {
		h, l = bits.Mul64(uint64(v), uint64(y[at[i]]))
		lo, c = bits.Add64(lo, l, 0)
		hi, _ = bits.Add64(hi, h, c)
	}
	return f.settle(hi, lo)
}
