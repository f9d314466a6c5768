package groebner_test

import (
	"fmt"
	"math/big"
	"testing"

	"github.com/stretchr/testify/require"

	"eliminant/groebner"
	"eliminant/rational/prime"
)

// fromPairs returns the symmetric matrix with the given entries above the
// diagonal, row by row.
func fromPairs(tb testing.TB, f *prime.Field, n int, values ...string) [][]prime.Element {
	require.Len(tb, values, n*(n-1)/2)
	s := make([][]prime.Element, n)
	for a := range s {
		s[a] = make([]prime.Element, n)
	}
	for a := range n {
		for b := a + 1; b < n; b++ {
			v := rational(tb, f, values[0])
			values = values[1:]
			s[a][b], s[b][a] = v, v
		}
	}
	for a := range n {
		var sum prime.Element
		for b := range n {
			sum = f.Add(sum, s[a][b])
		}
		require.Zero(tb, sum, "row %d", a)
	}
	return s
}

func rational(tb testing.TB, f *prime.Field, text string) prime.Element {
	q, ok := new(big.Rat).SetString(text)
	require.True(tb, ok, text)
	v, ok := f.FromRat(q)
	require.True(tb, ok, text)
	return v
}

// fromPoles returns s_ij = X_{i,j+1} + X_{i+1,j} - X_{i,j} - X_{i+1,j+1} for the
// squares X_ij of planar momenta, given for i < j in lexicographic order without
// those of neighbours, which are zero.
func fromPoles(tb testing.TB, f *prime.Field, n int, poles ...int64) [][]prime.Element {
	x := make([][]prime.Element, n)
	for i := range x {
		x[i] = make([]prime.Element, n)
	}
	for i := range n {
		for j := i + 2; j < n; j++ {
			if i == 0 && j == n-1 {
				continue
			}
			v := f.FromInt64(poles[0])
			poles = poles[1:]
			x[i][j], x[j][i] = v, v
		}
	}
	require.Empty(tb, poles)
	s := make([][]prime.Element, n)
	for i := range s {
		s[i] = make([]prime.Element, n)
		for j := range n {
			if i != j {
				k, l := (i+1)%n, (j+1)%n
				s[i][j] = f.Sub(f.Add(x[i][l], x[k][j]), f.Add(x[i][j], x[k][l]))
			}
		}
	}
	return s
}

// The points with published values.
func pointK5(tb testing.TB, f *prime.Field) [][]prime.Element {
	return fromPairs(tb, f, 5, "-7", "1", "10/3", "8/3", "-17", "41/3", "31/3", "6", "10", "-23")
}

func pointK6(tb testing.TB, f *prime.Field) [][]prime.Element {
	return fromPairs(tb, f, 6, "-7", "1", "12", "-5/3", "-13/3", "-17", "-11", "-43/3", "148/3",
		"13", "-4", "7", "29", "-43", "-9")
}

func pointX5(tb testing.TB, f *prime.Field) [][]prime.Element {
	return fromPoles(tb, f, 5, 2, 3, 5, 7, 11)
}

func pointX6(tb testing.TB, f *prime.Field) [][]prime.Element {
	return fromPoles(tb, f, 6, 2, 3, 5, 7, 11, 13, 17, 31, 23)
}

func monomialsByDegree(q *groebner.Quotient) []int {
	var count []int
	for _, m := range q.Monomials() {
		d := q.Ring().Degree(m)
		for len(count) <= d {
			count = append(count, 0)
		}
		count[d]++
	}
	return count
}

// h_1..h_{n-3} have (n-3)! common zeros (F. Cachazo, S. He, E. Yuan,
// arXiv:1306.6575; value from memory), and their leading forms are a regular
// sequence: the Hilbert series of the graded quotient is the product of the
// (1 - t^m)/(1 - t), m = 1..n-3. The constraint of degree 1 leaves n-4 variables.
func TestScatteringSolutions(t *testing.T) {
	f := prime.TableField(1)
	for n := 4; n <= 8; n++ {
		series := []int{1}
		count := 1
		for m := 1; m <= n-3; m++ {
			next := make([]int, len(series)+m-1)
			for i, c := range series {
				for j := range m {
					next[i+j] += c
				}
			}
			series, count = next, count*m
		}
		h := constraints(t, f, groebner.GrevLex, drawInvariants(t, f, n, "solutions"))
		o := groebner.Options{Cofactors: n <= 6}
		b, err := groebner.ComputeBasis(background, h, o)
		require.NoError(t, err)
		if o.Cofactors {
			require.NoError(t, groebner.CheckBasis(background, h, b))
		} else if n == 7 {
			require.ErrorIs(t, groebner.CheckBasis(background, h, b), groebner.ErrNoCofactors)
		}
		q := quotientOf(t, b)
		require.Equal(t, count, q.Dimension(), "n = %d", n)
		require.Equal(t, series, monomialsByDegree(q), "n = %d", n)
	}
	// the published series for n = 6, 7
	for n, want := range map[int][]int{6: {1, 2, 2, 1}, 7: {1, 3, 5, 6, 5, 3, 1}} {
		h := constraints(t, f, groebner.GrevLex, drawInvariants(t, f, n, "series"))
		b, err := groebner.ComputeBasis(background, h, groebner.Options{})
		require.NoError(t, err)
		require.Equal(t, want, monomialsByDegree(quotientOf(t, b)))
	}
}

// The constraints at the points of reference, as listed with them.
func TestListedConstraints(t *testing.T) {
	f := prime.TableField(0)
	for _, c := range []struct {
		name string
		s    [][]prime.Element
		want []string
	}{
		{"K5", pointK5(t, f), []string{"z3+10/3*z4-7", "31/3*z3*z4-23*z3+10*z4"}},
		{"X5", pointX5(t, f), []string{"-4*z3-5*z4+2", "2*z3*z4+3*z3-12*z4"}},
		{"X6", pointX6(t, f), []string{"-6*z3-2*z4-7*z5+2",
			"9*z3*z4-22*z3*z5+3*z3+14*z4*z5-13*z4-17*z5",
			"16*z3*z4*z5+5*z3*z4-25*z3*z5-9*z4*z5"}},
	} {
		h := constraints(t, f, groebner.GrevLex, c.s)
		for i, p := range polynomials(t, h[0].Ring(), c.want...) {
			require.True(t, p.Equal(h[i]), "%s: %v", c.name, h[i])
		}
	}
}

// The characteristic polynomial of M_z equals the eliminant over Q reduced modulo
// p; eliminants computed with Singular and PARI.
func TestListedEliminants(t *testing.T) {
	for _, c := range []struct {
		point    func(testing.TB, *prime.Field) [][]prime.Element
		variable int
		factors  []string
	}{
		{pointK5, 0, []string{"x-2", "31*x+105"}},
		{pointK5, 1, []string{"2*x-3", "155*x-483"}},
		{pointX5, 0, []string{"x-8", "8*x-3"}},
		{pointX5, 1, []string{"x+6", "10*x-1"}},
		{pointK6, 0, []string{"2*x-1", "74*x+147", "26936*x^4+99904*x^3-223974*x^2-108990*x+30429"}},
		{pointK6, 1, []string{"4*x-3", "444*x-301", "5448768*x^4-16577312*x^3+18171860*x^2-8499972*x+1433061"}},
		{pointK6, 2, []string{"2*x-3", "370*x+189", "611240*x^4-1760304*x^3-805986*x^2+1277046*x+352107"}},
		{pointX6, 0, []string{"1824768*x^6-5927712*x^5+613790*x^4+8979625*x^3-5145167*x^2+1001574*x-71604"}},
	} {
		for i := range 2 {
			f := prime.TableField(i)
			line := newRing(t, f, groebner.Lex, "x")
			want := line.One()
			for _, factor := range polynomials(t, line, c.factors...) {
				want.Mul(want, factor)
			}
			want.Monic(want)
			for _, o := range orders {
				h := constraints(t, f, o, c.point(t, f))
				q := quotientOf(t, basisOf(t, h...))
				x, err := q.Coordinates(background, h[0].Ring().Variable(c.variable))
				require.NoError(t, err)
				chi, err := q.CharacteristicPolynomial(background, x)
				require.NoError(t, err)
				got := line.Zero()
				for e, a := range chi {
					m, err := line.Monomial(e)
					require.NoError(t, err)
					got.Add(got, line.Term(a, m))
				}
				require.True(t, want.Equal(got), "%v %v: %v", c.factors, o, got)
			}
		}
	}
}

// jacobian returns det(dp_i/dx_j).
func jacobian(p []*poly) *poly {
	r := p[0].Ring()
	rows := make([][]*poly, len(p))
	for i := range p {
		rows[i] = make([]*poly, r.Variables())
		for j := range rows[i] {
			rows[i][j] = new(poly).Derivative(p[i], j)
		}
	}
	var expand func(rows [][]*poly) *poly
	expand = func(rows [][]*poly) *poly {
		if len(rows) == 0 {
			return r.One()
		}
		sum := r.Zero()
		for j, c := range rows[0] {
			var minor [][]*poly
			for _, row := range rows[1:] {
				minor = append(minor, append(append([]*poly{}, row[:j]...), row[j+1:]...))
			}
			x := mul(c, expand(minor))
			if j%2 == 1 {
				x.Neg(x)
			}
			sum.Add(sum, x)
		}
		return sum
	}
	return expand(rows)
}

// The bi-adjoint amplitude m(1..n|1 beta) is the sum over the zeros of
//
//	PT(1..n) PT(1 beta) prod_{2<=a<b<n} (z_a - z_b) prod_{2<a<n} z_a / det(dh/dz),
//
// PT(1 ... a b ...) = -prod 1/(z_a - z_b) over neighbours other than 1. Values at
// the points of reference from F. Cachazo, S. He, E. Yuan, arXiv:1309.0885 (value
// from memory), confirmed there by off-shell recursion.
func TestBiAdjointAmplitudes(t *testing.T) {
	for _, c := range []struct {
		point func(testing.TB, *prime.Field) [][]prime.Element
		beta  []int
		want  string
	}{
		{pointX5, []int{1, 2, 3, 4, 5}, "74/231"},
		{pointX5, []int{1, 3, 2, 4, 5}, "-2/21"},
		{pointX5, []int{1, 4, 3, 2, 5}, "16/385"},
		{pointK5, []int{1, 2, 3, 4, 5}, "3337/131376"},
		{pointK5, []int{1, 2, 5, 3, 4}, "1/42"},
		{pointK5, []int{1, 3, 5, 2, 4}, "0"},
		{pointX6, []int{1, 2, 3, 4, 5, 6}, "-1135577/17333030"},
		{pointX6, []int{1, 3, 2, 4, 5, 6}, "773/49335"},
		{pointK6, []int{1, 2, 3, 4, 5, 6}, "-2300540/6881400981"},
		{pointK6, []int{1, 5, 3, 4, 2, 6}, "-23/32110"},
		{pointK6, []int{1, 3, 5, 2, 4, 6}, "0"},
	} {
		t.Run(fmt.Sprint(c.want, c.beta), func(t *testing.T) {
			f := prime.TableField(0)
			h := constraints(t, f, groebner.GrevLex, c.point(t, f))
			r := h[0].Ring()
			n := len(c.beta)
			z := func(a int) *poly {
				switch a {
				case 2:
					return r.One()
				case n:
					return r.Zero()
				}
				return r.Variable(a - 3)
			}
			numerator, denominator := r.One(), jacobian(h)
			for a := 2; a < n; a++ {
				for b := a + 1; b < n; b++ {
					numerator.Mul(numerator, sub(z(a), z(b)))
				}
				numerator.Mul(numerator, z(a))
			}
			links := func(order []int) {
				for i := 1; i+1 < n; i++ {
					denominator.Mul(denominator, sub(z(order[i]), z(order[i+1])))
				}
			}
			identity := make([]int, n)
			for i := range identity {
				identity[i] = i + 1
			}
			links(identity)
			links(c.beta) // both start with leg 1, so the signs cancel
			q := quotientOf(t, basisOf(t, h...))
			got, err := q.TraceQuotient(background, numerator, denominator)
			require.NoError(t, err)
			require.Equal(t, f.Uint64(rational(t, f, c.want)), f.Uint64(got))

			// the same with one factor after the other in coordinates
			x, err := q.Coordinates(background, numerator)
			require.NoError(t, err)
			y, err := q.Coordinates(background, jacobian(h))
			require.NoError(t, err)
			for _, order := range [][]int{identity, c.beta} {
				for i := 1; i+1 < n; i++ {
					y, err = q.MulPolynomial(background, y, sub(z(order[i]), z(order[i+1])))
					require.NoError(t, err)
				}
			}
			x, err = q.Divide(background, x, y)
			require.NoError(t, err)
			again, err := q.Trace(background, x)
			require.NoError(t, err)
			require.Equal(t, got, again)
		})
	}
}
