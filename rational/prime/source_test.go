package prime

import (
	"crypto/sha256"
	"encoding/binary"
	"math/big"
	"testing"

	"github.com/stretchr/testify/require"
)

// The stream is SHA-256(SHA-256(lengths and parts), counter), worked out here
// from the definition.
func TestSourceIsItsDefinition(t *testing.T) {
	h := sha256.New()
	for _, part := range []string{"seed", "", "claim"} {
		h.Write(binary.BigEndian.AppendUint64(nil, uint64(len(part))))
		h.Write([]byte(part))
	}
	key := h.Sum(nil)
	s := NewSource("seed", "", "claim")
	for counter := range uint64(5) {
		block := sha256.Sum256(binary.BigEndian.AppendUint64(append([]byte{}, key...), counter))
		for i := 0; i < 32; i += 8 {
			require.Equal(t, binary.BigEndian.Uint64(block[i:]), s.Uint64())
		}
	}
	require.NotEqual(t, NewSource("ab", "c").Uint64(), NewSource("a", "bc").Uint64(), "parts do not run together")
	require.NotEqual(t, NewSource("a").Uint64(), NewSource("a", "").Uint64())
}

// Chi-square with 9 degrees of freedom exceeds 40 with chance below 10^-5; the
// stream is fixed, so this test does not flicker.
func TestBelowIsUniform(t *testing.T) {
	s := NewSource("uniform")
	var count [10]float64
	const n = 20000
	for range n {
		count[s.Below(10)]++
	}
	chi := 0.0
	for _, c := range count {
		chi += (c - n/10) * (c - n/10) / (n / 10)
	}
	require.Less(t, chi, 40.0)
	for range 1000 {
		require.Less(t, s.Below(1<<63+1), uint64(1<<63+1))
		v := s.Between(-3, 2)
		require.True(t, -3 <= v && v <= 2)
	}
	require.Zero(t, s.Below(1))
	require.Panics(t, func() { s.Below(0) })
}

func TestPrimes(t *testing.T) {
	s := NewSource("primes")
	seen := map[uint64]bool{}
	for range 50 {
		p := s.Prime()
		require.Equal(t, uint64(1), p>>61, "%d is not in [2^61, 2^62)", p)
		require.True(t, new(big.Int).SetUint64(p).ProbablyPrime(20))
		require.False(t, seen[p])
		seen[p] = true
	}
	require.Equal(t, NewSource("x").Field().Modulus(), NewSource("x").Prime())
}
