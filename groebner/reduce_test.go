package groebner_test

import (
	"context"
	"errors"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"

	"eliminant/groebner"
)

func TestNormalForm(t *testing.T) {
	for _, o := range orders {
		r := newRing(t, smallField(t), o, "x", "y", "z")
		generators := polynomials(t, r, "x^2+y^2+z^2-4", "x*y-z", "y^2*z-x+2")
		b := basisOf(t, generators...)
		form := func(p *poly) *poly {
			q, err := b.NormalForm(background, p)
			require.NoError(t, err)
			return q
		}
		rapid.Check(t, func(t *rapid.T) {
			p, q := drawPolynomial(t, r, "p", 8, 6), drawPolynomial(t, r, "q", 8, 6)
			n := form(p)
			require.True(t, n.Equal(form(n)), "idempotent")
			require.True(t, add(n, form(q)).Equal(form(add(p, q))), "linear")
			require.True(t, form(mul(p, q)).Equal(form(mul(n, form(q)))), "compatible with products")
			for i := range n.Len() {
				_, m := n.Term(i)
				for _, e := range b.Elements {
					_, lead := e.Lead()
					require.False(t, r.Divides(lead, m))
				}
			}
			member := r.Zero()
			for _, g := range generators {
				member.Add(member, mul(g, drawPolynomial(t, r, "factor", 4, 3)))
			}
			require.True(t, form(member).IsZero(), "members of the ideal reduce to zero")
			require.True(t, form(add(p, member)).Equal(n), "depends on the class only")
		})
	}
}

// Division by a list that is not a Groebner basis leaves a remainder that depends
// on the order of the list; Cox, Little, O'Shea, section 2.3, examples 2 and 4
// (value from memory).
func TestNormalFormByOtherLists(t *testing.T) {
	r := newRing(t, smallField(t), groebner.Lex, "x", "y")
	p := polynomial(t, r, "x^2*y+x*y^2+y^2")
	for _, c := range []struct {
		divisors []string
		want     string
	}{
		{[]string{"x*y-1", "y^2-1"}, "x+y+1"},
		{[]string{"y^2-1", "x*y-1"}, "2*x+1"},
		{[]string{"3*x*y-3", "2*y^2-2"}, "x+y+1"}, // divisors need not be monic
	} {
		q, err := (&groebner.Basis{Elements: polynomials(t, r, c.divisors...)}).NormalForm(background, p)
		require.NoError(t, err)
		require.Equal(t, c.want, q.String())
	}
}

func TestNormalFormErrors(t *testing.T) {
	f := smallField(t)
	r := newRing(t, f, groebner.Lex, "x", "y")
	b := basisOf(t, polynomials(t, r, "x^2-y", "y^3-1")...)
	_, err := b.NormalForm(background, newRing(t, f, groebner.Lex, "x", "y").One())
	require.ErrorIs(t, err, groebner.ErrMixedRings)

	stopped, cancel := context.WithCancelCause(background)
	cause := errors.New("no more time")
	cancel(cause)
	_, err = b.NormalForm(stopped, polynomial(t, r, "x^4"))
	require.ErrorIs(t, err, cause)

	// x_0 -> x_1^100 squares beyond the largest exponent of 15 variables
	wide := newRing(t, f, groebner.Lex, variableNames(groebner.MaxVariables)...)
	b = basisOf(t, polynomial(t, wide, "a-b^100"))
	_, err = b.NormalForm(background, polynomial(t, wide, "a^2"))
	var limit *groebner.LimitError
	require.ErrorAs(t, err, &limit)
	require.Equal(t, wide.MaxDegree(), limit.Limit)
}
