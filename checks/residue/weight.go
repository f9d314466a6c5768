package residue

import (
	"fmt"
	"math/big"
	"slices"

	"eliminant/checks/formula"
)

// weights is the Moebius weight of an expression in every leg: under
// z -> (a z + b)/(c z + d) with a d - b c = 1 it is multiplied by the product of
// (c z_i + d)^w_i. z(a,b) has weight -1 in a and b, a Parke-Taylor factor 2 in
// each of its legs, the reduced determinant detPhi 4 in every leg.
type weights struct {
	w    []int
	zero bool // the literal 0 fits everything
}

// WeightError says that an integrand is not Moebius invariant.
type WeightError struct {
	Leg    int
	Weight int
	// Terms is set where two terms of one sum differ in the leg's weight.
	Terms bool
	Other int
}

func (e *WeightError) Error() string {
	if e.Terms {
		return fmt.Sprintf("terms of a sum have Moebius weights %d and %d in leg %d", e.Weight, e.Other, e.Leg)
	}
	return fmt.Sprintf("the integrand has Moebius weight %d in leg %d, expected 0", e.Weight, e.Leg)
}

// weightDomain infers weights; errors of sums are kept and returned at the end.
type weightDomain struct {
	legs  int
	fault *WeightError
}

func (d *weightDomain) none() weights { return weights{w: make([]int, d.legs+1)} }

func (d *weightDomain) Rational(r *big.Rat) (weights, error) {
	w := d.none()
	w.zero = r.Sign() == 0
	return w, nil
}

func (d *weightDomain) Add(x, y weights) weights {
	if x.zero {
		return y
	}
	if y.zero {
		return x
	}
	for l := 1; l <= d.legs; l++ {
		if x.w[l] != y.w[l] && d.fault == nil {
			d.fault = &WeightError{Leg: l, Weight: x.w[l], Other: y.w[l], Terms: true}
		}
	}
	return x
}

func (d *weightDomain) Sub(x, y weights) weights { return d.Add(x, y) }
func (d *weightDomain) Neg(x weights) weights    { return x }

func (d *weightDomain) Mul(x, y weights) weights {
	z := weights{w: slices.Clone(x.w), zero: x.zero || y.zero}
	for l := range z.w {
		z.w[l] += y.w[l]
	}
	return z
}

func (d *weightDomain) Inverse(x weights) (weights, bool) {
	if x.zero {
		return x, false
	}
	z := d.none()
	for l := range z.w {
		z.w[l] = -x.w[l]
	}
	return z, true
}

func (d *weightDomain) Leaf(n formula.Node) (weights, error) {
	w := d.none()
	switch n := n.(type) {
	case *formula.Difference:
		w.w[n.A]--
		w.w[n.B]--
	case *formula.ParkeTaylor:
		for _, l := range n.Ordering {
			w.w[l] += 2
		}
	case *formula.ReducedDeterminant:
		for l := 1; l <= d.legs; l++ {
			w.w[l] += 4
		}
	}
	return w, nil
}
