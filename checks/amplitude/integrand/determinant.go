package integrand

import "eliminant/rational/prime"

// ReducedDeterminant sets z = det Phi, the determinant over a, b = 3..n-1 of
//
//	Phi_ab = s_ab/(z_a - z_b)^2,  Phi_aa = - sum over b != a, b >= 2, of s_ab/(z_a - z_b)^2,
//
// which is the gauge-fixed reduced determinant: the sum over solutions of an
// integrand I is the sum of I/det Phi. Its Moebius weight is 4 in every leg.
// Cost: about (n-3)^3/6 products of rows.
func (v *Solution) ReducedDeterminant(z []prime.Element) {
	r, d, m := v.ring, v.ring.depth, v.legs-3
	if v.phi == nil {
		v.phi = make([]prime.Element, m*m*d)
		v.square = make([]prime.Element, d)
	}
	phi := func(a, b int) []prime.Element {
		i := (a-3)*m + b - 3
		return v.phi[i*d : (i+1)*d]
	}
	for a := 3; a < v.legs; a++ {
		r.SetConstant(phi(a, a), 0)
	}
	for a := 3; a < v.legs; a++ {
		for b := 2; b <= v.legs; b++ {
			if b > 2 && b <= a {
				continue
			}
			g := v.Inverse(a, b)
			r.Square(v.square, g)
			v.timesInvariant(v.square, a, b, v.square)
			r.Sub(phi(a, a), phi(a, a), v.square)
			if b > 2 && b < v.legs {
				r.Sub(phi(b, b), phi(b, b), v.square)
				copy(phi(a, b), v.square)
			}
		}
	}
	r.symmetricDeterminant(z, v.phi, m)
}

// symmetricDeterminant sets z to the determinant of the symmetric m x m matrix
// whose rows (i, j), i <= j, are x[(i m + j) D:]; the rest of x is scratch, and x
// is destroyed. Elimination takes diagonal pivots that are units, and where none
// is left goes on with eliminate.
func (r *Ring) symmetricDeterminant(z, x []prime.Element, m int) {
	d := r.depth
	row := func(i, j int) []prime.Element {
		if i > j {
			i, j = j, i
		}
		k := i*m + j
		return x[k*d : (k+1)*d]
	}
	inverse := r.inverse
	r.SetOne(z)
	for k := range m {
		pivot := k
		for pivot < m && row(pivot, pivot)[0] == 0 {
			pivot++
		}
		if pivot == m {
			r.finishDeterminant(z, x, m, k)
			return
		}
		if pivot != k { // exchange k and pivot on both sides
			for j := range m {
				if j != k && j != pivot && j >= k {
					swapRows(row(k, j), row(pivot, j))
				}
			}
			swapRows(row(k, k), row(pivot, pivot))
		}
		r.Mul(z, z, row(k, k))
		if k == m-1 {
			return
		}
		r.Invert(inverse, row(k, k))
		for i := k + 1; i < m; i++ {
			// scratch = -(row k)_i/pivot, then subtracted from the rest of row i
			r.Mul(r.scratch, row(k, i), inverse)
			r.negate(r.scratch)
			r.reversed(r.reverse, r.scratch)
			for j := i; j < m; j++ {
				r.convolve(row(i, j), row(i, j), row(k, j), r.reverse, 1)
			}
		}
	}
}

// finishDeterminant multiplies z by the determinant of the trailing block
// i, j >= k of a symmetric matrix stored as in symmetricDeterminant.
func (r *Ring) finishDeterminant(z, x []prime.Element, m, k int) {
	d, size := r.depth, m-k
	y := make([]prime.Element, size*size*d)
	for i := range size {
		for j := range size {
			a, b := k+min(i, j), k+max(i, j)
			copy(y[(i*size+j)*d:][:d], x[(a*m+b)*d:])
		}
	}
	t := make([]prime.Element, d)
	r.Determinant(t, y, size)
	r.Mul(z, z, t)
}

// Determinant sets z to the determinant of the m x m matrix whose entry (i, j) is
// the row x[(i m + j) D:]; x is destroyed. Pivots are units; where the constant
// terms of the whole remaining block vanish, a factor e is taken out of each of
// its rows, which is exact: the determinant modulo e^D depends on the entries
// modulo e^D alone, so they may be continued by zeros. Cost: m^3/3 products of
// rows.
func (r *Ring) Determinant(z, x []prime.Element, m int) {
	d := r.depth
	row := func(i, j int) []prime.Element {
		k := i*m + j
		return x[k*d : (k+1)*d]
	}
	inverse, factor := r.inverse, make([]prime.Element, d)
	shift, odd := 0, false
	r.SetOne(z)
	for k := 0; k < m; {
		p, q := k, k
		for p < m && row(p, q)[0] == 0 {
			if q++; q == m {
				p, q = p+1, k
			}
		}
		if p == m {
			if shift += m - k; shift >= d {
				clear(z[:d])
				return
			}
			for i := k; i < m; i++ {
				for j := k; j < m; j++ {
					lower(row(i, j), 1)
				}
			}
			continue
		}
		for j := k; p != k && j < m; j++ {
			swapRows(row(k, j), row(p, j))
		}
		for i := k; q != k && i < m; i++ {
			swapRows(row(i, k), row(i, q))
		}
		odd = odd != ((p != k) != (q != k))
		r.Mul(z, z, row(k, k))
		r.Invert(inverse, row(k, k))
		for i := k + 1; i < m; i++ {
			r.Mul(factor, row(i, k), inverse)
			for j := k + 1; j < m; j++ {
				r.Mul(r.scratch, factor, row(k, j))
				r.Sub(row(i, j), row(i, j), r.scratch)
			}
		}
		k++
	}
	r.raise(z, shift, odd)
}

// raise sets z = e^shift z, and negates it if odd.
func (r *Ring) raise(z []prime.Element, shift int, odd bool) {
	z = z[:r.depth]
	if shift > 0 {
		copy(z[shift:], z)
		clear(z[:shift])
	}
	if odd {
		r.negate(z)
	}
}

// lower sets x = x/e^shift, for x whose first shift coefficients vanish.
func lower(x []prime.Element, shift int) {
	copy(x, x[shift:])
	clear(x[len(x)-shift:])
}

// swapRows exchanges the contents of two rows.
func swapRows(x, y []prime.Element) {
	y = y[:len(x)]
	for i := range x {
		x[i], y[i] = y[i], x[i]
	}
}
