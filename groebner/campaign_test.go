package groebner_test

import (
	"flag"
	"strconv"
	"testing"

	"github.com/stretchr/testify/require"

	"eliminant/groebner"
	"eliminant/rational/prime"
)

var campaign = flag.Bool("campaign", false, "run the long campaign")

// drawDense returns a polynomial of the given degree; each of its monomials has a
// random coefficient, zero with the given chance in percent.
func drawDense(tb testing.TB, s *prime.Source, r *groebner.Ring, degree int, sparse uint64) *poly {
	f := r.Field()
	var coefficients []prime.Element
	var monomials []groebner.Monomial
	exponents := make([]int, r.Variables())
	var fill func(k, left int)
	fill = func(k, left int) {
		if k == len(exponents) {
			if s.Below(100) < sparse {
				return
			}
			m, err := r.Monomial(exponents...)
			require.NoError(tb, err)
			coefficients, monomials = append(coefficients, f.FromUint64(s.Below(f.Modulus()))), append(monomials, m)
			return
		}
		for e := range left + 1 {
			exponents[k] = e
			fill(k+1, left-e)
		}
		exponents[k] = 0
	}
	fill(0, degree)
	return r.FromTerms(coefficients, monomials)
}

// countPoints counts the common zeros with coordinates in GF(p), by trying all.
func countPoints(r *groebner.Ring, generators []*poly) int {
	f := r.Field()
	values := make([]prime.Element, r.Variables())
	var count int
	var try func(k int)
	try = func(k int) {
		if k == len(values) {
			for _, g := range generators {
				if g.Eval(values) != 0 {
					return
				}
			}
			count++
			return
		}
		for v := range f.Modulus() {
			values[k] = f.FromUint64(v)
			try(k + 1)
		}
	}
	try(0)
	return count
}

// requireSound verifies everything that can be verified about a system.
func requireSound(t *testing.T, s *prime.Source, generators []*poly) *groebner.Quotient {
	r := generators[0].Ring()
	f := r.Field()
	b, err := groebner.ComputeBasis(background, generators, groebner.Options{Cofactors: true})
	require.NoError(t, err)
	require.NoError(t, groebner.CheckBasis(background, generators, b), "%v", generators)

	shuffled := append([]*poly{}, generators...)
	for i := range shuffled {
		j := int(s.Below(uint64(i + 1)))
		shuffled[i], shuffled[j] = shuffled[j], shuffled[i]
	}
	again, err := groebner.ComputeBasis(background, shuffled, groebner.Options{Strategy: groebner.Normal})
	require.NoError(t, err)
	requireElements(t, b.Elements, again)

	if !b.IsZeroDimensional() {
		return nil
	}
	q := quotientOf(t, b)
	if b.Elements[0].IsConstant() {
		require.Zero(t, q.Dimension())
		return q
	}
	require.Equal(t, standardMonomials(t, b), q.Monomials())
	// the characteristic polynomial of an element has degree D, its coefficient of
	// x^{D-1} is minus the trace, and the element is a root of it
	x, err := q.Coordinates(background, drawDense(t, s, r, 2, 0))
	require.NoError(t, err)
	chi, err := q.CharacteristicPolynomial(background, x)
	require.NoError(t, err)
	require.Len(t, chi, q.Dimension()+1)
	require.Equal(t, f.One(), chi[q.Dimension()])
	trace, err := q.Trace(background, x)
	require.NoError(t, err)
	require.Equal(t, f.Neg(trace), chi[q.Dimension()-1])
	one, err := q.Coordinates(background, r.One())
	require.NoError(t, err)
	value := make([]prime.Element, q.Dimension())
	for i := q.Dimension(); i >= 0; i-- {
		value, err = q.Product(background, value, x)
		require.NoError(t, err)
		f.AddScaledRow(value, chi[i], one)
	}
	require.Equal(t, make([]prime.Element, q.Dimension()), value, "Cayley-Hamilton")
	// multiplying and dividing by it
	n, err := q.Coordinates(background, drawDense(t, s, r, 2, 0))
	require.NoError(t, err)
	product, err := q.Product(background, n, x)
	require.NoError(t, err)
	quotient, err := q.Divide(background, product, x)
	if chi[0] != 0 {
		require.NoError(t, err)
		require.Equal(t, n, quotient)
	} else {
		var divisor *groebner.ZeroDivisorError
		require.ErrorAs(t, err, &divisor)
	}
	return q
}

// Random small systems of two kinds. Complete intersections over a large field
// have as many zeros as the product of their degrees (Bezout), nearly always.
// Systems over a small field together with x_k^p - x_k have exactly the points
// with coordinates in the field as simple zeros, which are counted one by one.
func TestRandomSystems(t *testing.T) {
	runs := 500
	if *campaign {
		runs = 10_000
	}
	small := []uint64{3, 5, 7}
	var generic, empty, points int
	for run := range runs {
		s := prime.NewSource("random systems", strconv.Itoa(run))
		variables := int(s.Between(1, 3))
		o := orders[s.Below(3)]
		if run%2 == 0 {
			r := newRing(t, prime.TableField(int(s.Below(3))), o, variableNames(variables)...)
			var generators []*poly
			bezout, most := 1, int64([]int{8, 4, 2}[variables-1])
			for range variables {
				degree := int(s.Between(1, most))
				bezout *= degree
				generators = append(generators, drawDense(t, s, r, degree, 0))
			}
			q := requireSound(t, s, generators)
			if q != nil && q.Dimension() == bezout {
				generic++
			}
			continue
		}
		f, err := prime.NewField(small[s.Below(3)])
		require.NoError(t, err)
		if variables == 3 {
			f, err = prime.NewField(3)
			require.NoError(t, err)
		}
		r := newRing(t, f, o, variableNames(variables)...)
		var generators []*poly
		for range s.Between(1, int64(variables)) {
			generators = append(generators, drawDense(t, s, r, int(s.Between(1, 3)), s.Below(80)))
		}
		for k := range variables {
			x := r.Variable(k)
			generators = append(generators, sub(new(poly).Pow(x, int(f.Modulus())), x))
		}
		count := countPoints(r, generators)
		q := requireSound(t, s, generators)
		require.NotNil(t, q)
		require.Equal(t, count, q.Dimension(), "%v", generators)
		points += count
		if count == 0 {
			empty++
		}
	}
	// the draws must exercise what they are meant to
	require.Equal(t, runs/2, generic, "a failure has probability of the order of 1/p")
	require.Greater(t, empty, runs/20)
	require.Greater(t, points, runs)
}
