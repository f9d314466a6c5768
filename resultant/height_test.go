package resultant

import (
	"context"
	"errors"
	"math"
	"math/big"
	"math/cmplx"
	"testing"

	"eliminant/rational/lift"
	"eliminant/rational/poly"
	"eliminant/rational/prime"
	"eliminant/rational/scattering"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// roots approximates the roots of a polynomial (K. Weierstrass, E. Durand, I. O.
// Kerner: simultaneous iteration).
func roots(c []*big.Rat) []complex128 {
	n := len(c) - 1
	a := make([]complex128, n+1)
	for i, x := range c {
		v, _ := x.Float64()
		a[i] = complex(v, 0)
	}
	z := make([]complex128, n)
	for i := range z {
		z[i] = cmplx.Pow(complex(0.4, 0.9), complex(float64(i), 0))
	}
	for range 2000 {
		for i := range z {
			f := complex(0, 0)
			for j := n; j >= 0; j-- {
				f = f*z[i] + a[j]
			}
			for j := range z {
				if j != i {
					f /= z[i] - z[j]
				}
			}
			z[i] -= f
		}
	}
	return z
}

// solutions approximates the solutions in the standard gauge, n <= 6: the
// combinations of roots of the eliminants that satisfy the constraints best.
func solutions(t *testing.T, d *scattering.Data) [][]complex128 {
	n := d.Legs()
	sets := [][]complex128{{cmplx.Inf(), 1}}
	for leg := 3; leg < n; leg++ {
		var next [][]complex128
		for _, r := range roots(eliminant(t, d, leg).Monic) {
			for _, s := range sets {
				next = append(next, append(append([]complex128{}, s...), r))
			}
		}
		sets = next
	}
	constraints := d.Constraints(scattering.Gauge{})
	defect := func(z []complex128) (sum float64) {
		for _, h := range constraints {
			v, size := complex(0, 0), 0.0
			for _, t := range h.Terms {
				c, _ := t.Coefficient.Float64()
				x := complex(c, 0)
				for _, a := range t.Legs {
					x *= z[a-1]
				}
				v += x
				size += cmplx.Abs(x)
			}
			sum += cmplx.Abs(v) / size
		}
		return sum
	}
	var out [][]complex128
	for _, z := range sets {
		if defect(z) < 1e-7 {
			out = append(out, append(z, 0))
		}
	}
	size := 1
	for j := 2; j <= n-3; j++ {
		size *= j
	}
	require.Len(t, out, size)
	return out
}

// Every absolute value bound holds at approximate solutions; reduced determinant
// and Jacobian from their definitions.
func TestSizesHold(t *testing.T) {
	for _, d := range []*scattering.Data{x4(t), x5(t), k5(t), x6(t), k6(t)} {
		n := d.Legs()
		h, err := NewHeights(d)
		require.NoError(t, err)
		s := func(a, b int) complex128 {
			x, _ := d.At(a, b).Float64()
			return complex(x, 0)
		}
		check := func(x complex128, bound Height) {
			t.Helper()
			require.LessOrEqual(t, math.Log2(cmplx.Abs(x)), bound.Size+1e-9)
		}
		for _, z := range solutions(t, d) {
			measure := complex(1, 0)
			for a := 2; a <= n; a++ {
				for b := a + 1; b <= n; b++ {
					x := z[a-1] - z[b-1]
					measure *= x
					check(x, h.Difference(a, b))
					check(1/x, h.DifferenceInverse(b, a))
				}
			}
			m := make([][]complex128, n-3)
			for a := 3; a < n; a++ {
				m[a-3] = make([]complex128, n-3)
				for b := 2; b <= n; b++ {
					if b == a {
						continue
					}
					x := s(a, b) / ((z[a-1] - z[b-1]) * (z[a-1] - z[b-1]))
					m[a-3][a-3] -= x
					if b > 2 && b < n {
						m[a-3][b-3] = x
					}
				}
			}
			phi := complexDeterminant(m)
			check(phi, h.ReducedDeterminant())
			check(phi*measure, h.Jacobian())
			for leg := 3; leg < n; leg++ {
				check(1/phi, h.ReducedDeterminantInverse(leg))
				check(1/(phi*measure), h.JacobianInverse(leg))
				check(z[leg-1], h.Puncture(leg))
				check(1/z[leg-1], h.PunctureInverse(leg))
			}
		}
	}
}

func complexDeterminant(m [][]complex128) complex128 {
	if len(m) == 0 {
		return 1
	}
	det, sign := complex(0, 0), complex(1, 0)
	for j := range m {
		var minor [][]complex128
		for _, row := range m[1:] {
			minor = append(minor, append(append([]complex128{}, row[:j]...), row[j+1:]...))
		}
		det += sign * m[0][j] * complexDeterminant(minor)
		sign = -sign
	}
	return det
}

// integrand is a product of powers of z_a - z_b, J or det Phi.
type integrand struct {
	power                 map[[2]int]int
	jacobian, determinant int
}

func (g integrand) height(h *Heights, separating int) Height {
	var z Height
	for ab, e := range g.power {
		if e > 0 {
			z = z.Mul(h.Difference(ab[0], ab[1]).Pow(e))
		} else {
			z = z.Mul(h.DifferenceInverse(ab[0], ab[1]).Pow(-e))
		}
	}
	for e := g.jacobian; e != 0; {
		if e > 0 {
			z, e = z.Mul(h.Jacobian()), e-1
		} else {
			z, e = z.Mul(h.JacobianInverse(separating)), e+1
		}
	}
	for e := g.determinant; e != 0; {
		if e > 0 {
			z, e = z.Mul(h.ReducedDeterminant()), e-1
		} else {
			z, e = z.Mul(h.ReducedDeterminantInverse(separating)), e+1
		}
	}
	return z
}

// sum adds the integrand over the solutions modulo p.
func (g integrand) sum(t require.TestingT, d *scattering.Data, f *prime.Field, separating int) prime.Element {
	n := d.Legs()
	q := newQuotient(t, f, n, reduce(t, d, f), nil)
	x := poly.New(f, f.One())
	times := func(y *poly.Poly, e int) {
		if e < 0 {
			y, e = q.inverse(y), -e
		}
		for range e {
			x = q.mul(x, y)
		}
	}
	for ab, e := range g.power {
		times(q.difference(ab[0], ab[1]), e)
	}
	j := q.jacobian()
	times(j, g.jacobian+1) // ResidueSum divides by J
	times(q.reducedDeterminant(), g.determinant)
	return q.ResidueSum(x)
}

// Residue sums lifted with the proven bounds satisfy them, with room to spare,
// and agree with a further prime; a bound that is too small is noticed.
func TestResidueBounds(t *testing.T) {
	ctx := context.Background()
	lifted := func(t require.TestingT, d *scattering.Data, g integrand, num, den *big.Int) (*big.Rat, error) {
		kernel := func(_ context.Context, f *prime.Field, out []prime.Element) error {
			out[0] = g.sum(t, d, f, 3)
			return nil
		}
		x, _, err := lift.Rationals(ctx, 1, num, den, kernel, lift.Options{})
		if err != nil {
			return nil, err
		}
		return x[0], nil
	}
	check := func(t require.TestingT, d *scattering.Data, g integrand) *big.Rat {
		h, err := NewHeights(d)
		require.NoError(t, err)
		num, den := h.ResidueBounds(g.height(h, 3))
		x, err := lifted(t, d, g, num, den)
		require.NoError(t, err)
		require.Less(t, x.Num().CmpAbs(num), 0)
		require.LessOrEqual(t, x.Denom().Cmp(den), 0)
		// far larger bounds give the same number
		again, err := lifted(t, d, g, new(big.Int).Mul(num, num), new(big.Int).Mul(den, den))
		require.NoError(t, err)
		require.Equal(t, x.RatString(), again.RatString())
		if x.Num().BitLen() > 8 && x.Denom().BitLen() > 8 {
			one := big.NewInt(1)
			small, err := lifted(t, d, g, one, one)
			if err == nil {
				require.NotEqual(t, x.RatString(), small.RatString())
			}
		}
		return x
	}
	// bi-adjoint amplitudes, values of an independent program
	square := func(n int) integrand {
		g := integrand{power: map[[2]int]int{}, determinant: -1}
		for a := 2; a < n; a++ {
			g.power[[2]int{a, a + 1}] = -2
		}
		return g
	}
	require.Equal(t, "-5/6", check(t, x4(t), square(4)).RatString())
	require.Equal(t, "74/231", check(t, x5(t), square(5)).RatString())
	require.Equal(t, "3337/131376", check(t, k5(t), square(5)).RatString())
	require.Equal(t, "-1135577/17333030", check(t, x6(t), square(6)).RatString())
	// the trace of z_3 is minus the second coefficient of its eliminant
	trace := check(t, k6(t), integrand{power: map[[2]int]int{{3, 6}: 1}})
	want := new(big.Rat).Neg(eliminant(t, k6(t), 3).Monic[5])
	require.Equal(t, want.RatString(), trace.RatString())

	rapid.Check(t, func(r *rapid.T) {
		n := rapid.IntRange(4, 5).Draw(r, "n")
		d := generic(r, n)
		f := prime.TableField(0)
		if q := newQuotient(r, f, n, reduce(r, d, f), nil); !q.Separable() {
			return
		}
		g := integrand{power: map[[2]int]int{}}
		for a := 2; a <= n; a++ {
			for b := a + 1; b <= n; b++ {
				g.power[[2]int{a, b}] = rapid.IntRange(-2, 2).Draw(r, "power")
			}
		}
		g.jacobian = rapid.IntRange(-1, 1).Draw(r, "J")
		g.determinant = rapid.IntRange(-1, 1).Draw(r, "Phi")
		check(r, d, g)
	})
}

// Norm inverses hold for the exact data of a quadratic: x = sqrt(2)/3 has
// D = 3, |x| < 1; 1/x = 3 sqrt(2)/2 has D = 2, |1/x| < 2.13.
func TestHeightArithmetic(t *testing.T) {
	x := Height{math.Log2(3), 0}
	inverse := x.Inverse(2)
	require.GreaterOrEqual(t, inverse.Denominator, 1.0)
	require.GreaterOrEqual(t, inverse.Size, math.Log2(1.5*math.Sqrt2))
	require.Equal(t, Height{2 * math.Log2(3), 1}, x.Add(x))
	require.Equal(t, Height{2 * math.Log2(3), 0}, x.Mul(x))
	require.Equal(t, x.Mul(x), x.Pow(2))
	require.Equal(t, Height{}, x.Pow(0))
	rapid.Check(t, func(r *rapid.T) {
		p, q := rapid.Int64Range(-1<<40, 1<<40).Draw(r, "p"), rapid.Int64Range(1, 1<<40).Draw(r, "q")
		v := big.NewRat(p, q)
		h := RationalHeight(v)
		den, _ := v.Denom().Float64()
		require.GreaterOrEqual(r, h.Denominator, math.Log2(den))
		require.Less(r, h.Denominator, math.Log2(den)+1e-6)
		if p != 0 {
			abs, _ := new(big.Rat).Abs(v).Float64()
			require.GreaterOrEqual(r, h.Size, math.Log2(abs))
			require.Less(r, h.Size, math.Log2(abs)+1e-6)
		}
	})
	huge := new(big.Rat).SetInt(new(big.Int).Lsh(big.NewInt(5), 5000))
	require.InDelta(t, 5000+math.Log2(5), RationalHeight(huge).Size, 1e-6)
}

func TestHeightsNameVanishingChannels(t *testing.T) {
	for name, d := range map[string]*scattering.Data{
		"s25":  planar(t, 6, 2, 3, 5, 7, 11, 13, 17, 19, 23),
		"s136": planar(t, 6, 2, 3, 5, 7, 11, 13, 17, 29, 23),
		"s14":  planar(t, 6, 1, 1, 1, 1, 1, 1, 1, 1, 1),
	} {
		_, err := NewHeights(d)
		var e *DegenerateError
		require.True(t, errors.As(err, &e))
		require.Equal(t, name, e.Channel.String())
	}
	h, err := NewHeights(x5(t))
	require.NoError(t, err)
	require.Panics(t, func() { h.Difference(1, 3) })
	require.Panics(t, func() { h.Difference(3, 3) })
	require.Equal(t, Height{}, h.Difference(2, 5))
}
