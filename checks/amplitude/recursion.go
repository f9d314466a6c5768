package amplitude

import (
	"math/big"

	"eliminant/rational/prime"
)

// intervalSums returns s_{i..j}, 0 <= i <= j < n, of a symmetric n x n matrix in
// row-major order, at [i*n+j]: s_{i..j} = s_{i..j-1} + s_{i+1..j} - s_{i+1..j-1} + t_ij.
func intervalSums(f *prime.Field, n int, t []prime.Element) []prime.Element {
	s := make([]prime.Element, n*n)
	for length := 2; length <= n; length++ {
		for i := 0; i+length <= n; i++ {
			j := i + length - 1
			v := f.Add(s[i*n+j-1], s[(i+1)*n+j])
			if length > 2 {
				v = f.Sub(v, s[(i+1)*n+j-1])
			}
			s[i*n+j] = f.Add(v, t[i*n+j])
		}
	}
	return s
}

// evaluate runs the recursion over GF(p) on the matrix t (n x n, labels of
// alpha). It returns prime.ErrBadPrime if a pole vanishes. Cost: O(n^3)
// products and one inversion.
func (p *wordPlan) evaluate(f *prime.Field, t []prime.Element) (prime.Element, error) {
	s := intervalSums(f, p.n, t)
	poles := make([]prime.Element, 2*len(p.poles)+len(p.nodes))
	for i, legs := range p.poles {
		poles[i] = s[legs[0]*p.n+legs[len(legs)-1]]
	}
	inv := poles[len(p.poles) : 2*len(p.poles)]
	current := poles[2*len(p.poles):]
	if _, ok := f.InvertRow(inv, poles[:len(p.poles)]); !ok {
		return 0, prime.ErrBadPrime
	}
	sum := func(terms []term) prime.Element {
		var v prime.Element
		for _, c := range terms {
			x := f.Mul(current[c.left], current[c.right])
			if c.negative {
				v = f.Sub(v, x)
			} else {
				v = f.Add(v, x)
			}
		}
		return v
	}
	for i := range p.nodes {
		nd := &p.nodes[i]
		if nd.pole < 0 {
			current[i] = f.One()
			continue
		}
		current[i] = f.Neg(f.Mul(inv[nd.pole], sum(nd.terms)))
	}
	return sum(p.root), nil
}

// absolute returns an upper bound for the sum over the diagrams of
// prod 1/|s_P|: the recursion with every term replaced by its absolute value,
// every operation rounded away from zero. poles holds lower bounds of |s_P|.
func (p *wordPlan) absolute(poles []*big.Float) *big.Float {
	current := make([]*big.Float, len(p.nodes))
	sum := func(terms []term) *big.Float {
		v := newUpper()
		for _, c := range terms {
			v.Add(v, newUpper().Mul(current[c.left], current[c.right]))
		}
		return v
	}
	for i, nd := range p.nodes {
		if nd.pole < 0 {
			current[i] = newUpper().SetInt64(1)
			continue
		}
		current[i] = newUpper().Quo(sum(nd.terms), poles[nd.pole])
	}
	return sum(p.root)
}

// newUpper returns a big.Float that rounds away from zero: sums, products and
// quotients of non-negative numbers never fall below the true value.
func newUpper() *big.Float { return new(big.Float).SetPrec(64).SetMode(big.AwayFromZero) }

// exact runs the recursion over Q, the slow second witness. A nil result means
// that pole number zero vanishes.
func (p *wordPlan) exact(poles []*big.Rat) (value *big.Rat, zero int) {
	for i, s := range poles {
		if s.Sign() == 0 {
			return nil, i
		}
	}
	current := make([]*big.Rat, len(p.nodes))
	sum := func(terms []term) *big.Rat {
		v := new(big.Rat)
		for _, c := range terms {
			x := new(big.Rat).Mul(current[c.left], current[c.right])
			if c.negative {
				x.Neg(x)
			}
			v.Add(v, x)
		}
		return v
	}
	for i, nd := range p.nodes {
		if nd.pole < 0 {
			current[i] = big.NewRat(1, 1)
			continue
		}
		v := sum(nd.terms)
		current[i] = v.Neg(v.Quo(v, poles[nd.pole]))
	}
	return sum(p.root), -1
}
