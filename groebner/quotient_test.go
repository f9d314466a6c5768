package groebner_test

import (
	"slices"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"

	"eliminant/groebner"
	"eliminant/rational/prime"
)

// value returns p of commuting matrices.
func value(p *poly, matrices []*groebner.Matrix) *groebner.Matrix {
	n := matrices[0].Rows()
	f := matrices[0].Field()
	sum := groebner.NewMatrix(f, n, n)
	for i := range p.Len() {
		c, m := p.Term(i)
		product := groebner.NewMatrix(f, n, n)
		for j := range n {
			product.Set(j, j, c)
		}
		for k, e := range p.Ring().Exponents(m) {
			for range e {
				product = product.Product(matrices[k])
			}
		}
		for j := range n {
			f.AddRow(sum.Row(j), sum.Row(j), product.Row(j))
		}
	}
	return sum
}

// The multiplication matrices are a representation of the quotient algebra: they
// commute, the generators vanish at them, and a polynomial at them is the matrix
// of multiplication by it.
func TestMultiplicationMatrices(t *testing.T) {
	f := prime.TableField(0)
	for name, generators := range map[string][]*poly{
		"katsura-3":   katsura(t, f, 3),
		"cyclic-3":    cyclic(t, f, 3),
		"scattering":  constraints(t, f, groebner.GrevLex, drawInvariants(t, f, 6, "matrices")),
		"lexicograph": constraints(t, f, groebner.Lex, drawInvariants(t, f, 6, "matrices")),
	} {
		t.Run(name, func(t *testing.T) {
			b := basisOf(t, generators...)
			q := quotientOf(t, b)
			r := q.Ring()
			matrices := make([]*groebner.Matrix, r.Variables())
			for k := range matrices {
				matrices[k] = q.VariableMatrix(k)
			}
			for _, x := range matrices {
				for _, y := range matrices {
					require.True(t, x.Product(y).Equal(y.Product(x)))
				}
			}
			zero := groebner.NewMatrix(f, q.Dimension(), q.Dimension())
			for _, g := range generators {
				require.True(t, value(g, matrices).Equal(zero))
			}
			rapid.Check(t, func(t *rapid.T) {
				p, s := drawPolynomial(t, r, "p", 5, 4), drawPolynomial(t, r, "s", 5, 4)
				x, err := q.Coordinates(background, p)
				require.NoError(t, err)
				normal, err := b.NormalForm(background, p)
				require.NoError(t, err)
				require.True(t, normal.Equal(q.Polynomial(x)), "coordinates are the normal form")
				m, err := q.Matrix(background, x)
				require.NoError(t, err)
				require.True(t, value(p, matrices).Equal(m))

				y, err := q.Coordinates(background, s)
				require.NoError(t, err)
				product, err := q.Product(background, x, y)
				require.NoError(t, err)
				want, err := q.Coordinates(background, mul(p, s))
				require.NoError(t, err)
				require.Equal(t, want, product)
				again, err := q.MulPolynomial(background, x, s)
				require.NoError(t, err)
				require.Equal(t, want, again)

				back, err := q.Divide(background, product, y)
				if err == nil {
					require.Equal(t, x, back)
				}
				trace, err := q.Trace(background, x)
				require.NoError(t, err)
				require.Equal(t, m.Trace(), trace)
			})
		})
	}
}

// grid returns generators of the ideal of the points (a_i, b_j, a_i + 2 b_j) after
// a linear change of variables, and the points in the new variables.
func grid(t *testing.T, r *groebner.Ring, as, bs []int64) ([]*poly, [][]prime.Element) {
	f := r.Field()
	x := polynomials(t, r, "x+y-z", "2*y+3*z", "x+5*z")
	first, second := r.One(), r.One()
	for _, a := range as {
		first.Mul(first, sub(x[0], r.Constant(f.FromInt64(a))))
	}
	for _, b := range bs {
		second.Mul(second, sub(x[1], r.Constant(f.FromInt64(b))))
	}
	third := sub(x[2], add(x[0], new(poly).Scale(f.FromInt64(2), x[1])))
	forms := matrix(f, []int64{1, 0, 1}, []int64{1, 2, 0}, []int64{-1, 3, 5}) // columns: x[0], x[1], x[2]
	var points [][]prime.Element
	for _, a := range as {
		for _, b := range bs {
			p, rank, err := forms.SolveLeft(background, integers(f, a, b, a+2*b))
			require.NoError(t, err)
			require.Equal(t, 3, rank)
			points = append(points, p)
		}
	}
	return []*poly{first, second, third}, points
}

// Tr(M_N M_D^{-1}) against the sum of N/D over known rational zeros, and the
// characteristic polynomial against the product over them.
func TestTraceIsTheSumOverTheZeros(t *testing.T) {
	f := prime.TableField(2)
	for _, o := range orders {
		r := newRing(t, f, o, "x", "y", "z")
		generators, points := grid(t, r, []int64{1, -2, 5}, []int64{0, 3, 7, -4})
		b := basisOf(t, generators...)
		q := quotientOf(t, b)
		require.Equal(t, len(points), q.Dimension())
		for _, p := range points {
			for _, g := range generators {
				require.Zero(t, g.Eval(p))
			}
		}
		rapid.Check(t, func(t *rapid.T) {
			numerator := drawPolynomial(t, r, "numerator", 6, 4)
			denominator := drawPolynomial(t, r, "denominator", 6, 4)
			var want prime.Element
			zeros := 0
			chi := []prime.Element{f.One()}
			for _, p := range points {
				v, ok := f.Div(numerator.Eval(p), denominator.Eval(p))
				want = f.Add(want, v)
				if !ok {
					zeros++
				}
				// chi (x - N(p))
				next := append([]prime.Element{0}, chi...)
				f.SubScaledRow(next[:len(chi)], numerator.Eval(p), chi)
				chi = next
			}
			got, err := q.TraceQuotient(background, numerator, denominator)
			if zeros > 0 {
				var divisor *groebner.ZeroDivisorError
				require.ErrorAs(t, err, &divisor)
				require.Equal(t, len(points), divisor.Dimension)
				require.Equal(t, len(points)-zeros, divisor.Rank)
				return
			}
			require.NoError(t, err)
			require.Equal(t, want, got)
			x, err := q.Coordinates(background, numerator)
			require.NoError(t, err)
			have, err := q.CharacteristicPolynomial(background, x)
			require.NoError(t, err)
			require.Equal(t, chi, have)
		})
	}
}

func TestZeroDivisors(t *testing.T) {
	f := prime.TableField(0)
	r := newRing(t, f, groebner.GrevLex, "x", "y", "z")
	generators, points := grid(t, r, []int64{1, -2, 5}, []int64{0, 3})
	q := quotientOf(t, basisOf(t, generators...))
	divisor := sub(polynomial(t, r, "x+y-z"), r.Constant(f.FromInt64(5))) // zero at two points
	_, err := q.TraceQuotient(background, divisor, divisor)
	var failure *groebner.ZeroDivisorError
	require.ErrorAs(t, err, &failure)
	require.Equal(t, len(points)-2, failure.Rank)
	require.ErrorContains(t, err, "rank 4 of 6")
	_, err = q.TraceQuotient(background, r.One(), r.Zero())
	require.ErrorAs(t, err, &failure)
	require.Zero(t, failure.Rank)
}

// Multiplicities count: x^2 (x - 3) = 0, y = x + 1 has the zero x = 0 twice.
func TestMultiplicities(t *testing.T) {
	f := smallField(t)
	for _, o := range orders {
		r := newRing(t, f, o, "x", "y")
		q := quotientOf(t, basisOf(t, polynomials(t, r, "x^3-3*x^2", "y-x-1")...))
		require.Equal(t, 3, q.Dimension())
		got, err := q.TraceQuotient(background, polynomial(t, r, "x+2"), polynomial(t, r, "y"))
		require.NoError(t, err)
		require.Equal(t, rational(t, f, "21/4"), got) // 2 + 2 + 5/4
		x, err := q.Coordinates(background, r.Variable(1))
		require.NoError(t, err)
		chi, err := q.CharacteristicPolynomial(background, x)
		require.NoError(t, err)
		require.Equal(t, integers(f, -4, 9, -6, 1), chi) // (y-1)^2 (y-4)
	}
}

// In lexicographic order and general position the basis is x_i - g_i(x_n), g(x_n)
// (shape lemma), so the characteristic polynomial of x_n is g.
func TestShapePosition(t *testing.T) {
	f := prime.TableField(0)
	h := constraints(t, f, groebner.Lex, drawInvariants(t, f, 6, "shape"))
	b := basisOf(t, h...)
	r := h[0].Ring()
	require.Len(t, b.Elements, 3)
	last := b.Elements[0]
	q := quotientOf(t, b)
	x, err := q.Coordinates(background, r.Variable(2))
	require.NoError(t, err)
	chi, err := q.CharacteristicPolynomial(background, x)
	require.NoError(t, err)
	require.Equal(t, 6, last.Degree())
	for e, c := range chi {
		m, err := r.Monomial(0, 0, e)
		require.NoError(t, err)
		require.Equal(t, last.Coefficient(m), c)
	}
	for i, p := range b.Elements[1:] {
		_, lead := p.Lead()
		_, want := r.Variable(1 - i).Lead()
		require.Equal(t, want, lead)
	}
}

func TestStandardMonomials(t *testing.T) {
	for _, o := range orders {
		r := newRing(t, smallField(t), o, "x", "y", "z")
		b := basisOf(t, polynomials(t, r, "x^3-y*z", "y^3-x-z+1", "z^2*x-y+2")...)
		q := quotientOf(t, b)
		require.Equal(t, standardMonomials(t, b), q.Monomials(), o)
		require.Positive(t, q.Dimension())
	}
}

// standardMonomials lists them, ascending, by going through the whole box below the
// powers of single variables among the leading monomials.
func standardMonomials(t require.TestingT, b *groebner.Basis) []groebner.Monomial {
	r := b.Elements[0].Ring()
	sides := make([]int, r.Variables())
	for _, p := range b.Elements {
		_, lead := p.Lead()
		for k, e := range r.Exponents(lead) {
			if e == r.Degree(lead) && e > 0 {
				sides[k] = e
			}
		}
	}
	var out []groebner.Monomial
	exponents := make([]int, r.Variables())
	for {
		m, err := r.Monomial(exponents...)
		require.NoError(t, err)
		if isStandard(b, m) {
			out = append(out, m)
		}
		k := 0
		for ; k < len(exponents); k++ {
			if exponents[k]++; exponents[k] < sides[k] {
				break
			}
			exponents[k] = 0
		}
		if k == len(exponents) {
			break
		}
	}
	slices.SortFunc(out, r.Compare)
	return out
}

func TestQuotientRefusesOtherBases(t *testing.T) {
	r := newRing(t, smallField(t), groebner.GrevLex, "x", "y")
	for _, texts := range [][]string{
		{"y", "2*x-1"},           // not monic
		{"y^2-x", "x^3-x*y^2+1"}, // a tail not reduced
	} {
		_, err := groebner.ComputeQuotient(background, &groebner.Basis{Elements: polynomials(t, r, texts...)}, groebner.QuotientOptions{})
		var refusal *groebner.CheckError
		require.ErrorAs(t, err, &refusal)
	}
	_, err := groebner.ComputeQuotient(background, &groebner.Basis{Elements: polynomials(t, r, "x^2-y", "x*y")}, groebner.QuotientOptions{})
	var infinite *groebner.NotZeroDimensionalError
	require.ErrorAs(t, err, &infinite)
	require.Equal(t, "y", infinite.Variable)
	_, err = groebner.ComputeQuotient(background, &groebner.Basis{}, groebner.QuotientOptions{})
	require.ErrorIs(t, err, groebner.ErrNoGenerators)

	q := quotientOf(t, basisOf(t, polynomials(t, r, "x^2-2", "y-1")...))
	_, err = q.Coordinates(background, newRing(t, smallField(t), groebner.GrevLex, "x", "y").One())
	require.ErrorIs(t, err, groebner.ErrMixedRings)
	_, err = q.Coordinates(background, new(poly))
	require.ErrorIs(t, err, groebner.ErrMixedRings)
	require.Panics(t, func() { _, _ = q.Trace(background, nil) })
}
