package integrand

import "eliminant/rational/prime"

// Solution is one solution of the scattering equations in the gauge
// z_1 = infinity, z_2 = 1, z_n = 0, over the ring: coordinates z_a and inverse
// differences 1/(z_a - z_b) as rows, together with the line of invariants
// s_ab(e) = s0_ab + e s1_ab on which it lies. Legs are numbered from 1.
//
// Inverse differences with leg 1 stand for their limits times z_1:
// Inverse(1,b) = 1 and Inverse(b,1) = -1. With this reading the formulas of the
// building blocks hold for all legs and give their gauge-fixed forms.
type Solution struct {
	ring   *Ring
	legs   int
	z, g   []prime.Element
	s0, s1 []prime.Element
	phi    []prime.Element // determinant scratch
	square []prime.Element
}

// NewSolution returns a solution over r with unset coordinates, on the line
// s0 + e s1. Both matrices are n x n by leg, entry (a-1) n + b-1, and are not
// copied; s1 may be nil for 0.
func NewSolution(r *Ring, legs int, s0, s1 []prime.Element) *Solution {
	if s1 == nil {
		s1 = make([]prime.Element, legs*legs)
	}
	v := &Solution{
		ring: r,
		legs: legs,
		z:    make([]prime.Element, legs*r.depth),
		g:    make([]prime.Element, legs*legs*r.depth),
		s0:   s0[:legs*legs],
		s1:   s1[:legs*legs],
	}
	one := r.field.One()
	for b := 2; b <= legs; b++ {
		r.SetConstant(v.Inverse(1, b), one)
		r.SetConstant(v.Inverse(b, 1), r.field.Neg(one))
	}
	r.SetConstant(v.Coordinate(2), one)
	return v
}

// Legs returns n.
func (v *Solution) Legs() int { return v.legs }

// Ring returns the ring of the rows.
func (v *Solution) Ring() *Ring { return v.ring }

// Coordinate returns the row of z_a, a >= 2, for reading and setting.
func (v *Solution) Coordinate(a int) []prime.Element {
	d := v.ring.depth
	return v.z[(a-1)*d : a*d : a*d]
}

// Inverse returns the row of 1/(z_a - z_b), a != b, for reading and setting;
// see Solution for a = 1 or b = 1.
func (v *Solution) Inverse(a, b int) []prime.Element {
	d := v.ring.depth
	i := (a-1)*v.legs + b - 1
	return v.g[i*d : (i+1)*d : (i+1)*d]
}

// Place sets constant coordinates, z[a-1] for leg a (z[0] is not read), and
// their inverse differences. It reports false if two of them coincide. The
// coordinates of legs 2 and n need not be 1 and 0 for the building blocks, only
// for the sum over solutions.
func (v *Solution) Place(z []prime.Element) bool {
	r := v.ring
	f := r.field
	for a := 2; a <= v.legs; a++ {
		r.SetConstant(v.Coordinate(a), z[a-1])
		for b := a + 1; b <= v.legs; b++ {
			g, ok := f.Inv(f.Sub(z[a-1], z[b-1]))
			if !ok {
				return false
			}
			r.SetConstant(v.Inverse(a, b), g)
			r.SetConstant(v.Inverse(b, a), f.Neg(g))
		}
	}
	return true
}

// Residual sets z to the left-hand side of the scattering equation of leg a,
// f_a = sum over b != a of s_ab/(z_a - z_b), a >= 2; leg 1 drops out.
func (v *Solution) Residual(z []prime.Element, a int) {
	r := v.ring
	t := make([]prime.Element, r.depth)
	r.SetConstant(z, 0)
	for b := 2; b <= v.legs; b++ {
		if b != a {
			v.timesInvariant(t, a, b, v.Inverse(a, b))
			r.Add(z, z, t)
		}
	}
}

// timesInvariant sets z = s_ab x; z may be x.
func (v *Solution) timesInvariant(z []prime.Element, a, b int, x []prime.Element) {
	i := (a-1)*v.legs + b - 1
	v.ring.MulLinear(z, v.s0[i], v.s1[i], x)
}
