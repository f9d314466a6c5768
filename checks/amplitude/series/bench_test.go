package series

import (
	"context"
	"fmt"
	"testing"

	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
)

func benchmark(b *testing.B, f *prime.Field, s []prime.Element, q *Problem, err error) {
	require.NoError(b, err)
	b.ReportAllocs()
	for b.Loop() {
		if _, err := ComputeSum(context.Background(), f, s, q, Options{}); err != nil {
			b.Fatal(err)
		}
	}
}

// The cost per prime on one core.
func BenchmarkComputeSum(b *testing.B) {
	f := prime.TableField(0)
	for n := 6; n <= 10; n++ {
		b.Run(fmt.Sprintf("BS/n=%d", n), func(b *testing.B) {
			s := randomInvariants(f, n, prime.NewSource("benchmark"))
			q, err := BiAdjoint(identity(n), identity(n))
			benchmark(b, f, s, q, err)
		})
	}
	for n := 6; n <= 10; n++ {
		b.Run(fmt.Sprintf("YM/n=%d", n), func(b *testing.B) {
			p := gram(f, n, prime.NewSource("benchmark"))
			q, err := YangMills(identity(n), p.products())
			benchmark(b, f, p.invariants(), q, err)
		})
	}
	for n := 5; n <= 8; n++ {
		b.Run(fmt.Sprintf("GR/n=%d", n), func(b *testing.B) {
			p := gram(f, n, prime.NewSource("benchmark"))
			q, err := Gravity(n, p.products())
			benchmark(b, f, p.invariants(), q, err)
		})
	}
}
