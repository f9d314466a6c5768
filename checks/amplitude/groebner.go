package amplitude

import (
	"context"
	"errors"
	"fmt"

	"eliminant/groebner"
	"eliminant/rational/kinematics"
	"eliminant/rational/prime"
	"eliminant/rational/scattering"
)

// groebnerKernel computes the residue sum a second way: a Groebner basis of the
// constraints, companion matrices of the punctures, and the trace of
// PT(a) PT(b)/det Phi with det Phi taken from its definition, the determinant of
// the derivatives of the scattering equations. It shares with elimination the
// constraints, but neither the pencil nor the Jacobian identity.
func groebnerKernel(r Request) Kernel {
	n := r.Legs()
	return func(ctx context.Context, p *kinematics.Reduced) (prime.Element, error) {
		if err := checkLegs(r, p.N); err != nil {
			return 0, err
		}
		f := p.Field
		alpha := r.Orderings[0]
		if !r.Braces {
			v, err := orderedTrace(ctx, f, n, shifted(p, alpha), alpha, r.Orderings[len(r.Orderings)-1])
			if r.Theory == Cubic {
				v = cubicSign(f, n, v)
			}
			return v, err
		}
		var sum prime.Element
		var failed error
		rest := append([]int{}, alpha[1:]...)
		permute(rest, func(w []int) bool {
			if w[0] > w[len(w)-1] {
				return true // a reflection counts twice instead
			}
			o := append([]int{alpha[0]}, w...)
			v, err := orderedTrace(ctx, f, n, shifted(p, o), o, o)
			if err != nil {
				failed = err
				return false
			}
			sum = f.Add(sum, f.Add(v, v))
			return true
		})
		if failed != nil {
			return 0, failed
		}
		half, _ := f.Inv(f.FromUint64(1 << (n - 2)))
		return cubicSign(f, n, f.Mul(half, sum)), nil
	}
}

// algebra is the quotient algebra of the constraints in the gauge z_1 =
// infinity, z_2 = 1, z_n = 0, for the matrix t in the labels of an ordering.
type algebra struct {
	ctx      context.Context
	f        *prime.Field
	n        int
	t        []prime.Element
	q        *groebner.Quotient
	ring     *groebner.Ring
	inverses map[[2]int][]prime.Element // coordinates of 1/(z_a - z_b), a < b
}

func newAlgebra(ctx context.Context, f *prime.Field, n int, t []prime.Element) (*algebra, error) {
	names := make([]string, 0, n-3)
	for l := 3; l < n; l++ {
		names = append(names, fmt.Sprintf("z%d", l))
	}
	ring, err := groebner.NewRing(f, groebner.GrevLex, names...)
	if err != nil {
		return nil, err
	}
	var generators []*groebner.Polynomial
	for _, h := range scattering.ConstraintsMod(f, n, t, scattering.Gauge{}) {
		var c []prime.Element
		var m []groebner.Monomial
		for _, term := range h.Terms {
			e := make([]int, n-3)
			for _, l := range term.Legs {
				e[l-3] = 1
			}
			x, err := ring.Monomial(e...)
			if err != nil {
				return nil, err
			}
			c, m = append(c, term.Coefficient), append(m, x)
		}
		generators = append(generators, ring.FromTerms(c, m))
	}
	basis, err := groebner.ComputeBasis(ctx, generators, groebner.Options{})
	if err != nil {
		return nil, err
	}
	q, err := groebner.ComputeQuotient(ctx, basis, groebner.QuotientOptions{})
	if err != nil {
		return nil, err
	}
	size := 1
	for k := 2; k <= n-3; k++ {
		size *= k
	}
	if q.Dimension() != size {
		return nil, fmt.Errorf("%w: %d solutions instead of %d", prime.ErrBadPrime, q.Dimension(), size)
	}
	return &algebra{ctx, f, n, t, q, ring, map[[2]int][]prime.Element{}}, nil
}

// difference returns z_a - z_b as a polynomial, legs 2..n.
func (g *algebra) difference(a, b int) *groebner.Polynomial {
	z := func(l int) *groebner.Polynomial {
		switch l {
		case 2:
			return g.ring.One()
		case g.n:
			return g.ring.Zero()
		}
		return g.ring.Variable(l - 3)
	}
	return g.ring.Zero().Sub(z(a), z(b))
}

// inverse returns the coordinates of 1/(z_a - z_b).
func (g *algebra) inverse(a, b int) ([]prime.Element, error) {
	if a > b {
		x, err := g.inverse(b, a)
		if err != nil {
			return nil, err
		}
		z := make([]prime.Element, len(x))
		g.f.SubRow(z, z, x)
		return z, nil
	}
	if x, ok := g.inverses[[2]int{a, b}]; ok {
		return x, nil
	}
	one, err := g.q.Coordinates(g.ctx, g.ring.One())
	if err != nil {
		return nil, err
	}
	d, err := g.q.Coordinates(g.ctx, g.difference(a, b))
	if err != nil {
		return nil, err
	}
	x, err := g.q.Divide(g.ctx, one, d)
	if err != nil {
		return nil, zeroDivisor(err)
	}
	g.inverses[[2]int{a, b}] = x
	return x, nil
}

// zeroDivisor marks a difference that vanishes on a solution.
func zeroDivisor(err error) error {
	var z *groebner.ZeroDivisorError
	if errors.As(err, &z) {
		return fmt.Errorf("%w: %v", prime.ErrBadPrime, err)
	}
	return err
}

// parkeTaylor multiplies x by the gauge-fixed Parke-Taylor factor of an
// ordering of the labels 1..n.
func (g *algebra) parkeTaylor(x []prime.Element, ordering []int) ([]prime.Element, error) {
	z := make([]prime.Element, len(x))
	g.f.SubRow(z, z, x)
	for i, a := range ordering {
		b := ordering[(i+1)%g.n]
		if a == 1 || b == 1 {
			continue
		}
		u, err := g.inverse(a, b)
		if err != nil {
			return nil, err
		}
		if z, err = g.q.Product(g.ctx, z, u); err != nil {
			return nil, err
		}
	}
	return z, nil
}

// determinant returns the coordinates of det Phi_ab, a, b = 3..n-1, by
// expansion along rows: minors over sets of columns.
func (g *algebra) determinant() ([]prime.Element, error) {
	m := g.n - 3
	phi := make([][][]prime.Element, m)
	for i := range phi {
		phi[i] = make([][]prime.Element, m)
		phi[i][i] = make([]prime.Element, g.q.Dimension())
	}
	for a := 3; a < g.n; a++ {
		for b := 2; b <= g.n; b++ {
			if a == b {
				continue
			}
			u, err := g.inverse(a, b)
			if err != nil {
				return nil, err
			}
			if u, err = g.q.Product(g.ctx, u, u); err != nil {
				return nil, err
			}
			v := make([]prime.Element, len(u))
			g.f.ScaleRow(v, g.t[(a-1)*g.n+b-1], u)
			g.f.SubRow(phi[a-3][a-3], phi[a-3][a-3], v)
			if b > 2 && b < g.n {
				phi[a-3][b-3] = v
			}
		}
	}
	minors := make([][]prime.Element, 1<<m)
	one, err := g.q.Coordinates(g.ctx, g.ring.One())
	if err != nil {
		return nil, err
	}
	minors[0] = one
	for set := 1; set < 1<<m; set++ {
		row := -1
		for s := set; s != 0; s &= s - 1 {
			row++
		}
		minors[set] = make([]prime.Element, len(one))
		sign := row%2 == 1 // of the last column of the set, counted from the right
		for c := range m {
			if set>>c&1 == 0 {
				continue
			}
			x, err := g.q.Product(g.ctx, phi[row][c], minors[set&^(1<<c)])
			if err != nil {
				return nil, err
			}
			if sign {
				g.f.SubRow(minors[set], minors[set], x)
			} else {
				g.f.AddRow(minors[set], minors[set], x)
			}
			sign = !sign
		}
	}
	return minors[1<<m-1], nil
}

// orderedTrace returns m(alpha|beta) from the matrix t in the labels of alpha.
func orderedTrace(ctx context.Context, f *prime.Field, n int, t []prime.Element, alpha, beta []int) (prime.Element, error) {
	g, err := newAlgebra(ctx, f, n, t)
	if err != nil {
		return 0, err
	}
	first, second := make([]int, n), relative(alpha, beta)
	for i := range first {
		first[i] = i + 1
		second[i]++
	}
	x, err := g.q.Coordinates(ctx, g.ring.One())
	if err != nil {
		return 0, err
	}
	for _, o := range [][]int{first, second} {
		if x, err = g.parkeTaylor(x, o); err != nil {
			return 0, err
		}
	}
	d, err := g.determinant()
	if err != nil {
		return 0, err
	}
	if x, err = g.q.Divide(ctx, x, d); err != nil {
		return 0, zeroDivisor(err)
	}
	return g.q.Trace(ctx, x)
}
