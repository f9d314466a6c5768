package poly

import "eliminant/rational/prime"

// Recurrence returns the minimal polynomial of a sequence, the monic m of least
// degree d with sum_i m_i s_{k+i} = 0 for 0 <= k < len(s)-d, by the Berlekamp-
// Massey algorithm (J. L. Massey, Shift-register synthesis and BCH decoding, IEEE
// Trans. Inf. Theory 15 (1969) 122). A sequence with a recurrence of degree d is
// determined by its first 2d terms. Cost: quadratic.
func Recurrence(f *prime.Field, s []prime.Element) *Poly {
	n := len(s)
	r := reversed(s) // r[n-1-k+i] = s[k-i]
	// c: connection polynomial, c_0 = 1, sum_i c_i s_{k-i} = 0; b: the one
	// before the length last changed, with discrepancy 1/inverse
	c, b := make([]prime.Element, 1, n+2), make([]prime.Element, 1, n+2)
	c[0], b[0] = f.One(), f.One()
	inverse := f.One()
	length, gap := 0, 1
	var spare []prime.Element
	for k := range n {
		m := min(len(c), k+1)
		d := f.Dot(c[:m], r[n-1-k:])
		if d == 0 {
			gap++
			continue
		}
		q := f.Mul(d, inverse)
		grows := 2*length <= k
		if grows {
			spare = append(spare[:0], c...)
		}
		for len(c) < len(b)+gap {
			c = append(c, 0)
		}
		f.SubScaledRow(c[gap:gap+len(b)], q, b)
		if grows {
			length = k + 1 - length
			b, spare = spare, b
			inverse, _ = f.Inv(d)
			gap = 1
		} else {
			gap++
		}
	}
	z := make([]prime.Element, length+1)
	for i := 0; i <= length && i < len(c); i++ {
		z[length-i] = c[i]
	}
	return new(Poly).set(f, z)
}
