package formula

import (
	"fmt"
	"math/big"

	"eliminant/rational/kinematics"
	"eliminant/rational/prime"
)

// RationalDomain evaluates over Q at an exact point.
type RationalDomain struct {
	point     *kinematics.Invariants
	amplitude func(*Amplitude) (*big.Rat, error)
}

// NewRationalDomain evaluates at the invariants of a point, amplitudes by the
// given function.
func NewRationalDomain(p *kinematics.Invariants, amplitude func(*Amplitude) (*big.Rat, error)) *RationalDomain {
	return &RationalDomain{p, amplitude}
}

func (d *RationalDomain) Rational(r *big.Rat) (*big.Rat, error) { return r, nil }
func (d *RationalDomain) Add(x, y *big.Rat) *big.Rat            { return new(big.Rat).Add(x, y) }
func (d *RationalDomain) Sub(x, y *big.Rat) *big.Rat            { return new(big.Rat).Sub(x, y) }
func (d *RationalDomain) Mul(x, y *big.Rat) *big.Rat            { return new(big.Rat).Mul(x, y) }
func (d *RationalDomain) Neg(x *big.Rat) *big.Rat               { return new(big.Rat).Neg(x) }

func (d *RationalDomain) Inverse(x *big.Rat) (*big.Rat, bool) {
	if x.Sign() == 0 {
		return nil, false
	}
	return new(big.Rat).Inv(x), true
}

// LegError says that a formula names a leg the point does not have.
type LegError struct {
	At        Span
	Leg, Legs int
}

func (e *LegError) Error() string {
	return fmt.Sprintf("leg %d: the point has %d legs", e.Leg, e.Legs)
}

// MassesDiffer says that msq was used at a point with different masses.
type MassesDiffer struct{ At Span }

func (e *MassesDiffer) Error() string {
	return "msq is the mass squared common to all legs, but the masses differ; write msq1, msq2, ..."
}

func checkLegs(n Node, legs int) error {
	var err error
	n.legs(func(l int) {
		if l > legs && err == nil {
			err = &LegError{n.Span(), l, legs}
		}
	})
	return err
}

func (d *RationalDomain) Leaf(n Node) (*big.Rat, error) {
	if err := checkLegs(n, d.point.Legs()); err != nil {
		return nil, err
	}
	switch n := n.(type) {
	case *Invariant:
		return d.point.Lorentz(n.Legs...), nil
	case *MassSquared:
		if n.Leg > 0 {
			return d.point.MassSquared(n.Leg), nil
		}
		if d.point.Massless() {
			return new(big.Rat), nil
		}
		m, ok := d.point.CommonMassSquared()
		if !ok {
			return nil, &MassesDiffer{n.Span()}
		}
		return m, nil
	case *Amplitude:
		return d.amplitude(n)
	}
	return nil, fmt.Errorf("%s has no value at a point", n)
}

// ModularDomain evaluates modulo a prime.
type ModularDomain struct {
	point     *kinematics.Reduced
	amplitude func(*Amplitude) (prime.Element, error)
}

// NewModularDomain evaluates at a reduced point, amplitudes by the given
// function. Rational numbers whose denominator the prime divides give
// prime.ErrBadPrime.
func NewModularDomain(p *kinematics.Reduced, amplitude func(*Amplitude) (prime.Element, error)) *ModularDomain {
	return &ModularDomain{p, amplitude}
}

func (d *ModularDomain) Rational(r *big.Rat) (prime.Element, error) {
	x, ok := d.point.Field.FromRat(r)
	if !ok {
		return 0, prime.ErrBadPrime
	}
	return x, nil
}

func (d *ModularDomain) Add(x, y prime.Element) prime.Element { return d.point.Field.Add(x, y) }
func (d *ModularDomain) Sub(x, y prime.Element) prime.Element { return d.point.Field.Sub(x, y) }
func (d *ModularDomain) Mul(x, y prime.Element) prime.Element { return d.point.Field.Mul(x, y) }
func (d *ModularDomain) Neg(x prime.Element) prime.Element    { return d.point.Field.Neg(x) }

func (d *ModularDomain) Inverse(x prime.Element) (prime.Element, bool) {
	return d.point.Field.Inv(x)
}

func (d *ModularDomain) Leaf(n Node) (prime.Element, error) {
	if err := checkLegs(n, d.point.N); err != nil {
		return 0, err
	}
	switch n := n.(type) {
	case *Invariant:
		return d.point.Lorentz(n.Legs), nil
	case *MassSquared:
		return d.point.MassSquared(max(1, n.Leg)), nil
	case *Amplitude:
		return d.amplitude(n)
	}
	return 0, fmt.Errorf("%s has no value at a point", n)
}

// leafDomain visits leaves and computes nothing.
type leafDomain func(Node)

// LeafDomain is a domain in which evaluation only visits the leaves, after
// relabelling.
func LeafDomain(visit func(Node)) Domain[struct{}] { return leafDomain(visit) }

func (d leafDomain) Rational(*big.Rat) (struct{}, error) { return struct{}{}, nil }
func (d leafDomain) Add(_, _ struct{}) struct{}          { return struct{}{} }
func (d leafDomain) Sub(_, _ struct{}) struct{}          { return struct{}{} }
func (d leafDomain) Mul(_, _ struct{}) struct{}          { return struct{}{} }
func (d leafDomain) Neg(struct{}) struct{}               { return struct{}{} }
func (d leafDomain) Inverse(struct{}) (struct{}, bool)   { return struct{}{}, true }
func (d leafDomain) Leaf(n Node) (struct{}, error)       { d(n); return struct{}{}, nil }
