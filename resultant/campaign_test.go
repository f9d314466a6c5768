package resultant

import (
	"context"
	"flag"
	"fmt"
	"math/big"
	"testing"

	"eliminant/rational/prime"
	"eliminant/rational/scattering"

	"github.com/stretchr/testify/require"
)

var campaign = flag.Bool("campaign", false, "run the long campaign")

// integerData draws integer data of any size without vanishing channels.
func integerData(t *testing.T, n int, source *prime.Source) *scattering.Data {
	for {
		s := make([][]int64, n)
		for a := range s {
			s[a] = make([]int64, n)
		}
		var total int64
		for a := range n - 3 {
			for b := a + 1; b < n-1; b++ {
				x := source.Between(-40, 40)
				s[a][b], s[b][a] = x, x
				total += x
			}
		}
		s[n-3][n-2], s[n-2][n-3] = -total, -total
		for a := range n - 1 {
			var sum int64
			for b := range n - 1 {
				sum += s[a][b]
			}
			s[a][n-1], s[n-1][a] = -sum, -sum
		}
		var pairs []string
		for a := range n {
			for b := a + 1; b < n; b++ {
				pairs = append(pairs, fmt.Sprint(s[a][b]))
			}
		}
		if d := fromPairs(t, n, pairs...); len(d.Vanishing()) == 0 {
			return d
		}
	}
}

// Eliminants over Q against the minimal polynomial modulo a fresh prime: n = 8, and
// n = 9 in the campaign (some 150 primes); gauge independence for n = 8.
func TestLargerEliminants(t *testing.T) {
	last := 8
	if *campaign {
		last = 9
	}
	for n := 8; n <= last; n++ {
		source := prime.NewSource("larger", fmt.Sprint(n))
		d := integerData(t, n, source)
		e, err := ComputeEliminant(context.Background(), d, 5, Options{Workers: 2})
		require.NoError(t, err)
		t.Logf("n = %d: %d primes, bound of %d bits", n, len(e.Record.Primes), e.Bound.BitLen())
		f := source.Field()
		p := newPencil(t, f, n, reduce(t, d, f), hiddenOrder(n, 5))
		chi := representation(t, p).Chi.Coeffs()
		largest := new(big.Int)
		for i, x := range e.Monic {
			v, ok := f.FromRat(x)
			require.True(t, ok)
			require.Equal(t, chi[i], v)
			y := new(big.Rat).Mul(x, new(big.Rat).SetInt(e.Lead))
			require.True(t, y.IsInt())
			if y.Num().CmpAbs(largest) > 0 {
				largest.Set(y.Num())
			}
		}
		require.LessOrEqual(t, largest.CmpAbs(e.Bound), 0)
		t.Logf("largest coefficient of %d bits", largest.BitLen())
	}
	n := 8
	f := prime.TableField(0)
	s := randomInvariants(f, n, prime.NewSource("gauge"))
	alpha := []int{1, 2, 3, 4, 5, 6, 7, 8}
	beta := []int{1, 3, 2, 4, 6, 5, 7, 8}
	a := newQuotient(t, f, n, s, nil).biadjoint(alpha, beta)
	b := newQuotient(t, f, n, s, []int{4, 8, 6, 1, 3, 2, 5, 7}).biadjoint(alpha, beta)
	require.Equal(t, a, b)
	require.NotZero(t, a)
}
