package amplitude

import (
	"context"
	"fmt"
	"testing"

	"eliminant/checks/amplitude/series"
	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
)

// A route of its own to the same numbers: continuation of all solutions from a
// solved start point, massless and massive, and at the degenerate points that
// stop elimination.
func TestSeriesAgrees(t *testing.T) {
	for n := 4; n <= 7; n++ {
		for _, massive := range []bool{false, true} {
			src := prime.NewSource("series", fmt.Sprint(n, massive))
			p := randomReduced(prime.TableField(n), n, massive, src)
			alpha := identityOrder(n)
			shuffle(src, alpha)
			beta := append([]int{}, alpha...)
			beta[1], beta[2] = beta[2], beta[1]
			compareRoutes(t, Request{Theory: BiAdjoint, Orderings: [][]int{alpha, beta}}, p, Recursion, Series)
			compareRoutes(t, Request{Theory: Cubic, Orderings: [][]int{alpha}}, p, Recursion, Series)
		}
	}
	r := Request{Theory: Cubic, Orderings: [][]int{identityOrder(6)}}
	p := planarPoint(t, 6, 1, 1, 1, 1, 1, 1, 1, 1, 1)
	v, err := ComputeValue(context.Background(), r, p, Series, Options{Workers: 2})
	require.NoError(t, err)
	require.Equal(t, "14", v.Value.RatString())
	_, err = NewKernel(Request{Theory: Cubic, Orderings: r.Orderings, Braces: true}, Series)
	var refused *RequestError
	require.ErrorAs(t, err, &refused)
	// a prime without the start point's nodes is refused, never guessed with
	f, err := prime.NewField(10007)
	require.NoError(t, err)
	k, err := NewKernel(r, Series)
	require.NoError(t, err)
	_, err = k(context.Background(), randomReduced(f, 6, false, prime.NewSource("series")))
	var wrong *series.PrimeError
	require.ErrorAs(t, err, &wrong)
}
