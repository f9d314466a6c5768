package kinematics

import (
	"fmt"
	"math/big"

	"eliminant/rational/prime"
)

// MinLegs and MaxLegs bound the number of legs of a point.
const (
	MinLegs = 4
	MaxLegs = 64
)

// Invariants are the exact Lorentz invariants of n legs, all outgoing:
//
//	s_ab = (k_a + k_b)^2 for a != b,  s_aa = 0,  m_a^2 = k_a^2,
//	sum over b of s_ab = (n-4) m_a^2 + sum over b of m_b^2.
//
// They are immutable and safe for concurrent use. Legs count from 1; methods
// panic for legs that do not exist.
type Invariants struct {
	n      int
	scale  *big.Int   // least positive integer that makes everything whole
	whole  []*big.Int // scale*s_ab at (a-1)*n + b-1
	masses []*big.Int // scale*m_a^2, nil if all vanish
}

// NewInvariants returns the invariants with the matrix s and the squared masses
// given, nil for massless legs. Everything is copied. The error is of type
// InputErrors and lists every entry and row that does not fit.
func NewInvariants(s [][]*big.Rat, massesSquared []*big.Rat) (*Invariants, error) {
	p := &Point{Kind: KindInvariants, S: NewMatrix(s)}
	if massesSquared != nil {
		p.MassesSquared = massesSquared
	}
	if err := p.Validate(); err != nil {
		return nil, err
	}
	return newInvariants(s, massesSquared), nil
}

// newInvariants skips the validation.
func newInvariants(s [][]*big.Rat, masses []*big.Rat) *Invariants {
	n := len(s)
	v := &Invariants{n: n, scale: big.NewInt(1), whole: make([]*big.Int, n*n)}
	var g big.Int
	widen := func(x *big.Rat) {
		if !x.IsInt() {
			g.GCD(nil, nil, v.scale, x.Denom())
			v.scale.Mul(v.scale, g.Quo(x.Denom(), &g))
		}
	}
	massive := false
	for _, m := range masses {
		widen(m)
		massive = massive || m.Sign() != 0
	}
	for _, row := range s {
		for _, x := range row {
			widen(x)
		}
	}
	whole := func(x *big.Rat) *big.Int {
		z := new(big.Int).Quo(v.scale, x.Denom())
		return z.Mul(z, x.Num())
	}
	for a, row := range s {
		for b, x := range row {
			v.whole[a*n+b] = whole(x)
		}
	}
	if massive {
		v.masses = make([]*big.Int, n)
		for a, m := range masses {
			v.masses[a] = whole(m)
		}
	}
	return v
}

// Legs returns n.
func (v *Invariants) Legs() int { return v.n }

// S returns s_ab; S(a, a) = 0.
func (v *Invariants) S(a, b int) *big.Rat {
	v.check(a)
	v.check(b)
	return new(big.Rat).SetFrac(v.whole[(a-1)*v.n+b-1], v.scale)
}

// MassSquared returns m_a^2.
func (v *Invariants) MassSquared(a int) *big.Rat {
	v.check(a)
	if v.masses == nil {
		return new(big.Rat)
	}
	return new(big.Rat).SetFrac(v.masses[a-1], v.scale)
}

// Massless reports whether every m_a^2 is zero.
func (v *Invariants) Massless() bool { return v.masses == nil }

// CommonMassSquared returns the squared mass that all legs share, and whether
// they share one.
func (v *Invariants) CommonMassSquared() (*big.Rat, bool) {
	for _, m := range v.masses {
		if m.Cmp(v.masses[0]) != 0 {
			return nil, false
		}
	}
	return v.MassSquared(1), true
}

// Lorentz returns the Lorentz square of a sum of distinct momenta,
//
//	(sum over U of k)^2 = sum over pairs in U of s_ab - (|U|-2) sum over U of m_a^2.
//
// It panics if a leg is repeated.
func (v *Invariants) Lorentz(legs ...int) *big.Rat {
	checkDistinct(legs, v.n)
	var z, m big.Int
	for i, a := range legs {
		for _, b := range legs[i+1:] {
			z.Add(&z, v.whole[(a-1)*v.n+b-1])
		}
		if v.masses != nil {
			m.Add(&m, v.masses[a-1])
		}
	}
	z.Sub(&z, m.Mul(&m, big.NewInt(int64(len(legs)-2))))
	return new(big.Rat).SetFrac(&z, v.scale)
}

// Scaled returns the least positive integer scale for which all scale*s_ab and
// scale*m_a^2 are whole, and copies of those, row by row; the masses are nil if
// all vanish.
func (v *Invariants) Scaled() (scale *big.Int, s, massesSquared []*big.Int) {
	return new(big.Int).Set(v.scale), copyInts(v.whole), copyInts(v.masses)
}

func copyInts(x []*big.Int) []*big.Int {
	if x == nil {
		return nil
	}
	z := make([]*big.Int, len(x))
	for i := range x {
		z[i] = new(big.Int).Set(x[i])
	}
	return z
}

func (v *Invariants) check(a int) {
	if a < 1 || a > v.n {
		panic(fmt.Sprintf("kinematics: leg %d of %d", a, v.n))
	}
}

// checkDistinct panics unless the legs are distinct and from 1 to n.
func checkDistinct(legs []int, n int) {
	var seen [MaxLegs + 1]bool
	for _, a := range legs {
		if a < 1 || a > n {
			panic(fmt.Sprintf("kinematics: leg %d of %d", a, n))
		}
		if seen[a] {
			panic(fmt.Sprintf("kinematics: leg %d named twice", a))
		}
		seen[a] = true
	}
}

// Reduced are invariants modulo a prime.
type Reduced struct {
	Field *prime.Field
	N     int
	S     []prime.Element // s_ab at (a-1)*N + b-1
	M     []prime.Element // m_a^2 at a-1; nil if massless
}

// Reduce returns the invariants modulo the prime of f. The error wraps
// prime.ErrBadPrime if the prime divides a denominator.
func (v *Invariants) Reduce(f *prime.Field) (*Reduced, error) {
	inverse, ok := f.Inv(f.FromInt(v.scale))
	if !ok {
		return nil, fmt.Errorf("invariants modulo %d: %w", f.Modulus(), prime.ErrBadPrime)
	}
	r := &Reduced{Field: f, N: v.n, S: make([]prime.Element, len(v.whole))}
	n := v.n
	for a := range n {
		for b := range a {
			x := f.Mul(inverse, f.FromInt(v.whole[a*n+b]))
			r.S[a*n+b], r.S[b*n+a] = x, x
		}
	}
	if v.masses != nil {
		r.M = make([]prime.Element, n)
		for a, m := range v.masses {
			r.M[a] = f.Mul(inverse, f.FromInt(m))
		}
	}
	return r, nil
}

// At returns s_ab.
func (r *Reduced) At(a, b int) prime.Element { return r.S[(a-1)*r.N+b-1] }

// MassSquared returns m_a^2.
func (r *Reduced) MassSquared(a int) prime.Element {
	if r.M == nil {
		return 0
	}
	return r.M[a-1]
}

// Lorentz returns (sum of k)^2 over distinct legs, as Invariants.Lorentz. It
// panics if a leg is repeated.
func (r *Reduced) Lorentz(legs []int) prime.Element {
	checkDistinct(legs, r.N)
	f := r.Field
	var z, m prime.Element
	for i, a := range legs {
		for _, b := range legs[i+1:] {
			z = f.Add(z, r.At(a, b))
		}
		m = f.Add(m, r.MassSquared(a))
	}
	return f.Sub(z, f.Mul(f.FromInt64(int64(len(legs)-2)), m))
}
