package amplitude

import (
	"context"
	"errors"

	"eliminant/rational/kinematics"
	"eliminant/rational/poly"
	"eliminant/rational/prime"
	"eliminant/resultant"
)

// eliminationKernel computes
//
//	BS(a|b) = sum over solutions of PT(a) PT(b) / det' Phi
//
// in companion form: by the Jacobian identity (resultant.Representation) every
// summand is F/J_h with F a product of differences of punctures, and the sum
// over the solutions is one coefficient of F P_1 mod chi. See F. Cachazo, S. He,
// E. Y. Yuan, Scattering of massless particles: scalars, gluons and gravitons,
// JHEP 07 (2014) 033, arXiv:1309.0885, for the integrand.
func eliminationKernel(r Request) Kernel {
	if r.Braces {
		return unorderedEliminationKernel(r)
	}
	n := r.Legs()
	alpha := r.Orderings[0]
	beta := r.Orderings[len(r.Orderings)-1]
	return func(ctx context.Context, p *kinematics.Reduced) (prime.Element, error) {
		if err := checkLegs(r, p.N); err != nil {
			return 0, err
		}
		v, err := orderedResidue(ctx, p.Field, n, shifted(p, alpha), alpha, beta, nil)
		if r.Theory == Cubic {
			v = cubicSign(p.Field, n, v)
		}
		return v, err
	}
}

// orderedResidue returns m(alpha|beta) from the matrix t in the labels of
// alpha. A nil order tries several choices of hidden variable until one
// separates the solutions.
func orderedResidue(ctx context.Context, f *prime.Field, n int, t []prime.Element, alpha, beta, order []int) (prime.Element, error) {
	second := relative(alpha, beta)
	return withRepresentation(ctx, f, n, t, order, func(rep *resultant.Representation, order []int) (prime.Element, error) {
		z, err := newPunctures(rep, n, order)
		if err != nil {
			return 0, err
		}
		first := make([]int, n)
		for i := range first {
			first[i] = i
		}
		e := z.measure()
		z.divideParkeTaylor(e, first)
		z.divideParkeTaylor(e, second)
		F, err := z.product(e)
		if err != nil {
			return 0, err
		}
		return rep.ResidueSum(F), nil
	})
}

// hiddenOrders lists the role assignments tried in turn: every hidden variable
// of the standard gauge, then cyclic relabellings of the roles.
func hiddenOrders(n int) [][]int {
	var out [][]int
	base := make([]int, n)
	for turn := range n {
		for i := range base {
			base[i] = (i+turn)%n + 1
		}
		for h := 2; h < n-1; h++ {
			o := append([]int{}, base...)
			o[2], o[h] = o[h], o[2]
			out = append(out, o)
			if turn > 0 {
				break
			}
		}
	}
	return out
}

// withRepresentation hands use the univariate representation for the given
// roles, or for the first of hiddenOrders whose variable separates the
// solutions.
func withRepresentation(ctx context.Context, f *prime.Field, n int, t []prime.Element, order []int,
	use func(*resultant.Representation, []int) (prime.Element, error)) (prime.Element, error) {
	orders := [][]int{order}
	if order == nil {
		orders = hiddenOrders(n)
	}
	var last error
	for _, o := range orders {
		pencil, err := resultant.NewPencil(f, n, t, o)
		if err == nil {
			var rep *resultant.Representation
			rep, err = resultant.ComputeRepresentation(ctx, pencil, resultant.Options{})
			if err == nil {
				var v prime.Element
				v, err = use(rep, o)
				if err == nil {
					return v, nil
				}
			}
		}
		var separate *resultant.NotSeparatingError
		var degenerate *resultant.DegenerateError
		if !errors.As(err, &separate) && !errors.As(err, &degenerate) && !errors.Is(err, prime.ErrBadPrime) {
			return 0, err
		}
		last = err
	}
	return 0, last
}

// punctures are the coordinates of the finite punctures as elements of
// GF(p)[T]/(chi), by leg (0-based).
type punctures struct {
	f     *prime.Field
	n     int
	mod   *poly.Modulus
	z     []*poly.Poly // nil for the leg at infinity
	role  []int        // role of a leg, 0 = infinity, 1 = one, n-1 = zero
	legOf []int        // leg of a role
}

func newPunctures(rep *resultant.Representation, n int, order []int) (*punctures, error) {
	mod, err := poly.NewModulus(rep.Chi)
	if err != nil {
		return nil, err
	}
	p := &punctures{f: rep.Chi.Field(), n: n, mod: mod, z: make([]*poly.Poly, n), role: make([]int, n), legOf: make([]int, n)}
	for i, leg := range order {
		p.role[leg-1] = i
		p.legOf[i] = leg - 1
		if i == 0 {
			continue
		}
		if p.z[leg-1], err = rep.Z(leg); err != nil {
			return nil, err
		}
	}
	return p, nil
}

// exponents counts powers of z_a - z_b, a before b in the order of roles;
// negative tells an overall sign.
type exponents struct {
	power    map[[2]int]int // roles a < b
	negative bool
}

// measure returns the factor J_h/det Phi = prod (z_a - z_b) over the pairs of
// finite punctures a before b in the order of roles, z_2 - z_n = 1 among them.
func (p *punctures) measure() *exponents {
	e := &exponents{power: map[[2]int]int{}}
	for a := 1; a < p.n; a++ {
		for b := a + 1; b < p.n; b++ {
			e.power[[2]int{a, b}] = 1
		}
	}
	return e
}

// divideParkeTaylor multiplies by the Parke-Taylor factor of an ordering of
// 0-based legs, gauge-fixed: minus the product of 1/(z_p - z_q) over the links
// that avoid the leg at infinity.
func (p *punctures) divideParkeTaylor(e *exponents, ordering []int) {
	e.negative = !e.negative
	for i := range ordering {
		a, b := p.role[ordering[i]], p.role[ordering[(i+1)%p.n]]
		if a == 0 || b == 0 {
			continue
		}
		if a > b {
			a, b = b, a
			e.negative = !e.negative
		}
		e.power[[2]int{a, b}]--
	}
}

// difference returns z_a - z_b for roles a, b.
func (p *punctures) difference(a, b int) *poly.Poly {
	return new(poly.Poly).Sub(p.z[p.legOf[a]], p.z[p.legOf[b]])
}

// product multiplies the powers out in the quotient. prime.ErrBadPrime means
// that a difference that is divided by vanishes on a solution.
func (p *punctures) product(e *exponents) (*poly.Poly, error) {
	num, den := poly.New(p.f, p.f.One()), poly.New(p.f, p.f.One())
	for a := 1; a < p.n; a++ {
		for b := a + 1; b < p.n; b++ {
			k := e.power[[2]int{a, b}]
			if k == 0 {
				continue
			}
			d := p.difference(a, b)
			for ; k > 0; k-- {
				p.mod.Mul(num, num, d)
			}
			for ; k < 0; k++ {
				p.mod.Mul(den, den, d)
			}
		}
	}
	inv := new(poly.Poly)
	if !p.mod.Inverse(inv, den) {
		return nil, prime.ErrBadPrime
	}
	p.mod.Mul(num, num, inv)
	if e.negative {
		num.Neg(num)
	}
	return num, nil
}

// unorderedEliminationKernel sums over all orderings,
//
//	phi3{1..n} = 2^{-(n-2)} sum over the (n-1)! orderings of (-1)^{n-3} BS(a|a).
//
// Without masses every ordering has the same equations and the sum of the
// squared Parke-Taylor factors is built in the quotient once, over subsets of
// legs and the last leg of a path; with masses each ordering has its own.
func unorderedEliminationKernel(r Request) Kernel {
	n := r.Legs()
	return func(ctx context.Context, p *kinematics.Reduced) (prime.Element, error) {
		if err := checkLegs(r, p.N); err != nil {
			return 0, err
		}
		f := p.Field
		var sum prime.Element
		var err error
		if p.M == nil {
			sum, err = pathSum(ctx, f, n, shifted(p, r.Orderings[0]))
		} else {
			sum, err = orderingSum(ctx, p)
		}
		if err != nil {
			return 0, err
		}
		half, _ := f.Inv(f.FromUint64(1 << (n - 2)))
		return cubicSign(f, n, f.Mul(half, sum)), nil
	}
}

// pathSum returns the sum of PT(a)^2/det' Phi over all (n-1)! orderings.
func pathSum(ctx context.Context, f *prime.Field, n int, t []prime.Element) (prime.Element, error) {
	return withRepresentation(ctx, f, n, t, nil, func(rep *resultant.Representation, order []int) (prime.Element, error) {
		z, err := newPunctures(rep, n, order)
		if err != nil {
			return 0, err
		}
		m := n - 1 // finite punctures, roles 1..n-1
		square := make([][]*poly.Poly, m)
		for a := range square {
			square[a] = make([]*poly.Poly, m)
		}
		for a := range m {
			for b := a + 1; b < m; b++ {
				inv := new(poly.Poly)
				if !z.mod.Inverse(inv, z.difference(a+1, b+1)) {
					return 0, prime.ErrBadPrime
				}
				z.mod.Mul(inv, inv, inv)
				square[a][b], square[b][a] = inv, inv
			}
		}
		paths := make([][]*poly.Poly, 1<<m)
		for s := 1; s < len(paths); s++ {
			if err := ctx.Err(); err != nil {
				return 0, context.Cause(ctx)
			}
			paths[s] = make([]*poly.Poly, m)
			for a := range m {
				rest := s &^ (1 << a)
				if rest == s {
					continue
				}
				if rest == 0 {
					paths[s][a] = poly.New(f, f.One())
					continue
				}
				v := new(poly.Poly).Set(poly.New(f))
				for b := range m {
					if rest>>b&1 == 1 {
						x := new(poly.Poly)
						z.mod.Mul(x, paths[rest][b], square[a][b])
						v.Add(v, x)
					}
				}
				paths[s][a] = v
			}
		}
		total := poly.New(f)
		for a := range m {
			total.Add(total, paths[1<<m-1][a])
		}
		all, err := z.product(z.measure())
		if err != nil {
			return 0, err
		}
		z.mod.Mul(total, total, all)
		return rep.ResidueSum(total), nil
	})
}

// orderingSum adds BS(a|a) over the orderings, each with its own shift; an
// ordering and its reflection have the same value.
func orderingSum(ctx context.Context, p *kinematics.Reduced) (prime.Element, error) {
	f, n := p.Field, p.N
	rest := make([]int, n-1)
	for i := range rest {
		rest[i] = i + 2
	}
	var sum prime.Element
	var failed error
	permute(rest, func(w []int) bool {
		if w[0] > w[len(w)-1] {
			return true
		}
		alpha := append([]int{1}, w...)
		v, err := orderedResidue(ctx, f, n, shifted(p, alpha), alpha, alpha, nil)
		if err != nil {
			failed = err
			return false
		}
		sum = f.Add(sum, f.Add(v, v))
		return true
	})
	return sum, failed
}

// permute calls visit with every arrangement of w, in lexicographic order of
// places, until it returns false.
func permute(w []int, visit func([]int) bool) bool {
	var place func(int) bool
	place = func(i int) bool {
		if i == len(w) {
			return visit(w)
		}
		for j := i; j < len(w); j++ {
			w[i], w[j] = w[j], w[i]
			ok := place(i + 1)
			w[i], w[j] = w[j], w[i]
			if !ok {
				return false
			}
		}
		return true
	}
	return place(0)
}

// Gauges lists role assignments (see resultant.NewPencil) that between them
// change the legs at infinity, one and zero and the hidden variable.
func Gauges(n int) [][]int {
	all := hiddenOrders(n)
	out := [][]int{all[0]}
	if n > 4 {
		out = append(out, all[1]) // another hidden variable
	}
	for _, o := range all {
		if o[0] != 1 && len(out) < 4 {
			out = append(out, o) // other legs fixed
		}
	}
	return out
}

// ResidueInGauge computes an amplitude by elimination in a given gauge: order
// says which leg plays which role, as in resultant.NewPencil.
func ResidueInGauge(ctx context.Context, r Request, p *kinematics.Reduced, order []int) (prime.Element, error) {
	if err := r.Validate(); err != nil {
		return 0, err
	}
	if r.Braces {
		return 0, &RequestError{Request: r, Reason: "a sum over orderings has no single residue sum", Hint: "name one ordering"}
	}
	alpha := r.Orderings[0]
	beta := r.Orderings[len(r.Orderings)-1]
	v, err := orderedResidue(ctx, p.Field, p.N, shifted(p, alpha), alpha, beta, order)
	if r.Theory == Cubic {
		v = cubicSign(p.Field, p.N, v)
	}
	return v, err
}
