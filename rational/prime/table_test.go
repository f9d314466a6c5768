package prime

import (
	"math/big"
	"sync"
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

// The start of the table, found by a program in another language.
func TestTableIsPinned(t *testing.T) {
	for i, p := range map[int]uint64{
		0: 4611686015717867521, 1: 4611686015387566081, 2: 4611686011754250241, 39: 4611685903415377921,
	} {
		require.Equal(t, p, TableField(i).Modulus(), "entry %d", i)
	}
}

func TestTableFromManyGoroutines(t *testing.T) {
	const n = 60
	var got [4][n]*Field
	var wg sync.WaitGroup
	for w := range got {
		wg.Go(func() {
			for i := range n {
				got[w][i] = TableField(i)
			}
		})
	}
	wg.Wait()
	for w := range got {
		for i, f := range got[w] {
			require.Same(t, TableField(i), f)
		}
	}
}
