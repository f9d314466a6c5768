package residue

import (
	"fmt"
	"math/big"

	"eliminant/checks/formula"
	"eliminant/rational/kinematics"
	"eliminant/rational/poly"
	"eliminant/rational/prime"
	"eliminant/resultant"
)

// quotient evaluates an integrand in GF(p)[T]/(chi), the algebra of the
// solutions, in the gauge z_1 = infinity, z_2 = 1, z_n = 0. Powers of z_1 are
// scaled out: z(1,a) is 1 and z(a,1) is -1.
type quotient struct {
	f     *prime.Field
	point *kinematics.Reduced
	rep   *resultant.Representation
	mod   *poly.Modulus
	z     []*poly.Poly // by leg, nil for leg 1
	j     *poly.Poly   // J_h, when first asked for
}

func newQuotient(point *kinematics.Reduced, rep *resultant.Representation) (*quotient, error) {
	mod, err := poly.NewModulus(rep.Chi)
	if err != nil {
		return nil, err
	}
	q := &quotient{f: point.Field, point: point, rep: rep, mod: mod, z: make([]*poly.Poly, point.N+1)}
	for l := 2; l <= point.N; l++ {
		if q.z[l], err = rep.Z(l); err != nil {
			return nil, err
		}
	}
	return q, nil
}

func (q *quotient) constant(c prime.Element) *poly.Poly { return poly.New(q.f, c) }

func (q *quotient) Rational(r *big.Rat) (*poly.Poly, error) {
	c, ok := q.f.FromRat(r)
	if !ok {
		return nil, prime.ErrBadPrime
	}
	return q.constant(c), nil
}

func (q *quotient) Add(x, y *poly.Poly) *poly.Poly { return new(poly.Poly).Add(x, y) }
func (q *quotient) Sub(x, y *poly.Poly) *poly.Poly { return new(poly.Poly).Sub(x, y) }
func (q *quotient) Neg(x *poly.Poly) *poly.Poly    { return new(poly.Poly).Neg(x) }

func (q *quotient) Mul(x, y *poly.Poly) *poly.Poly {
	z := new(poly.Poly)
	q.mod.Mul(z, x, y)
	return z
}

func (q *quotient) Inverse(x *poly.Poly) (*poly.Poly, bool) {
	z := new(poly.Poly)
	return z, q.mod.Inverse(z, x)
}

// difference returns z_a - z_b with z_1 scaled out.
func (q *quotient) difference(a, b int) *poly.Poly {
	switch {
	case a == 1:
		return q.constant(q.f.One())
	case b == 1:
		return q.constant(q.f.Neg(q.f.One()))
	}
	return new(poly.Poly).Sub(q.z[a], q.z[b])
}

func (q *quotient) Leaf(n formula.Node) (*poly.Poly, error) {
	switch n := n.(type) {
	case *formula.Puncture:
		return q.z[n.Leg], nil
	case *formula.Difference:
		return q.difference(n.A, n.B), nil
	case *formula.ParkeTaylor:
		den := q.constant(q.f.One())
		for i, a := range n.Ordering {
			den = q.Mul(den, q.difference(a, n.Ordering[(i+1)%len(n.Ordering)]))
		}
		inv, ok := q.Inverse(den)
		if !ok {
			return nil, prime.ErrBadPrime
		}
		return inv, nil
	case *formula.Jacobian:
		return q.jacobian()
	case *formula.ReducedDeterminant:
		j, err := q.jacobian()
		if err != nil {
			return nil, err
		}
		inv, ok := q.Inverse(q.measure())
		if !ok {
			return nil, prime.ErrBadPrime
		}
		return q.Mul(j, inv), nil
	case *formula.Invariant:
		return q.constant(q.point.Lorentz(n.Legs)), nil
	case *formula.MassSquared:
		return q.constant(q.point.MassSquared(max(1, n.Leg))), nil
	}
	return nil, fmt.Errorf("integrands have no %T", n)
}

// jacobian returns J_h. The summands of a residue sum are
// F/J_h = F P_1/(c0 chi') on the solutions, so J_h = c0 chi'/P_1.
func (q *quotient) jacobian() (*poly.Poly, error) {
	if q.j != nil {
		return q.j, nil
	}
	inv, ok := q.Inverse(q.rep.P1)
	if !ok {
		return nil, prime.ErrBadPrime
	}
	d := new(poly.Poly).Derivative(q.rep.Chi)
	d.Scale(q.rep.C0, d)
	q.j = q.Mul(d, inv)
	return q.j, nil
}

// measure returns J_h/det Phi = prod_{2<=a<b<=n-1} (z_a-z_b) prod_{a=3}^{n-1} z_a.
func (q *quotient) measure() *poly.Poly {
	v := q.constant(q.f.One())
	for a := 2; a < q.point.N; a++ {
		for b := a + 1; b < q.point.N; b++ {
			v = q.Mul(v, q.difference(a, b))
		}
		v = q.Mul(v, q.z[a])
	}
	return v
}

// sum adds an expression over the solutions.
func (q *quotient) sum(x *poly.Poly) (prime.Element, error) {
	j, err := q.jacobian()
	if err != nil {
		return 0, err
	}
	return q.rep.ResidueSum(q.Mul(x, j)), nil
}
