package resultant

import (
	"fmt"
	"math"
	"math/big"
	"math/bits"

	"eliminant/rational/scattering"
)

// Height bounds a number attached to the N solutions of the constraints over Q,
// that is N complex values x_l, one for each solution, conjugate or not:
// there is a positive integer D <= 2^Denominator for which all D x_l are algebraic
// integers, and all |x_l| <= 2^Size. The zero value is the height of 1.
//
// Bounds are float64 and carry a relative slack far above the rounding of sums
// of a million terms (ResidueBounds).
type Height struct{ Denominator, Size float64 }

// Mul bounds the product x y: denominators and absolute values multiply.
func (x Height) Mul(y Height) Height {
	return Height{x.Denominator + y.Denominator, x.Size + y.Size}
}

// Pow bounds x^e, e >= 0.
func (x Height) Pow(e int) Height {
	return Height{float64(e) * x.Denominator, float64(e) * x.Size}
}

// Add bounds x + y and x - y: the product of the denominators serves both.
func (x Height) Add(y Height) Height {
	return Height{x.Denominator + y.Denominator, max(x.Size, y.Size) + 1}
}

// Inverse bounds 1/x for any x without zero values, by its norm. The algebraic
// integers a_l = D x_l have a nonzero integer M as product, |M| <= 2^{N(Denominator
// + Size)}, if the x_l are the values of one rational function of the solutions.
// M/a_l is the product of the others, an algebraic integer; so M (1/x_l) = D M/a_l is
// one, and |1/x_l| = D |M/a_l| / |M| <= 2^{Denominator + (N-1)(Denominator+Size)}. The
// inverses of Heights are far smaller.
func (x Height) Inverse(size int) Height {
	n, t := float64(size), max(0, x.Denominator+x.Size)
	return Height{n * t, x.Denominator + (n-1)*t}
}

// RationalHeight returns the height of a rational number.
func RationalHeight(r *big.Rat) Height {
	if r.Sign() == 0 {
		return Height{}
	}
	d := logarithm(r.Denom())
	return Height{d, logarithm(r.Num()) - d + slack*(2+2*d)}
}

// slack is far above the relative error of a float64 logarithm.
const slack = 1.0 / (1 << 40)

// logarithm returns log2 |x| rounded up by a few slack, x != 0.
func logarithm(x *big.Int) float64 {
	m := new(big.Float).SetInt(x)
	e := m.MantExp(m)
	f, _ := m.Float64()
	l := float64(e) + math.Log2(math.Abs(f))
	return l + slack*(1+l)
}

// Heights bounds the building blocks of integrands over the solutions for one
// matrix of invariants none of whose channels vanishes, in the gauge
// z_1 = infinity, z_2 = 1, z_n = 0. It is not safe for concurrent use.
//
// Let the invariants be scaled to integers.
//
// Punctures. For different legs o, a, b other than 1 let w be the puncture of a in the
// gauge 1 = infinity, o = 1, b = 0. It is a root of E(t) = det T(t) for these roles,
// an integer polynomial with leading coefficient L, constant coefficient C and all
// coefficients at most H in absolute value (newDeterminant). So L w is an
// algebraic integer, and C/w is one, because 1/w is a root of the reversed
// polynomial; no s_I vanishes, hence L and C do not. By Cauchy's bound
// |w| <= 1 + H/|L| and |1/w| <= 1 + H/|C|.
//
// Differences. In the standard gauge z_a is w for (o, b) = (2, n); z -> 1-z fixes
// infinity and exchanges 0 and 1, so 1 - z_a is w for (n, 2); and
// (z_a - z_b)/(1 - z_b) is w for (2, b), being 1 at z_2, 0 at z_b. So
// z_a - z_b is a product of two such numbers, its inverse of two inverses.
//
// Jacobian. J_h is the determinant of dh_m/dz_a, in which column a is free of z_a and
// of degree at most 1 in the others: a polynomial of degree at most k = n-4 in each
// z_a, with integer coefficients whose absolute values sum to at most the product over
// m of the sum over V of |V| |coefficient of z_V in h_m|.
//
// Inverse Jacobian. Let t be a free puncture that takes N different values, E as
// above. P_1/chi = e_1^T (T - M)^{-1} e_top and T(t) = T1 (t - M) give for Q = det T1 P_1
// the integer polynomial e_1^T adj T(t) T1 e_top of degree below N. Column top of T1 has
// one entry, s_{1 3..n-1} in row (alpha, k+1), alpha_j = j-1, so Q is that entry times a
// minor of T(t) without this row; at |t| = 1 it is at most H, as E is, because the entry
// is at most the norm of the row left out. So Q has coefficients at most H, and
// 1/J_h = Q(t)/(c0 E'(t)) up to sign, c0 as in Representation.
// L^{N-1} Q(t) is an algebraic integer, |Q(t)| <= N H (1 + H/|L|)^{N-1}.
// R = Res(E, E') = U E + V E' for integer polynomials U, V of degree below N, R != 0, so
// R/E'(t) = V(t) and L^{N-1} R/E'(t) is an algebraic integer. E has Euclidean norm at
// most H (Parseval on |t| = 1), E' at most N H, and by Hadamard
// |R| <= H^{N-1} (N H)^N. Further |R| = |L|^{N-1} prod_m |E'(t_m)| >= 1 and
// |E'(t_m)| <= N^2 H max(1,|t_m|)^{N-1}, and |L| prod_m max(1,|t_m|) <= H (Landau), so
// |1/E'(t_l)| = prod_{m != l} |E'(t_m)| |L|^{N-1}/|R| <= (N^2 H)^{N-1} H^{N-1}.
// (The norm argument of Height.Inverse would give N times as many bits.)
//
// Reduced determinant. det Phi = J_h / (prod_{2<=a<b<n} (z_a - z_b) prod_{2<a<n} z_a).
type Heights struct {
	n, size int
	scale   *big.Int
	whole   [][]*big.Int
	known   map[[3]int]*determinant // by roles one, hidden, zero
	c0      Height
	jNorm   float64 // log2 of the sum of the coefficients of the Jacobian
}

// NewHeights prepares the bounds. The error is a *DegenerateError naming the first
// channel that vanishes, or a *RangeError.
func NewHeights(d *scattering.Data) (*Heights, error) {
	n := d.Legs()
	if n > MaxLegs {
		return nil, &RangeError{"heights", n, MaxLegs}
	}
	if c := d.Vanishing(); len(c) > 0 {
		return nil, &DegenerateError{c[0], "solutions coincide or are at infinity"}
	}
	h := &Heights{n: n, size: 1, known: map[[3]int]*determinant{}}
	for j := 2; j <= n-3; j++ {
		h.size *= j
	}
	h.scale, h.whole = d.Scaled()
	scale := new(big.Rat).SetInt(h.scale)
	for m := 1; m <= n-3; m++ {
		legs := []int{1}
		for a := n - m; a < n; a++ {
			legs = append(legs, a)
		}
		s := d.Sum(scattering.NewChannel(n, legs...))
		h.c0.Size += RationalHeight(s.Mul(s, scale)).Size
	}
	for _, c := range d.Constraints(scattering.Gauge{}) {
		sum := new(big.Rat)
		for _, t := range c.Terms {
			x := big.NewRat(int64(len(t.Legs)), 1)
			sum.Add(sum, x.Mul(x, t.Coefficient.Abs(t.Coefficient)))
		}
		h.jNorm += RationalHeight(sum.Mul(sum, scale)).Size
	}
	return h, nil
}

// gauge returns the determinant for leg a hidden, 1 = infinity, one = 1, zero = 0.
func (h *Heights) gauge(one, a, zero int) *determinant {
	key := [3]int{one, a, zero}
	if d := h.known[key]; d != nil {
		return d
	}
	order := []int{1, one, a}
	for b := 2; b <= h.n; b++ {
		if b != one && b != a && b != zero {
			order = append(order, b)
		}
	}
	d, err := newDeterminant(h.whole, append(order, zero))
	if err != nil {
		panic("resultant: " + err.Error()) // NewHeights excludes it
	}
	h.known[key] = d
	return d
}

// root returns the height of w, and inverseRoot that of 1/w.
func (h *Heights) root(one, a, zero int) Height {
	d := h.gauge(one, a, zero)
	return cauchy(d.bound, d.lead)
}

func (h *Heights) inverseRoot(one, a, zero int) Height {
	d := h.gauge(one, a, zero)
	return cauchy(d.bound, d.constant)
}

// cauchy returns log2 of lead and of 1 + bound/lead.
func cauchy(bound, lead *big.Int) Height {
	l := logarithm(lead)
	r := logarithm(bound) - l + slack*(2+2*l)
	return Height{l, max(r, 0) + math.Log2(1+math.Exp2(-math.Abs(r))) + slack}
}

// Puncture bounds z_a, a in 2..n-1, and PunctureInverse 1/z_a.
func (h *Heights) Puncture(a int) Height { return h.Difference(a, h.n) }

// PunctureInverse bounds 1/z_a, a in 2..n-1.
func (h *Heights) PunctureInverse(a int) Height { return h.DifferenceInverse(a, h.n) }

// Difference bounds z_a - z_b for different legs a, b in 2..n.
func (h *Heights) Difference(a, b int) Height { return h.difference(a, b, h.root) }

// DifferenceInverse bounds 1/(z_a - z_b) for different legs a, b in 2..n.
func (h *Heights) DifferenceInverse(a, b int) Height { return h.difference(a, b, h.inverseRoot) }

func (h *Heights) difference(a, b int, root func(one, a, zero int) Height) Height {
	n := h.n
	if a > b {
		a, b = b, a
	}
	switch {
	case a < 2 || b > n || a == b:
		panic(fmt.Sprintf("resultant: no difference of legs %d and %d of %d", a, b, n))
	case a == 2 && b == n:
		return Height{}
	case a == 2:
		return root(n, b, 2)
	case b == n:
		return root(2, a, n)
	}
	return root(2, a, b).Mul(root(n, b, 2))
}

// Jacobian bounds J_h.
func (h *Heights) Jacobian() Height {
	k := h.n - 4
	z := Height{Size: h.jNorm}
	for a := 3; a < h.n; a++ {
		z = z.Mul(h.Puncture(a).Pow(k))
	}
	one := big.NewRat(1, 1)
	return z.Mul(RationalHeight(one.Quo(one, new(big.Rat).SetInt(h.scale))).Pow(h.n - 3))
}

// JacobianInverse bounds 1/J_h, provided that the puncture of the given leg, in
// 3..n-1, takes N different values (Representation.Separable modulo one prime
// shows it).
func (h *Heights) JacobianInverse(separating int) Height {
	d := h.gauge(2, separating, h.n)
	n := float64(h.size)
	log := math.Log2(n)
	bound, lead := logarithm(d.bound), logarithm(d.lead)
	numerator := Height{(n - 1) * lead, log + bound + (n-1)*cauchy(d.bound, d.lead).Size}
	derivative := Height{
		(n-1)*lead + (n-1)*bound + n*(log+bound),
		(n - 1) * (2*log + 2*bound),
	}
	// 1/c0 has denominator c0 and size at most 1; h_m is scale times smaller
	constant := Height{Denominator: h.c0.Size, Size: float64(h.n-3) * logarithm(h.scale)}
	return numerator.Mul(derivative).Mul(constant)
}

// ReducedDeterminant bounds det Phi.
func (h *Heights) ReducedDeterminant() Height {
	return h.Jacobian().Mul(h.measure(h.DifferenceInverse))
}

// ReducedDeterminantInverse bounds 1/det Phi, under the condition of
// JacobianInverse.
func (h *Heights) ReducedDeterminantInverse(separating int) Height {
	return h.JacobianInverse(separating).Mul(h.measure(h.Difference))
}

// measure multiplies over the pairs of legs in 2..n; z_2 - z_n = 1.
func (h *Heights) measure(difference func(a, b int) Height) Height {
	var z Height
	for a := 2; a <= h.n; a++ {
		for b := a + 1; b <= h.n; b++ {
			z = z.Mul(difference(a, b))
		}
	}
	return z
}

// ResidueBounds bounds the sum of x over all N solutions, if that is rational, as
// for every rational function of the solutions: |numerator| <= num and
// denominator <= den in lowest terms. D times the sum is a rational algebraic
// integer, hence an integer, and at most D N 2^Size.
func (h *Heights) ResidueBounds(x Height) (num, den *big.Int) {
	up := func(v float64) *big.Int {
		return new(big.Int).Lsh(big.NewInt(1), uint(math.Ceil(max(0, v)*(1+1.0/(1<<30))+1)))
	}
	num = up(x.Denominator + x.Size + float64(bits.Len(uint(h.size))))
	return num, up(x.Denominator)
}
