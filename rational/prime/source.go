package prime

import (
	"crypto/sha256"
	"encoding/binary"
)

// Source is a stream of random words: SHA-256 of (key, counter) in counter
// mode, the key being the SHA-256 of its length-prefixed parts. Equal parts
// give equal streams on every machine. Not safe for concurrent use.
type Source struct {
	key     [32]byte
	counter uint64
	block   [32]byte
	used    int // bytes of block already given out
}

// NewSource returns the stream of the given parts, for instance a seed, the
// text of a claim and the number of a round.
func NewSource(parts ...string) *Source {
	h := sha256.New()
	var n [8]byte
	for _, s := range parts {
		binary.BigEndian.PutUint64(n[:], uint64(len(s)))
		h.Write(n[:])
		h.Write([]byte(s))
	}
	s := &Source{used: 32}
	h.Sum(s.key[:0])
	return s
}

// Uint64 returns the next word.
func (s *Source) Uint64() uint64 {
	if s.used == len(s.block) {
		var in [40]byte
		copy(in[:], s.key[:])
		binary.BigEndian.PutUint64(in[32:], s.counter)
		s.counter++
		s.block = sha256.Sum256(in[:])
		s.used = 0
	}
	w := binary.BigEndian.Uint64(s.block[s.used:])
	s.used += 8
	return w
}

// Below returns a uniform integer in [0, n), n > 0, by rejection.
func (s *Source) Below(n uint64) uint64 {
	if n == 0 {
		panic("prime: Source.Below(0)")
	}
	limit := -n % n // 2^64 mod n: the words below it are rejected
	for {
		if w := s.Uint64(); w >= limit {
			return w % n
		}
	}
}

// Between returns a uniform integer in [lo, hi], lo <= hi.
func (s *Source) Between(lo, hi int64) int64 {
	return lo + int64(s.Below(uint64(hi-lo)+1))
}

// Prime returns a prime drawn uniformly from those of [2^61, 2^62), more than
// 2^55 of them (J. B. Rosser, L. Schoenfeld, Illinois J. Math. 6 (1962) 64), by
// rejection. Cost: about 21 candidates.
func (s *Source) Prime() uint64 {
	for {
		n := 1<<61 | s.Uint64()>>3 | 1
		if IsPrime(n) {
			return n
		}
	}
}

// Field returns GF(p) for the next Prime.
func (s *Source) Field() *Field { return newField(s.Prime()) }
