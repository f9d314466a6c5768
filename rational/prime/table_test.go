package prime

import (
	"math/big"
	"testing"

	"github.com/stretchr/testify/require"
)

// The table by its rule: descending from 2^62, = 1 mod 2^20 315, prime, none
// left out.
func TestTable(t *testing.T) {
	next := uint64(1) << 62
	next -= next % TableStep
	next++
	for i := range 60 {
		p := TableField(i).Modulus()
		for {
			prime := next < 1<<62 && new(big.Int).SetUint64(next).ProbablyPrime(20)
			if prime {
				break
			}
			require.NotEqual(t, next, p, "%d is no prime", p)
			next -= TableStep
		}
		require.Equal(t, next, p)
		require.Equal(t, uint64(1), p%TableStep)
		require.Greater(t, p, uint64(1)<<61)
		next -= TableStep
	}
	require.Same(t, TableField(7), TableField(7))
}
