package resultant

import (
	"context"
	"math/big"
	"testing"

	"eliminant/rational/lift"
	"eliminant/rational/prime"
	"eliminant/rational/scattering"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

func eliminant(t *testing.T, d *scattering.Data, leg int) *Eliminant {
	e, err := ComputeEliminant(context.Background(), d, leg, Options{})
	require.NoError(t, err)
	require.Equal(t, lift.Bound, e.Record.Proof)
	for _, c := range e.Monic {
		x := new(big.Rat).Mul(c, new(big.Rat).SetInt(e.Lead))
		require.True(t, x.IsInt())
		require.LessOrEqual(t, x.Num().CmpAbs(e.Bound), 0)
	}
	return e
}

// product multiplies integer polynomials, constant coefficient first.
func product(factors ...[]int64) []*big.Rat {
	z := []*big.Rat{big.NewRat(1, 1)}
	for _, f := range factors {
		next := make([]*big.Rat, len(z)+len(f)-1)
		for i := range next {
			next[i] = new(big.Rat)
		}
		for i, x := range z {
			for j, y := range f {
				next[i+j].Add(next[i+j], new(big.Rat).Mul(x, big.NewRat(y, 1)))
			}
		}
		z = next
	}
	lead := new(big.Rat).Inv(z[len(z)-1])
	for _, x := range z {
		x.Mul(x, lead)
	}
	return z
}

func requireSame(t *testing.T, want, got []*big.Rat) {
	t.Helper()
	require.Len(t, got, len(want))
	for i := range want {
		require.Equal(t, want[i].RatString(), got[i].RatString(), "coefficient %d", i)
	}
}

// Eliminants computed by an independent program with general elimination.
func TestKnownEliminants(t *testing.T) {
	for _, c := range []struct {
		name    string
		d       *scattering.Data
		leg     int
		factors [][]int64
	}{
		{"K5", k5(t), 3, [][]int64{{-2, 1}, {105, 31}}},
		{"K5", k5(t), 4, [][]int64{{-3, 2}, {-483, 155}}},
		{"X5", x5(t), 3, [][]int64{{-8, 1}, {-3, 8}}},
		{"X5", x5(t), 4, [][]int64{{6, 1}, {-1, 10}}},
		{"K6", k6(t), 3, [][]int64{{-1, 2}, {147, 74}, {30429, -108990, -223974, 99904, 26936}}},
		{"K6", k6(t), 4, [][]int64{{-3, 4}, {-301, 444}, {1433061, -8499972, 18171860, -16577312, 5448768}}},
		{"K6", k6(t), 5, [][]int64{{-3, 2}, {189, 370}, {352107, 1277046, -805986, -1760304, 611240}}},
		{"X6", x6(t), 3, [][]int64{{-71604, 1001574, -5145167, 8979625, 613790, -5927712, 1824768}}},
		{"the golden ratio", planar(t, 5, 1, 1, 1, 1, 1), 3, [][]int64{{-1, 1, 1}}},
	} {
		t.Run(c.name, func(t *testing.T) {
			requireSame(t, product(c.factors...), eliminant(t, c.d, c.leg).Monic)
		})
	}
}

// K7: degree 24, with the rational roots -2 and -189/32 (independent program).
func TestKnownDivisor(t *testing.T) {
	e := eliminant(t, k7(t), 3)
	require.Len(t, e.Monic, 25)
	for _, root := range []*big.Rat{big.NewRat(-2, 1), big.NewRat(-189, 32)} {
		require.Zero(t, value(e.Monic, root).Sign())
	}
	require.NotZero(t, value(e.Monic, big.NewRat(2, 1)).Sign())
}

func value(c []*big.Rat, x *big.Rat) *big.Rat {
	z := new(big.Rat)
	for i := len(c) - 1; i >= 0; i-- {
		z.Mul(z, x).Add(z, c[i])
	}
	return z
}

// n = 4 in closed form: z_3 = -s_12/s_13.
func TestFourLegs(t *testing.T) {
	d := x4(t)
	e := eliminant(t, d, 3)
	want := d.At(1, 2)
	want.Quo(want, d.At(1, 3))
	requireSame(t, []*big.Rat{want, big.NewRat(1, 1)}, e.Monic)
}

// The solutions of startData are permutations of the zeros of the Chebyshev
// polynomial T_m(2z-1), so every z_a has the characteristic polynomial
// T_m(2z-1)^{(m-1)!}; no z_a separates them. T_2(x) = 2x^2 - 1, T_3 = 4x^3 - 3x,
// T_4 = 8x^4 - 8x^2 + 1.
func TestEliminantOfSymmetricData(t *testing.T) {
	for n, c := range map[int]struct {
		chebyshev []int64
		power     int
	}{
		5: {[]int64{1, -8, 8}, 1},
		6: {[]int64{-1, 18, -48, 32}, 2},
		7: {[]int64{1, -32, 160, -256, 128}, 6},
	} {
		var factors [][]int64
		for range c.power {
			factors = append(factors, c.chebyshev)
		}
		for _, leg := range []int{3, n - 1} {
			requireSame(t, product(factors...), eliminant(t, startData(t, n), leg).Monic)
		}
	}
}

func TestEliminantErrors(t *testing.T) {
	ctx := context.Background()
	_, err := ComputeEliminant(ctx, k7(t), 3, Options{MaxLegs: 6})
	var outside *RangeError
	require.ErrorAs(t, err, &outside)
	require.EqualError(t, err, "eliminant for 7 legs: the range is 4 to 6")
	for _, leg := range []int{0, 1, 2, 7, 8} {
		_, err = ComputeEliminant(ctx, k7(t), leg, Options{})
		var e *RoleError
		require.ErrorAs(t, err, &e)
	}
	var e *DegenerateError
	// all planar invariants 1
	_, err = ComputeEliminant(ctx, planar(t, 6, 1, 1, 1, 1, 1, 1, 1, 1, 1), 3, Options{})
	require.ErrorAs(t, err, &e)
	require.Equal(t, "s14", e.Channel.String())

	reason := context.DeadlineExceeded
	done, cancel := context.WithCancelCause(ctx)
	cancel(reason)
	_, err = ComputeEliminant(done, k7(t), 3, Options{})
	require.ErrorIs(t, err, reason)
}

// Points that are regular for every planar diagram while solutions coincide with
// fixed punctures: s25 = 0 puts z_5 on z_2 = 1, s136 = s245 = 0 both z_4 and z_5.
// Sums are named degenerate by scattering.Data.Vanishing; the polynomial exists.
func TestTrapsShowInTheEliminant(t *testing.T) {
	one := big.NewRat(1, 1)
	rootAtOne := func(d *scattering.Data) (legs []int) {
		for leg := 3; leg <= 5; leg++ {
			if value(eliminant(t, d, leg).Monic, one).Sign() == 0 {
				legs = append(legs, leg)
			}
		}
		return legs
	}
	require.Empty(t, rootAtOne(x6(t)))
	require.Equal(t, []int{5}, rootAtOne(planar(t, 6, 2, 3, 5, 7, 11, 13, 17, 19, 23)))
	require.Equal(t, []int{4, 5}, rootAtOne(planar(t, 6, 2, 3, 5, 7, 11, 13, 17, 29, 23)))
}

func TestWorkersDoNotChangeTheEliminant(t *testing.T) {
	one, err := ComputeEliminant(context.Background(), k7(t), 4, Options{})
	require.NoError(t, err)
	two, err := ComputeEliminant(context.Background(), k7(t), 4, Options{Workers: 2})
	require.NoError(t, err)
	require.Equal(t, one, two)
}

func BenchmarkEliminant(b *testing.B) {
	d := k7(b)
	b.ReportAllocs()
	for b.Loop() {
		_, err := ComputeEliminant(context.Background(), d, 3, Options{})
		require.NoError(b, err)
	}
}

// Over random data: the product of the roots is known from det T0 / det T1, and the
// polynomial is the same from the matrix of M modulo a fresh prime.
func TestEliminantsOfRandomData(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		n := rapid.IntRange(4, 6).Draw(r, "n")
		d := generic(r, n)
		leg := rapid.IntRange(3, n-1).Draw(r, "leg")
		e, err := ComputeEliminant(context.Background(), d, leg, Options{})
		require.NoError(r, err)
		factorial := []int{1, 1, 2}
		ratio := big.NewRat(1, 1)
		for v := range 1 << (n - 4) {
			two, other := []int{1, 2}, []int{1, leg}
			size := 0
			for a, j := 3, 0; a < n; a++ {
				if a == leg {
					continue
				}
				if v>>j&1 == 1 {
					two, other = append(two, a), append(other, a)
					size++
				}
				j++
			}
			x := d.Sum(scattering.NewChannel(n, two...))
			x.Quo(x, d.Sum(scattering.NewChannel(n, other...)))
			for range factorial[size] * factorial[n-4-size] {
				ratio.Mul(ratio, x)
			}
		}
		require.Equal(r, ratio.RatString(), e.Monic[0].RatString())

		f := prime.NewSource("eliminant").Field()
		p := newPencil(r, f, n, reduce(r, d, f), hiddenOrder(n, leg))
		c, err := characteristicDense(context.Background(), p)
		require.NoError(r, err)
		for i, x := range e.Monic {
			v, ok := f.FromRat(x)
			require.True(r, ok)
			require.Equal(r, c[i], v)
		}
	})
}
