package amplitude

import (
	"math"
	"math/bits"
)

// Growth bounds an amplitude as a rational function N/G of the planar
// invariants X_ij and the mass squared: degrees, and base-2 logarithms of
// 1-norms rounded up. N and G have integer coefficients and G is the product
// of every divisor used.
type Growth struct {
	NumeratorDegree, DenominatorDegree int
	NumeratorBits, DenominatorBits     float64
}

// NewGrowth returns the bounds of an amplitude. G is the product of its
// propagators, linear forms of 1-norm at most c(P); N is a sum over the
// diagrams of products of the propagators a diagram lacks, so it has degree
// #poles - (n-3) and 1-norm at most #diagrams times the product of all c(P).
// With X_{a,a+1} = m^2, s_ab = X_{a,b+1} + X_{a+1,b} - X_ab - X_{a+1,b+1} + 2 m^2 has
// 1-norm at most 6, and P^2 - m^2 = sum of s_ab - (|P|-1)^2 m^2.
//
// Elimination computes the same function but divides by more: NewResidueGrowth.
func NewGrowth(r Request) Growth {
	n := r.Legs()
	masks := poleMasks(r)
	g := Growth{NumeratorDegree: len(masks) - (n - 3), DenominatorDegree: len(masks)}
	for _, m := range masks {
		k := float64(bits.OnesCount32(m))
		g.DenominatorBits += math.Log2(6*k*(k-1)/2 + (k-1)*(k-1))
	}
	diagrams := 1.0
	if r.Braces {
		for k := 3; k <= 2*n-5; k += 2 {
			diagrams *= float64(k)
		}
	} else {
		diagrams = newWordPlan(r.Orderings[0], r.Orderings[len(r.Orderings)-1]).diagrams
	}
	if diagrams == 0 {
		return Growth{}
	}
	const slack = 1 + 1e-9 // float64 logarithms and sums are off by far less
	g.NumeratorBits = slack * (g.DenominatorBits + math.Log2(diagrams) + 1e-6)
	g.DenominatorBits = slack*g.DenominatorBits + 1e-6
	return g
}

// NewResidueGrowth bounds the residue sum of a product of differences of
// punctures as a rational function of the X_ij and m^2, by the way elimination
// computes it, without using what it is equal to. With N = (n-3)! the
// polynomials lc*chi = +-det T, lc*P_1 and lc*P_j have degree at most N in t, and
// coefficients of degree at most N+1 in the invariants and 1-norm at most
// 2^h, h = (N+1) log2(row norm of T). A summand is a product of at most
// E = n^2 differences and inverses of them, so the sum is a quotient of
// resultants of chi with polynomials of degree at most E N in t, whose
// coefficients have degree E(N+1) and 1-norm at most 2^{E(h+log2 N+1)}; a
// resultant is homogeneous of degree E N in the coefficients of chi and N in
// the others. A factor of two in each number pays for P_1, chi' and c0.
func NewResidueGrowth(n int) Growth {
	size := 1.0
	for k := 2; k <= n-3; k++ {
		size *= float64(k)
	}
	factors := float64(n * n)
	entry := math.Log2(6 * float64(n*(n-1)/2))
	h := (size + 1) * (float64(n-2) + entry)
	degree := 4 * factors * size * (size + 1)
	bitsize := 4*factors*size*(h+math.Log2(size)+1) + 2*factors*size*math.Log2(2*factors*size+2)
	d := int(min(degree, 1<<60))
	return Growth{d, d, bitsize, bitsize}
}
