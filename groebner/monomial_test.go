package groebner_test

import (
	"slices"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"

	"eliminant/groebner"
	"eliminant/rational/prime"
)

var orders = []groebner.Order{groebner.GrevLex, groebner.GrLex, groebner.Lex}

// compareExponents is the textbook definition of the orders (Cox, Little, O'Shea,
// section 2.2) on exponent vectors.
func compareExponents(o groebner.Order, a, b []int) int {
	total := func(e []int) (sum int) {
		for _, v := range e {
			sum += v
		}
		return sum
	}
	if o != groebner.Lex && total(a) != total(b) {
		return sign(total(a) - total(b))
	}
	if o == groebner.GrevLex {
		for i := len(a) - 1; i >= 0; i-- {
			if a[i] != b[i] {
				return sign(b[i] - a[i])
			}
		}
		return 0
	}
	return slices.Compare(a, b)
}

func sign(v int) int { return min(1, max(-1, v)) }

func variableNames(n int) []string {
	names := make([]string, n)
	for i := range names {
		names[i] = string(rune('a' + i))
	}
	return names
}

// drawRing draws a ring over a table field with 1 to most variables.
func drawRing(t *rapid.T, most int) *groebner.Ring {
	n := rapid.IntRange(1, most).Draw(t, "variables")
	o := rapid.SampledFrom(orders).Draw(t, "order")
	r, err := groebner.NewRing(prime.TableField(0), o, variableNames(n)...)
	require.NoError(t, err)
	return r
}

// drawExponents draws exponents of total degree at most degree.
func drawExponents(t *rapid.T, n, degree int, label string) []int {
	e := make([]int, n)
	for i := range e {
		e[i] = rapid.IntRange(0, degree).Draw(t, label)
		degree -= e[i]
	}
	return rapid.Permutation(e).Draw(t, label+" order")
}

func TestMonomialsAgreeWithExponentVectors(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		r := drawRing(t, groebner.MaxVariables)
		n, most := r.Variables(), min(r.MaxDegree(), 1<<20)
		degree := rapid.SampledFrom([]int{3, most}).Draw(t, "degree")
		a, b := drawExponents(t, n, degree, "a"), drawExponents(t, n, degree, "b")
		ma, err := r.Monomial(a...)
		require.NoError(t, err)
		mb, err := r.Monomial(b...)
		require.NoError(t, err)
		require.Equal(t, a, r.Exponents(ma))
		require.Equal(t, compareExponents(r.Order(), a, b), r.Compare(ma, mb))

		var total, totalSum, totalLCM int
		divides := true
		sum, lcm := make([]int, n), make([]int, n)
		for i := range a {
			sum[i], lcm[i] = a[i]+b[i], max(a[i], b[i])
			total, totalSum, totalLCM = total+a[i], totalSum+sum[i], totalLCM+lcm[i]
			divides = divides && a[i] <= b[i]
		}
		require.Equal(t, total, r.Degree(ma))
		require.Equal(t, divides, r.Divides(ma, mb))
		product, ok := r.Product(ma, mb)
		require.Equal(t, totalSum <= r.MaxDegree(), ok)
		if ok {
			require.Equal(t, sum, r.Exponents(product))
			require.True(t, r.Divides(ma, product))
			back, ok := r.Quotient(product, ma)
			require.True(t, ok)
			require.Equal(t, mb, back)
		}
		m, ok := r.LCM(ma, mb)
		require.Equal(t, totalLCM <= r.MaxDegree(), ok)
		if ok {
			require.Equal(t, lcm, r.Exponents(m))
			require.Equal(t, totalLCM, r.Degree(m))
		}
		_, ok = r.Quotient(mb, ma)
		require.Equal(t, divides, ok)
	})
}

func TestOrderAxioms(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		r := drawRing(t, groebner.MaxVariables)
		var m [3]groebner.Monomial
		for i := range m {
			var err error
			m[i], err = r.Monomial(drawExponents(t, r.Variables(), 5, "exponents")...)
			require.NoError(t, err)
		}
		one := groebner.Monomial{}
		require.LessOrEqual(t, r.Compare(one, m[0]), 0)
		require.Equal(t, -r.Compare(m[1], m[0]), r.Compare(m[0], m[1]))
		require.Equal(t, m[0] == m[1], r.Compare(m[0], m[1]) == 0)
		x, _ := r.Product(m[0], m[2])
		y, _ := r.Product(m[1], m[2])
		require.Equal(t, r.Compare(m[0], m[1]), r.Compare(x, y), "products keep the order")
		if r.Compare(m[0], m[1]) <= 0 && r.Compare(m[1], m[2]) <= 0 {
			require.LessOrEqual(t, r.Compare(m[0], m[2]), 0)
		}
		if r.Divides(m[0], m[1]) {
			require.LessOrEqual(t, r.Compare(m[0], m[1]), 0, "a divisor is not larger")
		}
	})
}

// The textbook examples that tell the orders apart (Cox, Little, O'Shea, section
// 2.2; value from memory).
func TestOrdersDiffer(t *testing.T) {
	f := smallField(t)
	text := "4*x*y^2*z + 4*z^2 - 5*x^3 + 7*x^2*z^2"
	for o, want := range map[groebner.Order]string{
		groebner.Lex:     "-5*x^3+7*x^2*z^2+4*x*y^2*z+4*z^2",
		groebner.GrLex:   "7*x^2*z^2+4*x*y^2*z-5*x^3+4*z^2",
		groebner.GrevLex: "4*x*y^2*z+7*x^2*z^2-5*x^3+4*z^2",
	} {
		require.Equal(t, want, polynomial(t, newRing(t, f, o, "x", "y", "z"), text).String(), o)
	}
}

func TestRingErrors(t *testing.T) {
	f := smallField(t)
	for _, names := range [][]string{nil, {""}, {"x", "x"}, {"1x"}, {"x y"}, {"_x"}, variableNames(groebner.MaxVariables + 1)} {
		_, err := groebner.NewRing(f, groebner.Lex, names...)
		require.ErrorIs(t, err, groebner.ErrRing, "%q", names)
	}
	_, err := groebner.NewRing(f, groebner.Order(3), "x")
	require.ErrorIs(t, err, groebner.ErrRing)
	_, err = groebner.NewRing(nil, groebner.Lex, "x")
	require.ErrorIs(t, err, groebner.ErrRing)

	r := newRing(t, f, groebner.Lex, "x", "y", "z", "w")
	for _, e := range [][]int{{1}, {1, 2, 3, -1}, {r.MaxDegree(), 1, 0, 0}, {0, r.MaxDegree() + 1, 0, 0}} {
		_, err := r.Monomial(e...)
		require.ErrorIs(t, err, groebner.ErrExponent, "%v", e)
	}
	require.Equal(t, "GF(32003)[x, y, z, w] lex", r.String())
	require.Equal(t, "Order(7)", groebner.Order(7).String())
}
