package claim

import (
	"math/big"

	"eliminant/rational/kinematics"
	"eliminant/rational/prime"
)

// coordinates are the free variables of all kinematics in any dimension: the
// n(n-3)/2 planar invariants X_ij = (k_i + ... + k_{j-1})^2, and the mass squared
// if it is free. X_{i,i+1} = m^2 and X_{ii} = 0.
type coordinates struct {
	legs   int
	masses Masses
}

// variables is the number of free variables.
func (c coordinates) variables() int {
	v := c.legs * (c.legs - 3) / 2
	if c.masses.Free {
		v++
	}
	return v
}

// drawRange is L of the identity bound: variables are uniform in [0, L).
const drawRange = 1 << 61

// draw returns values for the free variables, uniform in [0, L).
func (c coordinates) draw(src *prime.Source) []uint64 {
	x := make([]uint64, c.variables())
	for i := range x {
		x[i] = src.Below(drawRange)
	}
	return x
}

// planarTable arranges values of the variables as a table X[i][j], 0 <= i, j < n,
// symmetric, with one for every planar pair, mass for neighbours, zero on the
// diagonal.
func planarTable[T any](n int, one func(k int) T, mass, zero T) [][]T {
	x := make([][]T, n)
	for i := range x {
		x[i] = make([]T, n)
		x[i][i] = zero
	}
	k := 0
	for i := range n {
		for j := i + 1; j < n; j++ {
			v := mass
			if j-i > 1 && j-i < n-1 {
				v = one(k)
				k++
			}
			x[i][j], x[j][i] = v, v
		}
	}
	return x
}

// reduced returns the point with the given values of the variables modulo the
// field's prime: s_ab = X_{a,b+1} + X_{a+1,b} - X_ab - X_{a+1,b+1} + 2 m^2.
func (c coordinates) reduced(f *prime.Field, values []uint64) (*kinematics.Reduced, error) {
	n := c.legs
	var mass prime.Element
	massive := true
	switch {
	case c.masses.Free:
		mass = f.FromUint64(values[len(values)-1])
	case c.masses.Squared != nil:
		var ok bool
		if mass, ok = f.FromRat(c.masses.Squared); !ok {
			return nil, prime.ErrBadPrime
		}
	default:
		massive = false
	}
	x := planarTable(n, func(k int) prime.Element { return f.FromUint64(values[k]) }, mass, 0)
	r := &kinematics.Reduced{Field: f, N: n, S: make([]prime.Element, n*n)}
	twice := f.Add(mass, mass)
	for a := range n {
		for b := range n {
			if a == b {
				continue
			}
			p, q := (a+1)%n, (b+1)%n
			v := f.Sub(f.Add(x[a][q], x[p][b]), f.Add(x[a][b], x[p][q]))
			r.S[a*n+b] = f.Add(v, twice)
		}
	}
	if massive {
		r.M = make([]prime.Element, n)
		for a := range r.M {
			r.M[a] = mass
		}
	}
	return r, nil
}

// point returns the same point over Q.
func (c coordinates) point(label string, values []*big.Int) (*kinematics.Point, error) {
	n := c.legs
	mass := new(big.Rat)
	massive := true
	switch {
	case c.masses.Free:
		mass.SetInt(values[len(values)-1])
	case c.masses.Squared != nil:
		mass.Set(c.masses.Squared)
	default:
		massive = false
	}
	x := planarTable(n, func(k int) *big.Rat { return new(big.Rat).SetInt(values[k]) }, mass, new(big.Rat))
	s := make([][]*big.Rat, n)
	for a := range n {
		s[a] = make([]*big.Rat, n)
		for b := range n {
			v := new(big.Rat)
			if a != b {
				p, q := (a+1)%n, (b+1)%n
				v.Add(x[a][q], x[p][b])
				v.Sub(v, x[a][b])
				v.Sub(v, x[p][q])
				v.Add(v, mass)
				v.Add(v, mass)
			}
			s[a][b] = v
		}
	}
	var m []*big.Rat
	if massive {
		for range n {
			m = append(m, mass)
		}
	}
	inv, err := kinematics.NewInvariants(s, m)
	if err != nil {
		return nil, err
	}
	return kinematics.FromInvariants(label, inv), nil
}
