package prime

import (
	"crypto/sha256"
	"encoding/binary"
	"math"
	"math/big"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
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

// The streams are part of what a seed means. The words were computed by a
// program in another language from the definition in the comment of Source.
func TestSourceWordsArePinned(t *testing.T) {
	for _, c := range []struct {
		parts []string
		words []uint64
	}{
		{nil, []uint64{0x5c5d42dcf39f71c0, 0x226ca720d8d518db, 0x615b5773f038e5e4,
			0x91963f6f47621bbd, 0x48f2b0172585b575, 0x13296eb5a7d22391}},
		{[]string{"eliminant"}, []uint64{0xd3d3201aff2f7dbe, 0x9293b3a9a0276d0b, 0x874a3eb71d017d46,
			0x538f27736ecdba12, 0x4b0adc622c6f65b2, 0x0deff0e1943356ec}},
		{[]string{"1", "claim", "0"}, []uint64{0x6d7958b8fec531d1, 0xdc1abc44479d738b, 0x4ce2eb4f33b54592,
			0xe126b94c5de568a8, 0xcf39a71d91b8e851, 0xd758763ac5306c91}},
	} {
		s := NewSource(c.parts...)
		for i, w := range c.words {
			require.Equal(t, w, s.Uint64(), "parts %q, word %d", c.parts, i)
		}
	}
	require.EqualValues(t, 3106721518509930449, NewSource("eliminant").Prime())
	require.EqualValues(t, 4288367514111684209, NewSource("1", "claim", "0").Prime())
	require.EqualValues(t, 4288367514111684209, NewSource("1", "claim", "0").Field().Modulus())
}

func firstWords(parts ...string) [4]uint64 {
	s := NewSource(parts...)
	return [4]uint64{s.Uint64(), s.Uint64(), s.Uint64(), s.Uint64()}
}

func TestSourcePartsAreKeptApart(t *testing.T) {
	seen := map[[4]uint64][]string{}
	for _, parts := range [][]string{
		nil, {""}, {"", ""}, {"a"}, {"b"}, {"a", ""}, {"", "a"},
		{"abc"}, {"ab", "c"}, {"a", "bc"}, {"a", "b", "c"}, {"c", "ab"},
		{"a\x00\x00\x00\x00\x00\x00\x00\x01b"}, {"a", "b"},
	} {
		w := firstWords(parts...)
		require.NotContains(t, seen, w, "%q and %q", parts, seen[w])
		seen[w] = parts
		require.Equal(t, w, firstWords(parts...))
	}
}

func TestSourceStaysInRange(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := NewSource(rapid.String().Draw(t, "seed"))
		n := rapid.Uint64Min(1).Draw(t, "n")
		lo := rapid.Int64().Draw(t, "lo")
		hi := rapid.Int64Min(lo).Draw(t, "hi")
		for range 20 {
			require.Less(t, s.Below(n), n)
			require.Zero(t, s.Below(1))
			v := s.Between(lo, hi)
			require.GreaterOrEqual(t, v, lo)
			require.LessOrEqual(t, v, hi)
			require.Equal(t, lo, s.Between(lo, lo))
		}
	})
	require.PanicsWithValue(t, "prime: Source.Below(0)", func() { NewSource().Below(0) })
}

// uniform is a chi-square test: the statistic has mean d and variance 2d for
// d + 1 cells, and may lie six deviations above.
func uniform(counts []int) bool {
	total := 0
	for _, c := range counts {
		total += c
	}
	want := float64(total) / float64(len(counts))
	chi := 0.0
	for _, c := range counts {
		chi += (float64(c) - want) * (float64(c) - want) / want
	}
	d := float64(len(counts) - 1)
	return chi < d+6*math.Sqrt(2*d)
}

func TestBelowAgainstBiasedDraws(t *testing.T) {
	const draws = 20_000
	s := NewSource("prime tests", "uniform")
	for _, n := range []uint64{2, 3, 5, 7, 10, 16, 100} {
		counts, biased := make([]int, n), make([]int, n)
		for range draws {
			counts[s.Below(n)]++
			biased[min(s.Below(n), s.Below(4*n))]++
		}
		require.True(t, uniform(counts), "n %d: %v", n, counts)
		require.False(t, uniform(biased), "n %d: the test sees no bias", n)
	}

	// a quarter of the words is rejected; reduced instead, they would double
	// the first cell
	counts, reduced := make([]int, 3), make([]int, 3)
	for range draws {
		counts[s.Below(3<<62)>>62]++
		reduced[s.Uint64()%(3<<62)>>62]++
	}
	require.True(t, uniform(counts), "%v", counts)
	require.False(t, uniform(reduced), "%v", reduced)

	between := make([]int, 7)
	for range draws {
		between[s.Between(-3, 3)+3]++
	}
	require.True(t, uniform(between), "%v", between)
}

func TestPrimesFillTheInterval(t *testing.T) {
	s := NewSource("prime tests", "interval")
	seen := map[uint64]bool{}
	halves := make([]int, 2)
	for range 200 {
		p := s.Prime()
		require.GreaterOrEqual(t, p, uint64(1)<<61)
		require.Less(t, p, uint64(1)<<62)
		require.True(t, new(big.Int).SetUint64(p).ProbablyPrime(20), "%d", p)
		require.False(t, seen[p])
		seen[p] = true
		halves[p>>60&1]++
	}
	require.True(t, uniform(halves), "%v", halves)
}
