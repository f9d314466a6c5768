package series

import (
	"fmt"
	"testing"

	"eliminant/checks/amplitude/integrand"
	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
)

// handmade is Pf'Psi assembled here, from rows and columns 2 and n left out where
// the building block leaves out 1 and n: (-1)^n Pf Psi(k_1, k_3..k_{n-1}, e_1..e_n)
// with z_2n = 1. It can be made wrong.
type handmade struct {
	integrand.ReducedPfaffian
	s                     []prime.Element // at the end point
	diagonal, polarised   bool            // wrong sign of C_aa, of B_ab
	overall, everyOther   bool            // wrong sign always, on half of the solutions
	transposed, forgotten bool            // C for C^T, no C_aa at leg 1
}

func (x handmade) Evaluator(r *integrand.Ring, legs int) integrand.Evaluator {
	return &handmadeEvaluator{handmade: x, ring: r, n: legs, matrix: integrand.NewAntisymmetric(r, 2*legs-2)}
}

type handmadeEvaluator struct {
	handmade
	ring   *integrand.Ring
	n      int
	matrix *integrand.Antisymmetric
	calls  int
}

func (e *handmadeEvaluator) Evaluate(z []prime.Element, v *integrand.Solution) {
	r, f, n, p := e.ring, e.ring.Field(), e.n, e.Products
	half, _ := f.Inv(f.FromInt64(2))
	begin := startInvariants(n)
	at := func(a, b int) int { return (a-1)*n + b - 1 }
	row := func(i int) (leg int, polarised bool) {
		switch {
		case i == 0:
			return 1, false
		case i < n-2:
			return i + 2, false
		}
		return i - (n - 2) + 1, true
	}
	minus := f.Neg(f.One())
	for i := range 2*n - 2 {
		for j := i + 1; j < 2*n-2; j++ {
			a, x := row(i)
			b, y := row(j)
			m := e.matrix.Entry(i, j)
			switch {
			case !x && !y: // A_ab
				s0 := f.FromInt64(begin[at(a, b)])
				r.MulLinear(m, f.Mul(half, s0), f.Mul(half, f.Sub(e.s[at(a, b)], s0)), v.Inverse(a, b))
			case x && y: // B_ab
				f.ScaleRow(m, p.EE[at(a, b)], v.Inverse(a, b))
				if e.polarised {
					f.ScaleRow(m, minus, m)
				}
			case a != b: // -C_ba = e_b.k_a/z_ab
				c := p.EK[at(b, a)]
				if e.transposed {
					c = p.EK[at(a, b)]
				}
				f.ScaleRow(m, c, v.Inverse(a, b))
			default: // -C_aa
				r.SetConstant(m, 0)
				if a == 1 && e.forgotten {
					continue
				}
				for c := 2; c <= n; c++ {
					if c == a {
						continue
					}
					g := v.Coordinate(c)
					if a != 1 {
						g = v.Inverse(a, c)
					}
					f.AddScaledRow(m, p.EK[at(a, c)], g)
				}
				if e.diagonal {
					f.ScaleRow(m, minus, m)
				}
			}
		}
	}
	r.Pfaffian(z, e.matrix)
	if e.calls++; (n%2 == 1) != (e.overall || e.everyOther && e.calls%2 == 0) {
		f.ScaleRow(z, minus, z)
	}
}

// Mistakes in the Pfaffian: those that spoil the poles are seen by the coefficients
// that do not vanish, the others by comparison with the recursion.
func TestWrongPfaffians(t *testing.T) {
	f := prime.TableField(0)
	for n := 4; n <= 6; n++ {
		p := gram(f, n, prime.NewSource("wrong", fmt.Sprint(n)))
		s := p.invariants()
		expected := p.gluons(t, p.e, identity(n))
		gluons := func(x handmade) (prime.Element, error) {
			x.ReducedPfaffian, x.s = integrand.ReducedPfaffian{Products: p.products()}, s
			q, err := YangMills(identity(n), x.Products)
			require.NoError(t, err)
			q.Integrand = integrand.Product{integrand.ParkeTaylor{Ordering: identity(n)}, x}
			return ComputeSum(t.Context(), f, s, q, Options{})
		}
		v, err := gluons(handmade{})
		require.NoError(t, err)
		require.Equal(t, expected, v)
		for _, x := range []handmade{{diagonal: true}, {transposed: true}, {everyOther: true}, {polarised: true}, {overall: true}, {forgotten: true}} {
			if n == 4 && x.everyOther { // only one solution
				continue
			}
			v, err := gluons(x)
			if err == nil {
				require.NotEqual(t, expected, v, "%d legs, %+v", n, x)
				t.Logf("%d legs, %+v: by comparison", n, x)
				require.False(t, x.everyOther || n > 4 && x.diagonal)
				continue
			}
			var e *SelfCheckError
			require.ErrorAs(t, err, &e)
			require.False(t, x.overall || x.polarised, "these keep the poles")
		}
	}
}
