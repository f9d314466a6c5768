package series

import "eliminant/rational/prime"

// start is the point of which all solutions are known. With m = n - 3 and legs
// a, b = 3..n-1:
//
//	s_ab = 4, s_a2 = s_an = 1, s_a1 = -(4m-2), s_2n = -2m^2, s_12 = s_1n = 2m^2-m.
//
// f_a/2 is then Stieltjes' condition of equilibrium with alpha = beta = -1/2 on
// [0, 1], solved by the zeros (1 + cos((2j-1) pi/2m))/2 of the Chebyshev
// polynomial T_m, in any order (G. Szego, Orthogonal Polynomials, section 6.7).
type start struct {
	legs, free int // n, m
	s          []prime.Element
	z          []prime.Element // m nodes, then z_2 = 1 and z_n = 0
	g          []prime.Element // 1/(z_i - z_j), (m+2) x (m+2)
	inverse    []prime.Element // of Phi, m x m
}

// startInvariants returns s_ab of the start point, n x n by leg.
func startInvariants(legs int) []int64 {
	m := int64(legs - 3)
	s := make([]int64, legs*legs)
	set := func(a, b int, x int64) {
		s[(a-1)*legs+b-1], s[(b-1)*legs+a-1] = x, x
	}
	for a := 3; a < legs; a++ {
		for b := a + 1; b < legs; b++ {
			set(a, b, 4)
		}
		set(a, 2, 1)
		set(a, legs, 1)
		set(a, 1, -(4*m - 2))
	}
	set(2, legs, -2*m*m)
	set(1, 2, 2*m*m-m)
	set(1, legs, 2*m*m-m)
	return s
}

// newStart returns the start point over f: a *PrimeError if f has no nodes, a
// *StartError if they coincide or the Jacobian is singular.
func newStart(f *prime.Field, legs int) (*start, error) {
	m := legs - 3
	p := &start{legs: legs, free: m}
	for _, x := range startInvariants(legs) {
		p.s = append(p.s, f.FromInt64(x))
	}
	w, err := f.RootOfUnity(uint64(4 * m))
	if err != nil {
		return nil, &PrimeError{f.Modulus(), legs}
	}
	quarter, _ := f.Inv(f.FromInt64(4))
	square, half := f.Square(w), f.FromInt64(2)
	back, _ := f.Inv(w)
	for x, y := w, back; len(p.z) < m; x, y = f.Mul(x, square), f.Mul(y, f.Square(back)) {
		// x = w^(2j-1), x + 1/x = 2 cos
		p.z = append(p.z, f.Mul(quarter, f.Add(half, f.Add(x, y))))
	}
	p.z = append(p.z, f.One(), 0)
	size := m + 2
	p.g = make([]prime.Element, size*size)
	for i := range size {
		for j := range i {
			g, ok := f.Inv(f.Sub(p.z[i], p.z[j]))
			if !ok {
				return nil, &StartError{f.Modulus(), "a difference of nodes"}
			}
			p.g[i*size+j], p.g[j*size+i] = g, f.Neg(g)
		}
	}
	phi := make([]prime.Element, m*m)
	for i := range m {
		for j := range size {
			if i == j {
				continue
			}
			x := f.Mul(f.FromInt64(startInvariant(m, i, j)), f.Square(p.g[i*size+j]))
			if j < m {
				phi[i*m+j] = x
			}
			phi[i*m+i] = f.Sub(phi[i*m+i], x)
		}
	}
	var ok bool
	if p.inverse, ok = invertMatrix(f, phi, m); !ok {
		return nil, &StartError{f.Modulus(), "the Jacobian"}
	}
	return p, nil
}

// startInvariant returns s_ij between a node i and a point j: 4 if j is a node,
// 1 if it is leg 2 or n.
func startInvariant(m, i, j int) int64 {
	if j < m {
		return 4
	}
	return 1
}

// invertMatrix returns the inverse of the m x m matrix x, or false. x is
// destroyed.
func invertMatrix(f *prime.Field, x []prime.Element, m int) ([]prime.Element, bool) {
	y := make([]prime.Element, m*m)
	for i := range m {
		y[i*m+i] = f.One()
	}
	for k := range m {
		pivot := k
		for pivot < m && x[pivot*m+k] == 0 {
			pivot++
		}
		if pivot == m {
			return nil, false
		}
		if pivot != k {
			for j := range m {
				x[k*m+j], x[pivot*m+j] = x[pivot*m+j], x[k*m+j]
				y[k*m+j], y[pivot*m+j] = y[pivot*m+j], y[k*m+j]
			}
		}
		c, _ := f.Inv(x[k*m+k])
		f.ScaleRow(x[k*m:(k+1)*m], c, x[k*m:(k+1)*m])
		f.ScaleRow(y[k*m:(k+1)*m], c, y[k*m:(k+1)*m])
		for i := range m {
			if c := x[i*m+k]; i != k && c != 0 {
				f.SubScaledRow(x[i*m:(i+1)*m], c, x[k*m:(k+1)*m])
				f.SubScaledRow(y[i*m:(i+1)*m], c, y[k*m:(k+1)*m])
			}
		}
	}
	return y, true
}
