package generate

import (
	"slices"

	"eliminant/rational/kinematics"
	"eliminant/rational/prime"
)

// integers draws a row of integers of magnitude at most size.
func integers(src *prime.Source, width, size int) []int64 {
	row := make([]int64, width)
	for i := range row {
		row[i] = src.Between(int64(-size), int64(size))
	}
	return row
}

// constants is a row of a matrix.
func constants(row []int64) []kinematics.Component {
	z := make([]kinematics.Component, len(row))
	for i, x := range row {
		z[i] = kinematics.Int(x)
	}
	return z
}

func bracket(x, y []int64) int64 { return x[0]*y[1] - x[1]*y[0] }

// retries bounds how often one row is drawn before the whole point is.
const retries = 50

// spinorRow draws a row of integers that begins with a spinor not proportional to
// that of any row in earlier; nil if it finds none.
func spinorRow(src *prime.Source, earlier [][]int64, width, size int) []int64 {
	for range retries {
		row := integers(src, width, size)
		if !slices.ContainsFunc(earlier, func(x []int64) bool { return bracket(x, row) == 0 }) {
			return row
		}
	}
	return nil
}

// twistors draws all entries; any four rows are on shell and conserve momentum.
func (d *drawer) twistors(src *prime.Source, size int) *kinematics.Point {
	var rows [][]int64
	p := &kinematics.Point{Kind: kinematics.KindTwistors}
	for range d.n {
		z := spinorRow(src, rows, 4, size)
		if z == nil {
			return nil
		}
		rows = append(rows, z)
		p.Twistors = append(p.Twistors, constants(z))
	}
	return p
}

// spinors draws everything but the last two lambda-tilde, which conserve
// momentum: lambda-tilde_{n-1} = -sum of <i n> lambda-tilde_i / <n-1,n> and the
// same with n-1 and n exchanged. <n-1,n> = +-1 makes them integers.
func (d *drawer) spinors(src *prime.Source, size int) *kinematics.Point {
	n := d.n
	angle, square := make([][]int64, n), make([][]int64, n)
	// the last two first: their bracket is a unit in one draw of eight
	unit := int64(0)
	for unit != 1 && unit != -1 {
		angle[n-2], angle[n-1] = integers(src, 2, 3), integers(src, 2, 3)
		unit = bracket(angle[n-2], angle[n-1])
	}
	earlier := [][]int64{angle[n-2], angle[n-1]}
	for i := range n - 2 {
		angle[i] = spinorRow(src, earlier, 2, size)
		square[i] = spinorRow(src, square[:i], 2, size)
		if angle[i] == nil || square[i] == nil {
			return nil
		}
		earlier = append(earlier, angle[i])
	}
	square[n-2], square[n-1] = make([]int64, 2), make([]int64, 2)
	for i := range n - 2 {
		x, y := bracket(angle[i], angle[n-1]), bracket(angle[i], angle[n-2])
		for k := range 2 {
			square[n-2][k] -= unit * x * square[i][k]
			square[n-1][k] += unit * y * square[i][k]
		}
	}
	p := &kinematics.Point{Kind: kinematics.KindSpinors, Angle: make(kinematics.Matrix, n), Square: make(kinematics.Matrix, n)}
	for i := range n {
		p.Angle[i], p.Square[i] = constants(angle[i]), constants(square[i])
	}
	return p
}
