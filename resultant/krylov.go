package resultant

import (
	"context"
	"fmt"
	"slices"

	"eliminant/rational/poly"
	"eliminant/rational/prime"
)

// Options of the computations of this package; the zero value works.
type Options struct {
	Workers  int                   // primes at the same time over Q, 0 means 1; never changes the result
	MaxLegs  int                   // range of ComputeEliminant, 0 means DefaultMaxLegs
	Progress func(done, total int) // products modulo p, primes over Q
}

// krylov holds sequences read off M^i e_top, e_top the top monomial: coordinate 1
// and the coordinates x_1..x_k.
type krylov struct {
	p         *Pencil
	x         []prime.Element // M^i e_top for the last term i
	at        []int           // the coordinates
	sequences [][]prime.Element
}

func newKrylov(p *Pencil) *krylov {
	s := &krylov{p: p, x: make([]prime.Element, p.plan.size), at: []int{0}}
	s.x[p.plan.top] = p.field.One()
	for j := 1; j <= p.plan.k; j++ {
		s.at = append(s.at, p.plan.variable(j))
	}
	s.sequences = make([][]prime.Element, len(s.at))
	return s
}

// extend computes the sequences up to the given number of terms.
func (s *krylov) extend(ctx context.Context, terms int, progress func(done, total int)) error {
	for j := range s.sequences {
		s.sequences[j] = slices.Grow(s.sequences[j], terms-len(s.sequences[j]))
	}
	for i := len(s.sequences[0]); i < terms; i++ {
		if i > 0 {
			if ctx.Err() != nil {
				return fmt.Errorf("elimination modulo %d: %w", s.p.field.Modulus(), context.Cause(ctx))
			}
			s.p.Multiply(s.x, s.x)
		}
		for j, c := range s.at {
			s.sequences[j] = append(s.sequences[j], s.x[c])
		}
		if progress != nil && i%64 == 0 {
			progress(i, terms)
		}
	}
	if progress != nil {
		progress(terms, terms)
	}
	return nil
}

// minimal returns the characteristic polynomial of M, provided that it is the
// minimal polynomial of the sequence of coordinate 1 as well.
//
// The sequences of 1, x_1, .., x_{k-1} together satisfy its recurrence, of degree N;
// x_k adds nothing, because h_1 expresses it by these and t. If N + N/k terms of
// them have no other recurrence of length N (generator), it is found, and no
// polynomial of lower degree annihilates all sequences, so t generates the
// algebra. Otherwise 2N terms of the sequence of coordinate 1 determine its
// minimal polynomial, which is the characteristic one if it has degree N.
func (s *krylov) minimal(ctx context.Context, progress func(done, total int)) (*poly.Poly, error) {
	f, n, m := s.p.field, s.p.plan.size, max(s.p.plan.k, 1)
	if err := s.extend(ctx, n+(n+m-1)/m, progress); err != nil {
		return nil, err
	}
	if c, unique := generator(f, s.sequences[:m]); unique && len(c) == n+1 {
		slices.Reverse(c)
		return poly.New(f, c...), nil
	}
	if err := s.extend(ctx, 2*n, progress); err != nil {
		return nil, err
	}
	chi := poly.Recurrence(f, s.sequences[0])
	if chi.Degree() < n {
		return nil, &NotSeparatingError{s.p.Hidden(), chi.Degree(), n}
	}
	return chi, nil
}

// numerator returns P with P/chi = sum_i s_i T^{-i-1} in descending powers, s the
// first N terms of a sequence with recurrence chi.
func numerator(chi *poly.Poly, s []prime.Element) *poly.Poly {
	n := len(s)
	reversed := make([]prime.Element, n)
	for i, x := range s {
		reversed[n-1-i] = x
	}
	z := poly.New(chi.Field(), reversed...)
	z.Mul(z, chi) // the coefficient of T^{n+d} is that of T^d in P
	c := z.Coeffs()
	if len(c) <= n {
		return poly.New(chi.Field())
	}
	return poly.New(chi.Field(), c[n:]...)
}
