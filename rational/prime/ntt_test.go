package prime

import (
	"slices"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

func TestTransform(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := TableField(rapid.IntRange(0, 5).Draw(t, "field"))
		n := 1 << rapid.IntRange(0, 8).Draw(t, "log")
		tr, err := NewTransform(f, n)
		require.NoError(t, err)
		src := NewSource(rapid.String().Draw(t, "seed"))
		x, y := make([]Element, n), make([]Element, n)
		for i := range x {
			x[i], y[i] = f.FromUint64(src.Uint64()), f.FromUint64(src.Uint64())
		}
		// values at all powers of a primitive root, as a set with multiplicity
		w, err := f.RootOfUnity(uint64(n))
		require.NoError(t, err)
		values := make([]Element, n)
		for i := range values {
			at := f.Exp(w, uint64(i))
			for j := n - 1; j >= 0; j-- {
				values[i] = f.Add(f.Mul(values[i], at), x[j])
			}
		}
		fx := slices.Clone(x)
		tr.Forward(fx)
		require.ElementsMatch(t, values, fx)
		// cyclic convolution
		fy := slices.Clone(y)
		tr.Forward(fy)
		f.MulRow(fy, fy, fx)
		tr.Inverse(fy)
		want := make([]Element, n)
		for i := range x {
			for j := range y {
				k := (i + j) % n
				want[k] = f.Add(want[k], f.Mul(x[i], y[j]))
			}
		}
		require.Equal(t, want, fy)
		tr.Inverse(fx)
		require.Equal(t, x, fx)
	})
}

func TestRootsOfUnity(t *testing.T) {
	f := TableField(3)
	for _, order := range []uint64{1, 2, 3, 5, 7, 9, 16, 63, 315, 1 << 20, TableStep} {
		w, err := f.RootOfUnity(order)
		require.NoError(t, err)
		require.Equal(t, f.One(), f.Exp(w, order))
		for _, q := range []uint64{2, 3, 5, 7} {
			if order%q == 0 {
				require.NotEqual(t, f.One(), f.Exp(w, order/q), "order %d", order)
			}
		}
	}
	small := newField(10007)
	_, err := small.RootOfUnity(3)
	var e *OrderError
	require.ErrorAs(t, err, &e)
	require.Equal(t, OrderError{10007, 3}, *e)
	_, err = NewTransform(small, 4)
	require.ErrorAs(t, err, &e)
	_, err = NewTransform(f, 12)
	require.ErrorAs(t, err, &e)
	require.Equal(t, 2, TransformLength(small))
	require.GreaterOrEqual(t, TransformLength(f), 1<<20)
}

func BenchmarkTransform(b *testing.B) {
	tr, err := NewTransform(TableField(0), 4096)
	require.NoError(b, err)
	x := make([]Element, 4096)
	for i := range x {
		x[i] = Element(i)
	}
	for b.Loop() {
		tr.Forward(x)
	}
}
