package prime

import (
	"math/big"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// The largest elements of the largest and of small fields, at every length
// around the correction interval, carried from row to row: against Field.Dot
// and math/big.
func TestWideSumsDoNotOverflow(t *testing.T) {
	for _, f := range []*Field{TableField(0), newField(3), newField(1<<61 - 1), newField(1000003)} {
		top := Element(f.p - 1)
		for n := range 3*wideBlock + 2 {
			x := make([]Element, n)
			at := make([]int32, n)
			for i := range x {
				x[i] = top
				at[i] = int32(n - 1 - i)
			}
			w := Wide{f.p - 1, 1<<64 - 1}
			start := f.ReduceWide(w)
			for range 3 {
				w = f.DotWide(w, x, x)
				require.Less(t, w.Hi, f.p)
				w = f.GatherDotWide(w, x, at, x)
				require.Less(t, w.Hi, f.p)
			}
			want := start
			for range 6 {
				want = f.Add(want, f.Dot(x, x))
			}
			require.Equal(t, want, f.ReduceWide(w))
		}
	}
}

func TestWideDotAgainstBig(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		f := TableField(rapid.IntRange(0, 3).Draw(r, "field"))
		n := rapid.IntRange(0, 40).Draw(r, "length")
		x := make([]Element, n)
		y := make([]Element, n+3)
		at := make([]int32, n)
		for i := range y {
			y[i] = f.FromUint64(rapid.Uint64().Draw(r, "y"))
		}
		sum := new(big.Int)
		for i := range x {
			x[i] = f.FromUint64(rapid.Uint64().Draw(r, "x"))
			at[i] = int32(rapid.IntRange(0, n+2).Draw(r, "at"))
			var a, b big.Int
			sum.Add(sum, a.Mul(f.Int(&a, x[i]), f.Int(&b, y[at[i]])))
		}
		require.Equal(r, f.FromInt(sum), f.ReduceWide(f.GatherDotWide(Wide{}, x, at, y)))
		require.Equal(r, f.Dot(x, y[:n]), f.ReduceWide(f.DotWide(Wide{}, x, y)))
	})
}
