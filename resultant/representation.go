package resultant

import (
	"context"
	"fmt"
	"sync"

	"eliminant/rational/poly"
	"eliminant/rational/prime"
)

// Representation describes the N = (n-3)! solutions modulo p by one of their
// punctures: t = z_hidden runs over the roots of Chi, and every other puncture is
// a polynomial in t. With J_h = det(dh_m/dz_a), rows m = 1..n-3, columns a in the
// order of the roles 3..n-1,
//
//	sum over solutions of t^i / J_h = [T^{-i-1}] P1/(C0 Chi),
//	J_h = det Phi * prod (z_a - z_b) * prod z_a,
//
// the first product over pairs of roles 2 <= a < b <= n-1, the second over roles
// 3..n-1, Phi_ab = s_ab/z_ab^2, Phi_aa = -sum_{b != a} Phi_ab, over the same roles.
// It is safe for concurrent use.
type Representation struct {
	Chi *poly.Poly    // monic, degree N: characteristic and minimal polynomial of t
	P1  *poly.Poly    // numerator of the sequence of sums
	C0  prime.Element // (-1)^{k(k+1)/2} prod_{m=1}^{n-3} s_{1,n-1,..,n-m}, by roles

	order      []int
	unit       []prime.Element // C0 sum t^i/J_h, i < N at least
	numerators []*poly.Poly    // P_j, j = 1..k
	scale      prime.Element   // 1/C0

	once    sync.Once
	modulus *poly.Modulus
	z       []*poly.Poly // by role - 4
	err     error
}

// ComputeRepresentation returns the univariate representation of the solutions:
// the Krylov sequence of M from the top monomial, whose coordinate at x^beta is
// C0 times the sum over solutions of t^i x^beta / J_h (the global residue), its
// minimal polynomial Chi, and numerators P_beta with x^beta = P_beta/P_1 mod Chi.
//
// Errors: *NotSeparatingError if t does not generate the algebra of the
// constraints; a cancelled context. Cost: N(1 + 1/(n-4)) products with M and
// (n-3) N^2 for the recurrence; 2N products in the first error's case.
func ComputeRepresentation(ctx context.Context, p *Pencil, o Options) (*Representation, error) {
	s := newKrylov(p)
	chi, err := s.minimal(ctx, o.Progress)
	if err != nil {
		return nil, err
	}
	n := p.plan.size
	r := &Representation{Chi: chi, C0: p.c0, order: p.order, unit: s.sequences[0]}
	r.P1 = numerator(chi, s.sequences[0][:n])
	for _, v := range s.sequences[1:] {
		r.numerators = append(r.numerators, numerator(chi, v[:n]))
	}
	r.scale, _ = p.field.Inv(p.c0)
	return r, nil
}

// Hidden returns the leg whose puncture is t.
func (r *Representation) Hidden() int { return r.order[2] }

// Modulus returns the precomputed modulus Chi, for products in GF(p)[T]/(Chi).
func (r *Representation) Modulus() (*poly.Modulus, error) {
	r.once.Do(r.punctures)
	return r.modulus, r.err
}

// Z returns the puncture of a leg as a polynomial in t of degree below N: T itself
// for the hidden leg, constants for the legs at 1 and 0. The result is shared and
// must not be modified. Error: *RoleError for the leg at infinity and for numbers
// that are no leg. The first call inverts P1 modulo Chi.
func (r *Representation) Z(leg int) (*poly.Poly, error) {
	f, n := r.Chi.Field(), len(r.order)
	role := 0
	for i, a := range r.order {
		if a == leg {
			role = i + 1
		}
	}
	switch role {
	case 0:
		return nil, &RoleError{fmt.Sprintf("there is no leg %d", leg)}
	case 1:
		return nil, &RoleError{fmt.Sprintf("leg %d is at infinity", leg)}
	case 2:
		return poly.New(f, f.One()), nil
	case n:
		return poly.New(f), nil
	case 3:
		z := poly.X(f)
		if r.Chi.Degree() == 1 {
			z.Rem(z, r.Chi)
		}
		return z, nil
	}
	r.once.Do(r.punctures)
	if r.err != nil {
		return nil, r.err
	}
	return r.z[role-4], nil
}

// punctures computes z_{3+j} = P_j/P_1 mod Chi. P_1 is a unit: a common factor
// would have given the sequence a shorter recurrence.
func (r *Representation) punctures() {
	r.modulus, r.err = poly.NewModulus(r.Chi)
	if r.err != nil {
		return
	}
	inv := new(poly.Poly)
	if !r.modulus.Inverse(inv, r.P1) {
		r.err = fmt.Errorf("resultant: the numerator and the minimal polynomial modulo %d have a common factor", r.Chi.Field().Modulus())
		return
	}
	r.z = make([]*poly.Poly, len(r.numerators))
	for j, p := range r.numerators {
		r.z[j] = new(poly.Poly)
		r.modulus.Mul(r.z[j], p, inv)
	}
}

// ResidueSum returns the sum over solutions of F(t)/J_h, the coefficient of
// T^{N-1} in F P1 mod Chi divided by C0; a global residue, so also where
// solutions coincide. Any degree of F is allowed. Cost: N products if F has
// degree at most N.
func (r *Representation) ResidueSum(F *poly.Poly) prime.Element {
	f := r.Chi.Field()
	if F.Degree() >= len(r.unit) {
		F = new(poly.Poly).Rem(F, r.Chi)
	}
	c := F.Coeffs()
	return f.Mul(r.scale, f.Dot(c, r.unit))
}

// Separable tells whether Chi has no multiple root: all solutions modulo p are
// simple, and t takes different values on them.
func (r *Representation) Separable() bool {
	d := new(poly.Poly).Derivative(r.Chi)
	return d.GCD(r.Chi, d).Degree() == 0
}
