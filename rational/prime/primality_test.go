package prime

import (
	"math/big"
	"math/bits"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

func TestPrimalityOfSmallNumbers(t *testing.T) {
	const n = 20000
	composite := make([]bool, n)
	for i := 2; i < n; i++ {
		require.Equal(t, !composite[i], IsPrime(uint64(i)), "%d", i)
		for j := i * i; j < n; j += i {
			composite[j] = true
		}
	}
	require.False(t, IsPrime(0))
	require.False(t, IsPrime(1))
}

// Strong pseudoprimes to the first 4, 9 and 11 prime bases (G. Jaeschke, On
// strong pseudoprimes to several bases, Math. Comp. 61 (1993) 915; values from
// memory, factored by math/big's test) and Carmichael numbers.
func TestPseudoprimes(t *testing.T) {
	for _, n := range []uint64{561, 1105, 1729, 2465, 41041, 825265, 3215031751, 2152302898747, 3474749660383, 341550071728321, 3825123056546413051} {
		require.False(t, new(big.Int).SetUint64(n).ProbablyPrime(20))
		require.False(t, IsPrime(n), "%d", n)
	}
	require.True(t, IsPrime(1<<61-1))
	require.True(t, IsPrime(4611686018427387847))
	require.True(t, IsPrime(18446744073709551557))
}

func TestPrimalityAgainstBig(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.Uint64().Draw(t, "n")
		require.Equal(t, new(big.Int).SetUint64(n).ProbablyPrime(20), IsPrime(n))
	})
}

// Carmichael numbers are found here by Korselt's criterion: squarefree, and
// q - 1 divides n - 1 for every prime q dividing n.
func TestIsPrimeRefusesCarmichaelNumbers(t *testing.T) {
	korselt := func(n uint64) bool {
		rest, factors := n, 0
		for q := uint64(3); q*q <= rest; q += 2 {
			if rest%q == 0 {
				if rest /= q; rest%q == 0 || (n-1)%(q-1) != 0 {
					return false
				}
				factors++
			}
		}
		return factors > 0 && (n-1)%(rest-1) == 0
	}
	var found []uint64
	for n := uint64(3); n < 100_000; n += 2 {
		if korselt(n) {
			found = append(found, n)
			require.False(t, IsPrime(n), "%d", n)
		}
	}
	require.Len(t, found, 16)
	require.Equal(t, []uint64{561, 1105, 1729, 2465, 2821}, found[:5])

	// (6k+1)(12k+1)(18k+1) with three prime factors is one (J. Chernick, 1939);
	// here without a factor that trial division finds
	large := 0
	for k := uint64(1000); k < 150_000; k++ {
		if !IsPrime(6*k+1) || !IsPrime(12*k+1) || !IsPrime(18*k+1) {
			continue
		}
		n := (6*k + 1) * (12*k + 1) * (18*k + 1)
		require.EqualValues(t, 1, powMod(2, n-1, n), "%d passes Fermat's test", n)
		require.False(t, IsPrime(n), "%d", n)
		large++
	}
	require.Greater(t, large, 100)
}

// The least strong pseudoprimes to the first k prime bases (G. Jaeschke, Math.
// Comp. 61 (1993) 915; J. Sorenson, J. Webster, Math. Comp. 86 (2017) 985).
// They pass exactly the rounds they are known for; the values are from memory,
// and the test confirms that they pass.
func TestIsPrimeRefusesStrongPseudoprimes(t *testing.T) {
	for _, c := range []struct {
		n      uint64
		passes int
	}{
		{2047, 1}, {1373653, 2}, {25326001, 3}, {3215031751, 4}, {2152302898747, 5},
		{3474749660383, 6}, {341550071728321, 8}, {3825123056546413051, 11},
	} {
		d := c.n - 1
		s := bits.TrailingZeros64(d)
		d >>= s
		passed := 0
		for passed < len(witnesses) && strongProbablePrime(c.n, witnesses[passed], d, s) {
			passed++
		}
		require.GreaterOrEqual(t, passed, c.passes, "%d", c.n)
		require.Less(t, passed, len(witnesses), "%d", c.n)
		require.False(t, IsPrime(c.n), "%d", c.n)
		require.False(t, new(big.Int).SetUint64(c.n).ProbablyPrime(20), "%d", c.n)
	}
}

// All primes within 200 of 2^62, found by a program in another language.
func TestIsPrimeNearBound(t *testing.T) {
	var found []int
	for off := -200; off <= 200; off++ {
		if IsPrime(uint64(1<<62 + off)) {
			found = append(found, off)
		}
	}
	require.Equal(t, []int{-195, -171, -167, -153, -143, -117, -87, -57, 135, 169, 177, 187, 189, 193}, found)
	require.True(t, IsPrime(1<<61-1))
	require.True(t, IsPrime(1<<64-59))
	require.False(t, IsPrime(1<<64-1))
}

func TestPowModAgainstBig(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.Uint64Min(2).Draw(t, "n")
		x, e := rapid.Uint64().Draw(t, "x"), rapid.Uint64().Draw(t, "e")
		u := func(v uint64) *big.Int { return new(big.Int).SetUint64(v) }
		require.Equal(t, new(big.Int).Exp(u(x), u(e), u(n)).Uint64(), powMod(x, e, n))
	})
}
