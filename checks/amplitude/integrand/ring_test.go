package integrand

import (
	"fmt"
	"testing"

	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// fieldOf draws a field: tiny, middling, and the largest of the table.
func fieldOf(t *rapid.T) *prime.Field {
	switch rapid.IntRange(0, 2).Draw(t, "field") {
	case 0:
		f, _ := prime.NewField(101)
		return f
	case 1:
		f, _ := prime.NewField(1<<31 - 1)
		return f
	}
	return prime.TableField(0)
}

// rowOf draws a row; extreme entries 0, 1, p-1 are frequent.
func rowOf(t *rapid.T, f *prime.Field, d int) []prime.Element {
	z := make([]prime.Element, d)
	for i := range z {
		switch rapid.IntRange(0, 4).Draw(t, "kind") {
		case 0:
		case 1:
			z[i] = f.One()
		case 2: // the largest representation, whatever it stands for
			z[i] = prime.Element(f.Modulus() - 1)
		default:
			z[i] = f.FromUint64(rapid.Uint64().Draw(t, "entry"))
		}
	}
	return z
}

// schoolbook is the truncated product by its definition.
func schoolbook(f *prime.Field, x, y []prime.Element) []prime.Element {
	z := make([]prime.Element, len(x))
	for i, a := range x {
		for j := range len(y) - i {
			z[i+j] = f.Add(z[i+j], f.Mul(a, y[j]))
		}
	}
	return z
}

func TestRowsAgainstDefinitions(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := fieldOf(t)
		d := rapid.IntRange(1, 40).Draw(t, "depth")
		r := NewRing(f, d)
		x, y, w := rowOf(t, f, d), rowOf(t, f, d), rowOf(t, f, d)
		product := schoolbook(f, x, y)
		z := make([]prime.Element, d)
		r.Mul(z, x, y)
		require.Equal(t, product, z)

		for _, alias := range [][]prime.Element{x, y} { // destination = operand
			copy(z, alias)
			if &alias[0] == &x[0] {
				r.Mul(z, z, y)
			} else {
				r.Mul(z, x, z)
			}
			require.Equal(t, product, z)
		}

		copy(z, w)
		r.MulAdd(z, x, y)
		f.AddRow(w, w, product)
		require.Equal(t, w, z)

		r.Square(z, x)
		require.Equal(t, schoolbook(f, x, x), z)

		line := make([]prime.Element, d)
		line[0] = y[0]
		if d > 1 {
			line[1] = w[0]
		}
		product = schoolbook(f, x, line)
		copy(z, x)
		r.MulLinear(z, y[0], w[0], z)
		require.Equal(t, product, z)

		ok := r.Invert(z, x)
		require.Equal(t, x[0] != 0, ok)
		if ok {
			r.Mul(z, z, x)
			r.SetOne(y)
			require.Equal(t, y, z)
		}
	})
}

// The largest entries at large depth: the sums must stay in range.
func TestLargestEntries(t *testing.T) {
	f := prime.TableField(0)
	for _, d := range []int{7, 8, 9, 200} {
		r := NewRing(f, d)
		x, y, z := make([]prime.Element, d), make([]prime.Element, 2*d), make([]prime.Element, d)
		for i := range x {
			x[i], z[i] = prime.Element(f.Modulus()-1), prime.Element(f.Modulus()-1)
		}
		for i := range y {
			y[i] = x[0]
		}
		square := f.Mul(x[0], x[0])
		r.convolve(z, z, y, y, 2)
		for i, v := range z {
			require.Equal(t, f.Add(x[0], f.Mul(f.FromInt64(int64(2*i+2)), square)), v)
		}
		r.Mul(z, x, x)
		for i, v := range z {
			require.Equal(t, f.Mul(f.FromInt64(int64(i+1)), square), v)
		}
		r.addTwoScaled(z, x[0], x, x[0], x)
		for i, v := range z {
			require.Equal(t, f.Mul(f.FromInt64(int64(i+3)), square), v)
		}
	}
}

func BenchmarkMul(b *testing.B) {
	f := prime.TableField(0)
	source := prime.NewSource("rows")
	for _, d := range []int{18, 31, 59, 123} {
		r := NewRing(f, d)
		x, y := randomRow(f, d, source), randomRow(f, d, source)
		z := make([]prime.Element, d)
		b.Run(fmt.Sprintf("D=%d", d), func(b *testing.B) {
			for b.Loop() {
				r.Mul(z, x, y)
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(d*(d+1)/2), "ns/product")
		})
	}
}

func BenchmarkPfaffian(b *testing.B) {
	f := prime.TableField(0)
	for _, n := range []int{8, 10} {
		r := NewRing(f, 21)
		m := NewAntisymmetric(r, 2*n-2)
		entries := randomRow(f, len(m.entries), prime.NewSource("matrix"))
		z := make([]prime.Element, 21)
		b.Run(fmt.Sprintf("size=%d", m.size), func(b *testing.B) {
			for b.Loop() {
				copy(m.entries, entries)
				r.Pfaffian(z, m)
			}
		})
	}
}

func randomRow(f *prime.Field, d int, source *prime.Source) []prime.Element {
	z := make([]prime.Element, d)
	for i := range z {
		z[i] = f.FromUint64(source.Below(f.Modulus()))
	}
	return z
}
