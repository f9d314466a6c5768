package amplitude

import (
	"context"
	"fmt"
	"testing"

	"eliminant/rational/kinematics"
	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
)

// smallPoint draws planar invariants below 100, none of whose sums vanish.
func smallPoint(t testing.TB, n int) *kinematics.Invariants {
	src := prime.NewSource("bench", fmt.Sprint(n))
	for {
		poles := make([]int64, n*(n-3)/2)
		for i := range poles {
			poles[i] = src.Between(1, 99)
		}
		p := planarPoint(t, n, poles...)
		if checkRegular(Request{Theory: Cubic, Orderings: [][]int{identityOrder(n)}}, p, Elimination) == nil {
			return p
		}
	}
}

func benchmarkValue(b *testing.B, route Route, n, workers int) {
	p := smallPoint(b, n)
	r := Request{Theory: BiAdjoint, Orderings: [][]int{identityOrder(n), identityOrder(n)}}
	b.ReportAllocs()
	for b.Loop() {
		_, err := ComputeValue(context.Background(), r, p, route, Options{Workers: workers})
		require.NoError(b, err)
	}
}

// BenchmarkValue measures BS(1..n|1..n) over Q at a point with two-digit
// planar invariants, one worker.
func BenchmarkValue(b *testing.B) {
	for _, c := range []struct {
		route Route
		legs  []int
	}{
		{Recursion, []int{6, 8, 10, 12}},
		{Diagrams, []int{6, 8, 9}},
		{Groebner, []int{5, 6, 7}},
		{Series, []int{6, 7, 8, 9, 10}},
		{Elimination, []int{6, 7, 8, 9, 10}},
	} {
		for _, n := range c.legs {
			b.Run(fmt.Sprintf("%s/n=%d", c.route, n), func(b *testing.B) { benchmarkValue(b, c.route, n, 1) })
		}
	}
}

// BenchmarkWorkers compares one worker with two where there are primes enough
// to share: invariants of twelve digits, 16 primes or so.
func BenchmarkWorkers(b *testing.B) {
	src := prime.NewSource("workers")
	poles := make([]int64, 9*6/2)
	for i := range poles {
		poles[i] = src.Between(1, 1e12)
	}
	p := planarPoint(b, 9, poles...)
	r := Request{Theory: BiAdjoint, Orderings: [][]int{identityOrder(9), identityOrder(9)}}
	for _, w := range []int{1, 2} {
		b.Run(fmt.Sprintf("workers=%d", w), func(b *testing.B) {
			var primes int
			for b.Loop() {
				v, err := ComputeValue(context.Background(), r, p, Elimination, Options{Workers: w})
				require.NoError(b, err)
				primes = len(v.Record.Primes)
			}
			b.ReportMetric(float64(primes), "primes")
		})
	}
}
