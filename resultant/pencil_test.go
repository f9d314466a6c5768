package resultant

import (
	"fmt"
	"testing"

	"eliminant/rational/prime"
)

// randomInvariants draws a symmetric matrix with zero diagonal and row sums.
func randomInvariants(f *prime.Field, n int, source *prime.Source) []prime.Element {
	s := make([]prime.Element, n*n)
	set := func(a, b int, x prime.Element) { s[a*n+b], s[b*n+a] = x, x }
	var total prime.Element
	for a := range n - 1 {
		for b := a + 1; b < n-1; b++ {
			if a == n-3 {
				continue
			}
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

func BenchmarkMultiply(b *testing.B) {
	for n := 7; n <= 11; n++ {
		b.Run(fmt.Sprintf("n=%d", n), func(b *testing.B) {
			f := prime.TableField(0)
			p, err := NewPencil(f, n, randomInvariants(f, n, prime.NewSource("bench")), nil)
			if err != nil {
				b.Fatal(err)
			}
			x := make([]prime.Element, p.Size())
			x[p.plan.top] = f.One()
			b.ReportAllocs()
			for b.Loop() {
				p.Multiply(x, x)
			}
		})
	}
}
