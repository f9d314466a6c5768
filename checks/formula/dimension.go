package formula

import (
	"fmt"
	"math/big"
)

// Dimension is a mass dimension: the degree in the components of momenta. The
// literal 0 has every dimension.
type Dimension struct {
	Value int
	Any   bool
}

// DimensionMismatch says that two terms of a sum have different mass
// dimensions.
type DimensionMismatch struct{ Left, Right int }

func (e *DimensionMismatch) Error() string {
	return fmt.Sprintf("terms of mass dimension %d and %d are added", e.Left, e.Right)
}

// DimensionDomain infers mass dimensions: s and msq have 2, BS and phi3 with n
// legs -2(n-3). Mismatch holds the first sum whose terms disagree, if any.
type DimensionDomain struct{ Mismatch *DimensionMismatch }

// Rational implements Domain.
func (d *DimensionDomain) Rational(r *big.Rat) (Dimension, error) {
	return Dimension{Any: r.Sign() == 0}, nil
}

// Add implements Domain.
func (d *DimensionDomain) Add(x, y Dimension) Dimension {
	if x.Any {
		return y
	}
	if !y.Any && x.Value != y.Value && d.Mismatch == nil {
		d.Mismatch = &DimensionMismatch{x.Value, y.Value}
	}
	return x
}

// Sub implements Domain.
func (d *DimensionDomain) Sub(x, y Dimension) Dimension { return d.Add(x, y) }

// Neg implements Domain.
func (d *DimensionDomain) Neg(x Dimension) Dimension { return x }

// Mul implements Domain.
func (d *DimensionDomain) Mul(x, y Dimension) Dimension {
	return Dimension{x.Value + y.Value, x.Any || y.Any}
}

// Inverse implements Domain.
func (d *DimensionDomain) Inverse(x Dimension) (Dimension, bool) {
	return Dimension{Value: -x.Value}, !x.Any
}

// Leaf implements Domain.
func (d *DimensionDomain) Leaf(n Node) (Dimension, error) {
	switch n := n.(type) {
	case *Invariant, *MassSquared:
		return Dimension{Value: 2}, nil
	case *Amplitude:
		return Dimension{Value: -2 * (len(n.Orderings[0]) - 3)}, nil
	}
	return Dimension{}, nil
}
