// Package scattering holds the polynomial form of the scattering equations of n
// legs (L. Dolan, P. Goddard, The polynomial form of the scattering equations,
// JHEP 07 (2014) 029, arXiv:1402.7374, section 2): their data, a symmetric
// matrix s_ab with zero diagonal and zero row sums; its channels
// s_I = sum of s_ab over the pairs in I; and the constraints
//
//	h_m = sum over U, |U| = m, of s_{1U} z_U,  m = 1..n-3,
//
// in any gauge, over Q and modulo primes.
package scattering

import (
	"fmt"
	"math/big"
	"math/bits"
	"slices"

	"eliminant/rational/prime"
)

// Data is a symmetric n by n matrix s_ab over Q with zero diagonal and zero row
// sums, n >= 4: massless invariants, or massive ones shifted along an ordering
// (Shifted). It is immutable and safe for concurrent use. Legs count from 1.
type Data struct {
	n     int
	scale *big.Int   // least positive integer that makes every entry whole
	whole []*big.Int // scale*s_ab at (a-1)*n + b-1
}

// MatrixError says why a matrix is not scattering data.
type MatrixError struct {
	Row, Column int // legs, 0 where they do not apply
	Reason      string
}

func (e *MatrixError) Error() string {
	switch {
	case e.Row == 0:
		return "invariants: " + e.Reason
	case e.Column == 0:
		return fmt.Sprintf("invariants, row %d: %s", e.Row, e.Reason)
	}
	return fmt.Sprintf("invariants, entry (%d,%d): %s", e.Row, e.Column, e.Reason)
}

// New returns the data of the matrix s, whose entries are copied. The error is
// a *MatrixError naming the first entry or row that does not fit.
func New(s [][]*big.Rat) (*Data, error) {
	n := len(s)
	if n < 4 || n > MaxLegs {
		return nil, &MatrixError{Reason: fmt.Sprintf("%d legs; from 4 to %d are possible", n, MaxLegs)}
	}
	scale := big.NewInt(1)
	for a, row := range s {
		if len(row) != n {
			return nil, &MatrixError{Row: a + 1, Reason: fmt.Sprintf("%d entries, not %d", len(row), n)}
		}
		for b, x := range row {
			switch {
			case x == nil:
				return nil, &MatrixError{a + 1, b + 1, "missing"}
			case a == b && x.Sign() != 0:
				return nil, &MatrixError{a + 1, b + 1, "the diagonal is " + x.RatString() + ", not 0"}
			case b < a && x.Cmp(s[b][a]) != 0:
				return nil, &MatrixError{a + 1, b + 1, fmt.Sprintf("not symmetric: %s and %s", x.RatString(), s[b][a].RatString())}
			}
			var g big.Int
			g.GCD(nil, nil, scale, x.Denom())
			scale.Mul(scale, g.Quo(x.Denom(), &g))
		}
	}
	d := &Data{n: n, scale: scale, whole: make([]*big.Int, n*n)}
	for a, row := range s {
		var sum big.Int
		for b, x := range row {
			z := new(big.Int).Quo(scale, x.Denom())
			d.whole[a*n+b] = z.Mul(z, x.Num())
			sum.Add(&sum, z)
		}
		if sum.Sign() != 0 {
			return nil, &MatrixError{Row: a + 1, Reason: "the sum is " + new(big.Rat).SetFrac(&sum, scale).RatString() + ", not 0"}
		}
	}
	return d, nil
}

// Legs returns n.
func (d *Data) Legs() int { return d.n }

// At returns a copy of s_ab.
func (d *Data) At(a, b int) *big.Rat {
	return new(big.Rat).SetFrac(d.whole[(a-1)*d.n+b-1], d.scale)
}

// Scaled returns the least positive integer scale for which all scale*s_ab are
// integers, and a copy of those.
func (d *Data) Scaled() (scale *big.Int, s [][]*big.Int) {
	s = make([][]*big.Int, d.n)
	for a := range s {
		s[a] = make([]*big.Int, d.n)
		for b := range s[a] {
			s[a][b] = new(big.Int).Set(d.whole[a*d.n+b])
		}
	}
	return new(big.Int).Set(d.scale), s
}

// Sum returns s_I, the sum of s_ab over the pairs in I.
func (d *Data) Sum(c Channel) *big.Rat {
	return new(big.Rat).SetFrac(d.wholeSum(c), d.scale)
}

// wholeSum returns scale*s_I.
func (d *Data) wholeSum(c Channel) *big.Int {
	z := new(big.Int)
	for ; c != 0; c &= c - 1 {
		a := bits.TrailingZeros32(uint32(c))
		for r := c & (c - 1); r != 0; r &= r - 1 {
			z.Add(z, d.whole[a*d.n+bits.TrailingZeros32(uint32(r))])
		}
	}
	return z
}

// Reduce returns s_ab modulo p, entry (a,b) at (a-1)*n + b-1. The error wraps
// prime.ErrBadPrime if p divides a denominator.
func (d *Data) Reduce(f *prime.Field) ([]prime.Element, error) {
	inv, ok := f.Inv(f.FromInt(d.scale))
	if !ok {
		return nil, fmt.Errorf("invariants modulo %d: %w", f.Modulus(), prime.ErrBadPrime)
	}
	s := make([]prime.Element, len(d.whole))
	for i, x := range d.whole {
		s[i] = f.Mul(inv, f.FromInt(x))
	}
	return s, nil
}

// Vanishing returns the channels I, 2 <= |I| <= n-2, with s_I = 0, ordered by
// size and then by legs. Solutions of the scattering equations coincide or
// escape only if there is one. Cost: 2^(n-2) n additions.
func (d *Data) Vanishing() []Channel {
	var out []Channel
	sum := new(big.Int)
	set := Channel(0)
	// Gray code: one leg enters or leaves at a time, leg n never enters
	for i := 1; i < 1<<(d.n-1); i++ {
		a := bits.TrailingZeros32(uint32(i))
		rest := set &^ (1 << a)
		for r := rest; r != 0; r &= r - 1 {
			x := d.whole[a*d.n+bits.TrailingZeros32(uint32(r))]
			if rest == set {
				sum.Add(sum, x)
			} else {
				sum.Sub(sum, x)
			}
		}
		set ^= 1 << a
		if k := set.Size(); k >= 2 && k <= d.n-2 && sum.Sign() == 0 {
			out = append(out, set.Canonical(d.n))
		}
	}
	slices.SortFunc(out, Channel.compare)
	return out
}

// ReducedVanishing returns the first channel, in the order of Vanishing, whose
// invariant is zero modulo p, and whether there is one; s as Reduce returns it.
func ReducedVanishing(f *prime.Field, n int, s []prime.Element) (Channel, bool) {
	var sum prime.Element
	var set, first Channel
	found := false
	for i := 1; i < 1<<(n-1); i++ {
		a := bits.TrailingZeros32(uint32(i))
		rest := set &^ (1 << a)
		var t prime.Element
		for r := rest; r != 0; r &= r - 1 {
			t = f.Add(t, s[a*n+bits.TrailingZeros32(uint32(r))])
		}
		if rest == set {
			sum = f.Add(sum, t)
		} else {
			sum = f.Sub(sum, t)
		}
		set ^= 1 << a
		if k := set.Size(); sum == 0 && k >= 2 && k <= n-2 {
			if c := set.Canonical(n); !found || c.compare(first) < 0 {
				first, found = c, true
			}
		}
	}
	return first, found
}
