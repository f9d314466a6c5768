package resultant

import (
	"context"
	"fmt"
	"slices"
	"testing"

	"eliminant/rational/poly"
	"eliminant/rational/prime"
	"eliminant/rational/scattering"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

func representation(t require.TestingT, p *Pencil) *Representation {
	r, err := ComputeRepresentation(context.Background(), p, Options{})
	require.NoError(t, err)
	return r
}

// jacobian returns det(dh_m/dz_a) at the point z (by leg), columns the free legs
// in the order given.
func jacobian(f *prime.Field, h []scattering.ReducedConstraint, z []prime.Element, columns []int) prime.Element {
	m := make([][]prime.Element, len(h))
	for i, c := range h {
		m[i] = make([]prime.Element, len(columns))
		for _, t := range c.Terms {
			for j, a := range columns {
				if !slices.Contains(t.Legs, a) {
					continue
				}
				x := t.Coefficient
				for _, b := range t.Legs {
					if b != a {
						x = f.Mul(x, z[b-1])
					}
				}
				m[i][j] = f.Add(m[i][j], x)
			}
		}
	}
	return gauss(f, m)
}

func evaluate(f *prime.Field, c scattering.ReducedConstraint, z []prime.Element) prime.Element {
	var sum prime.Element
	for _, t := range c.Terms {
		x := t.Coefficient
		for _, a := range t.Legs {
			x = f.Mul(x, z[a-1])
		}
		sum = f.Add(sum, x)
	}
	return sum
}

func gaugeOf(order []int) scattering.Gauge {
	return scattering.Gauge{Infinity: order[0], One: order[1], Zero: order[len(order)-1]}
}

// chebyshevNodes returns (1 + cos((2j-1)pi/2m))/2, j = 1..m, modulo p = 1 mod 4m.
func chebyshevNodes(t *testing.T, f *prime.Field, m int) []prime.Element {
	e := (f.Modulus() - 1) / uint64(4*m)
	var w prime.Element
	for g := int64(2); ; g++ {
		w = f.Exp(f.FromInt64(g), e)
		if primitive := func() bool {
			for d := 1; d < 4*m; d++ {
				if 4*m%d == 0 && f.Exp(w, uint64(d)) == f.One() {
					return false
				}
			}
			return true
		}(); primitive {
			break
		}
	}
	quarter, _ := f.Inv(f.FromInt64(4))
	half, _ := f.Inv(f.FromInt64(2))
	var out []prime.Element
	for j := 1; j <= m; j++ {
		u := f.Exp(w, uint64(2*j-1))
		v, _ := f.Inv(u)
		out = append(out, f.Add(half, f.Mul(quarter, f.Add(u, v))))
	}
	return out
}

// (M^i e_top)_beta = c0 sum over solutions of t^i x^beta / J_h for every beta, at
// data whose solutions are known: the permutations of the Chebyshev nodes.
func TestKrylovCoordinatesAreResidues(t *testing.T) {
	f := prime.TableField(0)
	for n := 4; n <= 7; n++ {
		s := reduce(t, startData(t, n), f)
		p := newPencil(t, f, n, s, nil)
		h := scattering.ConstraintsMod(f, n, s, scattering.Gauge{})
		free := make([]int, n-3)
		for i := range free {
			free[i] = i + 3
		}
		want := make([][]prime.Element, 4) // by i, then beta
		for i := range want {
			want[i] = make([]prime.Element, p.Size())
		}
		permutations(chebyshevNodes(t, f, n-3), func(nodes []prime.Element) {
			z := make([]prime.Element, n)
			z[1] = f.One()
			copy(z[2:], nodes)
			for _, c := range h {
				require.Zero(t, evaluate(f, c, z))
			}
			w, ok := f.Div(p.c0, jacobian(f, h, z, free))
			require.True(t, ok)
			for i := range want {
				for beta := range p.Size() {
					x, radix := w, 1
					for j := 1; j <= n-4; j++ {
						radix *= j
						x = f.Mul(x, f.Exp(z[2+j], uint64(beta/radix%(j+1))))
					}
					want[i][beta] = f.Add(want[i][beta], x)
				}
				w = f.Mul(w, z[2])
			}
		})
		x := make([]prime.Element, p.Size())
		x[p.plan.top] = f.One()
		for i := range want {
			require.Equal(t, want[i], x, "n=%d, power %d", n, i)
			p.Multiply(x, x)
		}
	}
}

func permutations(x []prime.Element, visit func([]prime.Element)) {
	var place func(i int)
	place = func(i int) {
		if i == len(x) {
			visit(x)
		}
		for j := i; j < len(x); j++ {
			x[i], x[j] = x[j], x[i]
			place(i + 1)
			x[i], x[j] = x[j], x[i]
		}
	}
	place(0)
}

// With n-3 node values for (n-3)! solutions no puncture separates them; J_h is
// odd under permutations of the others, so all sums of t^i/J_h vanish.
func TestSymmetricDataDoNotSeparate(t *testing.T) {
	f := prime.TableField(0)
	for n := 6; n <= 7; n++ {
		p := newPencil(t, f, n, reduce(t, startData(t, n), f), nil)
		_, err := ComputeRepresentation(context.Background(), p, Options{})
		var e *NotSeparatingError
		require.ErrorAs(t, err, &e)
		require.Equal(t, NotSeparatingError{Leg: 3, Degree: 0, Size: p.Size()}, *e)
		require.Contains(t, e.Error(), "z3 does not separate")
	}
}

// chi is the characteristic polynomial of M (dense), and of the pencil by
// determinants at N+1 values of t.
func TestChiAgainstDense(t *testing.T) {
	f := prime.TableField(3)
	for n := 4; n <= 7; n++ {
		source := prime.NewSource("chi", fmt.Sprint(n))
		s := randomInvariants(f, n, source)
		p := newPencil(t, f, n, s, nil)
		r := representation(t, p)
		c, err := characteristicDense(context.Background(), p)
		require.NoError(t, err)
		require.Equal(t, r.Chi.Coeffs(), c)
		d := writeOut(f, n, s)
		lead := gauss(f, copyMatrix(d.t1))
		for range 3 {
			x := f.FromUint64(source.Uint64())
			m := copyMatrix(d.t0)
			for i := range m {
				f.AddScaledRow(m[i], x, d.t1[i])
			}
			require.Equal(t, gauss(f, m), f.Mul(lead, r.Chi.Eval(x)))
		}
	}
}

// For every order of the roles the punctures satisfy the constraints in
// GF(p)[T]/(chi), and the Jacobian is c0 chi'/P_1:
// J_h P_1 = c0 chi' mod chi, J_h by expanding the determinant in the quotient.
func TestPuncturesSolveTheConstraints(t *testing.T) {
	f := prime.TableField(0)
	rapid.Check(t, func(r *rapid.T) {
		n := rapid.IntRange(4, 7).Draw(r, "n")
		legs := make([]int, n)
		for i := range legs {
			legs[i] = i + 1
		}
		order := rapid.Permutation(legs).Draw(r, "order")
		s := randomInvariants(f, n, prime.NewSource(rapid.String().Draw(r, "seed")))
		q := newQuotient(r, f, n, s, order)
		for _, c := range scattering.ConstraintsMod(f, n, s, gaugeOf(order)) {
			require.Equal(r, -1, q.constraint(c).Degree())
		}
		j := q.jacobian()
		want := new(poly.Poly).Derivative(q.Chi)
		want.Scale(q.C0, want)
		require.True(r, want.Equal(q.mul(j, q.P1)))
	})
}

// quotient is GF(p)[T]/(chi) with the punctures in it.
type quotient struct {
	*Representation
	t     require.TestingT
	f     *prime.Field
	n     int
	s     []prime.Element
	order []int
	mod   *poly.Modulus
	z     []*poly.Poly // by role from 1, nil for the first
}

func newQuotient(t require.TestingT, f *prime.Field, n int, s []prime.Element, order []int) *quotient {
	q := &quotient{Representation: representation(t, newPencil(t, f, n, s, order)), t: t, f: f, n: n, s: s, order: order}
	if order == nil {
		q.order, _ = roles(n, nil)
	}
	var err error
	q.mod, err = q.Modulus()
	require.NoError(t, err)
	q.z = make([]*poly.Poly, n+1)
	for i := 2; i <= n; i++ {
		q.z[i], err = q.Z(q.order[i-1])
		require.NoError(t, err)
	}
	_, err = q.Z(q.order[0])
	var e *RoleError
	require.ErrorAs(t, err, &e)
	return q
}

func (q *quotient) mul(x ...*poly.Poly) *poly.Poly {
	z := poly.New(q.f, q.f.One())
	for _, y := range x {
		q.mod.Mul(z, z, y)
	}
	return z
}

func (q *quotient) inverse(x *poly.Poly) *poly.Poly {
	z := new(poly.Poly)
	require.True(q.t, q.mod.Inverse(z, x))
	return z
}

// difference returns z_a - z_b for roles a, b.
func (q *quotient) difference(a, b int) *poly.Poly { return new(poly.Poly).Sub(q.z[a], q.z[b]) }

func (q *quotient) leg(a int) *poly.Poly { return q.z[slices.Index(q.order, a)+1] }

func (q *quotient) constraint(c scattering.ReducedConstraint) *poly.Poly {
	sum := poly.New(q.f)
	for _, t := range c.Terms {
		x := poly.New(q.f, t.Coefficient)
		for _, a := range t.Legs {
			q.mod.Mul(x, x, q.leg(a))
		}
		sum.Add(sum, x)
	}
	return sum
}

// determinant of polynomials modulo chi by expansion along rows over subsets of
// columns.
func (q *quotient) determinant(m [][]*poly.Poly) *poly.Poly {
	det := map[int]*poly.Poly{0: poly.New(q.f, q.f.One())}
	for i := range m {
		next := map[int]*poly.Poly{}
		for set, d := range det {
			for j := range m {
				if set>>j&1 == 1 {
					continue
				}
				x := q.mul(d, m[i][j])
				above := 0
				for l := j + 1; l < len(m); l++ {
					above += set >> l & 1
				}
				if above%2 == 1 {
					x.Neg(x)
				}
				if y := next[set|1<<j]; y != nil {
					x.Add(x, y)
				}
				next[set|1<<j] = x
			}
		}
		det = next
	}
	return det[1<<len(m)-1]
}

// jacobian returns det(dh_m/dz_a), columns in the order of roles.
func (q *quotient) jacobian() *poly.Poly {
	var m [][]*poly.Poly
	for _, c := range scattering.ConstraintsMod(q.f, q.n, q.s, gaugeOf(q.order)) {
		var row []*poly.Poly
		for _, a := range q.order[2 : q.n-1] {
			d := scattering.ReducedConstraint{}
			for _, t := range c.Terms {
				if i := slices.Index(t.Legs, a); i >= 0 {
					d.Terms = append(d.Terms, scattering.ReducedTerm{Legs: slices.Delete(slices.Clone(t.Legs), i, i+1), Coefficient: t.Coefficient})
				}
			}
			row = append(row, q.constraint(d))
		}
		m = append(m, row)
	}
	return q.determinant(m)
}

// reducedDeterminant returns det Phi over the roles 3..n-1.
func (q *quotient) reducedDeterminant() *poly.Poly {
	k := q.n - 3
	m := make([][]*poly.Poly, k)
	for i := range m {
		m[i] = make([]*poly.Poly, k)
		m[i][i] = poly.New(q.f)
	}
	for a := 3; a < q.n; a++ {
		for b := 2; b <= q.n; b++ {
			if a == b {
				continue
			}
			x := q.inverse(q.difference(a, b))
			x = q.mul(x, x)
			x.Scale(q.s[(q.order[a-1]-1)*q.n+q.order[b-1]-1], x)
			m[a-3][a-3].Sub(m[a-3][a-3], x)
			if b > 2 && b < q.n {
				m[a-3][b-3] = x
			}
		}
	}
	return q.determinant(m)
}

// measure returns prod_{2<=a<b<n} (z_a - z_b) prod_{2<a<n} z_a over roles.
func (q *quotient) measure() *poly.Poly {
	z := poly.New(q.f, q.f.One())
	for a := 2; a <= q.n; a++ {
		for b := a + 1; b <= q.n; b++ {
			z = q.mul(z, q.difference(a, b))
		}
	}
	return z
}

// det Phi * prod (z_a - z_b) * prod z_a = J_h.
func TestJacobianIdentity(t *testing.T) {
	f := prime.TableField(1)
	for n := 4; n <= 7; n++ {
		source := prime.NewSource("Jacobian", fmt.Sprint(n))
		order, _ := roles(n, nil)
		order[0], order[1], order[2], order[n-1] = order[2], order[n-1], order[0], order[1]
		for _, o := range [][]int{nil, order} {
			q := newQuotient(t, f, n, randomInvariants(f, n, source), o)
			j := q.jacobian()
			require.True(t, j.Equal(q.mul(q.reducedDeterminant(), q.measure())))
			// 1/J sums to the residue sum of 1
			one := q.mul(j, q.inverse(j))
			require.Equal(t, q.ResidueSum(one), q.ResidueSum(poly.New(f, f.One())))
			require.True(t, q.Separable())
		}
	}
}

// Global residues of monomials: zero below the degree (n-3)(n-4)/2 of the
// socle, 1/c0 at prod z_{3+j}^j.
func TestResiduesBelowTheSocleVanish(t *testing.T) {
	f := prime.TableField(0)
	for n := 5; n <= 8; n++ {
		q := newQuotient(t, f, n, randomInvariants(f, n, prime.NewSource("socle", fmt.Sprint(n))), nil)
		require.Zero(t, q.ResidueSum(poly.New(f, f.One())))
		socle := (n - 3) * (n - 4) / 2
		source := prime.NewSource("monomials")
		for range 40 {
			x := poly.New(f, f.One())
			for range int(source.Below(uint64(socle))) {
				x = q.mul(x, q.z[3+int(source.Below(uint64(n-3)))])
			}
			require.Zero(t, q.ResidueSum(x))
		}
		top := poly.New(f, f.One())
		for j := 1; j <= n-4; j++ {
			for range j {
				top = q.mul(top, q.z[3+j])
			}
		}
		inv, _ := f.Inv(q.C0)
		require.Equal(t, inv, q.ResidueSum(top))
		require.NotZero(t, q.ResidueSum(q.mul(top, q.z[3])))

		// degrees beyond 2N are reduced
		far := make([]prime.Element, 2*q.Chi.Degree()+3)
		far[len(far)-1] = f.One()
		long := poly.New(f, far...)
		require.Equal(t, q.ResidueSum(new(poly.Poly).Rem(long, q.Chi)), q.ResidueSum(long))
		short := poly.New(f, far[3:]...)
		require.Equal(t, q.ResidueSum(new(poly.Poly).Rem(short, q.Chi)), q.ResidueSum(short))
	}
}

// parkeTaylor returns the gauge-fixed factor of an ordering: minus the product of
// 1/(z_a - z_b) over its links without the leg at infinity.
func (q *quotient) parkeTaylor(ordering []int) *poly.Poly {
	z := poly.New(q.f, q.f.Neg(q.f.One()))
	for i, a := range ordering {
		b := ordering[(i+1)%q.n]
		if a != q.order[0] && b != q.order[0] {
			z = q.mul(z, q.inverse(new(poly.Poly).Sub(q.leg(a), q.leg(b))))
		}
	}
	return z
}

// biadjoint returns the sum over solutions of PT(alpha) PT(beta) / det Phi.
func (q *quotient) biadjoint(alpha, beta []int) prime.Element {
	return q.ResidueSum(q.mul(q.parkeTaylor(alpha), q.parkeTaylor(beta), q.measure()))
}

// A sum of Moebius weight zero does not depend on the roles of the legs; the
// permutation of roles 3..n-1 changes J_h and the measure by the same sign.
func TestGaugeIndependence(t *testing.T) {
	f := prime.TableField(2)
	rapid.Check(t, func(r *rapid.T) {
		n := rapid.IntRange(4, 7).Draw(r, "n")
		legs := make([]int, n)
		for i := range legs {
			legs[i] = i + 1
		}
		order := rapid.Permutation(legs).Draw(r, "order")
		alpha := rapid.Permutation(legs).Draw(r, "alpha")
		beta := rapid.Permutation(legs).Draw(r, "beta")
		s := randomInvariants(f, n, prime.NewSource(rapid.String().Draw(r, "seed")))
		a := newQuotient(r, f, n, s, nil)
		b := newQuotient(r, f, n, s, order)
		require.Equal(r, a.biadjoint(alpha, beta), b.biadjoint(alpha, beta))
		// a sum that is not covariant does depend on them
		if n >= 5 && order[0] != 1 {
			x := a.ResidueSum(a.mul(a.parkeTaylor(alpha), a.measure()))
			y := b.ResidueSum(b.mul(b.parkeTaylor(alpha), b.measure()))
			require.NotEqual(r, x, y)
		}
	})
}

// Values of bi-adjoint amplitudes (F. Cachazo, S. He, E. Y. Yuan, JHEP 07 (2014) 033,
// section 3, for the closed forms) recomputed by an independent program.
func TestKnownResidueSums(t *testing.T) {
	f := prime.TableField(0)
	for _, c := range []struct {
		d          *scattering.Data
		beta       []int
		num, denom int64
	}{
		{x4(t), []int{1, 2, 3, 4}, -5, 6},
		{x4(t), []int{1, 3, 2, 4}, 1, 3},
		{x5(t), []int{1, 2, 3, 4, 5}, 74, 231},
		{x5(t), []int{1, 3, 2, 4, 5}, -2, 21},
		{x5(t), []int{1, 4, 3, 2, 5}, 16, 385},
		{x6(t), []int{1, 2, 3, 4, 5, 6}, -1135577, 17333030},
		{x6(t), []int{1, 3, 2, 4, 5, 6}, 773, 49335},
		{k5(t), []int{1, 2, 3, 4, 5}, 3337, 131376},
		{k5(t), []int{1, 3, 5, 2, 4}, 0, 1},
		{k6(t), []int{1, 2, 3, 4, 5, 6}, -2300540, 6881400981},
		{k6(t), []int{1, 5, 3, 4, 2, 6}, -23, 32110},
		{k6(t), []int{1, 3, 5, 2, 4, 6}, 0, 1},
	} {
		n := c.d.Legs()
		q := newQuotient(t, f, n, reduce(t, c.d, f), nil)
		want, _ := f.Div(f.FromInt64(c.num), f.FromInt64(c.denom))
		identity, _ := roles(n, nil)
		require.Equal(t, want, q.biadjoint(identity, c.beta), "%v", c.beta)
	}
}

// At the two rational solutions of four-dimensional points (z_3 from an
// independent program) the box monomials span the kernel of T(t), and only there.
func TestPencilAnnihilatesSolutions(t *testing.T) {
	f := prime.TableField(0)
	for _, c := range []struct {
		d     *scattering.Data
		roots [2][2]int64
	}{
		{k5(t), [2][2]int64{{2, 1}, {-105, 31}}},
		{k6(t), [2][2]int64{{1, 2}, {-147, 74}}},
		{k7(t), [2][2]int64{{-2, 1}, {-189, 32}}},
	} {
		n := c.d.Legs()
		s := reduce(t, c.d, f)
		q := newQuotient(t, f, n, s, nil)
		m := writeOut(f, n, s)
		defect := func(root prime.Element) int {
			x := make([]prime.Element, len(m.columns))
			for i, beta := range m.columns {
				x[i] = f.One()
				for j, e := range beta {
					x[i] = f.Mul(x[i], f.Exp(q.z[4+j].Eval(root), uint64(e)))
				}
			}
			bad := 0
			for i := range m.rows {
				if f.Add(f.Dot(m.t0[i], x), f.Mul(root, f.Dot(m.t1[i], x))) != 0 {
					bad++
				}
			}
			return bad
		}
		for _, r := range c.roots {
			root, _ := f.Div(f.FromInt64(r[0]), f.FromInt64(r[1]))
			require.Zero(t, q.Chi.Eval(root))
			require.Zero(t, defect(root))
			require.NotZero(t, defect(f.Add(root, f.One())))
		}
	}
}

func TestRepresentationStopsWhenCancelled(t *testing.T) {
	f := prime.TableField(0)
	p := newPencil(t, f, 7, randomInvariants(f, 7, prime.NewSource("cancel")), nil)
	reason := fmt.Errorf("enough")
	ctx, cancel := context.WithCancelCause(context.Background())
	cancel(reason)
	_, err := ComputeRepresentation(ctx, p, Options{})
	require.ErrorIs(t, err, reason)
	var last, total int
	_, err = ComputeRepresentation(context.Background(), p, Options{Progress: func(done, of int) { last, total = done, of }})
	require.NoError(t, err)
	require.Equal(t, 32, last) // 24 + 24/3 terms
	require.Equal(t, 32, total)
}

func BenchmarkRepresentation(b *testing.B) {
	for n := 7; n <= 10; n++ {
		b.Run(fmt.Sprintf("n=%d", n), func(b *testing.B) {
			f := prime.TableField(0)
			s := randomInvariants(f, n, prime.NewSource("benchmark"))
			b.ReportAllocs()
			for b.Loop() {
				r := representation(b, newPencil(b, f, n, s, nil))
				_, err := r.Z(4)
				require.NoError(b, err)
			}
		})
	}
}
