package groebner_test

import (
	"context"
	"fmt"
	"math/big"
	"math/bits"
	"strconv"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"eliminant/groebner"
	"eliminant/rational/prime"
)

var background = context.Background()

// smallField is GF(32003), the field most published computations use.
func smallField(tb testing.TB) *prime.Field {
	f, err := prime.NewField(32003)
	require.NoError(tb, err)
	return f
}

func newRing(tb testing.TB, f *prime.Field, o groebner.Order, names ...string) *groebner.Ring {
	r, err := groebner.NewRing(f, o, names...)
	require.NoError(tb, err)
	return r
}

// polynomial reads sums of terms like "3/2*x^2*y" with integer exponents.
func polynomial(tb testing.TB, r *groebner.Ring, text string) *groebner.Polynomial {
	f := r.Field()
	sum := r.Zero()
	text = strings.ReplaceAll(strings.ReplaceAll(text, " ", ""), "-", "+-")
	for _, part := range strings.Split(text, "+") {
		if part == "" {
			continue
		}
		c := f.One()
		if rest, negative := strings.CutPrefix(part, "-"); negative {
			c, part = f.Neg(c), rest
		}
		exponents := make([]int, r.Variables())
		for _, factor := range strings.Split(part, "*") {
			base, power, found := strings.Cut(factor, "^")
			e := 1
			if found {
				var err error
				e, err = strconv.Atoi(power)
				require.NoError(tb, err, text)
			}
			if i, ok := r.Index(base); ok {
				exponents[i] += e
				continue
			}
			q, ok := new(big.Rat).SetString(base)
			require.True(tb, ok, "%q in %q", base, text)
			k, ok := f.FromRat(q)
			require.True(tb, ok)
			c = f.Mul(c, f.Exp(k, uint64(e)))
		}
		m, err := r.Monomial(exponents...)
		require.NoError(tb, err)
		sum.Add(sum, r.Term(c, m))
	}
	return sum
}

func polynomials(tb testing.TB, r *groebner.Ring, texts ...string) []*groebner.Polynomial {
	ps := make([]*groebner.Polynomial, len(texts))
	for i, s := range texts {
		ps[i] = polynomial(tb, r, s)
	}
	return ps
}

// integers returns the residues of the values.
func integers(f *prime.Field, values ...int64) []prime.Element {
	out := make([]prime.Element, len(values))
	for i, v := range values {
		out[i] = f.FromInt64(v)
	}
	return out
}

// basisOf computes a basis with cofactors and lets CheckBasis pass it.
func basisOf(tb testing.TB, generators ...*groebner.Polynomial) *groebner.Basis {
	b, err := groebner.ComputeBasis(background, generators, groebner.Options{Cofactors: true})
	require.NoError(tb, err)
	require.NoError(tb, groebner.CheckBasis(background, generators, b))
	return b
}

func quotientOf(tb testing.TB, b *groebner.Basis) *groebner.Quotient {
	q, err := groebner.ComputeQuotient(background, b, groebner.QuotientOptions{})
	require.NoError(tb, err)
	return q
}

// katsura returns the system of S. Katsura in u_0..u_n: with u_{-l} = u_l and
// u_l = 0 for |l| > n, u_m = sum_l u_l u_{m-l} for m < n, and 1 = sum_l u_l.
func katsura(tb testing.TB, f *prime.Field, n int) []*groebner.Polynomial {
	names := make([]string, n+1)
	for i := range names {
		names[i] = fmt.Sprintf("u%d", i)
	}
	r := newRing(tb, f, groebner.GrevLex, names...)
	u := func(l int) *groebner.Polynomial {
		l = max(l, -l)
		if l > n {
			return r.Zero()
		}
		return r.Variable(l)
	}
	var out []*groebner.Polynomial
	for m := range n {
		p := new(groebner.Polynomial).Neg(u(m))
		for l := -n; l <= n; l++ {
			p.Add(p, new(groebner.Polynomial).Mul(u(l), u(m-l)))
		}
		out = append(out, p)
	}
	p := new(groebner.Polynomial).Neg(r.One())
	for l := -n; l <= n; l++ {
		p.Add(p, u(l))
	}
	return append(out, p)
}

// cyclic returns the cyclic n-roots system: the sums of the n products of d
// consecutive variables, d < n, and the product of all minus 1.
func cyclic(tb testing.TB, f *prime.Field, n int) []*groebner.Polynomial {
	names := make([]string, n)
	for i := range names {
		names[i] = fmt.Sprintf("x%d", i)
	}
	r := newRing(tb, f, groebner.GrevLex, names...)
	product := func(first, count int) *groebner.Polynomial {
		p := r.One()
		for i := range count {
			p.Mul(p, r.Variable((first+i)%n))
		}
		return p
	}
	var out []*groebner.Polynomial
	for d := 1; d < n; d++ {
		p := r.Zero()
		for i := range n {
			p.Add(p, product(i, d))
		}
		out = append(out, p)
	}
	return append(out, product(0, n).Sub(product(0, n), r.One()))
}

// constraints returns the polynomials h_1..h_{n-3} of the scattering equations in
// the gauge z_1 = infinity, z_2 = 1, z_n = 0, as in L. Dolan, P. Goddard,
// arXiv:1402.7374:
//
//	h_m = sum over U in {2..n-1}, |U| = m, of s_{1U} z_U,
//
// s[a-1][b-1] being s_ab and s_{1U} the sum of s over the pairs in {1} and U.
func constraints(tb testing.TB, f *prime.Field, o groebner.Order, s [][]prime.Element) []*groebner.Polynomial {
	n := len(s)
	names := make([]string, 0, n-3)
	for a := 3; a < n; a++ {
		names = append(names, fmt.Sprintf("z%d", a))
	}
	r := newRing(tb, f, o, names...)
	out := make([]*groebner.Polynomial, n-3)
	for i := range out {
		out[i] = r.Zero()
	}
	// bit a-1 of a set stands for leg a
	for u := uint(1); u < 1<<(n-1); u++ {
		m := bits.OnesCount(u)
		if u&1 == 1 || m > n-3 {
			continue
		}
		var c prime.Element
		for a := range n {
			for b := range a {
				if (u|1)>>a&1 == 1 && (u|1)>>b&1 == 1 {
					c = f.Add(c, s[a][b])
				}
			}
		}
		exponents := make([]int, n-3)
		for a := 3; a < n; a++ {
			exponents[a-3] = int(u >> (a - 1) & 1)
		}
		monomial, err := r.Monomial(exponents...)
		require.NoError(tb, err)
		out[m-1].Add(out[m-1], r.Term(c, monomial))
	}
	return out
}

// invariants returns the symmetric matrix with zero row sums whose entries s_ab
// for a < b < n are the given values, row by row, but for a = n-2, b = n-1, which
// the row sums fix.
func invariants(tb testing.TB, f *prime.Field, n int, values []prime.Element) [][]prime.Element {
	s := make([][]prime.Element, n)
	for a := range s {
		s[a] = make([]prime.Element, n)
	}
	set := func(a, b int, v prime.Element) { s[a][b], s[b][a] = v, v }
	require.Len(tb, values, (n-1)*(n-2)/2-1)
	var total prime.Element
	for a := range n - 3 {
		for b := a + 1; b < n-1; b++ {
			set(a, b, values[0])
			total = f.Add(total, values[0])
			values = values[1:]
		}
	}
	set(n-3, n-2, f.Neg(total))
	for a := range n - 1 {
		var sum prime.Element
		for b := range n - 1 {
			sum = f.Add(sum, s[a][b])
		}
		set(a, n-1, f.Neg(sum))
	}
	return s
}

// drawInvariants returns a generic matrix of invariants of n legs.
func drawInvariants(tb testing.TB, f *prime.Field, n int, seed string) [][]prime.Element {
	source := prime.NewSource("invariants", seed, strconv.Itoa(n))
	values := make([]prime.Element, (n-1)*(n-2)/2-1)
	for i := range values {
		values[i] = f.FromUint64(source.Below(f.Modulus()))
	}
	return invariants(tb, f, n, values)
}
