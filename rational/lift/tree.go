package lift

import (
	"math/big"

	"github.com/remyoudompheng/bigfft"
)

// fftWords is the size, in words of the smaller factor, from which bigfft
// multiplies faster than math/big (TestCalibrate prints it).
const fftWords = 1500

// mul returns x y, by FFT for large factors.
func mul(x, y *big.Int) *big.Int {
	if min(len(x.Bits()), len(y.Bits())) >= fftWords {
		return bigfft.Mul(x, y)
	}
	return new(big.Int).Mul(x, y)
}

// Tree is the product tree of distinct primes, for combining residues by the
// Chinese remainder theorem (J. von zur Gathen, J. Gerhard, Modern Computer
// Algebra, 2003, section 10.3). It is immutable once made.
type Tree struct {
	primes []uint64
	levels [][]*big.Int // levels[0]: the primes; last: their product
	inv    []uint64     // (product/p_i)^{-1} mod p_i
}

// NewTree returns the tree of distinct primes. It panics on an empty list.
func NewTree(primes []uint64) *Tree {
	if len(primes) == 0 {
		panic("lift: no primes")
	}
	t := &Tree{primes: append([]uint64(nil), primes...)}
	level := make([]*big.Int, len(primes))
	for i, p := range primes {
		level[i] = new(big.Int).SetUint64(p)
	}
	t.levels = [][]*big.Int{level}
	for len(level) > 1 {
		next := make([]*big.Int, (len(level)+1)/2)
		for i := range next {
			if 2*i+1 < len(level) {
				next[i] = mul(level[2*i], level[2*i+1])
			} else {
				next[i] = level[2*i]
			}
		}
		level = next
		t.levels = append(t.levels, level)
	}
	t.invert()
	return t
}

// invert finds (P/p_i)^{-1} mod p_i from P mod p_i^2, by a remainder tree.
func (t *Tree) invert() {
	top := len(t.levels) - 1
	square := func(x *big.Int) *big.Int { return mul(x, x) }
	rem := []*big.Int{t.Product()}
	for l := top - 1; l >= 0; l-- {
		next := make([]*big.Int, len(t.levels[l]))
		for i, m := range t.levels[l] {
			next[i] = new(big.Int).Mod(rem[i/2], square(m))
		}
		rem = next
	}
	t.inv = make([]uint64, len(t.primes))
	for i, r := range rem {
		p := t.levels[0][i]
		q := new(big.Int)
		if top == 0 {
			q.SetInt64(1)
		} else {
			q.Quo(r, p)
		}
		t.inv[i] = q.ModInverse(q.Mod(q, p), p).Uint64()
	}
}

// Product returns the product of the primes; it must not be modified.
func (t *Tree) Product() *big.Int { return t.levels[len(t.levels)-1][0] }

// Combine sets z to the integer of least absolute value with the given
// residues, residues[i] in [0, p_i), and returns z.
func (t *Tree) Combine(z *big.Int, residues []uint64) *big.Int {
	level := make([]*big.Int, len(t.primes))
	var p, q big.Int
	for i, r := range residues {
		p.SetUint64(t.primes[i])
		x := new(big.Int).SetUint64(r)
		level[i] = x.Mod(x.Mul(x, q.SetUint64(t.inv[i])), &p)
	}
	for l := 0; len(level) > 1; l++ {
		next := make([]*big.Int, (len(level)+1)/2)
		for i := range next {
			if 2*i+1 < len(level) {
				a := mul(level[2*i], t.levels[l][2*i+1])
				next[i] = a.Add(a, mul(level[2*i+1], t.levels[l][2*i]))
			} else {
				next[i] = level[2*i]
			}
		}
		level = next
	}
	z.Mod(level[0], t.Product())
	if p.Lsh(z, 1).Cmp(t.Product()) > 0 {
		z.Sub(z, t.Product())
	}
	return z
}
