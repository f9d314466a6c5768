package residue

import (
	"fmt"
	"math/big"

	"eliminant/checks/formula"
	"eliminant/rational/kinematics"
	"eliminant/resultant"
)

// bounded is a height together with the height of the inverse where that is
// known to be smaller than the norm argument gives.
type bounded struct {
	h, inverse resultant.Height
	known      bool
}

// heightDomain bounds an expression on the solutions (resultant.Height states
// what a height is, resultant.Heights proves those of the leaves).
type heightDomain struct {
	heights    *resultant.Heights
	point      *kinematics.Invariants
	legs, size int
	separating int
}

func rationalBounds(r *big.Rat) bounded {
	b := bounded{h: resultant.RationalHeight(r)}
	if r.Sign() != 0 {
		b.inverse, b.known = resultant.RationalHeight(new(big.Rat).Inv(r)), true
	}
	return b
}

func (d *heightDomain) Rational(r *big.Rat) (bounded, error) { return rationalBounds(r), nil }
func (d *heightDomain) Add(x, y bounded) bounded             { return bounded{h: x.h.Add(y.h)} }
func (d *heightDomain) Sub(x, y bounded) bounded             { return bounded{h: x.h.Add(y.h)} }
func (d *heightDomain) Neg(x bounded) bounded                { return x }

func (d *heightDomain) Mul(x, y bounded) bounded {
	z := bounded{h: x.h.Mul(y.h), known: x.known && y.known}
	if z.known {
		z.inverse = x.inverse.Mul(y.inverse)
	}
	return z
}

func (d *heightDomain) Inverse(x bounded) (bounded, bool) {
	if x.known {
		return bounded{x.inverse, x.h, true}, true
	}
	return bounded{x.h.Inverse(d.size), x.h, true}, true
}

func (d *heightDomain) difference(a, b int) bounded {
	if a == 1 || b == 1 {
		return bounded{known: true}
	}
	return bounded{d.heights.Difference(a, b), d.heights.DifferenceInverse(a, b), true}
}

func (d *heightDomain) Leaf(n formula.Node) (bounded, error) {
	switch n := n.(type) {
	case *formula.Puncture:
		if n.Leg == d.legs {
			return bounded{}, nil
		}
		return d.difference(n.Leg, d.legs), nil
	case *formula.Difference:
		return d.difference(n.A, n.B), nil
	case *formula.ParkeTaylor:
		z := bounded{known: true}
		for i, a := range n.Ordering {
			x := d.difference(a, n.Ordering[(i+1)%len(n.Ordering)])
			z = d.Mul(z, bounded{x.inverse, x.h, true})
		}
		return z, nil
	case *formula.Jacobian:
		return bounded{d.heights.Jacobian(), d.heights.JacobianInverse(d.separating), true}, nil
	case *formula.ReducedDeterminant:
		return bounded{d.heights.ReducedDeterminant(), d.heights.ReducedDeterminantInverse(d.separating), true}, nil
	case *formula.Invariant:
		return rationalBounds(d.point.Lorentz(n.Legs...)), nil
	case *formula.MassSquared:
		return rationalBounds(d.point.MassSquared(max(1, n.Leg))), nil
	}
	return bounded{}, fmt.Errorf("integrands have no %T", n)
}
