package prime

import "math/bits"

// witnesses are the first 12 primes: Miller-Rabin to these bases decides
// primality below 3.18 10^23 (J. Sorenson, J. Webster, Strong pseudoprimes to
// twelve prime bases, Math. Comp. 86 (2017) 985).
var witnesses = [...]uint64{2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37}

// IsPrime decides whether n is prime. Cost: at most 12 modular powers.
func IsPrime(n uint64) bool {
	if n < 2 {
		return false
	}
	for _, w := range witnesses {
		if n%w == 0 {
			return n == w
		}
	}
	d := n - 1
	s := bits.TrailingZeros64(d)
	d >>= uint(s)
	for _, w := range witnesses {
		if !strongProbablePrime(n, w, d, s) {
			return false
		}
	}
	return true
}

// strongProbablePrime is one Miller-Rabin round, n - 1 = d 2^s with d odd.
func strongProbablePrime(n, base, d uint64, s int) bool {
	x := powMod(base, d, n)
	if x == 1 || x == n-1 {
		return true
	}
	for range s - 1 {
		x = mulMod(x, x, n)
		if x == n-1 {
			return true
		}
	}
	return false
}

func mulMod(x, y, n uint64) uint64 {
	hi, lo := bits.Mul64(x, y)
	_, r := bits.Div64(hi, lo, n)
	return r
}

func powMod(x, e, n uint64) uint64 {
	z := uint64(1)
	x %= n
	for ; e > 0; e >>= 1 {
		if e&1 == 1 {
			z = mulMod(z, x, n)
		}
		x = mulMod(x, x, n)
	}
	return z
}
