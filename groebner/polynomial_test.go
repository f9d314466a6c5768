package groebner_test

import (
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"

	"eliminant/groebner"
	"eliminant/rational/prime"
)

type poly = groebner.Polynomial

// drawPolynomial draws a polynomial of few terms; small coefficients make terms
// cancel.
func drawPolynomial(t *rapid.T, r *groebner.Ring, label string, terms, degree int) *poly {
	f := r.Field()
	n := rapid.IntRange(0, terms).Draw(t, label+" terms")
	coefficients := make([]prime.Element, n)
	monomials := make([]groebner.Monomial, n)
	for i := range n {
		coefficients[i] = f.FromInt64(rapid.Int64Range(-3, 3).Draw(t, label))
		var err error
		monomials[i], err = r.Monomial(drawExponents(t, r.Variables(), degree, label)...)
		require.NoError(t, err)
	}
	return r.FromTerms(coefficients, monomials)
}

func drawValues(t *rapid.T, r *groebner.Ring) []prime.Element {
	v := make([]prime.Element, r.Variables())
	for i := range v {
		v[i] = r.Field().FromUint64(rapid.Uint64().Draw(t, "value"))
	}
	return v
}

func add(x, y *poly) *poly { return new(poly).Add(x, y) }
func sub(x, y *poly) *poly { return new(poly).Sub(x, y) }
func mul(x, y *poly) *poly { return new(poly).Mul(x, y) }

// requireCanonical tests the invariant of the representation.
func requireCanonical(t require.TestingT, p *poly) {
	for i := range p.Len() {
		c, m := p.Term(i)
		require.NotZero(t, c)
		if i > 0 {
			_, before := p.Term(i - 1)
			require.Positive(t, p.Ring().Compare(before, m))
		}
		require.Equal(t, c, p.Coefficient(m))
	}
}

func TestRingAxioms(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		r := drawRing(t, 4)
		x, y, z := drawPolynomial(t, r, "x", 8, 3), drawPolynomial(t, r, "y", 8, 3), drawPolynomial(t, r, "z", 8, 3)
		requireCanonical(t, x)
		requireCanonical(t, mul(x, y))
		requireCanonical(t, add(x, y))
		require.Equal(t, add(x, y), add(y, x))
		require.True(t, add(add(x, y), z).Equal(add(x, add(y, z))))
		require.True(t, mul(x, y).Equal(mul(y, x)))
		require.True(t, mul(mul(x, y), z).Equal(mul(x, mul(y, z))))
		require.True(t, mul(x, add(y, z)).Equal(add(mul(x, y), mul(x, z))))
		require.True(t, sub(x, x).IsZero())
		require.True(t, sub(x, y).Equal(add(x, new(poly).Neg(y))))
		require.True(t, mul(x, r.One()).Equal(x))
		require.True(t, mul(x, r.Zero()).IsZero())
		require.True(t, new(poly).Pow(x, 3).Equal(mul(x, mul(x, x))))
		require.True(t, new(poly).Pow(x, 0).Equal(r.One()))
		c := r.Field().FromInt64(-7)
		require.True(t, new(poly).Scale(c, x).Equal(mul(r.Constant(c), x)))
		require.True(t, new(poly).Scale(0, x).IsZero())
		if !y.IsZero() {
			a, m := y.Lead()
			require.True(t, new(poly).MulTerm(a, m, x).Equal(mul(x, r.Term(a, m))))
			inverse, _ := r.Field().Inv(a)
			require.True(t, new(poly).Monic(y).Equal(new(poly).Scale(inverse, y)))
		}
		for i := range r.Variables() {
			d := func(p *poly) *poly { return new(poly).Derivative(p, i) }
			require.True(t, d(mul(x, y)).Equal(add(mul(d(x), y), mul(x, d(y)))), "Leibniz rule")
		}
	})
}

func TestEvaluationIsAHomomorphism(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		r := drawRing(t, 4)
		f := r.Field()
		x, y := drawPolynomial(t, r, "x", 30, 6), drawPolynomial(t, r, "y", 30, 6)
		v := drawValues(t, r)
		require.Equal(t, f.Mul(x.Eval(v), y.Eval(v)), mul(x, y).Eval(v))
		require.Equal(t, f.Add(x.Eval(v), y.Eval(v)), add(x, y).Eval(v))
		require.Equal(t, f.Sub(x.Eval(v), y.Eval(v)), sub(x, y).Eval(v))
		for i := range r.Variables() {
			require.Equal(t, v[i], r.Variable(i).Eval(v))
		}
	})
}

func TestReceiversMayBeOperands(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		r := drawRing(t, 3)
		x, y := drawPolynomial(t, r, "x", 6, 3), drawPolynomial(t, r, "y", 6, 3)
		for name, op := range map[string]func(z, x, y *poly) *poly{
			"Add": (*poly).Add, "Sub": (*poly).Sub, "Mul": (*poly).Mul,
			"Neg":        func(z, x, _ *poly) *poly { return z.Neg(x) },
			"Monic":      func(z, x, _ *poly) *poly { return z.Monic(x) },
			"Pow":        func(z, x, _ *poly) *poly { return z.Pow(x, 2) },
			"Derivative": func(z, x, _ *poly) *poly { return z.Derivative(x, 0) },
		} {
			want := op(new(poly), x, y)
			a := new(poly).Set(x)
			require.True(t, want.Equal(op(a, a, y)), name)
			b := new(poly).Set(y)
			require.True(t, want.Equal(op(b, x, b)), name)
			same := op(new(poly), x, x)
			c := new(poly).Set(x)
			require.True(t, same.Equal(op(c, c, c)), name)
			requireCanonical(t, c)
		}
	})
}

func TestDegreeIsTotal(t *testing.T) {
	for _, o := range orders {
		r := newRing(t, smallField(t), o, "x", "y")
		require.Equal(t, 5, polynomial(t, r, "x^2+y^5+1").Degree(), o)
		require.Equal(t, -1, r.Zero().Degree(), o)
		require.Equal(t, 0, r.One().Degree(), o)
	}
}

func TestString(t *testing.T) {
	r := newRing(t, smallField(t), groebner.Lex, "x", "y_1")
	require.Equal(t, "-x^2*y_1+3*x-y_1-1", polynomial(t, r, "3*x - y_1 - 1 - x^2*y_1").String())
	require.Equal(t, "0", r.Zero().String())
	require.Equal(t, "1", r.One().String())
	m, err := r.Monomial(1, 2)
	require.NoError(t, err)
	require.Equal(t, "x*y_1^2", r.MonomialString(m))
	require.Equal(t, "1", r.MonomialString(groebner.Monomial{}))
}

func panicError(t *testing.T, f func()) (err error) {
	t.Helper()
	defer func() {
		var ok bool
		err, ok = recover().(error)
		require.True(t, ok, "a panic with an error is expected")
	}()
	f()
	return nil
}

func TestPanicsAreTyped(t *testing.T) {
	f := smallField(t)
	r, other := newRing(t, f, groebner.Lex, "x"), newRing(t, f, groebner.Lex, "x")
	require.ErrorIs(t, panicError(t, func() { add(r.One(), other.One()) }), groebner.ErrMixedRings)
	require.ErrorIs(t, panicError(t, func() { mul(r.One(), new(poly)) }), groebner.ErrMixedRings)
	require.False(t, r.One().Equal(other.One()))

	for _, o := range orders {
		wide := newRing(t, f, o, variableNames(groebner.MaxVariables)...)
		x := wide.Variable(0)
		high := new(poly).Pow(x, wide.MaxDegree())
		require.Equal(t, wide.MaxDegree(), high.Degree())
		require.ErrorIs(t, panicError(t, func() { mul(high, x) }), groebner.ErrExponent)
		require.ErrorIs(t, panicError(t, func() { mul(add(high, wide.One()), add(x, wide.One())) }), groebner.ErrExponent)
		_, m := x.Lead()
		require.ErrorIs(t, panicError(t, func() { new(poly).MulTerm(f.One(), m, high) }), groebner.ErrExponent)
	}
}
