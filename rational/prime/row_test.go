package prime

import (
	"slices"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// Row kernels against the operations on elements, entry by entry.
func TestRowsAgainstElements(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := drawField(t)
		n := rapid.IntRange(0, 60).Draw(t, "n")
		row := func(label string) []Element {
			x := make([]Element, n)
			for i := range x {
				x[i] = drawElement(t, f, label)
			}
			return x
		}
		x, y, c := row("x"), row("y"), drawElement(t, f, "c")
		each := func(op func(a, b Element) Element) []Element {
			z := make([]Element, n)
			for i := range z {
				z[i] = op(x[i], y[i])
			}
			return z
		}
		kernels := []struct {
			run  func(z, x, y []Element)
			want []Element
		}{
			{f.AddRow, each(f.Add)},
			{f.SubRow, each(f.Sub)},
			{f.MulRow, each(f.Mul)},
			{func(z, x, _ []Element) { f.ScaleRow(z, c, x) }, each(func(a, _ Element) Element { return f.Mul(c, a) })},
			{func(z, x, y []Element) { copy(z, x); f.AddScaledRow(z, c, y) }, each(func(a, b Element) Element { return f.Add(a, f.Mul(c, b)) })},
			{func(z, x, y []Element) { copy(z, x); f.SubScaledRow(z, c, y) }, each(func(a, b Element) Element { return f.Sub(a, f.Mul(c, b)) })},
		}
		for i, k := range kernels {
			z := make([]Element, n)
			k.run(z, x, y)
			require.Equal(t, k.want, z, "kernel %d", i)
			z = slices.Clone(x)
			k.run(z, z, y)
			require.Equal(t, k.want, z, "kernel %d, destination is the first operand", i)
		}
		var sum Element
		for i := range x {
			sum = f.Add(sum, f.Mul(x[i], y[i]))
		}
		require.Equal(t, sum, f.Dot(x, y))
		z := make([]Element, n)
		at, ok := f.InvertRow(z, x)
		zero := slices.Index(x, 0)
		require.Equal(t, zero < 0, ok)
		if !ok {
			require.Equal(t, zero, at)
			return
		}
		for i := range x {
			inv, _ := f.Inv(x[i])
			require.Equal(t, inv, z[i])
		}
	})
}

// The largest possible terms do not overflow the sums.
func TestDotOfLargestElements(t *testing.T) {
	const n = 100000
	f := newField(4611686018427387847) // the largest prime below 2^62
	x := make([]Element, n)
	for i := range x {
		x[i] = Element(f.p - 1)
	}
	want := f.Mul(f.FromUint64(n), f.Square(x[0]))
	require.Equal(t, want, f.Dot(x, x))
	z := slices.Clone(x)
	f.AddScaledRow(z, x[0], x)
	require.Equal(t, f.Add(x[0], f.Square(x[0])), z[n-1])
}

func BenchmarkRows(b *testing.B) {
	f := TableField(0)
	x, y := make([]Element, 4096), make([]Element, 4096)
	for i := range x {
		x[i], y[i] = f.FromUint64(uint64(i)*0x9e3779b97f4a7c15), f.FromUint64(uint64(i)*0xbf58476d1ce4e5b9)
	}
	b.Run("Dot/4096", func(b *testing.B) {
		for b.Loop() {
			f.Dot(x, y)
		}
	})
	b.Run("AddScaledRow/4096", func(b *testing.B) {
		for b.Loop() {
			f.AddScaledRow(x, y[1], y)
		}
	})
}
