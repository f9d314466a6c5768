// Package kinematics holds exact on-shell kinematic points of n legs, all
// outgoing, of every kind of a points file: momentum twistors, spinors, momenta
// in any dimension and signature, Lorentz invariants and dot products. It reads
// them, validates them exactly, converts between kinds, writes them, and reduces
// their invariants modulo primes. Components may be polynomials in one
// parameter: such a point is a family.
package kinematics

import (
	"math/big"
	"slices"
)

// Kind says by what a point is given. Its value is the key in a points file.
type Kind string

// The kinds of a point.
const (
	KindTwistors   Kind = "twistors"
	KindSpinors    Kind = "spinors"
	KindMomenta    Kind = "momenta"
	KindInvariants Kind = "invariants"
	KindProducts   Kind = "products"
)

// Kinds lists every Kind.
var Kinds = []Kind{KindTwistors, KindSpinors, KindMomenta, KindInvariants, KindProducts}

// Point is an exact kinematic point or family. Only the fields of its Kind are
// set; row i-1 of a matrix belongs to leg i. A point is not changed after it was
// made: matrices and numbers may be shared.
type Point struct {
	Label string
	Kind  Kind

	// KindTwistors: rows (lambda^1, lambda^2, mu^1, mu^2).
	Twistors Matrix

	// KindSpinors: rows lambda and lambda-tilde.
	Angle, Square Matrix

	// KindMomenta: rows of D components, signs of the metric, polarisations
	// (nil, or rows that may be nil). Polarisations2 are the second factors of
	// gravitons; nil means the same as the first.
	Momenta                       Matrix
	Metric                        string
	Polarisations, Polarisations2 Matrix

	// KindMomenta, KindInvariants: m_a^2, nil if all legs are massless.
	MassesSquared []*big.Rat

	// KindInvariants: s_ab = (k_a + k_b)^2.
	S Matrix

	// KindProducts.
	Products Products
}

// Products are all dot products of momenta k, polarisations e and second
// polarisations f. Row a of EK is e_a.k_b, of FE f_a.e_b. The diagonal of KK
// holds the squared masses. A leg without polarisation has a nil row in EK and
// EE. EK and EE are nil together, and so are FK, FE and FF; no f means f = e.
type Products struct{ KK, EK, EE, FK, FE, FF Matrix }

// Legs returns n.
func (p *Point) Legs() int { return len(p.main()) }

// main returns the matrix that every point of the kind has.
func (p *Point) main() Matrix {
	switch p.Kind {
	case KindTwistors:
		return p.Twistors
	case KindSpinors:
		return p.Angle
	case KindMomenta:
		return p.Momenta
	case KindInvariants:
		return p.S
	case KindProducts:
		return p.Products.KK
	}
	return nil
}

// field is one matrix of a point under its key in a points file.
type field struct {
	name   string
	matrix *Matrix
}

// fields returns every matrix that a point of the kind may have, in the order
// in which they are written.
func (p *Point) fields() []field {
	switch p.Kind {
	case KindTwistors:
		return []field{{"twistors", &p.Twistors}}
	case KindSpinors:
		return []field{{"angle", &p.Angle}, {"square", &p.Square}}
	case KindMomenta:
		return []field{{"momenta", &p.Momenta}, {"polarisations", &p.Polarisations}, {"polarisations2", &p.Polarisations2}}
	case KindInvariants:
		return []field{{"invariants", &p.S}}
	case KindProducts:
		q := &p.Products
		return []field{{"k.k", &q.KK}, {"e.k", &q.EK}, {"e.e", &q.EE}, {"f.k", &q.FK}, {"f.e", &q.FE}, {"f.f", &q.FF}}
	}
	return nil
}

// IsFamily reports whether a component depends on the parameter.
func (p *Point) IsFamily() bool {
	for _, f := range p.fields() {
		if f.matrix.degree() > 0 {
			return true
		}
	}
	return false
}

// At returns the point at the value e of the parameter; at a point it returns a
// copy. The error is a *DomainError if the point is undefined there.
func (p *Point) At(e *big.Rat) (*Point, error) {
	q := p.mapped(func(m Matrix) Matrix { return m.at(e) })
	if q.Kind == KindTwistors {
		if b := vanishingBracket(q.Twistors); b != "" {
			return nil, &DomainError{b}
		}
	}
	return q, nil
}

// mapped returns a copy of p with other matrices.
func (p *Point) mapped(f func(Matrix) Matrix) *Point {
	q := *p
	for _, x := range q.fields() {
		*x.matrix = f(*x.matrix)
	}
	q.MassesSquared = slices.Clone(p.MassesSquared)
	return &q
}

// Equal reports whether p and q hold the same data under the same label. A
// common mass and one mass for each leg, all equal, are the same.
func (p *Point) Equal(q *Point) bool {
	if p.Label != q.Label || p.Kind != q.Kind || p.Kind == KindMomenta && p.Metric != q.Metric {
		return false
	}
	o := q.fields()
	for i, f := range p.fields() {
		if !f.matrix.equal(*o[i].matrix) {
			return false
		}
	}
	for a := range p.Legs() {
		if p.massSquared(a).Cmp(q.massSquared(a)) != 0 {
			return false
		}
	}
	return true
}

// massSquared returns m^2 of row a, counted from 0, of momenta or invariants.
func (p *Point) massSquared(a int) *big.Rat {
	if a < len(p.MassesSquared) {
		return p.MassesSquared[a]
	}
	return new(big.Rat)
}

// massless reports whether no mass of momenta or invariants is given but zero.
func (p *Point) massless() bool {
	return !slices.ContainsFunc(p.MassesSquared, func(m *big.Rat) bool { return m.Sign() != 0 })
}

// FromInvariants returns the point of kind "invariants" with the given data.
func FromInvariants(label string, v *Invariants) *Point {
	p := &Point{Label: label, Kind: KindInvariants, S: make(Matrix, v.n)}
	for a := range v.n {
		p.S[a] = make([]Component, v.n)
		for b := range v.n {
			p.S[a][b] = NewComponent(v.S(a+1, b+1))
		}
	}
	if v.masses != nil {
		p.MassesSquared = make([]*big.Rat, v.n)
		for a := range v.n {
			p.MassesSquared[a] = v.MassSquared(a + 1)
		}
	}
	return p
}

// Invariants returns s_ab and m_a^2. The error is of type InputErrors: the point
// is a family, or not valid.
func (p *Point) Invariants() (*Invariants, error) {
	if p.IsFamily() {
		return nil, inputError(CodeFamily, p.Label, "take the point at one value of the parameter", "a family has no values of its own")
	}
	if err := p.Validate(); err != nil {
		return nil, err
	}
	return p.invariants()
}

// invariants skips the validation.
func (p *Point) invariants() (*Invariants, error) {
	q, err := p.convert(KindInvariants)
	if err != nil {
		return nil, err
	}
	return newInvariants(q.S.rationals(), q.MassesSquared), nil
}
