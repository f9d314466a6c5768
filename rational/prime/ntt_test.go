package prime

import (
	"errors"
	"math/bits"
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

// transformFields have transforms of length 2^20 at least; 12289 and 7681 are
// small fields with transforms of length 2^12 and 2^9.
func transformFields() []*Field {
	return []*Field{TableField(0), TableField(3), newField(12289), newField(7681)}
}

func horner(f *Field, a []Element, x Element) Element {
	var z Element
	for i := len(a) - 1; i >= 0; i-- {
		z = f.Add(f.Mul(z, x), a[i])
	}
	return z
}

func TestTransformRoundTrip(t *testing.T) {
	s := NewSource("prime tests", "round trip")
	for _, f := range transformFields() {
		for n := 1; n <= min(1<<12, TransformLength(f)); n *= 2 {
			tr, err := NewTransform(f, n)
			require.NoError(t, err)
			for _, a := range [][]Element{randomRow(f, n, s), slices.Repeat([]Element{Element(f.p - 1)}, n)} {
				b := slices.Clone(a)
				tr.Forward(b)
				if n > 1 {
					require.NotEqual(t, a, b)
				}
				tr.Inverse(b)
				require.Equal(t, a, b)
				tr.Inverse(b)
				tr.Forward(b)
				require.Equal(t, a, b)
			}
		}
	}
}

// Entry i of the transform is the value at the power rev(i) of the root, rev
// being the reversal of the bits.
func TestForwardIsInBitReversedOrder(t *testing.T) {
	s := NewSource("prime tests", "evaluation")
	for _, f := range transformFields() {
		for n := 1; n <= 256; n *= 2 {
			tr, err := NewTransform(f, n)
			require.NoError(t, err)
			root, err := f.RootOfUnity(uint64(n))
			require.NoError(t, err)
			a := randomRow(f, n, s)
			b := slices.Clone(a)
			tr.Forward(b)
			for i := range b {
				power := bits.Reverse64(uint64(i)) >> (64 - bits.TrailingZeros(uint(n)))
				require.Equal(t, horner(f, a, f.Exp(root, power)), b[i], "%v, n %d, entry %d", f, n, i)
			}
		}
	}
}

func TestTransformsAreKept(t *testing.T) {
	f := TableField(0)
	one, err := NewTransform(f, 64)
	require.NoError(t, err)
	two, err := NewTransform(newField(f.p), 64)
	require.NoError(t, err)
	require.Same(t, one, two)
	other, err := NewTransform(TableField(1), 64)
	require.NoError(t, err)
	require.NotSame(t, one, other)
}

// exactOrder decides by math alone: w^order = 1 and w^(order/q) != 1 for the
// primes q of TableStep.
func exactOrder(f *Field, w Element, order uint64) bool {
	if f.Exp(w, order) != f.One() {
		return false
	}
	for _, q := range []uint64{2, 3, 5, 7} {
		if order%q == 0 && f.Exp(w, order/q) == f.One() {
			return false
		}
	}
	return true
}

func TestRootOfUnityHasExactOrder(t *testing.T) {
	for _, f := range []*Field{TableField(0), TableField(2)} {
		count := 0
		for two := uint64(1); two <= 1<<20; two *= 2 {
			for odd := uint64(1); odd <= 315; odd++ {
				if 315%odd != 0 {
					continue
				}
				count++
				order := two * odd
				w, err := f.RootOfUnity(order)
				require.NoError(t, err)
				require.Less(t, uint64(w), f.p)
				require.True(t, exactOrder(f, w, order), "%v, order %d", f, order)
				again, err := newField(f.p).RootOfUnity(order)
				require.NoError(t, err)
				require.Equal(t, w, again)
				if order > 1 { // the check itself refuses a root of lower order
					require.False(t, exactOrder(f, f.One(), order))
				}
			}
		}
		require.Equal(t, 21*12, count)
	}
}

// Every order of small groups, the order counted by multiplying.
func TestRootOfUnityInSmallFields(t *testing.T) {
	for _, p := range []uint64{3, 5, 7, 31, 211} {
		f := newField(p)
		for order := uint64(1); order <= p; order++ {
			w, err := f.RootOfUnity(order)
			if (p-1)%order != 0 {
				require.Equal(t, &OrderError{p, order}, err)
				continue
			}
			require.NoError(t, err)
			n := uint64(1)
			for x := w; x != f.One(); x = f.Mul(x, w) {
				n++
			}
			require.Equal(t, order, n, "p %d", p)
		}
	}
}

func TestOrderError(t *testing.T) {
	f := TableField(0)
	for _, order := range []uint64{0, 11 * 13 * 17 * 19 * 23, f.p} {
		w, err := f.RootOfUnity(order)
		require.Zero(t, w)
		var oe *OrderError
		require.True(t, errors.As(err, &oe))
		require.Equal(t, OrderError{f.p, order}, *oe)
	}
	for _, n := range []int{-4, 0, 3, 12} { // 3 and 12 divide p-1: no power of two
		tr, err := NewTransform(f, n)
		require.Nil(t, tr)
		var oe *OrderError
		require.True(t, errors.As(err, &oe), "n %d", n)
	}
	small := newField(10007) // 10006 = 2 * 5003
	require.Equal(t, 2, TransformLength(small))
	_, err := NewTransform(small, 2)
	require.NoError(t, err)
	_, err = NewTransform(small, 4)
	require.EqualError(t, err, "GF(10007) has no root of unity of order 4")
	require.GreaterOrEqual(t, TransformLength(f), 1<<20)
}
