package formula

import (
	"fmt"
	"math"
	"math/big"
)

// Bound bounds a formula as a rational function N/G of the free variables, N
// and G with integer coefficients, G the product of every divisor used on the
// way: total degrees, and base-2 logarithms of 1-norms (sums of the absolute
// values of the coefficients), rounded up.
//
// 1-norms are submultiplicative and subadditive, so with x = N1/G1, y = N2/G2
//
//	x + y = (N1 G2 + N2 G1)/(G1 G2),  x y = N1 N2/(G1 G2),
//	1/x   = G1^2/(G1 N1), which keeps G1 among the divisors,
//
// and the bounds of the results follow.
type Bound struct {
	NumeratorDegree, DenominatorDegree int
	NumeratorBits, DenominatorBits     float64
}

// Masses says what a mass squared is in a bound: zero, a variable, a number.
type Masses struct {
	Free    bool
	Squared *big.Rat
}

// BoundDomain evaluates bounds. The variables are the planar invariants X_ij of
// n legs and, if masses are free, m^2; see Invariant below for s(U).
type BoundDomain struct {
	legs      int
	masses    Masses
	amplitude func(*Amplitude) (Bound, error)
}

// NewBoundDomain bounds formulas of n legs; amplitude bounds an amplitude as a
// function of the X_ij and m^2, m^2 a variable.
func NewBoundDomain(legs int, masses Masses, amplitude func(*Amplitude) (Bound, error)) *BoundDomain {
	return &BoundDomain{legs, masses, amplitude}
}

// maxDegree caps degrees far above anything that leaves a bound.
const maxDegree = 1 << 60

func capped(d int) int { return min(d, maxDegree) }

// sumBits returns log2(2^a + 2^b), rounded up by more than the error of the
// floating-point functions.
func sumBits(a, b float64) float64 {
	if a < b {
		a, b = b, a
	}
	return a + math.Log2(1+math.Exp2(b-a))*(1+1e-9) + 1e-12*math.Abs(a)
}

// intBits returns an upper bound of log2 |n|, 0 for n = 0.
func intBits(n *big.Int) float64 {
	l := n.BitLen()
	if l <= 52 {
		f := math.Abs(float64(n.Int64()))
		if f <= 1 {
			return 0
		}
		return math.Log2(f) * (1 + 1e-12)
	}
	return float64(l)
}

func (d *BoundDomain) Rational(r *big.Rat) (Bound, error) {
	return Bound{0, 0, intBits(r.Num()), intBits(r.Denom())}, nil
}

func (d *BoundDomain) Add(x, y Bound) Bound {
	return Bound{
		capped(max(x.NumeratorDegree+y.DenominatorDegree, y.NumeratorDegree+x.DenominatorDegree)),
		capped(x.DenominatorDegree + y.DenominatorDegree),
		sumBits(x.NumeratorBits+y.DenominatorBits, y.NumeratorBits+x.DenominatorBits),
		x.DenominatorBits + y.DenominatorBits,
	}
}

func (d *BoundDomain) Sub(x, y Bound) Bound { return d.Add(x, y) }
func (d *BoundDomain) Neg(x Bound) Bound    { return x }

func (d *BoundDomain) Mul(x, y Bound) Bound {
	return Bound{
		capped(x.NumeratorDegree + y.NumeratorDegree), capped(x.DenominatorDegree + y.DenominatorDegree),
		x.NumeratorBits + y.NumeratorBits, x.DenominatorBits + y.DenominatorBits,
	}
}

func (d *BoundDomain) Inverse(x Bound) (Bound, bool) {
	return Bound{
		capped(2 * x.DenominatorDegree), capped(x.DenominatorDegree + x.NumeratorDegree),
		2 * x.DenominatorBits, x.DenominatorBits + x.NumeratorBits,
	}, true
}

func (d *BoundDomain) Leaf(n Node) (Bound, error) {
	if err := checkLegs(n, d.legs); err != nil {
		return Bound{}, err
	}
	switch n := n.(type) {
	case *Invariant:
		return d.substitute(Bound{1, 0, math.Log2(d.invariantNorm(n.Legs)) * (1 + 1e-12), 0}), nil
	case *MassSquared:
		return d.substitute(Bound{1, 0, 0, 0}), nil
	case *Amplitude:
		b, err := d.amplitude(n)
		return d.substitute(b), err
	}
	return Bound{}, fmt.Errorf("%s has no bound", n)
}

// substitute replaces the variable m^2 by a number p/q. With degrees d and g,
// N q^d and G q^g have integer coefficients and 1-norms at most those of N and G
// times max(|p|,q)^d and max(|p|,q)^g, and N/G = (N q^d) q^g / ((G q^g) q^d).
func (d *BoundDomain) substitute(b Bound) Bound {
	if d.masses.Squared == nil {
		return b
	}
	q := intBits(d.masses.Squared.Denom())
	most := max(q, intBits(d.masses.Squared.Num()))
	n, g := float64(b.NumeratorDegree), float64(b.DenominatorDegree)
	b.NumeratorBits += n*most + g*q
	b.DenominatorBits += g*most + n*q
	return b
}

// invariantNorm returns the 1-norm of s(U) as a linear form in the X_ij and m^2:
// s_ab = X_{a,b+1} + X_{a+1,b} - X_ab - X_{a+1,b+1} + 2 m^2, X_{a,a+1} = m^2, and
// s(U) is the sum over its pairs less (|U|-2) m^2 for every leg.
func (d *BoundDomain) invariantNorm(legs []int) float64 {
	n := d.legs
	form := map[[2]int]int{}
	mass := -(len(legs) - 2) * len(legs)
	add := func(i, j, c int) {
		i, j = i%n, j%n
		if i > j {
			i, j = j, i
		}
		switch gap := j - i; {
		case gap == 0:
		case gap == 1 || gap == n-1:
			mass += c
		default:
			form[[2]int{i, j}] += c
		}
	}
	for i, a := range legs {
		for _, b := range legs[i+1:] {
			add(a-1, b, 1)
			add(a, b-1, 1)
			add(a-1, b-1, -1)
			add(a, b, -1)
			mass += 2
		}
	}
	norm := 0
	for _, c := range form {
		norm += max(c, -c)
	}
	if d.masses.Free || d.masses.Squared != nil {
		norm += max(mass, -mass)
	}
	return float64(max(norm, 1))
}

// Delta bounds the chance that one round accepts a difference that is not zero,
// as a base-2 logarithm rounded up: a round draws a prime uniformly from more
// than 2^55 primes of [2^61, 2^62) and every variable uniformly from [0, 2^61),
// and discards both where a divisor vanishes. A fixed nonzero coefficient of N
// is divisible by at most beta/61 of the primes; otherwise the Schwartz-Zippel
// lemma (J. T. Schwartz, J. ACM 27 (1980) 701) applies to N mod p; the
// denominator is the chance that a draw is kept:
//
//	delta <= (beta/(61 2^55) + d/2^61) / (1 - gamma/(61 2^55) - g/2^61).
//
// +Inf if the bound is void.
func Delta(b Bound) float64 {
	const primes, length = 61 * (1 << 55), 1 << 61
	kept := 1 - b.DenominatorBits/primes - float64(b.DenominatorDegree)/length
	if !(kept > 0) {
		return math.Inf(1)
	}
	// beta at least 1: a numerator of 1-norm 1 is a unit, but costs nothing
	delta := (max(b.NumeratorBits, 1)/primes + float64(b.NumeratorDegree)/length) / kept
	return math.Log2(delta) + 1e-9
}
