package scattering

import (
	"errors"
	"fmt"
	"math/big"

	"eliminant/rational/kinematics"
)

// ErrMassive is wrapped by FromInvariants for massive legs: Shifted gives their
// data along an ordering.
var ErrMassive = errors.New("massive legs have scattering data only along an ordering")

// ErrMasses is wrapped by Shifted if the legs do not share one mass.
var ErrMasses = errors.New("the legs do not share one mass")

// ErrOrdering is wrapped by Shifted if the ordering is not a permutation.
var ErrOrdering = errors.New("the ordering is not a permutation of the legs")

// FromInvariants returns the data of massless legs.
func FromInvariants(v *kinematics.Invariants) (*Data, error) {
	if !v.Massless() {
		return nil, fmt.Errorf("scattering data: %w", ErrMassive)
	}
	return newFrom(v, func(int, int) *big.Rat { return new(big.Rat) })
}

// Shifted returns the matrix
//
//	2 k_a.k_b + m^2 [a, b neighbours in the cyclic ordering]
//	  = s_ab - 2 m^2 + m^2 [..],
//
// for legs of one mass m. Its row sums vanish, and for a consecutive part U of
// the ordering its s_U is (k_U)^2 - m^2. Without masses it does not depend on the
// ordering. Source: L. Dolan, P. Goddard, Proof of the formula of Cachazo, He and
// Yuan for Yang-Mills tree amplitudes in arbitrary dimension, JHEP 05 (2014) 010,
// arXiv:1311.5200, section 2 (massive scalars).
func Shifted(v *kinematics.Invariants, ordering []int) (*Data, error) {
	n := v.Legs()
	m, ok := v.CommonMassSquared()
	if v.Massless() {
		m, ok = new(big.Rat), true
	}
	if !ok {
		return nil, fmt.Errorf("scattering data: %w", ErrMasses)
	}
	place := make([]int, n+1)
	for i, a := range ordering {
		if a < 1 || a > n || place[a] != 0 || len(ordering) != n {
			return nil, fmt.Errorf("scattering data along %v for %d legs: %w", ordering, n, ErrOrdering)
		}
		place[a] = i + 1
	}
	if len(ordering) != n {
		return nil, fmt.Errorf("scattering data along %v for %d legs: %w", ordering, n, ErrOrdering)
	}
	far := new(big.Rat).Mul(m, big.NewRat(-2, 1))
	near := new(big.Rat).Neg(m)
	return newFrom(v, func(a, b int) *big.Rat {
		if d := (place[a] - place[b] + n) % n; d == 1 || d == n-1 {
			return near
		}
		return far
	})
}

// newFrom returns the data s_ab + shift(a, b), a != b.
func newFrom(v *kinematics.Invariants, shift func(a, b int) *big.Rat) (*Data, error) {
	s := make([][]*big.Rat, v.Legs())
	for a := range s {
		s[a] = make([]*big.Rat, len(s))
		for b := range s[a] {
			s[a][b] = new(big.Rat)
			if a != b {
				s[a][b].Add(v.S(a+1, b+1), shift(a+1, b+1))
			}
		}
	}
	return New(s)
}
