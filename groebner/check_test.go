package groebner_test

import (
	"slices"
	"testing"

	"github.com/stretchr/testify/require"

	"eliminant/groebner"
)

// CheckBasis must refuse every wrong basis, each for its own reason.
func TestCheckBasisRefuses(t *testing.T) {
	r := newRing(t, smallField(t), groebner.GrevLex, "x", "y")
	generators := polynomials(t, r, "x^2+y^2-5", "x*y-2") // the points (1,2) (2,1) (-1,-2) (-2,-1)
	good := basisOf(t, generators...)
	requireElements(t, polynomials(t, r, "x*y-2", "x^2+y^2-5", "y^3+2*x-5*y"), good)

	// the bases of other ideals, with their cofactors for their own generators, where
	// the test looks for those of the generators above
	larger := basisOf(t, polynomials(t, r, "x^2+y^2-5", "x+y-3")...) // two of the points
	smaller := basisOf(t, mul(generators[0], generators[1]), mul(generators[1], generators[1]))

	modified := func(change func(b *groebner.Basis)) *groebner.Basis {
		b := &groebner.Basis{Elements: slices.Clone(good.Elements)}
		for _, row := range good.Cofactors {
			b.Cofactors = append(b.Cofactors, slices.Clone(row))
		}
		change(b)
		return b
	}
	withoutCofactors := func(b *groebner.Basis) *groebner.Basis { return &groebner.Basis{Elements: b.Elements} }

	for _, c := range []struct {
		name   string
		basis  *groebner.Basis
		reason string
	}{
		{"one, cofactors of something else", &groebner.Basis{
			Elements: []*poly{r.One()}, Cofactors: [][]*poly{polynomials(t, r, "x", "-y")}}, "another polynomial"},
		{"larger ideal", larger, "another polynomial"},
		{"smaller ideal", smaller, "generator 0 does not reduce to zero"},
		{"the generators themselves", &groebner.Basis{Elements: []*poly{generators[1], generators[0]}}, "S-polynomial"},
		{"no elements", &groebner.Basis{}, "no elements"},
		{"zero element", modified(func(b *groebner.Basis) { b.Elements[0] = r.Zero() }), "zero"},
		{"not monic", modified(func(b *groebner.Basis) {
			b.Elements[0] = new(poly).Scale(r.Field().FromInt64(2), b.Elements[0])
		}), "not monic"},
		{"descending", modified(func(b *groebner.Basis) { slices.Reverse(b.Elements) }), "ascend"},
		{"an element twice", modified(func(b *groebner.Basis) { b.Elements[1] = b.Elements[0] }), "ascend"},
		{"an element missing", modified(func(b *groebner.Basis) {
			b.Elements, b.Cofactors = b.Elements[:2], b.Cofactors[:2]
		}), "S-polynomial"},
		{"tail not reduced", modified(func(b *groebner.Basis) {
			b.Elements[2] = add(b.Elements[2], b.Elements[1])
		}), "multiple of a leading monomial"},
		{"superfluous element", modified(func(b *groebner.Basis) {
			b.Elements = append(b.Elements, mul(b.Elements[2], r.Variable(0)))
		}), "multiple of a leading monomial"},
		{"a coefficient changed", modified(func(b *groebner.Basis) {
			b.Elements[2] = add(b.Elements[2], r.One())
		}), "S-polynomial"},
		{"a cofactor changed", modified(func(b *groebner.Basis) {
			b.Cofactors[1][0] = add(b.Cofactors[1][0], r.One())
		}), "another polynomial"},
		{"a row of cofactors missing", modified(func(b *groebner.Basis) { b.Cofactors = b.Cofactors[:2] }), "one row for each"},
		{"a cofactor missing", modified(func(b *groebner.Basis) { b.Cofactors[0] = b.Cofactors[0][:1] }), "one for each generator"},
	} {
		var refusal *groebner.CheckError
		err := groebner.CheckBasis(background, generators, c.basis)
		require.ErrorAs(t, err, &refusal, c.name)
		require.Contains(t, refusal.Error(), c.reason, c.name)
	}

	// without cofactors these two pass three tests; that must not count as a pass
	for _, b := range []*groebner.Basis{{Elements: []*poly{r.One()}}, withoutCofactors(larger), withoutCofactors(good)} {
		require.ErrorIs(t, groebner.CheckBasis(background, generators, b), groebner.ErrNoCofactors)
	}
	require.NoError(t, groebner.CheckBasis(background, generators, modified(func(*groebner.Basis) {})))
}

func TestCheckBasisLeavesOpen(t *testing.T) {
	f := smallField(t)
	r := newRing(t, f, groebner.Lex, "x", "y")
	b := basisOf(t, polynomials(t, r, "x-y")...)
	require.ErrorIs(t, groebner.CheckBasis(background, nil, b), groebner.ErrNoGenerators)
	require.ErrorIs(t, groebner.CheckBasis(background, []*poly{newRing(t, f, groebner.Lex, "x").One()}, b), groebner.ErrMixedRings)

	wide := newRing(t, f, groebner.Lex, variableNames(groebner.MaxVariables)...)
	elements := polynomials(t, wide, "b^70-c^50", "a^70-c^60")
	err := groebner.CheckBasis(background, elements, &groebner.Basis{Elements: elements})
	var limit *groebner.LimitError
	require.ErrorAs(t, err, &limit, "the least common multiple has degree 140")
}
