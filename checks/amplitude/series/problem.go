package series

import (
	"fmt"

	"eliminant/checks/amplitude/integrand"
	"eliminant/rational/prime"
)

// Pole is a possible pole s_I^-Order of a sum.
type Pole = integrand.Pole

// Problem is a sum over solutions: Scale <I>, <I> = sum of I/det Phi, of which the
// poles and the degree of the numerator along a line of invariants are known.
type Problem struct {
	Legs int
	// Poles lists the invariants by whose product the sum becomes a polynomial
	// along the line. The sum must be defined where they do not vanish.
	Poles []Pole
	// NumeratorDegree bounds the degree of that polynomial; negative means 0.
	NumeratorDegree int
	// Integrand is of Moebius weight 4 in every leg.
	Integrand integrand.Integrand
	// Scale multiplies the sum; 0 stands for 1.
	Scale int64

	products *integrand.Products
}

// NewProblem returns the sum of a product of building blocks with the poles and
// the degree that integrand.Poles and integrand.NumeratorDegree prove. The error
// is an *integrand.WeightError, or that of a building block's labels.
func NewProblem(legs int, x integrand.Factor, scale int64) (*Problem, error) {
	if err := checkCount(legs); err != nil {
		return nil, err
	}
	if err := integrand.CheckMoebius(x, legs); err != nil {
		return nil, err
	}
	return &Problem{
		Legs:            legs,
		Poles:           integrand.Poles(x, legs),
		NumeratorDegree: integrand.NumeratorDegree(x, legs),
		Integrand:       x,
		Scale:           scale,
	}, nil
}

// BiAdjoint returns the bi-adjoint scalar amplitude of two orderings of the same
// legs 1..n,
//
//	m(alpha|beta) = <PT(alpha) PT(beta)>.
//
// Its poles are the channels planar in both orderings, P of them, and the degree
// of the numerator is P - (n-3).
func BiAdjoint(alpha, beta []int) (*Problem, error) {
	n := len(alpha)
	a, b := integrand.ParkeTaylor{Ordering: alpha}, integrand.ParkeTaylor{Ordering: beta}
	if err := checkOrderings(n, a, b); err != nil {
		return nil, err
	}
	if sameCycle(alpha, beta) {
		return NewProblem(n, integrand.Power{Base: a, Exponent: 2}, 1)
	}
	return NewProblem(n, integrand.Product{a, b}, 1)
}

// YangMills returns the colour-ordered gluon amplitude
//
//	A_YM(alpha) = sigma_n 2^(n-2) <PT(alpha) Pf'Psi>, sigma_n = (-1)^(n(n+1)/2).
//
// Its poles are the n(n-3)/2 planar channels and the degree of the numerator is
// n(n-3)/2 - (n-3) + floor(n/2) - 1.
func YangMills(alpha []int, p *integrand.Products) (*Problem, error) {
	n := len(alpha)
	a := integrand.ParkeTaylor{Ordering: alpha}
	if err := checkOrderings(n, a); err != nil {
		return nil, err
	}
	scale := int64(1) << (n - 2)
	if n*(n+1)/2%2 == 1 {
		scale = -scale
	}
	q, err := NewProblem(n, integrand.Product{a, integrand.ReducedPfaffian{Products: p}}, scale)
	return q.with(p), err
}

// Gravity returns the double copy of gluons with polarisations e and f,
//
//	M_D = (-1)^(n-3) 2^(2n-4) <Pf'Psi(e) Pf'Psi(f)>
//
// for legs 1..n; f = e if the products have no second set. Its poles are all
// 2^(n-1) - n - 1 channels, and the degree of the numerator is their number less
// n-3 plus 2 (floor(n/2) - 1).
func Gravity(legs int, p *integrand.Products) (*Problem, error) {
	if err := checkCount(legs); err != nil {
		return nil, err
	}
	if p == nil {
		return nil, &integrand.ProductsError{Reason: "missing"}
	}
	scale := int64(1) << (2*legs - 4)
	if legs%2 == 0 {
		scale = -scale
	}
	var x integrand.Factor
	first := integrand.ReducedPfaffian{Products: p}
	if second := p.Second(); second == p {
		x = integrand.Power{Base: first, Exponent: 2}
	} else {
		x = integrand.Product{first, integrand.ReducedPfaffian{Products: second}}
	}
	q, err := NewProblem(legs, x, scale)
	return q.with(p), err
}

// with remembers the products, whose KK must agree with the invariants.
func (q *Problem) with(p *integrand.Products) *Problem {
	if q != nil {
		q.products = p
	}
	return q
}

// check checks the problem against a field and the invariants at the end point.
func (q *Problem) check(f *prime.Field, s []prime.Element) error {
	if err := checkCount(q.Legs); err != nil {
		return err
	}
	n := q.Legs
	if len(s) != n*n {
		return &InvariantsError{0, fmt.Sprintf("%d entries, expected %d", len(s), n*n)}
	}
	for a := range n {
		var sum prime.Element
		for b := range n {
			sum = f.Add(sum, s[a*n+b])
			if s[a*n+b] != s[b*n+a] {
				return &InvariantsError{a + 1, fmt.Sprintf("s_ab is not symmetric with leg %d", b+1)}
			}
		}
		if s[a*n+a] != 0 {
			return &InvariantsError{a + 1, "the diagonal entry is not 0"}
		}
		if sum != 0 {
			return &InvariantsError{a + 1, "the row does not add up to 0"}
		}
	}
	for _, p := range q.Poles {
		if p.Order < 1 || p.Channel.Size() < 2 || p.Channel.Size() > n-2 || p.Channel>>n != 0 {
			return fmt.Errorf("%s^-%d is not a pole of a sum over solutions for %d legs", p.Channel, p.Order, n)
		}
	}
	if p := q.products; p != nil && p.KK != nil {
		if len(p.KK) != n*n {
			return &integrand.ProductsError{Reason: fmt.Sprintf("k.k has %d entries, expected %d", len(p.KK), n*n)}
		}
		for i, x := range p.KK {
			if i%(n+1) != 0 && f.Add(x, x) != s[i] {
				return &integrand.ProductsError{Leg: i/n + 1, Reason: fmt.Sprintf("2 k.k with leg %d is not the invariant", i%n+1)}
			}
		}
	}
	return q.Integrand.Check(f, n)
}

// MinLegs and MaxLegs bound the number of legs: at 13 there are 3628800 solutions.
const (
	MinLegs = 4
	MaxLegs = 13
)

// LegsError says that a number of legs is out of range.
type LegsError struct{ Legs int }

func (e *LegsError) Error() string {
	return fmt.Sprintf("sums over solutions by series are for %d to %d legs, got %d", MinLegs, MaxLegs, e.Legs)
}

func checkCount(legs int) error {
	if legs < MinLegs || legs > MaxLegs {
		return &LegsError{legs}
	}
	return nil
}

// checkOrderings checks that the orderings name all legs.
func checkOrderings(n int, list ...integrand.ParkeTaylor) error {
	if err := checkCount(n); err != nil {
		return err
	}
	for _, x := range list {
		if len(x.Ordering) != n {
			return fmt.Errorf("orderings of %d and %d legs", n, len(x.Ordering))
		}
		if err := x.Check(nil, n); err != nil {
			return err
		}
	}
	return nil
}

// sameCycle tells whether b is a rotation of a.
func sameCycle(a, b []int) bool {
	for r := range a {
		equal := true
		for i := range a {
			equal = equal && a[i] == b[(i+r)%len(b)]
		}
		if equal {
			return true
		}
	}
	return false
}
