package groebner_test

import (
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"

	"eliminant/groebner"
	"eliminant/rational/prime"
)

// matrix returns the matrix with the given rows of integers.
func matrix(f *prime.Field, rows ...[]int64) *groebner.Matrix {
	m := groebner.NewMatrix(f, len(rows), len(rows[0]))
	for i, row := range rows {
		copy(m.Row(i), integers(f, row...))
	}
	return m
}

// drawMatrix draws a product of an n x k and a k x n matrix with small entries, of
// which many are zero.
func drawMatrix(t *rapid.T, f *prime.Field, n, k int) *groebner.Matrix {
	draw := func(rows, cols int) *groebner.Matrix {
		m := groebner.NewMatrix(f, rows, cols)
		for i := range rows {
			for j := range cols {
				m.Set(i, j, f.FromInt64(rapid.SampledFrom([]int64{0, 0, 0, 1, -1, 2, 5}).Draw(t, "entry")))
			}
		}
		return m
	}
	if k >= n {
		return draw(n, n)
	}
	return draw(n, k).Product(draw(k, n))
}

// laplace is the determinant by expansion along the first row.
func laplace(f *prime.Field, rows [][]prime.Element) prime.Element {
	if len(rows) == 0 {
		return f.One()
	}
	var sum prime.Element
	for j, c := range rows[0] {
		var minor [][]prime.Element
		for _, row := range rows[1:] {
			minor = append(minor, append(append([]prime.Element{}, row[:j]...), row[j+1:]...))
		}
		x := f.Mul(c, laplace(f, minor))
		if j%2 == 1 {
			x = f.Neg(x)
		}
		sum = f.Add(sum, x)
	}
	return sum
}

func rowsOf(m *groebner.Matrix) [][]prime.Element {
	rows := make([][]prime.Element, m.Rows())
	for i := range rows {
		rows[i] = m.Row(i)
	}
	return rows
}

// shifted returns x - m.
func shifted(m *groebner.Matrix, x prime.Element) *groebner.Matrix {
	f := m.Field()
	z := m.Clone()
	for i := range z.Rows() {
		for j := range z.Cols() {
			c := f.Neg(m.At(i, j))
			if i == j {
				c = f.Add(c, x)
			}
			z.Set(i, j, c)
		}
	}
	return z
}

// horner evaluates a polynomial given by its coefficients.
func horner(f *prime.Field, p []prime.Element, x prime.Element) prime.Element {
	var sum prime.Element
	for i := len(p) - 1; i >= 0; i-- {
		sum = f.Add(f.Mul(sum, x), p[i])
	}
	return sum
}

func TestDeterminantAndCharacteristicPolynomial(t *testing.T) {
	f := prime.TableField(0)
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(0, 6).Draw(t, "n")
		m := drawMatrix(t, f, n, rapid.IntRange(0, n).Draw(t, "rank"))
		det, err := m.Determinant(background)
		require.NoError(t, err)
		require.Equal(t, laplace(f, rowsOf(m)), det)
		chi, err := m.CharacteristicPolynomial(background)
		require.NoError(t, err)
		require.Len(t, chi, n+1)
		// monic of degree n and right at n points
		require.Equal(t, f.One(), chi[n])
		for x := range int64(n) {
			at := f.FromInt64(x*x + 3)
			require.Equal(t, laplace(f, rowsOf(shifted(m, at))), horner(f, chi, at))
		}
		if n > 0 {
			require.Equal(t, f.Neg(chi[n-1]), m.Trace())
		}
	})
}

func TestCharacteristicPolynomialOfSimilarMatrices(t *testing.T) {
	f := smallField(t)
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 12).Draw(t, "n")
		a, b := drawMatrix(t, f, n, n), drawMatrix(t, f, n, n/2+1)
		x, err := a.Product(b).CharacteristicPolynomial(background)
		require.NoError(t, err)
		y, err := b.Product(a).CharacteristicPolynomial(background)
		require.NoError(t, err)
		require.Equal(t, x, y, "AB and BA")
		z, err := a.Product(b).Transpose().CharacteristicPolynomial(background)
		require.NoError(t, err)
		require.Equal(t, x, z)
	})
}

func TestSolveLeftAndRank(t *testing.T) {
	f := prime.TableField(0)
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 9).Draw(t, "n")
		k := rapid.IntRange(0, n).Draw(t, "rank")
		m := drawMatrix(t, f, n, k)
		rank, err := m.Rank(background)
		require.NoError(t, err)
		require.LessOrEqual(t, rank, k)
		transposed, err := m.Transpose().Rank(background)
		require.NoError(t, err)
		require.Equal(t, rank, transposed)
		det, err := m.Determinant(background)
		require.NoError(t, err)
		require.Equal(t, rank == n, det != 0)

		want := groebner.NewMatrix(f, 1, n)
		for j := range n {
			want.Set(0, j, f.FromUint64(rapid.Uint64().Draw(t, "x")))
		}
		x, same, err := m.SolveLeft(background, want.Product(m).Row(0))
		require.NoError(t, err)
		require.Equal(t, rank, same)
		if rank == n {
			require.Equal(t, want.Row(0), x)
		} else {
			require.Nil(t, x)
		}
	})
}

// 1/det of the Hilbert matrix of order 5 is 266716800000 (OEIS A005249); the
// Vandermonde determinant of 1..6 is 34560.
func TestKnownDeterminants(t *testing.T) {
	f := prime.TableField(0)
	hilbert, vandermonde := groebner.NewMatrix(f, 5, 5), groebner.NewMatrix(f, 6, 6)
	for i := range 6 {
		for j := range 6 {
			if i < 5 && j < 5 {
				inverse, _ := f.Inv(f.FromInt64(int64(i + j + 1)))
				hilbert.Set(i, j, inverse)
			}
			vandermonde.Set(i, j, f.Exp(f.FromInt64(int64(i+1)), uint64(j)))
		}
	}
	det, err := hilbert.Determinant(background)
	require.NoError(t, err)
	require.Equal(t, f.One(), f.Mul(det, f.FromInt64(266716800000)))
	det, err = vandermonde.Determinant(background)
	require.NoError(t, err)
	require.Equal(t, f.FromInt64(34560), det)

	m := matrix(f, []int64{0, 1, 2}, []int64{3, 4, 5})
	rank, err := m.Rank(background)
	require.NoError(t, err)
	require.Equal(t, 2, rank)
	require.Panics(t, func() { m.Trace() })
	require.Panics(t, func() { m.Product(m) })
	require.False(t, m.Equal(m.Transpose()))
	require.True(t, m.Equal(m.Transpose().Transpose()))
}
