package integrand

import (
	"fmt"
	"testing"

	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
)

// homogeneous is a solution at finite points with data, and the building blocks
// by their definitions, leg 1 like any other.
type homogeneous struct {
	*prime.Field
	n     int
	z, s  []prime.Element
	p     *Products
	plain *Ring
}

func (h *homogeneous) s2(a, b int) prime.Element { return h.s[(a-1)*h.n+b-1] }

func (h *homogeneous) over(x prime.Element, a, b int) prime.Element {
	y, ok := h.Div(x, h.Sub(h.z[a-1], h.z[b-1]))
	if !ok {
		panic("coincident points")
	}
	return y
}

// newHomogeneous draws distinct points and then invariants for which they solve
// f_a = 0, which is linear; also products with row sums zero.
func newHomogeneous(t testing.TB, f *prime.Field, n int, source *prime.Source) *homogeneous {
	h := &homogeneous{Field: f, n: n, z: randomRow(f, n, source), s: make([]prime.Element, n*n)}
	h.plain = NewRing(f, 1)
	index := func(a, b int) int { // of the pair a < b among all pairs
		k := 0
		for i := 1; i < a; i++ {
			k += n - i
		}
		return k + b - a - 1
	}
	pairs := n * (n - 1) / 2
	var rows [][]prime.Element
	for a := 1; a <= n; a++ {
		sum, force := make([]prime.Element, pairs), make([]prime.Element, pairs)
		for b := 1; b <= n; b++ {
			if a != b {
				k := index(min(a, b), max(a, b))
				sum[k], force[k] = f.One(), h.over(f.One(), a, b)
			}
		}
		rows = append(rows, sum, force)
	}
	x := kernelVector(f, rows, pairs, source)
	for a := 1; a <= n; a++ {
		for b := a + 1; b <= n; b++ {
			v := x[index(a, b)]
			h.s[(a-1)*n+b-1], h.s[(b-1)*n+a-1] = v, v
		}
	}
	for a := 1; a <= n; a++ {
		var sum, force prime.Element
		for b := 1; b <= n; b++ {
			if a != b {
				sum = f.Add(sum, h.s2(a, b))
				force = f.Add(force, h.over(h.s2(a, b), a, b))
			}
		}
		require.Zero(t, sum)
		require.Zero(t, force)
	}
	h.p = randomProducts(f, n, source)
	return h
}

// kernelVector returns a random vector annihilated by the rows.
func kernelVector(f *prime.Field, rows [][]prime.Element, width int, source *prime.Source) []prime.Element {
	x := randomRow(f, width, source)
	var pivots []int
	done := 0
	for k := 0; k < width && done < len(rows); k++ {
		p := done
		for p < len(rows) && rows[p][k] == 0 {
			p++
		}
		if p == len(rows) {
			continue
		}
		rows[done], rows[p] = rows[p], rows[done]
		c, _ := f.Inv(rows[done][k])
		f.ScaleRow(rows[done], c, rows[done])
		for i := range rows {
			if i != done {
				f.SubScaledRow(rows[i], rows[i][k], rows[done])
			}
		}
		pivots = append(pivots, k)
		done++
	}
	for _, k := range pivots {
		x[k] = 0
	}
	for i, k := range pivots {
		x[k] = f.Neg(f.Dot(rows[i], x))
	}
	return x
}

// randomProducts draws e.k with row sums and diagonal zero, and e.e.
func randomProducts(f *prime.Field, n int, source *prime.Source) *Products {
	p := &Products{EK: randomRow(f, n*n, source), EE: randomRow(f, n*n, source)}
	for a := range n {
		p.EK[a*n+a] = 0
		last := a*n + n - 1
		if a == n-1 {
			last--
		}
		var sum prime.Element
		for b := range n {
			if a*n+b != last {
				sum = f.Add(sum, p.EK[a*n+b])
			}
			p.EE[b*n+a] = p.EE[a*n+b]
		}
		p.EK[last] = f.Neg(sum)
	}
	return p
}

func (h *homogeneous) parkeTaylor(order []int) prime.Element {
	x := h.One()
	for i, a := range order {
		x = h.over(x, a, order[(i+1)%len(order)])
	}
	return x
}

// psi returns Pf of Psi with the rows k of legs K and e of legs E.
func (h *homogeneous) psi(K, E []int) prime.Element {
	f, n := h.Field, h.n
	half, _ := f.Inv(f.FromInt64(2))
	ek := func(a, b int) prime.Element { return h.p.EK[(a-1)*n+b-1] }
	c := func(a, b int) prime.Element { // C_ab
		if a != b {
			return h.over(ek(a, b), a, b)
		}
		var sum prime.Element
		for c := 1; c <= n; c++ {
			if c != a {
				sum = f.Sub(sum, h.over(ek(a, c), a, c))
			}
		}
		return sum
	}
	return h.expand(len(K)+len(E), func(i, j int) prime.Element {
		switch {
		case j < len(K):
			return f.Mul(half, h.over(h.s2(K[i], K[j]), K[i], K[j]))
		case i < len(K):
			return f.Neg(c(E[j-len(K)], K[i]))
		default:
			a, b := E[i-len(K)], E[j-len(K)]
			return h.over(h.p.EE[(a-1)*n+b-1], a, b)
		}
	})
}

func (h *homogeneous) expand(size int, entry func(i, j int) prime.Element) prime.Element {
	rows := make([][]prime.Element, size*size)
	for i := range size {
		for j := i + 1; j < size; j++ {
			rows[i*size+j] = []prime.Element{entry(i, j)}
		}
	}
	return expandPfaffian(h.plain, func(i, j int) []prime.Element { return rows[i*size+j] }, upTo(size))[0]
}

// without returns 1..n without some legs.
func (h *homogeneous) without(drop ...int) []int {
	var z []int
	for a := 1; a <= h.n; a++ {
		keep := true
		for _, b := range drop {
			keep = keep && a != b
		}
		if keep {
			z = append(z, a)
		}
	}
	return z
}

// reducedPfaffian is (-1)^(i+j)/z_ij Pf Psi without rows and columns i < j of the
// k block.
func (h *homogeneous) reducedPfaffian(i, j int) prime.Element {
	x := h.over(h.psi(h.without(i, j), h.without()), i, j)
	if (i+j)%2 == 1 {
		x = h.Neg(x)
	}
	return x
}

func (h *homogeneous) reducedPfaffianA(i, j int) prime.Element {
	rest := h.without(i, j)
	x := h.expand(len(rest), func(i, j int) prime.Element {
		return h.over(h.s2(rest[i], rest[j]), rest[i], rest[j])
	})
	x = h.over(x, i, j)
	if (i+j)%2 == 1 {
		x = h.Neg(x)
	}
	return x
}

// reducedDeterminant is (-1)^(r+s+t+u+v+w) det Phi without rows r, s, t and
// columns u, v, w, over z_rs z_st z_tr z_uv z_vw z_wu.
func (h *homogeneous) reducedDeterminant(rows, columns [3]int) prime.Element {
	f := h.Field
	I, J := h.without(rows[:]...), h.without(columns[:]...)
	entry := func(i, j int) []prime.Element {
		a, b := I[i], J[j]
		if a != b {
			return []prime.Element{h.over(h.over(h.s2(a, b), a, b), a, b)}
		}
		var sum prime.Element
		for c := 1; c <= h.n; c++ {
			if c != a {
				sum = f.Sub(sum, h.over(h.over(h.s2(a, c), a, c), a, c))
			}
		}
		return []prime.Element{sum}
	}
	x := expandDeterminant(h.plain, entry, 0, upTo(len(I)))[0]
	sign := 0
	for _, q := range [][3]int{rows, columns} {
		x = h.over(h.over(h.over(x, q[0], q[1]), q[1], q[2]), q[2], q[0])
		sign += q[0] + q[1] + q[2]
	}
	if sign%2 == 1 {
		x = f.Neg(x)
	}
	return x
}

// gaugeFixed maps z to -1/(z - z_1), which takes leg 1 to infinity: the limit of
// X(z') z'_1^w is (-1)^w_1 X(z) times the product of (z_i - z_1)^w_i, i != 1.
func (h *homogeneous) gaugeFixed(x prime.Element, weight func(leg int) int) prime.Element {
	f := h.Field
	for a := 1; a <= h.n; a++ {
		base := f.Neg(f.One())
		if a > 1 {
			base = f.Sub(h.z[a-1], h.z[0])
		}
		w := weight(a)
		if w < 0 {
			base, _ = f.Inv(base)
			w = -w
		}
		x = f.Mul(x, f.Exp(base, uint64(w)))
	}
	return x
}

// solution is the same point in the gauge z_1 = infinity.
func (h *homogeneous) solution(t testing.TB) *Solution {
	f := h.Field
	z := make([]prime.Element, h.n)
	for a := 2; a <= h.n; a++ {
		x, _ := f.Inv(f.Sub(h.z[a-1], h.z[0]))
		z[a-1] = f.Neg(x)
	}
	v := NewSolution(NewRing(f, 1), h.n, h.s, nil)
	require.True(t, v.Place(z))
	for a := 2; a <= h.n; a++ {
		residual := make([]prime.Element, 1)
		v.Residual(residual, a)
		require.Zero(t, residual[0])
	}
	return v
}

func evaluate(t testing.TB, x Factor, v *Solution) prime.Element {
	f := v.Ring().Field()
	require.NoError(t, x.Check(f, v.Legs()))
	z := make([]prime.Element, v.Ring().Depth())
	x.Evaluator(v.Ring(), v.Legs()).Evaluate(z, v)
	return z[0]
}

// Every block against its definition at finite points, signs included.
func TestBlocksAgainstDefinitions(t *testing.T) {
	for n := 4; n <= 6; n++ {
		t.Run(fmt.Sprint(n), func(t *testing.T) {
			source := prime.NewSource("blocks", fmt.Sprint(n))
			f := source.Field()
			h := newHomogeneous(t, f, n, source)
			v := h.solution(t)
			check := func(name string, x Factor, definition prime.Element) {
				t.Helper()
				require.NotZero(t, definition, name)
				require.Equal(t, h.gaugeFixed(definition, x.Moebius), evaluate(t, x, v), name)
			}
			full := h.without()
			check("PT", ParkeTaylor{full}, h.parkeTaylor(full))
			check("PT through 1", ParkeTaylor{[]int{3, 1, 2}}, h.parkeTaylor([]int{3, 1, 2}))
			check("PT of a pair", ParkeTaylor{[]int{1, 3}}, h.parkeTaylor([]int{1, 3}))
			check("PT without 1", ParkeTaylor{[]int{4, 2, 3}}, h.parkeTaylor([]int{4, 2, 3}))
			square := h.Square(h.parkeTaylor(full))
			check("PT^2", Power{ParkeTaylor{full}, 2}, square)
			check("PT^3", Power{ParkeTaylor{full}, 3}, h.Mul(square, h.parkeTaylor(full)))
			check("PT^1", Power{ParkeTaylor{full}, 1}, h.parkeTaylor(full))
			check("1", Product{}, h.One())
			for _, p := range [][2]int{{2, 4}, {1, 3}, {3, 1}} {
				x := h.over(h.One(), p[0], p[1])
				y, _ := h.Inv(x)
				check("1/z", Difference{p[0], p[1], -1}, x)
				check("z", Difference{p[0], p[1], 1}, y)
				check("z^3", Difference{p[0], p[1], 3}, h.Mul(y, h.Square(y)))
				check("1/z^2", Difference{p[0], p[1], -2}, h.Square(x))
			}
			check("Pf'Psi", ReducedPfaffian{h.p}, h.reducedPfaffian(1, n))
			for _, q := range [][2]int{{1, 2}, {2, n}, {2, 3}, {3, 4}} { // all choices agree
				check("Pf'Psi", ReducedPfaffian{h.p}, h.reducedPfaffian(q[0], q[1]))
			}
			if n%2 == 0 {
				for _, q := range [][2]int{{1, n}, {1, 2}, {2, n}, {2, 3}} {
					check("Pf'A", ReducedPfaffianA{}, h.reducedPfaffianA(q[0], q[1]))
				}
			}
			for _, H := range [][]int{{2}, {1}, {2, 3}, {3, 1}, {1, 2, 4}, {2, 3, 4}} {
				if len(H) == n-1 { // a null vector of Psi vanishes at the one leg left out
					require.Zero(t, evaluate(t, SubsetPfaffian{h.p, H}, v))
					require.Zero(t, h.psi(H, H))
					continue
				}
				check("Pf Psi_H", SubsetPfaffian{h.p, H}, h.psi(H, H))
			}
			check("product", Product{ParkeTaylor{full}, ReducedPfaffian{h.p}},
				h.Mul(h.parkeTaylor(full), h.reducedPfaffian(2, 3)))

			four := func(int) int { return 4 }
			z := make([]prime.Element, 1)
			v.ReducedDeterminant(z)
			// (z_12 z_2n z_n1)^2 leaves z_2n^2 in the gauge
			d := h.Square(h.Sub(v.Coordinate(2)[0], v.Coordinate(n)[0]))
			for _, q := range [][2][3]int{{{1, 2, n}, {1, 2, n}}, {{1, 2, 3}, {2, 3, 4}}, {{1, 2, 4}, {1, 3, 4}}} {
				require.Equal(t, z[0], h.Mul(d, h.gaugeFixed(h.reducedDeterminant(q[0], q[1]), four)), "det'Phi")
			}
		})
	}
}

// A point that solves nothing has a reduced Pfaffian that depends on the choice of
// rows, so the agreement above is a statement about solutions.
func TestDefinitionsDifferOffSolutions(t *testing.T) {
	source := prime.NewSource("off solutions")
	f := source.Field()
	h := newHomogeneous(t, f, 5, source)
	h.z[2] = f.Add(h.z[2], f.One())
	require.NotEqual(t, h.reducedPfaffian(1, 5), h.reducedPfaffian(2, 3))
}

// Leg e -> k gives zero on solutions.
func TestReducedPfaffianIsGaugeInvariant(t *testing.T) {
	for n := 4; n <= 9; n++ {
		source := prime.NewSource("gauge", fmt.Sprint(n))
		h := newHomogeneous(t, source.Field(), n, source)
		v := h.solution(t)
		half, _ := h.Inv(h.FromInt64(2))
		for leg := 1; leg <= n; leg += n - 1 {
			p := &Products{EK: append([]prime.Element{}, h.p.EK...), EE: append([]prime.Element{}, h.p.EE...)}
			require.NotZero(t, evaluate(t, ReducedPfaffian{p}, v))
			for b := 1; b <= n; b++ {
				p.EK[(leg-1)*n+b-1] = h.Mul(half, h.s2(leg, b))
			}
			for b := 1; b <= n; b++ {
				x := p.EK[(b-1)*n+leg-1]
				p.EE[(leg-1)*n+b-1], p.EE[(b-1)*n+leg-1] = x, x
			}
			require.Zero(t, evaluate(t, ReducedPfaffian{p}, v), "%d legs, leg %d", n, leg)
		}
	}
}

func TestChecks(t *testing.T) {
	source := prime.NewSource("checks")
	f := source.Field()
	p := randomProducts(f, 5, source)
	bad := []Factor{
		ParkeTaylor{[]int{1, 2, 6}}, ParkeTaylor{[]int{0, 2}}, ParkeTaylor{[]int{1, 2, 1}}, ParkeTaylor{[]int{1}},
		Difference{2, 2, 1}, Difference{2, 9, 1},
		Power{ParkeTaylor{[]int{1, 2, 3, 4, 5}}, 0},
		ReducedPfaffianA{},
		ReducedPfaffian{nil}, ReducedPfaffian{&Products{}}, SubsetPfaffian{p, []int{2, 2}},
		Product{ParkeTaylor{[]int{1, 2}}, SubsetPfaffian{p, []int{7}}},
	}
	for _, x := range bad {
		require.Error(t, x.Check(f, 5), "%#v", x)
	}
	require.NoError(t, ReducedPfaffian{p}.Check(f, 5))
	change := func(set func(q *Products)) *Products {
		q := &Products{EK: append([]prime.Element{}, p.EK...), EE: append([]prime.Element{}, p.EE...)}
		set(q)
		return q
	}
	for leg, set := range map[int]func(q *Products){
		3: func(q *Products) { q.EK[2*5] = f.Add(q.EK[2*5], f.One()) },
		2: func(q *Products) {
			q.EK[1*5+1], q.EK[1*5+2] = f.One(), f.Sub(q.EK[1*5+2], f.One())
		},
		1: func(q *Products) { q.EE[4] = f.Add(q.EE[4], f.One()) },
	} {
		var e *ProductsError
		require.ErrorAs(t, ReducedPfaffian{change(set)}.Check(f, 5), &e)
		require.Equal(t, leg, e.Leg)
		require.NotEmpty(t, e.Error())
	}
	// of legs outside a subset nothing is asked
	require.NoError(t, SubsetPfaffian{change(func(q *Products) { q.EK[0] = f.One() }), []int{2, 3}}.Check(f, 5))
	var e *WeightError
	require.ErrorAs(t, CheckMoebius(Product{ParkeTaylor{[]int{1, 2, 3, 4}}, ReducedPfaffian{p}}, 5), &e)
	require.Equal(t, &WeightError{5, 2}, e)
}
