package resultant

import (
	"slices"
	"testing"

	"eliminant/rational/poly"
	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// rankOf returns the rank of a matrix, which it destroys.
func rankOf(f *prime.Field, a [][]prime.Element) int {
	rank := 0
	for col := 0; len(a) > 0 && col < len(a[0]); col++ {
		r := rank
		for r < len(a) && a[r][col] == 0 {
			r++
		}
		if r == len(a) {
			continue
		}
		a[r], a[rank] = a[rank], a[r]
		inv, _ := f.Inv(a[rank][col])
		for r := rank + 1; r < len(a); r++ {
			if a[r][col] != 0 {
				f.SubScaledRow(a[r], f.Mul(a[r][col], inv), a[rank])
			}
		}
		rank++
	}
	return rank
}

// hankel returns the equations sum_i C_i s_{n-i} = 0, length <= n < T, with columns
// C_0..C_length.
func hankel(s [][]prime.Element, length int) (rows [][]prime.Element) {
	for _, x := range s {
		for n := length; n < len(x); n++ {
			r := slices.Clone(x[n-length : n+1])
			slices.Reverse(r)
			rows = append(rows, r)
		}
	}
	return rows
}

// The recurrence holds, none is shorter, and it is called unique exactly if the
// linear equations for C_1..C_L have full rank; small fields make degenerate
// cases common.
func TestGeneratorAgainstLinearAlgebra(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		f, err := prime.NewField(rapid.SampledFrom([]uint64{3, 5, 101, 4611686018427387847}).Draw(r, "p"))
		require.NoError(r, err)
		m := rapid.IntRange(1, 4).Draw(r, "m")
		total := rapid.IntRange(1, 16).Draw(r, "T")
		degree := rapid.IntRange(0, 9).Draw(r, "degree")
		rule := make([]prime.Element, degree)
		entry := rapid.Custom(func(r *rapid.T) prime.Element { return f.FromUint64(rapid.Uint64().Draw(r, "x")) })
		for i := range rule {
			rule[i] = entry.Draw(r, "rule")
		}
		s := make([][]prime.Element, m)
		for h := range s {
			for n := range total {
				x := prime.Element(0)
				if n < degree {
					x = entry.Draw(r, "start")
				} else {
					for i, c := range rule {
						x = f.Add(x, f.Mul(c, s[h][n-1-i]))
					}
				}
				s[h] = append(s[h], x)
			}
		}
		c, unique := generator(f, s)
		length := len(c) - 1
		require.LessOrEqual(r, length, degree)
		require.Equal(r, f.One(), c[0])
		for _, row := range hankel(s, length) {
			require.Zero(r, f.Dot(row, c))
		}
		// a solution has C_0 = 1: the equations do not force C_0 = 0
		solvable := func(length int) bool {
			rows := hankel(s, length)
			if len(rows) == 0 {
				return true
			}
			var tail [][]prime.Element
			for _, row := range rows {
				tail = append(tail, slices.Clone(row[1:]))
			}
			return rankOf(f, rows) == rankOf(f, tail)
		}
		require.True(r, solvable(length))
		if length > 0 {
			require.False(r, solvable(length-1))
		}
		var tail [][]prime.Element
		for _, row := range hankel(s, length) {
			tail = append(tail, slices.Clone(row[1:]))
		}
		require.Equal(r, rankOf(f, tail) == length, unique)
		if m == 1 && total >= 2*degree {
			slices.Reverse(c)
			require.True(r, poly.Recurrence(f, s[0]).Equal(poly.New(f, c...)))
		}
	})
}
