package lift

import "math/big"

// Reconstruct returns the fraction p/q with |p| <= numBound, 0 < q <= denBound,
// gcd(p,q) = 1 and p = u q mod m, if there is one (P. S. Wang, M. J. T. Guy,
// J. H. Davenport, SIGSAM Bull. 16 (1982) 2). For m > 2 numBound denBound there is
// at most one; with smaller m the answer may be another fraction than the one
// meant: 355/113 mod 10007 comes back as -54/11.
//
// The remainders of Euclid's algorithm are walked by Lehmer's method, a word at
// a time: quadratic in the length with a small constant.
func Reconstruct(u, m, numBound, denBound *big.Int) (*big.Rat, bool) {
	r0 := new(big.Int).Set(m)
	r1 := new(big.Int).Mod(u, m)
	// t: r_i = s_i m + t_i u
	t0, t1 := new(big.Int), big.NewInt(1)
	var q, x, y big.Int
	for r1.CmpAbs(numBound) > 0 {
		if a, b, c, d, ok := lehmer(r0, r1, numBound); ok {
			// (r0, r1) <- (a r0 + b r1, c r0 + d r1), and the same for t
			step := func(v0, v1 *big.Int) {
				var p0, p1 big.Int
				p0.Add(x.Mul(v0, big.NewInt(a)), y.Mul(v1, big.NewInt(b)))
				p1.Add(x.Mul(v0, big.NewInt(c)), y.Mul(v1, big.NewInt(d)))
				v0.Set(&p0)
				v1.Set(&p1)
			}
			step(r0, r1)
			step(t0, t1)
			continue
		}
		q.QuoRem(r0, r1, &x)
		r0.Set(r1)
		r1.Set(&x)
		y.Mul(&q, t1)
		y.Sub(t0, &y)
		t0.Set(t1)
		t1.Set(&y)
	}
	if t1.Sign() == 0 || t1.CmpAbs(denBound) > 0 {
		return nil, false
	}
	if t1.Sign() < 0 {
		t1.Neg(t1)
		r1.Neg(r1)
	}
	if x.GCD(nil, nil, y.Abs(r1), t1).Cmp(big.NewInt(1)) != 0 {
		return nil, false
	}
	return new(big.Rat).SetFrac(r1, t1), true
}

// lehmer returns the matrix of several steps of Euclid's algorithm worked out
// from the leading words of r0 > r1, with Collins' condition that the quotients
// are the true ones (D. E. Knuth, The Art of Computer Programming 2, 4.5.2,
// Algorithm L). It refuses near the bound, where single steps are taken.
func lehmer(r0, r1, bound *big.Int) (a, b, c, d int64, ok bool) {
	n := r0.BitLen()
	if n < 128 || n-r1.BitLen() > 20 || n-bound.BitLen() < 70 {
		return 0, 0, 0, 0, false
	}
	shift := uint(n - 62)
	var h big.Int
	x := h.Rsh(r0, shift).Int64()
	y := h.Rsh(r1, shift).Int64()
	a, b, c, d = 1, 0, 0, 1
	const most = 1 << 30 // keeps all products in a word
	for {
		if y+c == 0 || y+d == 0 {
			break
		}
		q := (x + a) / (y + c)
		if q != (x+b)/(y+d) {
			break
		}
		e, f := a-q*c, b-q*d
		if e > most || e < -most || f > most || f < -most {
			break
		}
		a, b, c, d = c, d, e, f
		x, y = y, x-q*y
	}
	return a, b, c, d, b != 0
}
