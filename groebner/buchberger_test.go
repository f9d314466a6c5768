package groebner_test

import (
	"context"
	"errors"
	"fmt"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"

	"eliminant/groebner"
	"eliminant/rational/prime"
)

func requireElements(t require.TestingT, want []*poly, b *groebner.Basis, label ...any) {
	require.Len(t, b.Elements, len(want), label...)
	for i, p := range want {
		require.True(t, p.Equal(b.Elements[i]), "element %d: %v, not %v", i, b.Elements[i], p)
	}
}

// Bases worked by hand in D. Cox, J. Little, D. O'Shea, Ideals, Varieties, and
// Algorithms, chapters 2 and 3 (values from memory), made monic and ascending.
func TestWorkedBases(t *testing.T) {
	f := prime.TableField(0)
	for _, c := range []struct {
		name             string
		order            groebner.Order
		variables        []string
		generators, want []string
	}{
		{"sphere, cylinder, plane", groebner.Lex, []string{"x", "y", "z"},
			[]string{"x^2+y^2+z^2-1", "x^2+z^2-y", "x-z"},
			[]string{"z^4+1/2*z^2-1/4", "y-2*z^2", "x-z"}},
		{"sphere, ellipse, hyperbola", groebner.Lex, []string{"x", "y", "z"},
			[]string{"x^2+y^2+z^2-4", "x^2+2*y^2-5", "x*z-1"},
			[]string{"z^4-3/2*z^2+1/2", "y^2-z^2-1", "x+2*z^3-3*z"}},
		{"two cubics", groebner.GrLex, []string{"x", "y"},
			[]string{"x^3-2*x*y", "x^2*y-2*y^2+x"},
			[]string{"y^2-1/2*x", "x*y", "x^2"}},
		{"twisted cubic", groebner.Lex, []string{"T", "x", "y", "z"},
			[]string{"x-T", "y-T^2", "z-T^3"},
			[]string{"y^3-z^2", "x*z-y^2", "x*y-z", "x^2-y", "T-x"}},
	} {
		t.Run(c.name, func(t *testing.T) {
			r := newRing(t, f, c.order, c.variables...)
			requireElements(t, polynomials(t, r, c.want...), basisOf(t, polynomials(t, r, c.generators...)...))
		})
	}
}

// The degree of the twisted cubic is 3: a plane of general position meets it in
// three points, and the number of standard monomials of each large degree of its
// projective ideal is 3 t + 1.
func TestTwistedCubicDegree(t *testing.T) {
	r := newRing(t, smallField(t), groebner.GrevLex, "x", "y", "z")
	curve := polynomials(t, r, "x^2-y", "x*y-z", "x*z-y^2")
	q := quotientOf(t, basisOf(t, append(curve, polynomial(t, r, "2*x-3*y+5*z-7"))...))
	require.Equal(t, 3, q.Dimension())

	w := newRing(t, smallField(t), groebner.GrevLex, "w", "x", "y", "z")
	b := basisOf(t, polynomials(t, w, "x^2-w*y", "x*y-w*z", "x*z-y^2")...)
	for degree := range 6 {
		standard := 0
		for i := range degree + 1 {
			for j := range degree + 1 - i {
				for k := range degree + 1 - i - j {
					m, err := w.Monomial(i, j, k, degree-i-j-k)
					require.NoError(t, err)
					if isStandard(b, m) {
						standard++
					}
				}
			}
		}
		require.Equal(t, 3*degree+1, standard)
	}
}

// isStandard reports whether m is a multiple of no leading monomial.
func isStandard(b *groebner.Basis, m groebner.Monomial) bool {
	for _, p := range b.Elements {
		if _, lead := p.Lead(); p.Ring().Divides(lead, m) {
			return false
		}
	}
	return true
}

// katsura-n has 2^n solutions; sizes of the reduced grevlex bases from the public
// documentation of general-purpose algebra systems.
func TestKatsura(t *testing.T) {
	for n, size := range map[int]int{2: 4, 3: 7, 4: 13, 5: 22} {
		generators := katsura(t, smallField(t), n)
		b := basisOf(t, generators...)
		require.Len(t, b.Elements, size, "katsura-%d", n)
		require.Equal(t, 1<<n, quotientOf(t, b).Dimension(), "katsura-%d", n)
	}
}

// The cyclic roots: 6 for n = 3 and 70 for n = 5, a curve for n = 4; G. Bjoerck, R.
// Froeberg, J. Symbolic Comput. 12 (1991) 329 (counts from memory). The reduced
// grevlex basis has 20 elements for n = 5 (public documentation of general-purpose
// algebra systems).
func TestCyclic(t *testing.T) {
	f := smallField(t)
	require.Equal(t, 6, quotientOf(t, basisOf(t, cyclic(t, f, 3)...)).Dimension())

	b := basisOf(t, cyclic(t, f, 5)...)
	require.Len(t, b.Elements, 20)
	require.Equal(t, 70, quotientOf(t, b).Dimension())

	b = basisOf(t, cyclic(t, f, 4)...)
	require.False(t, b.IsZeroDimensional())
	_, err := groebner.ComputeQuotient(background, b, groebner.QuotientOptions{})
	var infinite *groebner.NotZeroDimensionalError
	require.ErrorAs(t, err, &infinite)
	require.Equal(t, "x2", infinite.Variable)
}

// Two larger bases; without cofactors, so the sizes are the check: 45 elements and
// 156 roots for cyclic-6, 41 and 64 for katsura-6 (sources as above).
func TestLargerSystems(t *testing.T) {
	for name, c := range map[string]struct {
		generators       []*poly
		size, dimensions int
	}{
		"cyclic-6":  {cyclic(t, smallField(t), 6), 45, 156},
		"katsura-6": {katsura(t, smallField(t), 6), 41, 64},
	} {
		b, err := groebner.ComputeBasis(background, c.generators, groebner.Options{})
		require.NoError(t, err)
		require.Len(t, b.Elements, c.size, name)
		require.Equal(t, c.dimensions, quotientOf(t, b).Dimension(), name)
	}
}

// The reduced basis is determined by ideal and order.
func TestBasisIsIndependentOfTheGenerators(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		r := drawRing(t, 3)
		var generators []*poly
		for i := range rapid.IntRange(1, 3).Draw(t, "generators") {
			generators = append(generators, drawPolynomial(t, r, fmt.Sprint("g", i), 4, 2))
		}
		generators = append(generators, r.Variable(0))
		o := groebner.Options{Cofactors: true}
		b, err := groebner.ComputeBasis(background, generators, o)
		require.NoError(t, err)
		require.NoError(t, groebner.CheckBasis(background, generators, b))

		shuffled := rapid.Permutation(generators).Draw(t, "shuffled")
		for i, g := range shuffled {
			if c := rapid.IntRange(0, i).Draw(t, "mix"); c < i {
				shuffled[i] = add(g, mul(shuffled[c], drawPolynomial(t, r, "factor", 2, 1)))
			}
		}
		o.Strategy = groebner.Strategy(rapid.IntRange(0, 1).Draw(t, "strategy"))
		o.Cofactors = rapid.Bool().Draw(t, "cofactors")
		again, err := groebner.ComputeBasis(background, shuffled, o)
		require.NoError(t, err)
		requireElements(t, b.Elements, again)

		// a basis is its own basis
		fixed, err := groebner.ComputeBasis(background, b.Elements, groebner.Options{})
		require.NoError(t, err)
		requireElements(t, b.Elements, fixed)
	})
}

// The chain criterion may drop an old pair only if the new element divides its
// least common multiple strictly on both sides; here one side is not strict, and
// dropping the pair would lose an element of the basis.
func TestChainCriterionNeedsBothSides(t *testing.T) {
	f, err := prime.NewField(3)
	require.NoError(t, err)
	for _, o := range orders {
		r := newRing(t, f, o, "a", "b", "c")
		generators := polynomials(t, r, "a*b^2+b*c^2-b^2", "a^3-a", "b^3-b", "c^3-c")
		require.Equal(t, countPoints(r, generators), quotientOf(t, basisOf(t, generators...)).Dimension())
	}
}

func TestRepeatedRunsAgree(t *testing.T) {
	generators := cyclic(t, smallField(t), 5)
	a, err := groebner.ComputeBasis(background, generators, groebner.Options{Cofactors: true})
	require.NoError(t, err)
	b, err := groebner.ComputeBasis(background, generators, groebner.Options{Cofactors: true})
	require.NoError(t, err)
	require.Equal(t, a, b)
	require.Positive(t, a.Statistics.ProductCriterion)
	require.Positive(t, a.Statistics.ChainCriterion)
	require.Positive(t, a.Statistics.Steps)
}

func TestUnitIdeal(t *testing.T) {
	r := newRing(t, smallField(t), groebner.GrevLex, "x", "y")
	b := basisOf(t, polynomials(t, r, "x*y-1", "x^2", "y^5+x")...)
	requireElements(t, []*poly{r.One()}, b)
	require.True(t, b.IsZeroDimensional())
	q := quotientOf(t, b)
	require.Zero(t, q.Dimension())
	trace, err := q.TraceQuotient(background, r.One(), r.Zero())
	require.NoError(t, err, "in the zero ring every element is invertible")
	require.Zero(t, trace)
	chi, err := q.CharacteristicPolynomial(background, nil)
	require.NoError(t, err)
	require.Equal(t, []prime.Element{r.Field().One()}, chi)
}

func TestZeroGeneratorsAreIgnored(t *testing.T) {
	r := newRing(t, smallField(t), groebner.GrevLex, "x", "y")
	b := basisOf(t, r.Zero(), polynomial(t, r, "3*x-6"), r.Zero())
	requireElements(t, polynomials(t, r, "x-2"), b)
}

func TestGeneratorErrors(t *testing.T) {
	f := smallField(t)
	r, other := newRing(t, f, groebner.Lex, "x"), newRing(t, f, groebner.Lex, "x")
	for _, c := range []struct {
		generators []*poly
		want       error
	}{
		{nil, groebner.ErrNoGenerators},
		{[]*poly{r.Zero(), r.Zero()}, groebner.ErrNoGenerators},
		{[]*poly{r.One(), other.One()}, groebner.ErrMixedRings},
		{[]*poly{r.One(), new(poly)}, groebner.ErrMixedRings},
		{[]*poly{r.One(), nil}, groebner.ErrMixedRings},
	} {
		_, err := groebner.ComputeBasis(background, c.generators, groebner.Options{})
		require.ErrorIs(t, err, c.want)
	}
}

// requireInIdeal verifies the claim of a partial result by its cofactors.
func requireInIdeal(t *testing.T, generators []*poly, b *groebner.Basis) {
	require.NotNil(t, b)
	require.NotEmpty(t, b.Elements)
	for i, p := range b.Elements {
		sum := p.Ring().Zero()
		for j, g := range generators {
			sum.Add(sum, mul(b.Cofactors[i][j], g))
		}
		require.True(t, sum.Equal(p))
	}
}

func TestLimits(t *testing.T) {
	generators := cyclic(t, smallField(t), 5)
	for _, c := range []struct {
		what    string
		options groebner.Options
		limit   int
	}{
		{"basis elements", groebner.Options{MaxBasis: 7, Cofactors: true}, 7},
		{"degree", groebner.Options{MaxDegree: 6, Cofactors: true}, 6},
	} {
		_, err := groebner.ComputeBasis(background, generators, c.options)
		var limit *groebner.LimitError
		require.ErrorAs(t, err, &limit)
		require.Equal(t, c.what, limit.What)
		require.Equal(t, c.limit, limit.Limit)
		require.Positive(t, limit.Pending)
		require.ErrorContains(t, err, "critical pairs left")
		requireInIdeal(t, generators, limit.Partial)
		require.Error(t, groebner.CheckBasis(background, generators, limit.Partial), "a partial result is no basis")
	}
	// limits that are not met change nothing
	want := basisOf(t, generators...)
	b, err := groebner.ComputeBasis(background, generators, groebner.Options{MaxBasis: 1000, MaxDegree: 20})
	require.NoError(t, err)
	requireElements(t, want.Elements, b)

	_, err = groebner.ComputeQuotient(background, want, groebner.QuotientOptions{MaxDimension: 69})
	var limit *groebner.LimitError
	require.ErrorAs(t, err, &limit)
	require.Equal(t, "dimension", limit.What)
	q, err := groebner.ComputeQuotient(background, want, groebner.QuotientOptions{MaxDimension: 70})
	require.NoError(t, err)
	require.Equal(t, 70, q.Dimension())
}

// For homogeneous generators a computation that stops at a degree has found all
// elements of the basis up to it.
func TestTruncatedBasis(t *testing.T) {
	r := newRing(t, smallField(t), groebner.GrevLex, "x", "y", "z")
	generators := polynomials(t, r, "x^2*y-z^3", "x*y^2-x*z^2", "y^3+x^2*z")
	whole := basisOf(t, generators...)
	for degree := 3; ; degree++ {
		b, err := groebner.ComputeBasis(background, generators, groebner.Options{MaxDegree: degree})
		if err == nil {
			requireElements(t, whole.Elements, b)
			require.Greater(t, degree, 4)
			break
		}
		var limit *groebner.LimitError
		require.ErrorAs(t, err, &limit)
		var want []*poly
		for _, p := range whole.Elements {
			if p.Degree() <= degree {
				want = append(want, p)
			}
		}
		requireElements(t, want, limit.Partial)
	}
}

// Exponents beyond the range of the ring end the computation, not its soundness.
func TestExponentLimit(t *testing.T) {
	r := newRing(t, smallField(t), groebner.Lex, variableNames(groebner.MaxVariables)...)
	generators := polynomials(t, r, "a-b^60", "b-c^60", "a*c-d")
	_, err := groebner.ComputeBasis(background, generators, groebner.Options{Cofactors: true})
	var limit *groebner.LimitError
	require.ErrorAs(t, err, &limit)
	require.Equal(t, "exponent", limit.What)
	require.Equal(t, r.MaxDegree(), limit.Limit)
	if limit.Partial != nil {
		requireInIdeal(t, generators, limit.Partial)
	}
}

func TestCancellation(t *testing.T) {
	cause := errors.New("enough")
	stopped, cancel := context.WithCancelCause(background)
	cancel(cause)
	generators := katsura(t, smallField(t), 3)
	_, err := groebner.ComputeBasis(stopped, generators, groebner.Options{})
	require.ErrorIs(t, err, cause)
	b := basisOf(t, generators...)
	require.ErrorIs(t, groebner.CheckBasis(stopped, generators, b), cause)
	_, err = groebner.ComputeQuotient(stopped, b, groebner.QuotientOptions{})
	require.ErrorIs(t, err, cause)
	q := quotientOf(t, b)
	x, err := q.Coordinates(background, b.Elements[0].Ring().Variable(0))
	require.NoError(t, err)
	for _, call := range []func() error{
		func() error { _, err := q.Coordinates(stopped, b.Elements[0]); return err },
		func() error { _, err := q.Matrix(stopped, x); return err },
		func() error { _, err := q.Divide(stopped, x, x); return err },
		func() error { _, err := q.Trace(stopped, x); return err },
		func() error { _, err := q.CharacteristicPolynomial(stopped, x); return err },
		func() error { _, err := q.VariableMatrix(0).Rank(stopped); return err },
		func() error { _, err := q.VariableMatrix(0).CharacteristicPolynomial(stopped); return err },
	} {
		require.ErrorIs(t, call(), cause)
	}

	// in the middle: after a while the context reports its end
	late := &countdown{Context: background, left: 20}
	_, err = groebner.ComputeBasis(late, cyclic(t, smallField(t), 5), groebner.Options{})
	require.ErrorIs(t, err, context.Canceled)
}

// countdown is a context that ends after a number of polls.
type countdown struct {
	context.Context
	left int
}

func (c *countdown) Err() error {
	if c.left--; c.left < 0 {
		return context.Canceled
	}
	return nil
}
