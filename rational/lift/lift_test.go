package lift

import (
	"context"
	"errors"
	"math/big"
	"testing"

	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

func drawInt(t *rapid.T, bits int, label string) *big.Int {
	b := rapid.SliceOfN(rapid.Byte(), 0, bits/8).Draw(t, label)
	z := new(big.Int).SetBytes(b)
	if rapid.Bool().Draw(t, label+" negative") {
		z.Neg(z)
	}
	return z
}

func kernelOf(x ...*big.Rat) Kernel {
	return func(_ context.Context, f *prime.Field, out []prime.Element) error {
		for i, v := range x {
			e, ok := f.FromRat(v)
			if !ok {
				return prime.ErrBadPrime
			}
			out[i] = e
		}
		return nil
	}
}

func TestIntegersReturnWhatTheKernelKnows(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x, y := drawInt(t, 2000, "x"), drawInt(t, 100, "y")
		bound := new(big.Int).Abs(x)
		if bound.CmpAbs(y) < 0 {
			bound.Abs(y)
		}
		k := kernelOf(new(big.Rat).SetInt(x), new(big.Rat).SetInt(y))
		var first *Record
		for workers := 1; workers <= 3; workers++ {
			got, record, err := Integers(context.Background(), 2, bound, k, Options{Workers: workers})
			require.NoError(t, err)
			require.Zero(t, got[0].Cmp(x))
			require.Zero(t, got[1].Cmp(y))
			require.Equal(t, Bound, record.Proof)
			product := big.NewInt(1)
			for _, p := range record.Primes {
				product.Mul(product, new(big.Int).SetUint64(p))
			}
			require.Positive(t, product.Cmp(new(big.Int).Lsh(bound, 1)))
			if first == nil {
				first = record
			}
			require.Equal(t, first, record, "the record does not depend on the number of workers")
		}
		got, record, err := Integers(context.Background(), 2, nil, k, Options{Proof: Agreement})
		require.NoError(t, err)
		require.Zero(t, got[0].Cmp(x))
		require.Equal(t, Agreement, record.Proof)
	})
}

func TestRationalsReturnWhatTheKernelKnows(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		num, den := drawInt(t, 1500, "num"), drawInt(t, 1500, "den")
		den.Abs(den).Add(den, big.NewInt(1))
		x := new(big.Rat).SetFrac(num, den)
		for _, o := range []Options{{}, {Workers: 2}, {Proof: Agreement}} {
			got, record, err := Rationals(context.Background(), 1, new(big.Int).Abs(num), den, kernelOf(x), o)
			require.NoError(t, err)
			require.Zero(t, got[0].Cmp(x))
			require.NotEmpty(t, record.Primes)
		}
	})
}

// A bound that is too small is noticed or gives another number: it is the
// caller's proof that makes the result right.
func TestTooSmallABound(t *testing.T) {
	x := new(big.Rat).SetInt(new(big.Int).Lsh(big.NewInt(1), 300))
	_, _, err := Integers(context.Background(), 1, big.NewInt(1000), kernelOf(x), Options{})
	var wrong *BoundError
	require.ErrorAs(t, err, &wrong)
	_, _, err = Rationals(context.Background(), 1, big.NewInt(1000), big.NewInt(1000), kernelOf(x), Options{})
	require.ErrorAs(t, err, &wrong)
}

// Known trap (checked with a general-purpose algebra system's arithmetic):
// 355/113 mod 10007 = 3634 within Wang's bounds is -54/11, and -452611/7936110
// survives a 61-bit prime but not a 31-bit one.
func TestReconstructionTraps(t *testing.T) {
	wang := func(m int64) *big.Int {
		b := big.NewInt((m - 1) / 2)
		return b.Sqrt(b)
	}
	try := func(u, m int64) string {
		b := wang(m)
		r, ok := Reconstruct(big.NewInt(u), big.NewInt(m), b, b)
		if !ok {
			return "none"
		}
		return r.RatString()
	}
	require.Equal(t, "-54/11", try(3634, 10007))
	require.Equal(t, "-7/13", try(1539, 10007))
	require.Equal(t, "70/69", try(4932, 10007))
	require.Equal(t, "-452611/7936110", try(1590207993930312622, 1<<61-1))
	require.Equal(t, "-26027/29340", try(1118462767, 1<<31-1))
	// with bounds that the true fraction meets and that fit the modulus the
	// wrong one is not found
	_, ok := Reconstruct(big.NewInt(3634), big.NewInt(10007), big.NewInt(355), big.NewInt(10))
	require.False(t, ok)
	require.Equal(t, int64(70), wang(10007).Int64())
	require.Equal(t, int64(32767), wang(1<<31-1).Int64())
	require.Equal(t, int64(1073741823), wang(1<<61-1).Int64())
}

func TestReconstructLong(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		bits := rapid.IntRange(8, 6000).Draw(t, "bits")
		num, den := drawInt(t, bits, "num"), drawInt(t, bits, "den")
		den.Abs(den).Add(den, big.NewInt(1))
		x := new(big.Rat).SetFrac(num, den)
		bound := new(big.Int).Lsh(big.NewInt(1), uint(bits+1))
		m := new(big.Int).Lsh(mul(bound, bound), 1)
		m.Add(m, big.NewInt(1))
		for new(big.Int).GCD(nil, nil, m, x.Denom()).Cmp(big.NewInt(1)) != 0 {
			m.Add(m, big.NewInt(1))
		}
		u := new(big.Int).ModInverse(x.Denom(), m)
		u.Mod(u.Mul(u, x.Num()), m)
		got, ok := Reconstruct(u, m, bound, bound)
		require.True(t, ok)
		require.Zero(t, got.Cmp(x))
	})
}

func TestTreeAgainstDefinition(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 40).Draw(t, "n")
		primes := make([]uint64, n)
		residues := make([]uint64, n)
		for i := range primes {
			primes[i] = prime.TableField(i).Modulus()
			residues[i] = rapid.Uint64Range(0, primes[i]-1).Draw(t, "residue")
		}
		tree := NewTree(primes)
		x := tree.Combine(new(big.Int), residues)
		require.LessOrEqual(t, new(big.Int).Lsh(x, 1).CmpAbs(tree.Product()), 0)
		for i, p := range primes {
			m := new(big.Int).Mod(x, new(big.Int).SetUint64(p))
			require.Equal(t, residues[i], m.Uint64())
		}
	})
}

func TestFailures(t *testing.T) {
	ctx := context.Background()
	big1000 := new(big.Int).Lsh(big.NewInt(1), 1000)
	_, _, err := Integers(ctx, 1, big1000, kernelOf(new(big.Rat)), Options{MaxPrimes: 3})
	var budget *BudgetError
	require.ErrorAs(t, err, &budget)
	require.Equal(t, 17, budget.Needed)

	boom := errors.New("boom")
	_, _, err = Integers(ctx, 1, big1000, func(context.Context, *prime.Field, []prime.Element) error { return boom }, Options{Workers: 2})
	require.ErrorIs(t, err, boom)

	_, _, err = Integers(ctx, 1, big1000, func(context.Context, *prime.Field, []prime.Element) error { return prime.ErrBadPrime }, Options{})
	var never *KernelError
	require.ErrorAs(t, err, &never)

	// every other prime is bad: the result is the same, from other primes
	calls := 0
	x, record, err := Integers(ctx, 1, big1000, func(ctx context.Context, f *prime.Field, out []prime.Element) error {
		calls++
		if calls%2 == 0 {
			return prime.ErrBadPrime
		}
		return kernelOf(big.NewRat(-77, 1))(ctx, f, out)
	}, Options{})
	require.NoError(t, err)
	require.Equal(t, int64(-77), x[0].Int64())
	require.Positive(t, record.BadPrimes)

	stop, cancel := context.WithCancelCause(ctx)
	why := errors.New("user stopped")
	n := 0
	_, _, err = Integers(stop, 1, big1000, func(ctx context.Context, f *prime.Field, out []prime.Element) error {
		if n++; n == 3 {
			cancel(why)
		}
		return nil
	}, Options{})
	require.ErrorIs(t, err, why)
}
