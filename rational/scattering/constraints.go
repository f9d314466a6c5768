package scattering

import (
	"fmt"
	"math/big"
	"math/bits"
	"slices"
	"strings"

	"eliminant/rational/prime"
)

// Gauge fixes three punctures: z_Infinity = infinity, z_One = 1, z_Zero = 0.
// The zero value is the standard gauge z_1 = infinity, z_2 = 1, z_n = 0.
type Gauge struct{ Infinity, One, Zero int }

// fix replaces the zero value by the standard gauge and panics unless the three
// legs are different ones out of n.
func (g Gauge) fix(n int) Gauge {
	if g == (Gauge{}) {
		return Gauge{1, 2, n}
	}
	for _, a := range []int{g.Infinity, g.One, g.Zero} {
		if a < 1 || a > n {
			panic(fmt.Sprintf("scattering: gauge leg %d of %d", a, n))
		}
	}
	if g.Infinity == g.One || g.Infinity == g.Zero || g.One == g.Zero {
		panic(fmt.Sprintf("scattering: gauge %v fixes a leg twice", g))
	}
	return g
}

// Term is Coefficient times the product of z_a over Legs (ascending, distinct).
type Term struct {
	Legs        []int
	Coefficient *big.Rat
}

// Constraint is h_m, m = Degree: multilinear of degree m in the free punctures.
// Terms are ordered by descending degree and then by legs; none is zero.
type Constraint struct {
	Degree int
	Terms  []Term
}

// ReducedTerm is Term modulo p.
type ReducedTerm struct {
	Legs        []int
	Coefficient prime.Element
}

// ReducedConstraint is Constraint modulo p.
type ReducedConstraint struct {
	Degree int
	Terms  []ReducedTerm
}

// Constraints returns the polynomials
//
//	h_m = sum over U, |U| = m, of s_{iU} z_U,  m = 1..n-3,
//
// where i is the leg at infinity, U runs over sets of legs without i and the
// leg at zero, z_U is the product of their punctures and z = 1 for the leg at
// one. Their common zeros are the (n-3)! solutions of the scattering equations,
// if no s_I vanishes. Panics if the gauge repeats a leg or leaves the range.
// Source: L. Dolan, P. Goddard, arXiv:1402.7374, section 2.
func (d *Data) Constraints(g Gauge) []Constraint {
	out := make([]Constraint, d.n-3)
	for m, sets := range termSets(d.n, g.fix(d.n)) {
		out[m].Degree = m + 1
		for _, t := range sets {
			if x := d.Sum(t.channel); x.Sign() != 0 {
				out[m].Terms = append(out[m].Terms, Term{t.legs, x})
			}
		}
	}
	return out
}

// ConstraintsMod returns Constraints modulo p for the matrix s of Data.Reduce.
func ConstraintsMod(f *prime.Field, n int, s []prime.Element, g Gauge) []ReducedConstraint {
	out := make([]ReducedConstraint, n-3)
	for m, sets := range termSets(n, g.fix(n)) {
		out[m].Degree = m + 1
		for _, t := range sets {
			var x prime.Element
			for c := t.channel; c != 0; c &= c - 1 {
				a := bits.TrailingZeros32(uint32(c))
				for r := c & (c - 1); r != 0; r &= r - 1 {
					x = f.Add(x, s[a*n+bits.TrailingZeros32(uint32(r))])
				}
			}
			if x != 0 {
				out[m].Terms = append(out[m].Terms, ReducedTerm{t.legs, x})
			}
		}
	}
	return out
}

// termSet is one monomial of a constraint and the set whose invariant is its
// coefficient.
type termSet struct {
	legs    []int
	channel Channel
}

// termSets lists the monomials of h_1..h_{n-3} in the order of Constraint.Terms.
// The set V of free legs stands in h_|V| with s_{iV} and in h_{|V|+1}, multiplied
// by z_One = 1, with s_{i One V}.
func termSets(n int, g Gauge) [][]termSet {
	fixed := Channel(1)<<(g.Infinity-1) | 1<<(g.One-1) | 1<<(g.Zero-1)
	infinity := Channel(1) << (g.Infinity - 1)
	one := Channel(1) << (g.One - 1)
	out := make([][]termSet, n-3)
	for v := Channel(0); v < 1<<n; v++ {
		if v&fixed != 0 {
			continue
		}
		k := v.Size()
		if k >= 1 {
			out[k-1] = append(out[k-1], termSet{v.Legs(), v | infinity})
		}
		if k+1 <= n-3 {
			out[k] = append(out[k], termSet{v.Legs(), v | infinity | one})
		}
	}
	for _, sets := range out {
		slices.SortFunc(sets, func(a, b termSet) int {
			if k := len(b.legs) - len(a.legs); k != 0 {
				return k
			}
			return slices.Compare(a.legs, b.legs)
		})
	}
	return out
}

// String writes the polynomial like "z3+10/3*z4-7".
func (c Constraint) String() string {
	var b strings.Builder
	for _, t := range c.Terms {
		abs := new(big.Rat).Abs(t.Coefficient)
		if t.Coefficient.Sign() < 0 {
			b.WriteByte('-')
		} else if b.Len() > 0 {
			b.WriteByte('+')
		}
		var factors []string
		if len(t.Legs) == 0 || !isOne(abs) {
			factors = append(factors, abs.RatString())
		}
		for _, a := range t.Legs {
			factors = append(factors, fmt.Sprintf("z%d", a))
		}
		b.WriteString(strings.Join(factors, "*"))
	}
	if b.Len() == 0 {
		return "0"
	}
	return b.String()
}

func isOne(x *big.Rat) bool { return x.IsInt() && x.Num().IsInt64() && x.Num().Int64() == 1 }

// Eval returns h_m at the punctures z, z[a-1] for leg a; those of the gauge are
// not read.
func (c Constraint) Eval(z []*big.Rat) *big.Rat {
	sum := new(big.Rat)
	for _, t := range c.Terms {
		x := new(big.Rat).Set(t.Coefficient)
		for _, a := range t.Legs {
			x.Mul(x, z[a-1])
		}
		sum.Add(sum, x)
	}
	return sum
}
