package scattering

import (
	"fmt"
	"math/bits"
	"strings"
)

// MaxLegs bounds the number of legs of the package: tables over all channels
// have 2^(n-1) entries.
const MaxLegs = 24

// Channel is a set of legs, bit a-1 standing for leg a. A set and its
// complement are one channel, s_I = s_{I^c}; functions of this package return
// the half with fewer legs, and of two equal halves the one with leg 1.
type Channel uint32

// NewChannel returns the canonical channel of a set of legs out of n.
func NewChannel(n int, legs ...int) Channel {
	var c Channel
	for _, a := range legs {
		c |= 1 << (a - 1)
	}
	return c.Canonical(n)
}

// Canonical returns the half of {c, complement} with fewer legs, and of two
// equal halves the one with leg 1.
func (c Channel) Canonical(n int) Channel {
	full := Channel(1)<<n - 1
	k := 2 * c.Size()
	if k > n || k == n && c&1 == 0 {
		return full &^ c
	}
	return c
}

// Size returns the number of legs in the set.
func (c Channel) Size() int { return bits.OnesCount32(uint32(c)) }

// Has tells whether leg a is in the set.
func (c Channel) Has(a int) bool { return c>>(a-1)&1 == 1 }

// Legs returns the legs in ascending order.
func (c Channel) Legs() []int {
	legs := make([]int, 0, c.Size())
	for ; c != 0; c &= c - 1 {
		legs = append(legs, bits.TrailingZeros32(uint32(c))+1)
	}
	return legs
}

// String names the invariant of the channel: "s25", "s136", and "s(1,12)" where
// a leg has two digits.
func (c Channel) String() string {
	legs := c.Legs()
	var b strings.Builder
	if len(legs) > 0 && legs[len(legs)-1] > 9 {
		b.WriteString("s(")
		for i, a := range legs {
			if i > 0 {
				b.WriteByte(',')
			}
			fmt.Fprint(&b, a)
		}
		b.WriteByte(')')
		return b.String()
	}
	b.WriteByte('s')
	for _, a := range legs {
		fmt.Fprint(&b, a)
	}
	return b.String()
}

// compare orders channels by size, then by their legs.
func (c Channel) compare(d Channel) int {
	if k := c.Size() - d.Size(); k != 0 {
		return k
	}
	if c == d {
		return 0
	}
	// the first leg in which they differ decides: the set that has it is first
	if (c^d)&-(c^d)&c != 0 {
		return -1
	}
	return 1
}
