package resultant

import (
	"math/big"
	"testing"

	"eliminant/rational/prime"
	"eliminant/rational/scattering"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// fromPairs returns data from s_ab in the order 12, 13, .., 23, ...
func fromPairs(t testing.TB, n int, pairs ...string) *scattering.Data {
	s := make([][]*big.Rat, n)
	for a := range s {
		s[a] = make([]*big.Rat, n)
		s[a][a] = new(big.Rat)
	}
	k := 0
	for a := range n {
		for b := a + 1; b < n; b++ {
			x, ok := new(big.Rat).SetString(pairs[k])
			require.True(t, ok)
			s[a][b], s[b][a] = x, x
			k++
		}
	}
	d, err := scattering.New(s)
	require.NoError(t, err)
	return d
}

// planar returns data from the planar invariants X13, X14, .., X24, ..:
// s_ab = X_{a,b+1} + X_{a+1,b} - X_ab - X_{a+1,b+1}.
func planar(t testing.TB, n int, poles ...int64) *scattering.Data {
	x := make([][]int64, n+1)
	for i := range x {
		x[i] = make([]int64, n+1)
	}
	k := 0
	for i := 1; i <= n; i++ {
		for j := i + 2; j <= n; j++ {
			if i != 1 || j != n {
				x[i][j], x[j][i] = poles[k], poles[k]
				k++
			}
		}
	}
	require.Len(t, poles, k)
	next := func(i int) int { return i%n + 1 }
	var pairs []string
	for a := 1; a <= n; a++ {
		for b := a + 1; b <= n; b++ {
			v := x[a][next(b)] + x[next(a)][b] - x[a][b] - x[next(a)][next(b)]
			pairs = append(pairs, big.NewInt(v).String())
		}
	}
	return fromPairs(t, n, pairs...)
}

// spinors returns the data s_ij = <ij>[ij] of four-dimensional momenta
// lambda lambda-tilde.
func spinors(t testing.TB, l, lt []string) *scattering.Data {
	n := len(l) / 2
	rat := func(s string) *big.Rat {
		x, ok := new(big.Rat).SetString(s)
		require.True(t, ok)
		return x
	}
	bracket := func(s []string, i, j int) *big.Rat {
		x := new(big.Rat).Mul(rat(s[2*i]), rat(s[2*j+1]))
		return x.Sub(x, new(big.Rat).Mul(rat(s[2*i+1]), rat(s[2*j])))
	}
	var pairs []string
	for i := range n {
		for j := i + 1; j < n; j++ {
			x := bracket(l, i, j)
			pairs = append(pairs, x.Mul(x, bracket(lt, i, j)).RatString())
		}
	}
	return fromPairs(t, n, pairs...)
}

// Points K5, K6, K7 (four-dimensional) and X4, X5, X6 (any dimension).
func k5(t testing.TB) *scattering.Data {
	return spinors(t, []string{"1", "0", "0", "1", "1", "1", "1", "2", "1", "-1"},
		[]string{"1", "2", "3", "-1", "2", "5", "-8/3", "-11/3", "-1/3", "-10/3"})
}

func k6(t testing.TB) *scattering.Data {
	return spinors(t, []string{"1", "0", "0", "1", "1", "1", "1", "2", "1", "-1", "2", "1"},
		[]string{"1", "2", "3", "-1", "2", "5", "-1", "4", "4/3", "13/3", "-5/3", "-23/3"})
}

func k7(t testing.TB) *scattering.Data {
	return spinors(t, []string{"1", "0", "0", "1", "1", "1", "1", "2", "1", "-1", "2", "1", "1", "3"},
		[]string{"1", "2", "3", "-1", "2", "5", "-1", "4", "2", "-3", "-11/5", "-9/5", "2/5", "-22/5"})
}

func x4(t testing.TB) *scattering.Data { return planar(t, 4, 2, 3) }
func x5(t testing.TB) *scattering.Data { return planar(t, 5, 2, 3, 5, 7, 11) }
func x6(t testing.TB) *scattering.Data { return planar(t, 6, 2, 3, 5, 7, 11, 13, 17, 31, 23) }

// startData returns the data whose solutions are the permutations of the m = n-3
// zeros of the Chebyshev polynomial T_m on [0, 1] (T. J. Stieltjes' equilibrium,
// G. Szego, Orthogonal Polynomials, theorem 6.7.1): s_ab = 4 for 3 <= a < b <= n-1,
// s_a2 = s_an = 1, s_a1 = -(4m-2), s_2n = -2m^2, s_12 = s_1n = 2m^2 - m.
func startData(t testing.TB, n int) *scattering.Data {
	m := int64(n - 3)
	var pairs []string
	for a := 1; a <= n; a++ {
		for b := a + 1; b <= n; b++ {
			v := int64(4)
			switch {
			case a == 1 && (b == 2 || b == n):
				v = 2*m*m - m
			case a == 1:
				v = -(4*m - 2)
			case a == 2 && b == n:
				v = -2 * m * m
			case a == 2 || b == n:
				v = 1
			}
			pairs = append(pairs, big.NewInt(v).String())
		}
	}
	return fromPairs(t, n, pairs...)
}

// generic draws data without vanishing channels.
func generic(r *rapid.T, n int) *scattering.Data {
	entry := rapid.Int64Range(-50, 50)
	for {
		s := make([][]*big.Rat, n)
		for a := range s {
			s[a] = make([]*big.Rat, n)
			for b := range s[a] {
				s[a][b] = new(big.Rat)
			}
		}
		set := func(a, b int, x *big.Rat) { s[a][b], s[b][a] = x, new(big.Rat).Set(x) }
		total := new(big.Rat)
		for a := range n - 3 {
			for b := a + 1; b < n-1; b++ {
				x := big.NewRat(entry.Draw(r, "s"), 1)
				set(a, b, x)
				total.Add(total, x)
			}
		}
		set(n-3, n-2, total.Neg(total)) // pairs without leg n add up to zero
		for a := range n - 1 {
			sum := new(big.Rat)
			for b := range n - 1 {
				sum.Add(sum, s[a][b])
			}
			set(a, n-1, sum.Neg(sum))
		}
		d, err := scattering.New(s)
		if err != nil {
			r.Fatal(err)
		}
		if len(d.Vanishing()) == 0 {
			return d
		}
	}
}

// reduce returns the data modulo p.
func reduce(t require.TestingT, d *scattering.Data, f *prime.Field) []prime.Element {
	s, err := d.Reduce(f)
	require.NoError(t, err)
	return s
}

// randomInvariants draws a matrix of large residues.
func randomInvariants(f *prime.Field, n int, source *prime.Source) []prime.Element {
	s := make([]prime.Element, n*n)
	set := func(a, b int, x prime.Element) { s[a*n+b], s[b*n+a] = x, x }
	var total prime.Element
	for a := range n - 3 {
		for b := a + 1; b < n-1; b++ {
			x := f.FromUint64(source.Uint64())
			set(a, b, x)
			total = f.Add(total, x)
		}
	}
	set(n-3, n-2, f.Neg(total))
	for a := range n - 1 {
		var sum prime.Element
		for b := range n - 1 {
			sum = f.Add(sum, s[a*n+b])
		}
		set(a, n-1, f.Neg(sum))
	}
	return s
}

func newPencil(t require.TestingT, f *prime.Field, n int, s []prime.Element, order []int) *Pencil {
	p, err := NewPencil(f, n, s, order)
	require.NoError(t, err)
	return p
}
