package claim

import (
	"math/big"
	"testing"

	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// A drawn point is a valid point over Q, and its reduction is the point drawn
// modulo the prime: what an identity round tests is what a counterexample shows.
func TestDrawsReduce(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := coordinates{legs: rapid.IntRange(4, 9).Draw(t, "legs")}
		switch rapid.IntRange(0, 2).Draw(t, "masses") {
		case 1:
			c.masses.Free = true
		case 2:
			c.masses.Squared = big.NewRat(rapid.Int64Range(1, 99).Draw(t, "m2"), rapid.Int64Range(1, 9).Draw(t, "den"))
		}
		src := prime.NewSource(rapid.String().Draw(t, "seed"))
		f := src.Field()
		values := c.draw(src)
		require.Len(t, values, c.variables())
		whole := make([]*big.Int, len(values))
		for i, v := range values {
			require.Less(t, v, uint64(drawRange))
			whole[i] = new(big.Int).SetUint64(v)
		}
		p, err := c.point("drawn", whole)
		require.NoError(t, err)
		require.NoError(t, p.Validate())
		v, err := p.Invariants()
		require.NoError(t, err)
		want, err := v.Reduce(f)
		require.NoError(t, err)
		got, err := c.reduced(f, values)
		require.NoError(t, err)
		require.Equal(t, want.S, got.S)
		require.Equal(t, want.M, got.M)
	})
}
