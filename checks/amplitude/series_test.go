package amplitude

import (
	"context"
	"fmt"
	"testing"

	"eliminant/checks/amplitude/series"
	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
)

// A fifth way to the same numbers: continuation of all solutions from a solved
// start point, massless and massive, and at the degenerate points that stop
// elimination.
func TestSeriesAgrees(t *testing.T) {
	for n := 4; n <= 7; n++ {
		for _, massive := range []bool{false, true} {
			src := prime.NewSource("series", fmt.Sprint(n, massive))
			f := prime.TableField(n)
			p := randomReduced(f, n, massive, src)
			alpha, beta := identityOrder(n), identityOrder(n)
			shuffle(src, alpha)
			copy(beta, alpha)
			beta[1], beta[2] = beta[2], beta[1]
			k, err := NewKernel(Request{Theory: BiAdjoint, Orderings: [][]int{alpha, beta}}, Recursion)
			require.NoError(t, err)
			want, err := k(context.Background(), p)
			require.NoError(t, err)
			require.Equal(t, want, bySeries(t, f, shifted(p, alpha), alpha, beta), "n = %d", n)
		}
	}
	ones := make([]int64, 6*3/2)
	for i := range ones {
		ones[i] = 1
	}
	f := prime.TableField(0)
	p, err := planarPoint(t, 6, ones...).Reduce(f)
	require.NoError(t, err)
	o := identityOrder(6)
	require.Equal(t, f.FromInt64(-14), bySeries(t, f, shifted(p, o), o, o))
}

// bySeries computes m(alpha|beta) from the matrix in the labels of alpha.
func bySeries(t *testing.T, f *prime.Field, s []prime.Element, alpha, beta []int) prime.Element {
	n := len(alpha)
	second := relative(alpha, beta)
	for i := range second {
		second[i]++
	}
	problem, err := series.BiAdjoint(identityOrder(n), second)
	require.NoError(t, err)
	v, err := series.ComputeSum(context.Background(), f, s, problem, series.Options{})
	require.NoError(t, err)
	return v
}
