// Package resultant eliminates all punctures but one from the polynomial
// scattering equations, exactly and modulo primes: the multigraded resultant
// pencil in companion form, characteristic polynomials (eliminants), univariate
// representations of the (n-3)! solutions, and sums of residues over them.
//
// The n-3 constraints are multilinear in the k = n-4 variables that are not
// hidden, so a Sylvester-type formula applies (B. Sturmfels, A. Zelevinsky,
// Multigraded resultants of Sylvester type, Adv. Math. 98 (1993) 65, for
// the scattering equations: C. Cardona, C. Kalousios, Elimination and recursions
// in the scattering equations, Phys. Lett. B 756 (2016) 180, arXiv:1511.05915): a square matrix
// T(t) = T0 + t T1 of size N = (n-3)! whose determinant is the eliminant.
package resultant

import (
	"fmt"
	"math/bits"

	"eliminant/rational/prime"
)

// MaxLegs bounds the legs of a pencil: vectors of 9! elements.
const MaxLegs = 12

// Pencil is T(t) = T0 + t T1 for one matrix of invariants modulo p. Rows are
// (alpha, m), 0 <= alpha_j <= j-1, m = 1..k+1, and stand for x^alpha h_m; columns
// are the exponents beta, 0 <= beta_j <= j, and stand for x^beta, where x_j is the
// puncture of role 3+j. In row (alpha, m) and column alpha + 1_V
//
//	T0 = s_{1V} for |V| = m,    s_{12V} for |V| = m-1,
//	T1 = s_{13V} for |V| = m-1, s_{123V} for |V| = m-2,
//
// so only 2^(n-2) coefficients are stored and no matrix. T1 is a permuted
// triangular matrix with diagonal entries s_{13V}, hence M = -T1^{-1} T0, the
// multiplication by t on the monomials x^beta, is applied by substitution.
// A vector is indexed by sum beta_j j!, so 1 has index 0, x_j index j! and the
// top monomial prod x_j^j index N-1.
//
// A Pencil holds scratch memory: use one per goroutine.
type Pencil struct {
	field *prime.Field
	plan  *plan
	order []int
	t0    [][]prime.Element // t0[m]: s_{12V} of size m-1, then s_{1V} of size m
	t1    [][]prime.Element // t1[m]: s_{123V} of size m-2, then s_{13V} of size m-1
	diag  []prime.Element   // -1/s_{13V} by set
	c0    prime.Element
	y     []prime.Wide    // T0 x, by alpha and m
	g     []prime.Element // x at alpha + 1_V, by set
}

// NewPencil returns the pencil of the n by n matrix s modulo p (entry (a,b) at
// (a-1)*n + b-1) with the roles of the legs given by order, a permutation of
// 1..n: order[0] at infinity, order[1] at 1, order[2] hidden, order[2+j] = x_j,
// order[n-1] at 0. nil is the identity.
//
// Errors: *RangeError for n outside 4..MaxLegs, *RoleError if order is not a
// permutation, *DegenerateError if s_{1R} = 0 for a nonempty set R of legs with
// roles 3..n-1: exactly then a solution is at infinity.
func NewPencil(f *prime.Field, n int, s []prime.Element, order []int) (*Pencil, error) {
	if n < 4 || n > MaxLegs {
		return nil, &RangeError{"elimination", n, MaxLegs}
	}
	order, err := roles(n, order)
	if err != nil {
		return nil, err
	}
	if len(s) != n*n {
		panic(fmt.Sprintf("resultant: %d invariants for %d legs", len(s), n))
	}
	p := &Pencil{field: f, plan: planFor(n), order: order}
	if err := p.fill(s); err != nil {
		return nil, err
	}
	p.y = make([]prime.Wide, p.plan.size)
	p.g = make([]prime.Element, len(p.plan.sets))
	return p, nil
}

// roles checks and copies an assignment of roles.
func roles(n int, order []int) ([]int, error) {
	out := make([]int, n)
	if order == nil {
		for i := range out {
			out[i] = i + 1
		}
		return out, nil
	}
	if len(order) != n {
		return nil, &RoleError{fmt.Sprintf("%d entries for %d legs", len(order), n)}
	}
	seen := make([]bool, n+1)
	for i, a := range order {
		if a < 1 || a > n {
			return nil, &RoleError{fmt.Sprintf("there is no leg %d", a)}
		}
		if seen[a] {
			return nil, &RoleError{fmt.Sprintf("leg %d stands twice", a)}
		}
		seen[a] = true
		out[i] = a
	}
	return out, nil
}

// fill computes the coefficients.
func (p *Pencil) fill(s []prime.Element) error {
	f, l := p.field, p.plan
	at := func(i, j int) prime.Element { return s[(p.order[i]-1)*l.n+p.order[j]-1] }
	// by mask: s_{1V}, s_{12V}, s_{13V}, s_{123V}
	var c [4][]prime.Element
	for i := range c {
		c[i] = make([]prime.Element, 1<<l.k)
	}
	s12, s13 := at(0, 1), at(0, 2)
	c[0][0], c[1][0], c[2][0], c[3][0] = 0, s12, s13, f.Add(f.Add(s12, s13), at(1, 2))
	for v := uint32(1); v < 1<<l.k; v++ {
		j := bits.TrailingZeros32(v) + 3
		rest := v & (v - 1)
		d := at(0, j)
		for r := rest; r != 0; r &= r - 1 {
			d = f.Add(d, at(j, bits.TrailingZeros32(r)+3))
		}
		d2, d3 := f.Add(d, at(1, j)), f.Add(d, at(2, j))
		c[0][v] = f.Add(c[0][rest], d)
		c[1][v] = f.Add(c[1][rest], d2)
		c[2][v] = f.Add(c[2][rest], d3)
		c[3][v] = f.Add(c[3][rest], f.Add(d2, at(2, j)))
	}
	for _, v := range l.sets {
		if v != 0 && c[0][v] == 0 {
			return degenerate(p.order, v)
		}
		if c[2][v] == 0 {
			return degenerate(p.order, v, 2)
		}
	}

	p.t0 = make([][]prime.Element, l.k+2)
	p.t1 = make([][]prime.Element, l.k+2)
	pick := func(out, from []prime.Element, m int) []prime.Element {
		if m < 0 || m > l.k {
			return out
		}
		for _, v := range l.sets[l.level[m]:l.level[m+1]] {
			out = append(out, from[v])
		}
		return out
	}
	for m := 1; m <= l.k+1; m++ {
		p.t0[m] = pick(pick(nil, c[1], m-1), c[0], m)
		p.t1[m] = pick(pick(nil, c[3], m-2), c[2], m-1)
	}
	d := make([]prime.Element, len(l.sets))
	for i, v := range l.sets {
		d[i] = f.Neg(c[2][v])
	}
	p.diag = make([]prime.Element, len(d))
	f.InvertRow(p.diag, d)

	p.c0 = c[2][1<<l.k-1]
	for m := 1; m <= l.k; m++ {
		p.c0 = f.Mul(p.c0, c[0][1<<l.k-1<<(l.k-m)&(1<<l.k-1)])
	}
	if l.k*(l.k+1)/2%2 == 1 {
		p.c0 = f.Neg(p.c0)
	}
	return nil
}

// Field returns GF(p).
func (p *Pencil) Field() *prime.Field { return p.field }

// Legs returns n.
func (p *Pencil) Legs() int { return p.plan.n }

// Size returns N = (n-3)!.
func (p *Pencil) Size() int { return p.plan.size }

// Order returns the roles of the legs.
func (p *Pencil) Order() []int { return append([]int(nil), p.order...) }

// Hidden returns the leg whose puncture is t.
func (p *Pencil) Hidden() int { return p.order[2] }

// Multiply sets z = M x, M = -T1^{-1} T0, for vectors of length N; z may be x.
// Cost: k! (2^(k+2) - 2) products without reductions, and two reductions for
// each of the N entries.
func (p *Pencil) Multiply(z, x []prime.Element) {
	n := p.plan.size
	if len(z) != n || len(x) != n {
		panic(fmt.Sprintf("resultant: vectors of lengths %d, %d for a pencil of size %d", len(z), len(x), n))
	}
	p.apply(x)
	p.substitute(z)
}

// apply sets y = T0 x.
func (p *Pencil) apply(x []prime.Element) {
	f, l, g := p.field, p.plan, p.g
	rows := l.k + 1
	y := p.y
	for _, base := range l.bases {
		b := x[base:]
		for i, o := range l.offset {
			g[i] = b[o]
		}
		for m := 1; m <= rows; m++ {
			t := p.t0[m]
			y[m-1] = f.DotWide(prime.Wide{}, t, g[l.level[m-1]:][:len(t)])
		}
		y = y[rows:]
	}
}

// substitute solves T1 z = -y.
func (p *Pencil) substitute(z []prime.Element) {
	f, l := p.field, p.plan
	clear(z) // the pivot takes part in its own row as zero
	for i := range l.rows {
		r := &l.rows[i]
		m := int(r.size) + 1
		t := p.t1[m]
		from := 0
		if m >= 2 {
			from = l.level[m-2]
		}
		w := f.GatherDotWide(p.y[r.place], t, l.offset[from:], z[r.base:])
		z[r.pivot] = f.Mul(p.diag[r.set], f.ReduceWide(w))
	}
}
