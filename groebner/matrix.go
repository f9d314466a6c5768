package groebner

import (
	"context"
	"fmt"
	"slices"

	"eliminant/rational/prime"
)

// Matrix is a dense matrix over GF(p), stored by rows.
type Matrix struct {
	field      *prime.Field
	rows, cols int
	data       []prime.Element
}

// NewMatrix returns the zero matrix. Panics if a size is negative.
func NewMatrix(f *prime.Field, rows, cols int) *Matrix {
	if rows < 0 || cols < 0 {
		panic(fmt.Sprintf("groebner: %d x %d matrix", rows, cols))
	}
	return &Matrix{f, rows, cols, make([]prime.Element, rows*cols)}
}

// Field returns GF(p).
func (m *Matrix) Field() *prime.Field { return m.field }

// Rows returns the number of rows.
func (m *Matrix) Rows() int { return m.rows }

// Cols returns the number of columns.
func (m *Matrix) Cols() int { return m.cols }

// Row returns row i; writing to it writes to m.
func (m *Matrix) Row(i int) []prime.Element { return m.data[i*m.cols : (i+1)*m.cols : (i+1)*m.cols] }

// At returns the entry in row i and column j, from 0 on.
func (m *Matrix) At(i, j int) prime.Element { return m.Row(i)[j] }

// Set writes the entry in row i and column j.
func (m *Matrix) Set(i, j int, c prime.Element) { m.Row(i)[j] = c }

// Clone returns a copy.
func (m *Matrix) Clone() *Matrix {
	return &Matrix{m.field, m.rows, m.cols, slices.Clone(m.data)}
}

// Equal reports whether sizes and entries agree.
func (m *Matrix) Equal(o *Matrix) bool {
	return m.rows == o.rows && m.cols == o.cols && slices.Equal(m.data, o.data)
}

// Transpose returns the transposed matrix.
func (m *Matrix) Transpose() *Matrix {
	t := NewMatrix(m.field, m.cols, m.rows)
	for i := range m.rows {
		for j, c := range m.Row(i) {
			t.data[j*t.cols+i] = c
		}
	}
	return t
}

// Product returns m o. Panics if the sizes do not fit. Cost: rows cols o.cols
// products in row operations.
func (m *Matrix) Product(o *Matrix) *Matrix {
	if m.cols != o.rows {
		panic(fmt.Sprintf("groebner: product of %d x %d and %d x %d", m.rows, m.cols, o.rows, o.cols))
	}
	z, t := NewMatrix(m.field, m.rows, o.cols), o.Transpose()
	for i := range m.rows {
		x := m.Row(i)
		for j := range t.rows {
			z.data[i*z.cols+j] = m.field.ReduceWide(m.field.DotWide(prime.Wide{}, x, t.Row(j)))
		}
	}
	return z
}

// Trace returns the sum of the diagonal. Panics unless m is square.
func (m *Matrix) Trace() prime.Element {
	m.wantSquare()
	var sum prime.Element
	for i := range m.rows {
		sum = m.field.Add(sum, m.At(i, i))
	}
	return sum
}

func (m *Matrix) wantSquare() {
	if m.rows != m.cols {
		panic(fmt.Sprintf("groebner: %d x %d matrix is not square", m.rows, m.cols))
	}
}

func (m *Matrix) swapRows(i, j int) {
	x, y := m.Row(i), m.Row(j)
	for k := range x {
		x[k], y[k] = y[k], x[k]
	}
}

// eliminate brings m to row echelon form in place and returns the columns of the
// pivots and the parity of the row exchanges. Only the first cols columns are
// searched for pivots. Pivots are not scaled; entries below them become zero.
func (m *Matrix) eliminate(ctx context.Context, cols int) (pivots []int, odd bool, err error) {
	f := m.field
	row := 0
	for j := 0; j < cols && row < m.rows; j++ {
		if err := poll(ctx, "elimination"); err != nil {
			return nil, false, err
		}
		i := row
		for i < m.rows && m.At(i, j) == 0 {
			i++
		}
		if i == m.rows {
			continue
		}
		if i != row {
			m.swapRows(i, row)
			odd = !odd
		}
		pivot := m.Row(row)[j:]
		inverse, _ := f.Inv(pivot[0])
		for i := row + 1; i < m.rows; i++ {
			if x := m.Row(i)[j:]; x[0] != 0 {
				f.SubScaledRow(x, f.Mul(x[0], inverse), pivot)
			}
		}
		pivots = append(pivots, j)
		row++
	}
	return pivots, odd, nil
}

// Rank returns the rank. Cost: at most rows^2 cols products.
func (m *Matrix) Rank(ctx context.Context) (int, error) {
	pivots, _, err := m.Clone().eliminate(ctx, m.cols)
	return len(pivots), err
}

// Determinant returns the determinant. Panics unless m is square. Cost: n^3/3
// products.
func (m *Matrix) Determinant(ctx context.Context) (prime.Element, error) {
	m.wantSquare()
	e := m.Clone()
	pivots, odd, err := e.eliminate(ctx, m.cols)
	if err != nil || len(pivots) < m.rows {
		return 0, err
	}
	det := m.field.One()
	for i := range e.rows {
		det = m.field.Mul(det, e.At(i, i))
	}
	if odd {
		det = m.field.Neg(det)
	}
	return det, nil
}

// SolveLeft returns the row vector x with x m = b for a square m, and the rank of
// m. If the rank is not full, x is nil. Panics unless m is square and b as long.
// Cost: n^3/3 products.
func (m *Matrix) SolveLeft(ctx context.Context, b []prime.Element) (x []prime.Element, rank int, err error) {
	m.wantSquare()
	n := m.rows
	if len(b) != n {
		panic(fmt.Sprintf("groebner: right side of length %d for %d x %d", len(b), n, n))
	}
	// the columns of m are the rows of the system
	e := NewMatrix(m.field, n, n+1)
	for i := range n {
		for j, c := range m.Row(i) {
			e.data[j*e.cols+i] = c
		}
		e.data[i*e.cols+n] = b[i]
	}
	pivots, _, err := e.eliminate(ctx, n)
	if err != nil || len(pivots) < n {
		return nil, len(pivots), err
	}
	x = make([]prime.Element, n)
	for i := n - 1; i >= 0; i-- {
		row := e.Row(i)
		rest := m.field.Sub(row[n], m.field.Dot(row[i+1:n], x[i+1:]))
		x[i], _ = m.field.Div(rest, row[i])
	}
	return x, n, nil
}
