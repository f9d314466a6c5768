package prime

import "math/bits"

// AddRow sets z = x + y entry by entry. The rows must have equal lengths; z may
// be x or y.
func (f *Field) AddRow(z, x, y []Element) {
	if slowcheck {
		f.checkCanonical(x, y)
	}
	p := f.p
	x, y = x[:len(z)], y[:len(z)]
	for i := range z {
		t := uint64(x[i]) + uint64(y[i])
		if t >= p {
			t -= p
		}
		z[i] = Element(t)
	}
}

// SubRow sets z = x - y entry by entry.
func (f *Field) SubRow(z, x, y []Element) {
	if slowcheck {
		f.checkCanonical(x, y)
	}
	p := f.p
	x, y = x[:len(z)], y[:len(z)]
	for i := range z {
		t := uint64(x[i]) - uint64(y[i])
		if t > uint64(x[i]) {
			t += p
		}
		z[i] = Element(t)
	}
}

// MulRow sets z = x y entry by entry.
func (f *Field) MulRow(z, x, y []Element) {
	if slowcheck {
		f.checkCanonical(x, y)
	}
	x, y = x[:len(z)], y[:len(z)]
	for i := range z {
		z[i] = f.Mul(x[i], y[i])
	}
}

// ScaleRow sets z = c x.
func (f *Field) ScaleRow(z []Element, c Element, x []Element) {
	if slowcheck {
		f.checkCanonical([]Element{c}, x)
	}
	x = x[:len(z)]
	for i := range z {
		z[i] = f.Mul(c, x[i])
	}
}

// AddScaledRow sets z = z + c x.
func (f *Field) AddScaledRow(z []Element, c Element, x []Element) {
	if slowcheck {
		f.checkCanonical(z, []Element{c}, x)
	}
	x = x[:len(z)]
	for i := range z {
		hi, lo := bits.Mul64(uint64(c), uint64(x[i]))
		// z 2^64 has residue z after reduction; hi + z < 2p < 2^63
		hi += uint64(z[i])
		if hi >= f.p {
			hi -= f.p
		}
		z[i] = f.reduce(hi, lo)
	}
}

// SubScaledRow sets z = z - c x.
func (f *Field) SubScaledRow(z []Element, c Element, x []Element) {
	if slowcheck {
		f.checkCanonical([]Element{c})
	}
	f.AddScaledRow(z, f.Neg(c), x)
}

// Dot returns the sum of x_i y_i with one reduction at the end.
func (f *Field) Dot(x, y []Element) Element {
	if slowcheck {
		f.checkCanonical(x, y)
	}
	var hi, lo, c uint64
	y = y[:len(x)]
	p := f.p
	for i := range x {
		h, l := bits.Mul64(uint64(x[i]), uint64(y[i]))
		lo, c = bits.Add64(lo, l, 0)
		hi += h + c // hi < p before, h < 2^60, so hi < 2^63
		if hi >= p {
			hi -= p
		}
	}
	return f.reduce(hi, lo)
}

// InvertRow sets z = 1/x entry by entry with one inversion and 3(len-1)
// products. If an entry is zero it returns its index and false, and z is
// unspecified. z must not overlap x.
func (f *Field) InvertRow(z, x []Element) (int, bool) {
	if slowcheck {
		f.checkCanonical(x)
	}
	acc := f.one
	for i, v := range x {
		if v == 0 {
			return i, false
		}
		z[i] = acc
		acc = f.Mul(acc, v)
	}
	inv, _ := f.Inv(acc)
	for i := len(x) - 1; i >= 0; i-- {
		z[i] = f.Mul(z[i], inv)
		inv = f.Mul(inv, x[i])
	}
	return 0, true
}
