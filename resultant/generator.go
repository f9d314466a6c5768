package resultant

import (
	"slices"

	"eliminant/rational/prime"
)

// generator finds the shortest common recurrence of m sequences of T terms: C with
// C_0 = 1 and length L, sum_i C_i s_{n-i} = 0 for L <= n < T in every sequence. It
// returns C padded to length L+1, and whether C is the only one of its length.
//
// It is the algorithm of Berlekamp and Massey for several sequences (G.-L. Feng, K. K.
// Tzeng, A generalization of the Berlekamp-Massey algorithm for multisequence
// shift-register synthesis, IEEE Trans. Inf. Theory 37 (1991) 1274). For every
// sequence h it keeps an earlier candidate B_h of length L_h with the
// discrepancy d_h != 0 at n_h; x^{n-n_h} B_h then has its first one at (n, h).
//
// Uniqueness. Let S_h be the sequences as polynomials of degree below T. Recurrences of
// length at most l are the elements with max(deg D, deg E_h + 1) <= l of the module
// of all (D, E_1, .., E_m) with D S_h = E_h mod x^T. C and the x^{T-n_h} B_h are a basis of
// it (at the start (1, 0) and x^{-1} e_h with n_h = -1, L_h = 0; a step adds a multiple of
// an element to another one, exchanges two and multiplies by x), whose determinant has
// degree mT. Their lengths L and T - n_h + L_h add up to mT + m in every step. So the
// basis is reduced: the length of a combination is the largest length of a
// term. Hence C is unique iff T - n_h + L_h > L for all h. Cost: m T L products.
func generator(f *prime.Field, sequences [][]prime.Element) (c []prime.Element, unique bool) {
	m, total := len(sequences), len(sequences[0])
	type earlier struct {
		b      []prime.Element
		at     int // n_h
		length int
		inv    prime.Element // 1/d_h
	}
	old := make([]earlier, m)
	back := make([][]prime.Element, m) // sequences in reverse, so that sums are dot products
	for h, s := range sequences {
		old[h] = earlier{at: -1, inv: f.One()}
		back[h] = slices.Clone(s)
		slices.Reverse(back[h])
	}
	c = make([]prime.Element, 1, total+1)
	c[0] = f.One()
	spare := make([]prime.Element, 0, total+1)
	length := 0
	for n := range total {
		for h := range m {
			r := back[h][total-1-n:]
			d := f.ReduceWide(f.DotWide(prime.Wide{}, c[:min(len(c), n+1)], r))
			if d == 0 {
				continue
			}
			o := &old[h]
			shift := n - o.at
			grown := shift + o.length
			replace := grown > length
			if replace {
				spare = append(spare[:0], c...)
			}
			for len(c) < shift+len(o.b) {
				c = append(c, 0)
			}
			f.SubScaledRow(c[shift:shift+len(o.b)], f.Mul(d, o.inv), o.b)
			if replace {
				inv, _ := f.Inv(d)
				o.b, spare = spare, o.b
				o.at, o.inv = n, inv
				o.length, length = length, grown
			}
		}
	}
	unique = true
	for _, o := range old {
		unique = unique && total-o.at+o.length > length
	}
	for len(c) <= length {
		c = append(c, 0)
	}
	return c[:length+1], unique
}
