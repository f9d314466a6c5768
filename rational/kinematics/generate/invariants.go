package generate

import (
	"math/big"

	"eliminant/rational/kinematics"
	"eliminant/rational/prime"
)

// invariants draws the planar X_ij = (k_i + ... + k_{j-1})^2, which are
// independent in any dimension >= n-1, with X_{i,i+1} = m^2, and sets
//
//	2 k_a.k_b = X_{a,b+1} + X_{a+1,b} - X_ab - X_{a+1,b+1},
//	s_ab = 2 k_a.k_b + 2 m^2.
func (d *drawer) invariants(src *prime.Source, size int) *kinematics.Point {
	n := d.n
	mass := new(big.Rat)
	if d.mass != nil {
		mass.Set(d.mass)
	}
	x := make([][]*big.Rat, n)
	for i := range x {
		x[i] = make([]*big.Rat, n)
		x[i][i] = new(big.Rat)
	}
	for i := range n {
		for j := i + 1; j < n; j++ {
			v := mass
			if j-i > 1 && j-i < n-1 {
				v = new(big.Rat).SetInt64(nonzero(src, size))
			}
			x[i][j], x[j][i] = v, v
		}
	}
	s := make([][]*big.Rat, n)
	for a := range s {
		s[a] = make([]*big.Rat, n)
		for b := range n {
			s[a][b] = new(big.Rat)
			if a == b {
				continue
			}
			p, q := (a+1)%n, (b+1)%n
			z := s[a][b]
			z.Add(x[a][q], x[p][b])
			z.Sub(z, x[a][b])
			z.Sub(z, x[p][q])
			z.Add(z, mass)
			z.Add(z, mass)
		}
	}
	point := &kinematics.Point{Kind: kinematics.KindInvariants, S: kinematics.NewMatrix(s)}
	if d.mass != nil {
		for range n {
			point.MassesSquared = append(point.MassesSquared, d.mass)
		}
	}
	return point
}

// nonzero draws a nonzero integer of magnitude at most size.
func nonzero(src *prime.Source, size int) int64 {
	x := src.Between(1, int64(size))
	if src.Below(2) == 1 {
		return -x
	}
	return x
}

// products draws k.k as invariants.
func (d *drawer) products(src *prime.Source, size int) *kinematics.Point {
	p, err := d.invariants(src, size).Convert(kinematics.KindProducts)
	if err != nil {
		return nil // not reached: drawn invariants are valid
	}
	return p
}

// polariseProducts draws e.k and f.k with e_a.k_a = 0 and zero row sums, and e.e,
// f.e, f.f freely.
func (d *drawer) polariseProducts(p *kinematics.Point, src *prime.Source) {
	const size = 9
	n := d.n
	conserved := func() kinematics.Matrix {
		m := make(kinematics.Matrix, n)
		for a := range m {
			row := make([]int64, n)
			last := (a + n - 1) % n
			for b := range row {
				if b != a && b != last {
					row[b] = nonzero(src, size)
					row[last] -= row[b]
				}
			}
			m[a] = constants(row)
		}
		return m
	}
	free := func(symmetric bool) kinematics.Matrix {
		m := make(kinematics.Matrix, n)
		for a := range m {
			row := make([]int64, n)
			for b := range row {
				row[b] = nonzero(src, size)
			}
			m[a] = constants(row)
			for b := range a {
				if symmetric {
					m[a][b] = m[b][a]
				}
			}
		}
		return m
	}
	q := &p.Products
	q.EK, q.EE = conserved(), free(true)
	q.FK, q.FE, q.FF = conserved(), free(false), free(true)
}
