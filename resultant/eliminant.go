package resultant

import (
	"context"
	"errors"
	"fmt"
	"math/big"
	"sync/atomic"

	"eliminant/rational/lift"
	"eliminant/rational/prime"
	"eliminant/rational/scattering"
)

// DefaultMaxLegs is the range of ComputeEliminant unless Options says otherwise.
const DefaultMaxLegs = 9

// Eliminant is the characteristic polynomial of one puncture over Q.
type Eliminant struct {
	Leg    int
	Monic  []*big.Rat // c_0, .., c_{N-1}, 1: coefficients of z^0, .., z^N
	Record lift.Record
	Bound  *big.Int // on |Lead c_i|
	Lead   *big.Int // Lead c_i is an integer
}

// ComputeEliminant returns the characteristic polynomial, of degree N = (n-3)!, of
// the puncture of a leg in 3..n-1 in the gauge z_1 = infinity, z_2 = 1, z_n = 0:
// the product over solutions, with multiplicity, of z - z_leg.
//
// The invariants are scaled to integers, which does not change solutions. Then
// det T(z) = det T1 chi(z) has integer coefficients, det T1 is known and Hadamard's
// inequality bounds the coefficients (newDeterminant), so sufficiently many primes
// prove the result. Where z_leg does not separate the solutions the
// characteristic polynomial comes from the matrix of M (n <= 9).
//
// Errors: *RangeError beyond Options.MaxLegs, *RoleError for other legs,
// *DegenerateError if a solution is at infinity, *NotSeparatingError for
// n > 9 only; a cancelled context. Cost: the bits of the bound over 62 times
// 2N-1 products with M.
func ComputeEliminant(ctx context.Context, d *scattering.Data, leg int, o Options) (*Eliminant, error) {
	n := d.Legs()
	most := o.MaxLegs
	if most == 0 {
		most = DefaultMaxLegs
	}
	if n > min(most, MaxLegs) {
		return nil, &RangeError{"eliminant", n, min(most, MaxLegs)}
	}
	if leg < 3 || leg >= n {
		return nil, &RoleError{fmt.Sprintf("the puncture of leg %d is fixed; free legs are 3 to %d", leg, n-1)}
	}
	order := hiddenOrder(n, leg)
	_, whole := d.Scaled()
	det, err := newDeterminant(whole, order)
	if err != nil {
		return nil, err
	}
	var useDense atomic.Bool // both ways give the same polynomial
	kernel := func(ctx context.Context, f *prime.Field, out []prime.Element) error {
		s := make([]prime.Element, n*n)
		for a, row := range whole {
			for b, x := range row {
				s[a*n+b] = f.FromInt(x)
			}
		}
		p, err := NewPencil(f, n, s, order)
		if err != nil {
			return fmt.Errorf("%w: %w", prime.ErrBadPrime, err)
		}
		c, err := characteristic(ctx, p, &useDense)
		if err != nil {
			return err
		}
		f.ScaleRow(out, f.FromInt(det.lead), c[:len(out)])
		return nil
	}
	x, record, err := lift.Integers(ctx, det.size, det.bound, kernel, lift.Options{Workers: o.Workers, Progress: o.Progress})
	if err != nil {
		return nil, fmt.Errorf("eliminant of z%d: %w", leg, err)
	}
	e := &Eliminant{Leg: leg, Record: *record, Bound: det.bound, Lead: det.lead}
	for _, v := range x {
		e.Monic = append(e.Monic, new(big.Rat).SetFrac(v, det.lead))
	}
	e.Monic = append(e.Monic, big.NewRat(1, 1))
	return e, nil
}

// characteristic returns the characteristic polynomial of t by the Krylov
// sequence, or where that is too short, and from then on, from the matrix.
func characteristic(ctx context.Context, p *Pencil, useDense *atomic.Bool) ([]prime.Element, error) {
	if !useDense.Load() {
		chi, err := newKrylov(p).minimal(ctx, nil)
		if err == nil {
			return chi.Coeffs(), nil
		}
		var short *NotSeparatingError
		if !errors.As(err, &short) || p.plan.size > MaxDense {
			return nil, err
		}
		useDense.Store(true)
	}
	return characteristicDense(ctx, p)
}
