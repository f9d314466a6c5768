package prime

import (
	"math/big"
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
