package prime

import (
	"math/big"
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

// drawRow draws n elements: random ones with the ends of the range among them,
// or p-1 throughout.
func drawRow(t *rapid.T, f *Field, n int, name string) []Element {
	if rapid.IntRange(0, 7).Draw(t, name+" top") == 0 {
		return slices.Repeat([]Element{Element(f.p - 1)}, n)
	}
	return randomRow(f, n, NewSource("row", name, rapid.StringN(0, 8, -1).Draw(t, name)))
}

// randomRow is n elements of the stream, a quarter of them 0, 1, p-2 or p-1.
func randomRow(f *Field, n int, s *Source) []Element {
	x := make([]Element, n)
	for i := range x {
		switch s.Below(16) {
		case 0:
			x[i] = 0
		case 1:
			x[i] = 1
		case 2:
			x[i] = Element(f.p - 2)
		case 3:
			x[i] = Element(f.p - 1)
		default:
			x[i] = Element(s.Below(f.p))
		}
	}
	return x
}

// Every kernel against the element operations, into a fresh row and into each
// operand.
func TestRowsMayAlias(t *testing.T) {
	type kernel struct {
		name string
		row  func(f *Field, z []Element, c Element, x, y []Element)
		one  func(f *Field, z, c, x, y Element) Element
	}
	kernels := []kernel{
		{"AddRow",
			func(f *Field, z []Element, _ Element, x, y []Element) { f.AddRow(z, x, y) },
			func(f *Field, _, _, x, y Element) Element { return f.Add(x, y) }},
		{"SubRow",
			func(f *Field, z []Element, _ Element, x, y []Element) { f.SubRow(z, x, y) },
			func(f *Field, _, _, x, y Element) Element { return f.Sub(x, y) }},
		{"MulRow",
			func(f *Field, z []Element, _ Element, x, y []Element) { f.MulRow(z, x, y) },
			func(f *Field, _, _, x, y Element) Element { return f.Mul(x, y) }},
		{"ScaleRow",
			func(f *Field, z []Element, c Element, x, _ []Element) { f.ScaleRow(z, c, x) },
			func(f *Field, _, c, x, _ Element) Element { return f.Mul(c, x) }},
		{"AddScaledRow",
			func(f *Field, z []Element, c Element, x, _ []Element) { f.AddScaledRow(z, c, x) },
			func(f *Field, z, c, x, _ Element) Element { return f.Add(z, f.Mul(c, x)) }},
		{"SubScaledRow",
			func(f *Field, z []Element, c Element, x, _ []Element) { f.SubScaledRow(z, c, x) },
			func(f *Field, z, c, x, _ Element) Element { return f.Sub(z, f.Mul(c, x)) }},
	}
	for _, k := range kernels {
		t.Run(k.name, func(t *testing.T) {
			rapid.Check(t, func(t *rapid.T) {
				f := rapid.SampledFrom(testFields).Draw(t, "field")
				n := rapid.IntRange(0, 200).Draw(t, "n")
				x, y, z := drawRow(t, f, n, "x"), drawRow(t, f, n, "y"), drawRow(t, f, n, "z")
				c := genElement(f).Draw(t, "c")
				expect := func(z, x, y []Element) []Element {
					want := make([]Element, n)
					for i := range want {
						want[i] = k.one(f, z[i], c, x[i], y[i])
						require.Less(t, uint64(want[i]), f.p)
					}
					return want
				}

				want, x0, y0 := expect(z, x, y), slices.Clone(x), slices.Clone(y)
				k.row(f, z, c, x, y)
				require.Equal(t, want, z)
				require.Equal(t, x0, x, "an operand changed")
				require.Equal(t, y0, y, "an operand changed")

				a := slices.Clone(x)
				want = expect(a, a, y)
				k.row(f, a, c, a, y)
				require.Equal(t, want, a, "z is x")

				a = slices.Clone(y)
				want = expect(a, x, a)
				k.row(f, a, c, x, a)
				require.Equal(t, want, a, "z is y")

				a = slices.Clone(x)
				want = expect(a, a, a)
				k.row(f, a, c, a, a)
				require.Equal(t, want, a, "z is x and y")
			})
		})
	}
}

func TestDotAgainstElements(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := rapid.SampledFrom(testFields).Draw(t, "field")
		n := rapid.IntRange(0, 200).Draw(t, "n")
		x, y := drawRow(t, f, n, "x"), drawRow(t, f, n, "y")
		for _, y := range [][]Element{x, y} {
			var want Element
			for i := range x {
				want = f.Add(want, f.Mul(x[i], y[i]))
			}
			require.Equal(t, want, f.Dot(x, y))
		}
	})
}

func TestDotOfLargestWords(t *testing.T) {
	const n = 100_000
	for _, f := range testFields {
		x := slices.Repeat([]Element{Element(f.p - 1)}, n)
		a := value(f, x[0])
		requireResidue(t, f, a.Mul(a, a).Mul(a, big.NewInt(n)), f.Dot(x, x))
	}
}

func TestShortOperandPanics(t *testing.T) {
	f := testFields[0]
	long, short := slices.Repeat([]Element{f.one}, 3), slices.Repeat([]Element{f.one}, 2)
	short = slices.Clip(short)
	require.Panics(t, func() { f.AddRow(long, long, short) })
	require.Panics(t, func() { f.SubRow(long, short, long) })
	require.Panics(t, func() { f.MulRow(long, long, short) })
	require.Panics(t, func() { f.ScaleRow(long, 1, short) })
	require.Panics(t, func() { f.AddScaledRow(long, 1, short) })
	require.Panics(t, func() { f.SubScaledRow(long, 1, short) })
	require.Panics(t, func() { f.Dot(long, short) })
	require.Panics(t, func() { f.InvertRow(short, long) })
}

func TestInvertRowNamesFirstZero(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := rapid.SampledFrom(testFields).Draw(t, "field")
		n := rapid.IntRange(0, 200).Draw(t, "n")
		x := drawRow(t, f, n, "x")
		for i := range x {
			if x[i] == 0 {
				x[i] = f.one
			}
		}
		kept := slices.Clone(x)
		z := make([]Element, n)
		i, ok := f.InvertRow(z, x)
		require.True(t, ok)
		require.Zero(t, i)
		require.Equal(t, kept, x, "the operand changed")
		for i := range x {
			want, _ := f.Inv(x[i])
			require.Equal(t, want, z[i])
		}
		if n == 0 {
			return
		}

		// the first of two zeros is named
		first := rapid.IntRange(0, n-1).Draw(t, "zero")
		x[first] = 0
		x[rapid.IntRange(first, n-1).Draw(t, "second zero")] = 0
		i, ok = f.InvertRow(z, x)
		require.False(t, ok)
		require.Equal(t, first, i)
	})
}
