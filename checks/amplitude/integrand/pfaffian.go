package integrand

import "eliminant/rational/prime"

// Antisymmetric is an antisymmetric matrix of even size over a Ring; only its
// entries (i, j) with i < j are stored. It carries the scratch space of the
// elimination.
type Antisymmetric struct {
	size, depth int
	entries     []prime.Element
	left, right []prime.Element // size pairs of interleaved rows
}

// NewAntisymmetric returns a zero matrix of the given even size over r.
func NewAntisymmetric(r *Ring, size int) *Antisymmetric {
	if size%2 != 0 || size < 0 {
		panic("integrand.NewAntisymmetric: odd size")
	}
	d := r.depth
	return &Antisymmetric{
		size: size, depth: d,
		entries: make([]prime.Element, size*size*d),
		left:    make([]prime.Element, 2*size*d),
		right:   make([]prime.Element, 2*size*d),
	}
}

// Size returns the number of rows.
func (m *Antisymmetric) Size() int { return m.size }

// Entry returns the row of entry (i, j), 0 <= i < j < size, for reading and
// setting.
func (m *Antisymmetric) Entry(i, j int) []prime.Element {
	k := i*m.size + j
	return m.entries[k*m.depth : (k+1)*m.depth : (k+1)*m.depth]
}

// Pfaffian sets z = Pf m and destroys m. The sign is that of Pf = m_01 for size
// 2; size 0 gives 1.
//
// Each step takes a pivot m_ij that is a unit. Where every entry of what is left
// has constant term 0, a factor e is taken out of the whole block of size 2 r:
// Pf(e K) = e^r Pf K, and K is needed only modulo e^(D-r), so nothing is lost.
// Cost: size^3/6 pairs of products of rows; the first step is of lower order if
// its pivot row is constant.
func (r *Ring) Pfaffian(z []prime.Element, m *Antisymmetric) {
	d := r.depth
	shift, odd := 0, false
	r.SetOne(z)
	for k := 0; k < m.size; {
		i, j, ok := m.pivot(k)
		if !ok {
			if shift += (m.size - k) / 2; shift >= d {
				clear(z[:d])
				return
			}
			for i := k; i < m.size; i++ {
				for j := i + 1; j < m.size; j++ {
					lower(m.Entry(i, j), 1)
				}
			}
			continue
		}
		if i != k {
			r.exchange(m, k, i, k)
			odd = !odd
		}
		if j != k+1 { // j > i >= k, so row j is still in place
			r.exchange(m, k+1, j, k)
			odd = !odd
		}
		r.Mul(z, z, m.Entry(k, k+1))
		if k += 2; k < m.size {
			r.reduceBlock(m, k)
		}
	}
	r.raise(z, shift, odd)
}

// pivot returns the first unit entry (i, j), k <= i < j.
func (m *Antisymmetric) pivot(k int) (int, int, bool) {
	for i := k; i < m.size; i++ {
		for j := i + 1; j < m.size; j++ {
			if m.entries[(i*m.size+j)*m.depth] != 0 {
				return i, j, true
			}
		}
	}
	return 0, 0, false
}

// exchange swaps indices a < b, on both sides, in the block of indices >= k; the
// Pfaffian changes its sign.
func (r *Ring) exchange(m *Antisymmetric, a, b, k int) {
	for c := k; c < m.size; c++ {
		switch {
		case c < a:
			swapRows(m.Entry(c, a), m.Entry(c, b))
		case c > b:
			swapRows(m.Entry(a, c), m.Entry(b, c))
		case c > a && c < b: // these change sides: m_ac <- m_bc = -m_cb
			x, y := m.Entry(a, c), m.Entry(c, b)
			swapRows(x, y)
			r.negate(x)
			r.negate(y)
		}
	}
	r.negate(m.Entry(a, b))
}

// reduceBlock replaces the block of indices i, j >= k by the Schur complement
// of the pivot at (k-2, k-1): with a and b the rows k-2 and k-1 and c their
// common entry, m_ij + (b_i a_j - a_i b_j)/c.
func (r *Ring) reduceBlock(m *Antisymmetric, k int) {
	f, d := r.field, r.depth
	constant := isConstant(m.Entry(k-2, k-1))
	for j := k; constant && j < m.size; j++ {
		constant = isConstant(m.Entry(k-2, j))
	}
	if constant {
		c, _ := f.Inv(m.Entry(k-2, k-1)[0])
		for j := k; j < m.size; j++ {
			m.left[j] = f.Mul(c, m.Entry(k-2, j)[0])
		}
		for i := k; i < m.size; i++ {
			b, minus := m.Entry(k-1, i), f.Neg(m.left[i])
			for j := i + 1; j < m.size; j++ {
				r.addTwoScaled(m.Entry(i, j), m.left[j], b, minus, m.Entry(k-1, j))
			}
		}
		return
	}
	// left_i = (b_i, a_i/c) and right_j = (a_j/c, -b_j) backwards, interleaved,
	// so that both products of an entry are one sum with one reduction
	r.Invert(r.inverse, m.Entry(k-2, k-1))
	scaled := r.scratch
	for j := k; j < m.size; j++ {
		r.Mul(scaled, m.Entry(k-2, j), r.inverse)
		b := m.Entry(k-1, j)
		left, right := m.left[2*j*d:2*(j+1)*d], m.right[2*j*d:2*(j+1)*d]
		for t, v := range scaled {
			left[2*t], left[2*t+1] = b[t], v
			right[2*(d-1-t)], right[2*(d-1-t)+1] = v, f.Neg(b[t])
		}
	}
	for i := k; i < m.size; i++ {
		left := m.left[2*i*d : 2*(i+1)*d]
		for j := i + 1; j < m.size; j++ {
			e := m.Entry(i, j)
			r.convolve(e, e, left, m.right[2*j*d:2*(j+1)*d], 2)
		}
	}
}
