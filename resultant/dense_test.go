package resultant

import (
	"context"
	"testing"

	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// The Hessenberg way against determinants det(x - A) at many x, for sparse
// matrices that break the subdiagonal into blocks.
func TestHessenbergAgainstDeterminants(t *testing.T) {
	f := prime.TableField(0)
	rapid.Check(t, func(r *rapid.T) {
		n := rapid.IntRange(1, 8).Draw(r, "n")
		a := make([][]prime.Element, n)
		for i := range a {
			a[i] = make([]prime.Element, n)
			for j := range a[i] {
				a[i][j] = f.FromInt64(rapid.SampledFrom([]int64{0, 0, 0, 1, -1, 2, 7}).Draw(r, "entry"))
			}
		}
		want := make([]prime.Element, n+2)
		for x := range want {
			m := make([][]prime.Element, n)
			for i := range m {
				m[i] = make([]prime.Element, n)
				for j := range m[i] {
					m[i][j] = f.Neg(a[i][j])
				}
				m[i][i] = f.Add(m[i][i], f.FromInt64(int64(x)))
			}
			want[x] = gauss(f, m)
		}
		c, err := hessenberg(context.Background(), f, a)
		require.NoError(r, err)
		require.Len(r, c, n+1)
		require.Equal(r, f.One(), c[n])
		for x := range want {
			var v prime.Element
			for i := n; i >= 0; i-- {
				v = f.Add(f.Mul(v, f.FromInt64(int64(x))), c[i])
			}
			require.Equal(r, want[x], v)
		}
	})
}
