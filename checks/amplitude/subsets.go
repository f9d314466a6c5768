package amplitude

import (
	"math/big"
	"math/bits"

	"eliminant/rational/prime"
)

// subsetPlan is the recursion for the sum over all cubic diagrams,
//
//	phi_i = 1,  phi_S = (1/s_S) sum_{S = A u B} phi_A phi_B,  A B unordered,
//	phi3{1..n} = sum_{1..n-1 = A u B} phi_A phi_B,
//
// the off-shell current of the cubic scalar without colour (F. A. Berends,
// W. T. Giele, Nucl. Phys. B 306 (1988) 759, applied to one scalar field).
// Cost: 3^(n-1)/2 products.
type subsetPlan struct {
	n    int
	full uint32
}

func newSubsetPlan(n int) *subsetPlan { return &subsetPlan{n: n, full: 1<<(n-1) - 1} }

// poles lists the proper subsets of 1..n-1 with at least two legs, as bit
// masks (bit a-1 is leg a), ascending: every channel once.
func (p *subsetPlan) poles() []uint32 {
	var out []uint32
	for m := uint32(3); m < p.full; m++ {
		if bits.OnesCount32(m) > 1 {
			out = append(out, m)
		}
	}
	return out
}

// subsetSums returns the sum of t over the pairs of every subset of the first
// n-1 legs, indexed by mask.
func subsetSums(f *prime.Field, n int, t []prime.Element) []prime.Element {
	s := make([]prime.Element, 1<<(n-1))
	for m := 1; m < len(s); m++ {
		a := bits.TrailingZeros(uint(m))
		rest := m &^ (1 << a)
		v := s[rest]
		for r := rest; r != 0; r &= r - 1 {
			v = f.Add(v, t[a*n+bits.TrailingZeros(uint(r))])
		}
		s[m] = v
	}
	return s
}

// evaluate runs the recursion over GF(p). pole returns the propagator
// denominator of a mask.
func (p *subsetPlan) evaluate(f *prime.Field, pole func(mask uint32) prime.Element) (prime.Element, error) {
	phi := make([]prime.Element, p.full+1)
	masks := p.poles()
	work := make([]prime.Element, 2*len(masks))
	den, inv := work[:len(masks)], work[len(masks):]
	for i, m := range masks {
		den[i] = pole(m)
	}
	if _, ok := f.InvertRow(inv, den); !ok {
		return 0, prime.ErrBadPrime
	}
	next := 0
	for m := uint32(1); m <= p.full; m++ {
		if bits.OnesCount32(m) == 1 {
			phi[m] = f.One()
			continue
		}
		low := m & -m // A keeps the lowest leg: every splitting once
		rest := m ^ low
		var v prime.Element
		for b := rest; b != 0; b = (b - 1) & rest {
			v = f.Add(v, f.Mul(phi[b], phi[m^b]))
		}
		if m == p.full {
			return v, nil
		}
		phi[m] = f.Mul(v, inv[next])
		next++
	}
	return 0, nil
}

// absolute bounds the sum over the diagrams of prod 1/|s_P| from above; poles
// in the order of poles().
func (p *subsetPlan) absolute(poles []*big.Float) *big.Float {
	phi := make([]*big.Float, p.full+1)
	next := 0
	for m := uint32(1); ; m++ {
		if bits.OnesCount32(m) == 1 {
			phi[m] = newUpper().SetInt64(1)
			continue
		}
		rest := m ^ m&-m
		v := newUpper()
		for b := rest; b != 0; b = (b - 1) & rest {
			v.Add(v, newUpper().Mul(phi[b], phi[m^b]))
		}
		if m == p.full {
			return v
		}
		phi[m] = v.Quo(v, poles[next])
		next++
	}
}
