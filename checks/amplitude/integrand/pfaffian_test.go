package integrand

import (
	"testing"

	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// expandPfaffian is Pf by expansion along the first of the rows listed.
func expandPfaffian(r *Ring, entry func(i, j int) []prime.Element, rows []int) []prime.Element {
	z := make([]prime.Element, r.depth)
	if len(rows) == 0 {
		r.SetOne(z)
		return z
	}
	for k := 1; k < len(rows); k++ {
		rest := append(append([]int{}, rows[1:k]...), rows[k+1:]...)
		term := schoolbook(r.field, entry(rows[0], rows[k]), expandPfaffian(r, entry, rest))
		if k%2 == 1 {
			r.Add(z, z, term)
		} else {
			r.Sub(z, z, term)
		}
	}
	return z
}

// expandDeterminant is det by expansion along the first column.
func expandDeterminant(r *Ring, entry func(i, j int) []prime.Element, column int, rows []int) []prime.Element {
	z := make([]prime.Element, r.depth)
	if len(rows) == 0 {
		r.SetOne(z)
		return z
	}
	for k, i := range rows {
		rest := append(append([]int{}, rows[:k]...), rows[k+1:]...)
		term := schoolbook(r.field, entry(i, column), expandDeterminant(r, entry, column+1, rest))
		if k%2 == 0 {
			r.Add(z, z, term)
		} else {
			r.Sub(z, z, term)
		}
	}
	return z
}

func upTo(n int) []int {
	z := make([]int, n)
	for i := range z {
		z[i] = i
	}
	return z
}

// degenerate draws rows whose leading coefficients often vanish, so that pivots
// are not units, or not in place.
func degenerate(t *rapid.T, f *prime.Field, d int) []prime.Element {
	z := rowOf(t, f, d)
	clear(z[:rapid.IntRange(0, d).Draw(t, "valuation")])
	return z
}

func TestPfaffians(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := fieldOf(t)
		d := rapid.IntRange(1, 5).Draw(t, "depth")
		size := 2 * rapid.IntRange(0, 4).Draw(t, "half size")
		r := NewRing(f, d)
		m := NewAntisymmetric(r, size)
		constant := rapid.Bool().Draw(t, "constant first row")
		for i := range size {
			for j := i + 1; j < size; j++ {
				copy(m.Entry(i, j), degenerate(t, f, d))
				if constant && i == 0 {
					clear(m.Entry(i, j)[1:])
				}
			}
		}
		expected := expandPfaffian(r, m.Entry, upTo(size))
		z := make([]prime.Element, d)
		DivisionFreePfaffian(r, z, size, m.Entry)
		require.Equal(t, expected, z, "division-free")
		r.Pfaffian(z, m)
		require.Equal(t, expected, z, "elimination")
	})
}

// A block without units: e times a matrix, and a matrix of rank 2 at e = 0.
func TestPfaffianWithoutUnits(t *testing.T) {
	f := prime.TableField(0)
	const d, size = 9, 8
	source := prime.NewSource("no units")
	for valuation := range 4 {
		r := NewRing(f, d)
		m := NewAntisymmetric(r, size)
		u, v := randomRow(f, size, source), randomRow(f, size, source)
		for i := range size {
			for j := i + 1; j < size; j++ {
				x := m.Entry(i, j)
				copy(x[valuation:], randomRow(f, d, source))
				if valuation > 0 {
					x[0] = f.Sub(f.Mul(u[i], v[j]), f.Mul(u[j], v[i]))
				}
			}
		}
		expected := expandPfaffian(r, m.Entry, upTo(size))
		if low := 3 * valuation; low < d {
			require.NotZero(t, expected[low])
			for _, x := range expected[:low] {
				require.Zero(t, x)
			}
		}
		z := make([]prime.Element, d)
		r.Pfaffian(z, m)
		require.Equal(t, expected, z)
	}
}

func TestDeterminants(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := fieldOf(t)
		d := rapid.IntRange(1, 5).Draw(t, "depth")
		size := rapid.IntRange(0, 5).Draw(t, "size")
		r := NewRing(f, d)
		x := make([]prime.Element, size*size*d)
		entry := func(i, j int) []prime.Element { return x[(i*size+j)*d:][:d] }
		symmetric := rapid.Bool().Draw(t, "symmetric")
		hollow := rapid.Bool().Draw(t, "no unit on the diagonal")
		for i := range size {
			for j := range size {
				if symmetric && j < i {
					copy(entry(i, j), entry(j, i))
				} else {
					copy(entry(i, j), degenerate(t, f, d))
				}
			}
			if hollow {
				entry(i, i)[0] = 0
			}
		}
		expected := expandDeterminant(r, entry, 0, upTo(size))
		z := make([]prime.Element, d)
		if symmetric {
			r.symmetricDeterminant(z, append([]prime.Element{}, x...), size)
			require.Equal(t, expected, z, "symmetric")
		}
		r.Determinant(z, x, size)
		require.Equal(t, expected, z)
	})
}

// split is GF(p)^width with products entry by entry, an algebra in which almost
// every drawn element is a zero divisor.
type split struct {
	*prime.Field
	width int
}

func (s split) Width() int { return s.width }

func (s split) SetOne(z []prime.Element) {
	for i := range z {
		z[i] = s.One()
	}
}

func (s split) Add(z, x, y []prime.Element) { s.AddRow(z, x, y) }
func (s split) Sub(z, x, y []prime.Element) { s.SubRow(z, x, y) }
func (s split) Mul(z, x, y []prime.Element) { s.MulRow(z, x, y) }

func TestDivisionFreeWithZeroDivisors(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := fieldOf(t)
		width := rapid.IntRange(1, 4).Draw(t, "width")
		size := 2 * rapid.IntRange(0, 4).Draw(t, "half size")
		rows := make([][]prime.Element, size*size)
		for i := range rows {
			rows[i] = rowOf(t, f, width)
		}
		entry := func(i, j int) []prime.Element { return rows[i*size+j] }
		z := make([]prime.Element, width)
		DivisionFreePfaffian(split{f, width}, z, size, entry)
		r := NewRing(f, 1)
		for k := range width {
			component := func(i, j int) []prime.Element { return entry(i, j)[k : k+1] }
			require.Equal(t, expandPfaffian(r, component, upTo(size)), z[k:k+1])
		}
	})
}
