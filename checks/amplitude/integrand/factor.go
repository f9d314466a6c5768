package integrand

import (
	"fmt"

	"eliminant/rational/prime"
	"eliminant/rational/scattering"
)

// Integrand is what can be summed over solutions.
type Integrand interface {
	// Check reports whether the integrand is defined for so many legs over f.
	Check(f *prime.Field, legs int) error
	// Evaluator returns an evaluator with scratch space of its own; r is used by
	// it and must not be shared between goroutines.
	Evaluator(r *Ring, legs int) Evaluator
}

// Evaluator sets z to the gauge-fixed value at a solution over the ring it was
// made for. It may change nothing of the solution.
type Evaluator interface {
	Evaluate(z []prime.Element, v *Solution)
}

// Factor is a building block together with what bounds its behaviour.
type Factor interface {
	Integrand
	// Moebius is the weight w of the leg: under z -> (a z + b)/(c z + d),
	// ad - bc = 1, the block is multiplied by the product of (c z_i + d)^w_i.
	Moebius(leg int) int
	// Weight bounds w_I: where the points of a set of legs approach each other at
	// rate rho on solutions, the block grows at most like rho^-w_I.
	Weight(set scattering.Channel) int
	// Growth bounds the degree of the block in the invariants s_ab.
	Growth(legs int) int
}

// Product is a product of building blocks.
type Product []Factor

// Check checks every factor.
func (p Product) Check(f *prime.Field, legs int) error {
	for _, x := range p {
		if err := x.Check(f, legs); err != nil {
			return err
		}
	}
	return nil
}

// Moebius returns the sum of the weights.
func (p Product) Moebius(leg int) int {
	w := 0
	for _, x := range p {
		w += x.Moebius(leg)
	}
	return w
}

// Weight returns the sum of the bounds.
func (p Product) Weight(set scattering.Channel) int {
	w := 0
	for _, x := range p {
		w += x.Weight(set)
	}
	return w
}

// Growth returns the sum of the bounds.
func (p Product) Growth(legs int) int {
	g := 0
	for _, x := range p {
		g += x.Growth(legs)
	}
	return g
}

// Evaluator multiplies the factors.
func (p Product) Evaluator(r *Ring, legs int) Evaluator {
	e := &productEvaluator{ring: r, row: make([]prime.Element, r.depth)}
	for _, x := range p {
		e.factors = append(e.factors, x.Evaluator(r, legs))
	}
	return e
}

type productEvaluator struct {
	ring    *Ring
	factors []Evaluator
	row     []prime.Element
}

func (e *productEvaluator) Evaluate(z []prime.Element, v *Solution) {
	if len(e.factors) == 0 {
		e.ring.SetOne(z)
		return
	}
	e.factors[0].Evaluate(z, v)
	for _, x := range e.factors[1:] {
		x.Evaluate(e.row, v)
		e.ring.Mul(z, z, e.row)
	}
}

// Power is Base^Exponent, Exponent >= 1; the base is evaluated once.
type Power struct {
	Base     Factor
	Exponent int
}

// Check checks the base.
func (p Power) Check(f *prime.Field, legs int) error {
	if p.Exponent < 1 {
		return fmt.Errorf("power %d of a building block", p.Exponent)
	}
	return p.Base.Check(f, legs)
}

// Moebius returns Exponent times the weight of the base.
func (p Power) Moebius(leg int) int { return p.Exponent * p.Base.Moebius(leg) }

// Weight returns Exponent times the bound of the base.
func (p Power) Weight(set scattering.Channel) int { return p.Exponent * p.Base.Weight(set) }

// Growth returns Exponent times the bound of the base.
func (p Power) Growth(legs int) int { return p.Exponent * p.Base.Growth(legs) }

// Evaluator multiplies the base with itself.
func (p Power) Evaluator(r *Ring, legs int) Evaluator {
	return &powerEvaluator{r, p.Base.Evaluator(r, legs), p.Exponent, make([]prime.Element, r.depth)}
}

type powerEvaluator struct {
	ring     *Ring
	base     Evaluator
	exponent int
	row      []prime.Element
}

func (e *powerEvaluator) Evaluate(z []prime.Element, v *Solution) {
	if e.exponent == 1 {
		e.base.Evaluate(z, v)
		return
	}
	e.base.Evaluate(e.row, v)
	e.ring.Square(z, e.row)
	for range e.exponent - 2 {
		e.ring.Mul(z, z, e.row)
	}
}

// Difference is (z_A - z_B)^Power, Power of either sign.
type Difference struct{ A, B, Power int }

// Check reports legs out of range or equal.
func (x Difference) Check(_ *prime.Field, legs int) error {
	return checkLegs("a difference", []int{x.A, x.B}, legs, 2)
}

// Moebius returns -Power for the two legs.
func (x Difference) Moebius(leg int) int {
	if leg == x.A || leg == x.B {
		return -x.Power
	}
	return 0
}

// Weight returns -Power if both legs are in the set.
func (x Difference) Weight(set scattering.Channel) int {
	if set.Has(x.A) && set.Has(x.B) {
		return -x.Power
	}
	return 0
}

// Growth returns 0.
func (x Difference) Growth(int) int { return 0 }

// Evaluator returns an evaluator of the power.
func (x Difference) Evaluator(r *Ring, _ int) Evaluator {
	return &differenceEvaluator{x, r, make([]prime.Element, r.depth)}
}

type differenceEvaluator struct {
	Difference
	ring *Ring
	row  []prime.Element
}

func (e *differenceEvaluator) Evaluate(z []prime.Element, v *Solution) {
	r, row := e.ring, e.row
	power := e.Power
	switch {
	case power < 0:
		copy(row, v.Inverse(e.A, e.B))
		power = -power
	case e.A == 1 || e.B == 1: // z_1 - z_b -> z_1: its own inverse
		copy(row, v.Inverse(e.A, e.B))
	default:
		r.Sub(row, v.Coordinate(e.A), v.Coordinate(e.B))
	}
	r.SetOne(z)
	for range power {
		r.Mul(z, z, row)
	}
}

// ParkeTaylor is the Parke-Taylor factor of an ordering of two or more legs, not
// necessarily of all.
type ParkeTaylor struct{ Ordering []int }

// Check reports legs out of range or named twice.
func (x ParkeTaylor) Check(_ *prime.Field, legs int) error {
	return checkLegs("a Parke-Taylor factor", x.Ordering, legs, 2)
}

// Moebius returns 2 for the legs of the ordering.
func (x ParkeTaylor) Moebius(leg int) int {
	for _, a := range x.Ordering {
		if a == leg {
			return 2
		}
	}
	return 0
}

// Weight returns the number of links inside the set: the number of its legs in
// the ordering minus the number of cyclic runs that they form.
func (x ParkeTaylor) Weight(set scattering.Channel) int {
	w := 0
	for i, a := range x.Ordering {
		if set.Has(a) && set.Has(x.Ordering[(i+1)%len(x.Ordering)]) {
			w++
		}
	}
	return w
}

// Growth returns 0.
func (x ParkeTaylor) Growth(int) int { return 0 }

// Evaluator returns an evaluator of the product of inverse differences. The two
// links with leg 1 give -1 together.
func (x ParkeTaylor) Evaluator(r *Ring, _ int) Evaluator {
	return &parkeTaylorEvaluator{r, x.Ordering}
}

type parkeTaylorEvaluator struct {
	ring     *Ring
	ordering []int
}

func (e *parkeTaylorEvaluator) Evaluate(z []prime.Element, v *Solution) {
	odd, first := false, true
	for i, a := range e.ordering {
		b := e.ordering[(i+1)%len(e.ordering)]
		switch {
		case a == 1: // +1
		case b == 1: // -1
			odd = !odd
		case first:
			copy(z, v.Inverse(a, b))
			first = false
		default:
			e.ring.Mul(z, z, v.Inverse(a, b))
		}
	}
	if first {
		e.ring.SetOne(z)
	}
	e.ring.raise(z, 0, odd)
}

// LegError says which leg of a building block is wrong, and why.
type LegError struct {
	What   string
	Leg    int
	Reason string
}

func (e *LegError) Error() string {
	return fmt.Sprintf("%s: leg %d %s", e.What, e.Leg, e.Reason)
}

// checkLegs reports legs out of 1..n, named twice, or fewer than least.
func checkLegs(what string, list []int, legs, least int) error {
	var seen scattering.Channel
	for _, a := range list {
		if a < 1 || a > legs {
			return &LegError{what, a, fmt.Sprintf("is not in 1..%d", legs)}
		}
		if seen.Has(a) {
			return &LegError{what, a, "is named twice"}
		}
		seen |= 1 << (a - 1)
	}
	if len(list) < least {
		return fmt.Errorf("%s names %d legs, at least %d are needed", what, len(list), least)
	}
	return nil
}
