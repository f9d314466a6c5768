package series

import (
	"testing"

	"eliminant/checks/amplitude/integrand"
	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
)

// This file computes the same amplitudes by recursions on off-shell currents,
// which know nothing of scattering equations.

// element returns a random element.
func element(f *prime.Field, source *prime.Source) prime.Element {
	return f.FromUint64(source.Below(f.Modulus()))
}

// randomInvariants draws a symmetric matrix with zero diagonal and row sums.
func randomInvariants(f *prime.Field, n int, source *prime.Source) []prime.Element {
	s := make([]prime.Element, n*n)
	set := func(a, b int, x prime.Element) { s[a*n+b], s[b*n+a] = x, x }
	var total prime.Element // over pairs of 0..n-2
	for a := range n - 1 {
		for b := a + 1; b < n-1; b++ {
			if a == n-3 {
				break
			}
			x := element(f, source)
			set(a, b, x)
			total = f.Add(total, x)
		}
	}
	set(n-3, n-2, f.Neg(total))
	for a := range n - 1 {
		var sum prime.Element
		for b := range n - 1 {
			sum = f.Add(sum, s[a*n+b])
		}
		set(a, n-1, f.Neg(sum))
	}
	return s
}

// sumOver returns s_P for a word of legs.
func sumOver(f *prime.Field, n int, s []prime.Element, word []int) prime.Element {
	var sum prime.Element
	for i, a := range word {
		for _, b := range word[i+1:] {
			sum = f.Add(sum, s[(a-1)*n+b-1])
		}
	}
	return sum
}

// lastFirst rotates an ordering so that leg n is last, and drops it.
func lastDropped(order []int) []int {
	n := len(order)
	for i, a := range order {
		if a == n {
			return append(append([]int{}, order[i+1:]...), order[:i]...)
		}
	}
	panic("no last leg")
}

func sameLegs(p, q []int) bool {
	var x, y uint
	for i := range p {
		x, y = x|1<<p[i], y|1<<q[i]
	}
	return x == y
}

// doubleCurrent returns m(alpha|beta) by
//
//	phi_{P|Q} = -(1/s_P) sum over XY = P, AB = Q of phi_{X|A} phi_{Y|B} - phi_{Y|A} phi_{X|B},
//
// m(Pn|Qn) = -s_P phi_{P|Q} (C. Mafra, JHEP 07 (2016) 080).
func doubleCurrent(t require.TestingT, f *prime.Field, s []prime.Element, alpha, beta []int) prime.Element {
	n := len(alpha)
	p, q := lastDropped(alpha), lastDropped(beta)
	type key struct{ i, j, k int } // words p[i:i+k], q[j:j+k]
	memo := map[key]prime.Element{}
	var phi func(i, j, k int) prime.Element
	phi = func(i, j, k int) prime.Element {
		x, y := p[i:i+k], q[j:j+k]
		if !sameLegs(x, y) {
			return 0
		}
		if k == 1 {
			return f.One()
		}
		if v, ok := memo[key{i, j, k}]; ok {
			return v
		}
		var sum prime.Element
		for l := 1; l < k; l++ {
			sum = f.Add(sum, f.Mul(phi(i, j, l), phi(i+l, j+l, k-l)))
			// Y|A: Y = p[i+l:], A = q[j:j+k-l]; X|B
			sum = f.Sub(sum, f.Mul(phi(i+l, j, k-l), phi(i, j+k-l, l)))
		}
		if k < n-1 {
			inverse, ok := f.Inv(sumOver(f, n, s, x))
			require.True(t, ok)
			sum = f.Neg(f.Mul(inverse, sum))
		}
		memo[key{i, j, k}] = sum
		return sum
	}
	return phi(0, 0, n-1)
}

// particles is momenta and polarisations in a space with a given metric; e and f
// are two sets of polarisations.
type particles struct {
	field   *prime.Field
	metric  []prime.Element // d x d
	k, e, f [][]prime.Element
}

func (p *particles) dot(x, y []prime.Element) prime.Element {
	d := len(x)
	var sum prime.Element
	for i, c := range x {
		if c != 0 {
			sum = p.field.Add(sum, p.field.Mul(c, p.field.Dot(p.metric[i*d:(i+1)*d], y)))
		}
	}
	return sum
}

// products returns all that enters the integrand.
func (p *particles) products() *integrand.Products {
	table := func(x, y [][]prime.Element) (z []prime.Element) {
		for _, v := range x {
			for _, w := range y {
				z = append(z, p.dot(v, w))
			}
		}
		return z
	}
	return &integrand.Products{KK: table(p.k, p.k), EK: table(p.e, p.k), EE: table(p.e, p.e),
		FK: table(p.f, p.k), FF: table(p.f, p.f)}
}

// invariants returns s_ab = 2 k_a.k_b.
func (p *particles) invariants() []prime.Element {
	n := len(p.k)
	s := make([]prime.Element, n*n)
	for a := range n {
		for b := range n {
			if a != b {
				x := p.dot(p.k[a], p.k[b])
				s[a*n+b] = p.field.Add(x, x)
			}
		}
	}
	return s
}

// gluons returns A_YM(order) by the recursion of off-shell currents (F. Berends,
// W. Giele, Nucl. Phys. B306 (1988) 759): k_P^2 J_P =
//
//	sum over XY of 2(k_Y.J_X)J_Y - 2(k_X.J_Y)J_X + (J_X.J_Y)(k_X - k_Y)
//	+ sum over XYZ of 2(J_X.J_Z)J_Y - (J_X.J_Y)J_Z - (J_Y.J_Z)J_X.
func (p *particles) gluons(t testing.TB, e [][]prime.Element, order []int) prime.Element {
	f, n, d := p.field, len(p.k), len(p.k[0])
	word := lastDropped(order)
	k := make([][][]prime.Element, n) // [i][j]: word[i:j]
	J := make([][][]prime.Element, n)
	for i := range n {
		k[i], J[i] = make([][]prime.Element, n), make([][]prime.Element, n)
	}
	scaled := func(z []prime.Element, c int64, x prime.Element, v []prime.Element) {
		f.AddScaledRow(z, f.Mul(f.FromInt64(c), x), v)
	}
	for l := 1; l < n; l++ {
		for i := 0; i+l < n; i++ {
			j := i + l
			if l == 1 {
				k[i][j], J[i][j] = p.k[word[i]-1], e[word[i]-1]
				continue
			}
			k[i][j] = make([]prime.Element, d)
			f.AddRow(k[i][j], k[i][j-1], k[j-1][j])
			z := make([]prime.Element, d)
			for x := i + 1; x < j; x++ {
				a, b := J[i][x], J[x][j]
				scaled(z, 2, p.dot(k[x][j], a), b)
				scaled(z, -2, p.dot(k[i][x], b), a)
				c := p.dot(a, b)
				scaled(z, 1, c, k[i][x])
				scaled(z, -1, c, k[x][j])
				for y := x + 1; y < j; y++ {
					b, c := J[x][y], J[y][j]
					scaled(z, 2, p.dot(a, c), b)
					scaled(z, -1, p.dot(a, b), c)
					scaled(z, -1, p.dot(b, c), a)
				}
			}
			if l < n-1 {
				inverse, ok := f.Inv(p.dot(k[i][j], k[i][j]))
				require.True(t, ok)
				f.ScaleRow(z, inverse, z)
			}
			J[i][j] = z
		}
	}
	return p.dot(J[0][n-1], e[n-1])
}

// doubleCopy returns M_D = - sum over alpha, beta of A(1,alpha,n-1,n) S[alpha|beta]
// A~(1,beta,n,n-1) (H. Kawai, D. Lewellen, S. Tye, Nucl. Phys. B269 (1986) 1).
func (p *particles) doubleCopy(t testing.TB) prime.Element {
	f, n := p.field, len(p.k)
	s := p.invariants()
	var middle []int
	for a := 2; a < n-1; a++ {
		middle = append(middle, a)
	}
	words := permutations(middle)
	left, right := make([]prime.Element, len(words)), make([]prime.Element, len(words))
	for i, w := range words {
		left[i] = p.gluons(t, p.e, concat([]int{1}, w, []int{n - 1, n}))
		right[i] = p.gluons(t, p.f, concat([]int{1}, w, []int{n, n - 1}))
	}
	var sum prime.Element
	for i, alpha := range words {
		for j, beta := range words {
			place := map[int]int{}
			for k, b := range beta {
				place[b] = k
			}
			kernel := f.One()
			for k, a := range alpha {
				x := s[a-1] // s_1a
				for _, b := range alpha[:k] {
					if place[b] < place[a] {
						x = f.Add(x, s[(a-1)*n+b-1])
					}
				}
				kernel = f.Mul(kernel, x)
			}
			sum = f.Sub(sum, f.Mul(kernel, f.Mul(left[i], right[j])))
		}
	}
	return sum
}

func concat(parts ...[]int) (z []int) {
	for _, p := range parts {
		z = append(z, p...)
	}
	return z
}

func permutations(x []int) [][]int {
	if len(x) == 0 {
		return [][]int{nil}
	}
	var z [][]int
	for i := range x {
		rest := concat(x[:i], x[i+1:])
		for _, w := range permutations(rest) {
			z = append(z, concat([]int{x[i]}, w))
		}
	}
	return z
}

// vectors draws n particles in d dimensions, metric +, -, .., -: massless momenta
// that add up to zero, polarisations orthogonal to their momenta.
func vectors(f *prime.Field, n, d int, source *prime.Source) *particles {
	p := &particles{field: f, metric: make([]prime.Element, d*d)}
	for i := range d {
		p.metric[i*d+i] = f.Neg(f.One())
	}
	p.metric[0] = f.One()
	massless := func() []prime.Element { // c (1 + T, 2 t, 1 - T), T = t.t
		v := make([]prime.Element, d)
		var T prime.Element
		for i := 1; i < d-1; i++ {
			x := element(f, source)
			v[i] = f.Add(x, x)
			T = f.Add(T, f.Square(x))
		}
		v[0], v[d-1] = f.Add(f.One(), T), f.Sub(f.One(), T)
		f.ScaleRow(v, element(f, source), v)
		return v
	}
	total := make([]prime.Element, d)
	p.k = make([][]prime.Element, n)
	for a := 2; a < n; a++ {
		p.k[a] = massless()
		f.AddRow(total, total, p.k[a])
	}
	l := massless()
	c, ok := f.Div(p.dot(total, total), f.Mul(f.FromInt64(2), p.dot(total, l)))
	if !ok {
		panic("unlucky draw")
	}
	p.k[0], p.k[1] = make([]prime.Element, d), make([]prime.Element, d)
	f.ScaleRow(p.k[0], f.Neg(c), l)
	f.AddRow(p.k[1], total, p.k[0])
	f.ScaleRow(p.k[1], f.Neg(f.One()), p.k[1])
	for a := range n {
		for _, set := range []*[][]prime.Element{&p.e, &p.f} {
			v, w := make([]prime.Element, d), make([]prime.Element, d)
			for i := range d {
				v[i], w[i] = element(f, source), element(f, source)
			}
			c, _ := f.Div(p.dot(v, p.k[a]), p.dot(w, p.k[a]))
			f.SubScaledRow(v, c, w)
			*set = append(*set, v)
		}
	}
	return p
}

// gram draws n particles by a random matrix of all products: coefficient vectors
// in k_1..k_n, e_1..e_n, f_1..f_n.
func gram(f *prime.Field, n int, source *prime.Source) *particles {
	d := 3 * n
	p := &particles{field: f, metric: make([]prime.Element, d*d)}
	set := func(i, j int, x prime.Element) { p.metric[i*d+j], p.metric[j*d+i] = x, x }
	half, _ := f.Inv(f.FromInt64(2))
	for i, x := range randomInvariants(f, n, source) {
		set(i/n, i%n, f.Mul(half, x))
	}
	for _, block := range []int{n, 2 * n} {
		for a := range n {
			last := n - 1
			if a == last {
				last = n - 2
			}
			var sum prime.Element
			for b := range last {
				if b != a {
					x := element(f, source)
					set(block+a, b, x)
					sum = f.Add(sum, x)
				}
			}
			set(block+a, last, f.Neg(sum))
			for b := range n {
				set(block+a, block+b, element(f, source))
			}
		}
	}
	for i := range d {
		v := make([]prime.Element, d)
		v[i] = f.One()
		switch {
		case i < n:
			p.k = append(p.k, v)
		case i < 2*n:
			p.e = append(p.e, v)
		default:
			p.f = append(p.f, v)
		}
	}
	return p
}

func identity(n int) []int {
	z := make([]int, n)
	for i := range z {
		z[i] = i + 1
	}
	return z
}

// shuffled returns a random ordering of 1..n.
func shuffled(n int, source *prime.Source) []int {
	z := identity(n)
	for i := n - 1; i > 0; i-- {
		j := int(source.Below(uint64(i + 1)))
		z[i], z[j] = z[j], z[i]
	}
	return z
}
