package resultant

import (
	"math/big"
	"math/bits"

	"eliminant/rational/scattering"
)

// determinant holds what is known exactly of E(t) = det T(t) for integer data:
// its coefficients are integers, bounded by bound in absolute value, the leading
// one is +-lead and the constant one +-constant.
type determinant struct {
	n, k, size     int
	lead, constant *big.Int
	bound          *big.Int
}

// newDeterminant evaluates the integer matrix s with the given roles. The error
// is a *DegenerateError if some s_{1R} vanishes, R a nonempty set of roles 3..n-1.
//
// Leading and constant coefficient: T1 and T0 are permuted triangular with
// diagonal entries s_{13V} and s_{12V}, each for |V|! (k-|V|)! rows.
//
// Bound: a coefficient of E is the mean of E(t) t^{-i} over the circle |t| = 1, so
// at most max |E(t)| there, and by Hadamard's inequality that is at most the product
// over the rows of their Euclidean norms. A row (alpha, m) has norm squared
// at most R_m = sum_{|V|=m} s_{1V}^2 + sum_{|V|=m-1} (|s_{12V}| + |s_{13V}|)^2
// + sum_{|V|=m-2} s_{123V}^2, and there are k! rows for every m.
func newDeterminant(s [][]*big.Int, order []int) (*determinant, error) {
	n := len(order)
	k := n - 4
	d := &determinant{n: n, k: k, size: 1, lead: big.NewInt(1), constant: big.NewInt(1)}
	for j := 2; j <= k+1; j++ {
		d.size *= j
	}
	at := func(i, j int) *big.Int { return s[order[i]-1][order[j]-1] }
	factorial := make([]int64, k+1)
	factorial[0] = 1
	for j := 1; j <= k; j++ {
		factorial[j] = factorial[j-1] * int64(j)
	}
	rows := make([]big.Int, k+3) // R_m
	one := make([]big.Int, 1<<k) // s_{1V}
	two := make([]big.Int, 1<<k) // sum of s_{2j} over V
	three := make([]big.Int, 1<<k)
	var s12, s13, s123, x big.Int
	for v := range uint32(1 << k) {
		if v != 0 {
			j := bits.TrailingZeros32(v) + 3
			rest := v & (v - 1)
			one[v].Add(&one[rest], at(0, j))
			for r := rest; r != 0; r &= r - 1 {
				one[v].Add(&one[v], at(j, bits.TrailingZeros32(r)+3))
			}
			two[v].Add(&two[rest], at(1, j))
			three[v].Add(&three[rest], at(2, j))
		}
		s12.Add(&one[v], at(0, 1))
		s12.Add(&s12, &two[v])
		s13.Add(&one[v], at(0, 2))
		s13.Add(&s13, &three[v])
		s123.Add(&s12, at(0, 2))
		s123.Add(&s123, &three[v])
		s123.Add(&s123, at(1, 2))
		if v != 0 && one[v].Sign() == 0 {
			return nil, degenerate(order, v)
		}
		if s13.Sign() == 0 {
			return nil, degenerate(order, v, 2)
		}
		m := bits.OnesCount32(v)
		e := big.NewInt(factorial[m] * factorial[k-m])
		d.lead.Mul(d.lead, x.Exp(&s13, e, nil))
		d.constant.Mul(d.constant, x.Exp(&s12, e, nil))
		rows[m].Add(&rows[m], x.Mul(&one[v], &one[v]))
		x.Add(s12.Abs(&s12), s13.Abs(&s13))
		rows[m+1].Add(&rows[m+1], x.Mul(&x, &x))
		rows[m+2].Add(&rows[m+2], x.Mul(&s123, &s123))
	}
	d.lead.Abs(d.lead)
	d.constant.Abs(d.constant)
	d.bound = big.NewInt(1)
	e := big.NewInt(factorial[k])
	for m := 1; m <= k+1; m++ {
		d.bound.Mul(d.bound, x.Exp(&rows[m], e, nil))
	}
	d.bound.Sqrt(d.bound)
	d.bound.Add(d.bound, big.NewInt(1))
	return d, nil
}

// degenerate names the channel of role 1, the legs x_j of V and further roles
// (counted from 0).
func degenerate(order []int, v uint32, further ...int) error {
	legs := []int{order[0]}
	for ; v != 0; v &= v - 1 {
		legs = append(legs, order[bits.TrailingZeros32(v)+3])
	}
	for _, i := range further {
		legs = append(legs, order[i])
	}
	return &DegenerateError{scattering.NewChannel(len(order), legs...), "solutions are at infinity"}
}

// hiddenOrder returns the roles of the standard gauge with the given leg hidden.
func hiddenOrder(n, leg int) []int {
	order := []int{1, 2, leg}
	for a := 3; a <= n; a++ {
		if a != leg {
			order = append(order, a)
		}
	}
	return order
}
