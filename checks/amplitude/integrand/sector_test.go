package integrand

import (
	"fmt"
	"math/bits"
	"testing"

	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
)

// In four dimensions z_a = lambda_a^1/lambda_a^2 solves the scattering equations,
// and so does the ratio of the components of lambda-tilde. With helicity
// polarisations Pf'Psi vanishes on the first unless exactly two legs are negative,
// on the second unless exactly two are positive (Y.-J. Du, F. Teng, Y.-S. Wu, JHEP
// 05 (2016) 086): entries and minors of Psi vanish, so pivots must be searched.
func TestPfaffianVanishesOutsideItsSector(t *testing.T) {
	for n := 4; n <= 8; n++ {
		source := prime.NewSource("sectors", fmt.Sprint(n))
		f := source.Field()
		lambda, tilde := make([][]prime.Element, n), make([][]prime.Element, n)
		for a := range n {
			lambda[a], tilde[a] = randomRow(f, 2, source), randomRow(f, 2, source)
		}
		angle := func(x, y []prime.Element) prime.Element {
			return f.Sub(f.Mul(x[0], y[1]), f.Mul(x[1], y[0]))
		}
		square := func(x, y []prime.Element) prime.Element { return f.Neg(angle(x, y)) }
		// solve for the tilde of legs 1, 2: <12> tilde_1 = sum <2j> tilde_j, ..
		for i, other := range []int{1, 0} {
			sum := make([]prime.Element, 2)
			for j := 2; j < n; j++ {
				f.AddScaledRow(sum, angle(lambda[other], lambda[j]), tilde[j])
			}
			c, _ := f.Inv(angle(lambda[i], lambda[other]))
			f.ScaleRow(tilde[i], c, sum)
		}
		// bispinors p = x y^T, 2 p.q = <xx'>[y'y]
		dot := func(x, y, u, v []prime.Element) prime.Element { return f.Mul(angle(x, u), square(v, y)) }
		s := make([]prime.Element, n*n)
		for a := range n {
			for b := range n {
				s[a*n+b] = dot(lambda[a], tilde[a], lambda[b], tilde[b])
			}
		}
		r, rt := randomRow(f, 2, source), randomRow(f, 2, source)
		solutions := make([]*Solution, 2)
		for i, spinors := range [][][]prime.Element{lambda, tilde} {
			h := &homogeneous{Field: f, n: n, s: s}
			for _, x := range spinors {
				z, _ := f.Div(x[0], x[1])
				h.z = append(h.z, z)
			}
			solutions[i] = h.solution(t) // requires the equations to hold
		}
		half, _ := f.Inv(f.FromInt64(2))
		seen := 0
		for negative := range 1 << n {
			k := bits.OnesCount(uint(negative))
			p := &Products{EK: make([]prime.Element, n*n), EE: make([]prime.Element, n*n)}
			left, right := make([][]prime.Element, n), make([][]prime.Element, n)
			for a := range n {
				left[a], right[a] = make([]prime.Element, 2), make([]prime.Element, 2)
				if negative>>a&1 == 1 { // lambda rt/[lat rt]
					c, _ := f.Inv(square(tilde[a], rt))
					f.ScaleRow(left[a], c, lambda[a])
					copy(right[a], rt)
				} else { // r lat/<r lam>
					c, _ := f.Inv(angle(r, lambda[a]))
					f.ScaleRow(left[a], c, r)
					copy(right[a], tilde[a])
				}
			}
			for a := range n {
				for b := range n {
					p.EK[a*n+b] = f.Mul(half, dot(left[a], right[a], lambda[b], tilde[b]))
					p.EE[a*n+b] = f.Mul(half, dot(left[a], right[a], left[b], right[b]))
				}
			}
			for i, v := range solutions {
				x := evaluate(t, ReducedPfaffian{p}, v)
				supported := k == 2
				if i == 1 {
					supported = n-k == 2
				}
				require.Equal(t, supported, x != 0, "%d legs, negative %b, solution %d: %d", n, negative, i, x)
				if n <= 6 { // the matrix again, without divisions
					e := ReducedPfaffian{p}.Evaluator(v.Ring(), n).(*psiEvaluator)
					for i, x := range e.rows {
						for j, y := range e.rows[i+1:] {
							e.entry(e.matrix.Entry(i, i+1+j), v, x, y)
						}
					}
					z := make([]prime.Element, 1)
					DivisionFreePfaffian(v.Ring(), z, len(e.rows), e.matrix.Entry)
					require.Equal(t, x, f.Neg(z[0]))
				}
				if supported {
					seen++
				}
			}
		}
		require.NotZero(t, seen)
	}
}
