package resultant

import (
	"fmt"
	"math/bits"
	"slices"
	"testing"

	"eliminant/rational/prime"
	"eliminant/rational/scattering"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// subset sums s_I by leg masks, straight from the definition.
func channelSum(f *prime.Field, n int, s []prime.Element, legs ...int) prime.Element {
	var z prime.Element
	for i, a := range legs {
		for _, b := range legs[i+1:] {
			z = f.Add(z, s[(a-1)*n+b-1])
		}
	}
	return z
}

// definition writes T0 and T1 out from their definition, for identity roles:
// row (alpha, m), column alpha + 1_V. Rows and columns are keyed by exponents.
type definition struct {
	n, k    int
	columns [][]int // exponents beta in mixed-radix order
	rows    [][]int // alpha_1..alpha_k, m
	t0, t1  [][]prime.Element
}

func writeOut(f *prime.Field, n int, s []prime.Element) *definition {
	k := n - 4
	d := &definition{n: n, k: k}
	exponents := func(most func(j int) int) [][]int {
		out := [][]int{{}}
		for j := 1; j <= k; j++ {
			var next [][]int
			for e := 0; e <= most(j); e++ {
				for _, x := range out {
					next = append(next, append(slices.Clone(x), e))
				}
			}
			out = next
		}
		return out
	}
	d.columns = exponents(func(j int) int { return j })
	index := map[string]int{}
	for i, c := range d.columns {
		index[fmt.Sprint(c)] = i
	}
	for _, alpha := range exponents(func(j int) int { return j - 1 }) {
		for m := 1; m <= k+1; m++ {
			d.rows = append(d.rows, append(slices.Clone(alpha), m))
			r0 := make([]prime.Element, len(d.columns))
			r1 := make([]prime.Element, len(d.columns))
			for v := range 1 << k {
				beta := slices.Clone(alpha)
				var legs []int
				for j := range k {
					if v>>j&1 == 1 {
						beta[j]++
						legs = append(legs, j+4)
					}
				}
				i := index[fmt.Sprint(beta)]
				sum := func(more ...int) prime.Element { return channelSum(f, n, s, append(more, legs...)...) }
				switch len(legs) {
				case m:
					r0[i] = sum(1)
				case m - 1:
					r0[i], r1[i] = sum(1, 2), sum(1, 3)
				case m - 2:
					r1[i] = sum(1, 2, 3)
				}
			}
			d.t0, d.t1 = append(d.t0, r0), append(d.t1, r1)
		}
	}
	return d
}

// determinant by elimination; destroys a.
func gauss(f *prime.Field, a [][]prime.Element) prime.Element {
	det := f.One()
	for i := range a {
		r := i
		for r < len(a) && a[r][i] == 0 {
			r++
		}
		if r == len(a) {
			return 0
		}
		if r != i {
			a[r], a[i] = a[i], a[r]
			det = f.Neg(det)
		}
		det = f.Mul(det, a[i][i])
		inv, _ := f.Inv(a[i][i])
		for r := i + 1; r < len(a); r++ {
			if a[r][i] != 0 {
				f.SubScaledRow(a[r][i:], f.Mul(a[r][i], inv), a[i][i:])
			}
		}
	}
	return det
}

func copyMatrix(a [][]prime.Element) [][]prime.Element {
	z := make([][]prime.Element, len(a))
	for i := range a {
		z[i] = slices.Clone(a[i])
	}
	return z
}

// T1 is triangular in the plan's order with the plan's pivots: every column and
// every row once, the pivot entry s_{13U}, no entry in a later column.
func TestPivotOrder(t *testing.T) {
	for n := 4; n <= 9; n++ {
		l := planFor(n)
		k := n - 4
		require.Len(t, l.rows, l.size)
		rank := make([]int, l.size)
		for i := range rank {
			rank[i] = -1
		}
		seen := map[[2]int]bool{}
		for i, r := range l.rows {
			require.Equal(t, -1, rank[r.pivot], "column twice")
			rank[r.pivot] = i
			key := [2]int{int(r.base), int(r.size)}
			require.False(t, seen[key], "row twice")
			seen[key] = true
			require.Equal(t, r.base+l.offset[r.set], r.pivot)
			require.Equal(t, int(r.size), bits.OnesCount32(l.sets[r.set]))
			// alpha is an exponent of a row
			digits, radix := int(r.base), 1
			for j := 1; j <= k; j++ {
				radix *= j
				require.LessOrEqual(t, digits/radix%(j+1), j-1)
			}
		}
		for i, r := range l.rows {
			for v, o := range l.offset {
				if c := bits.OnesCount32(l.sets[v]); (c == int(r.size) || c == int(r.size)-1) && v != int(r.set) {
					require.Less(t, rank[r.base+o], i, "entry after the pivot")
				}
			}
		}
	}
}

// Multiply solves T1 z + T0 x = 0, T0 and T1 written out; also in place.
func TestMultiplyAgainstDefinition(t *testing.T) {
	for n := 4; n <= 8; n++ {
		for _, f := range []*prime.Field{prime.TableField(1), prime.NewSource("multiply").Field()} {
			source := prime.NewSource("multiply", fmt.Sprint(n))
			s := randomInvariants(f, n, source)
			p := newPencil(t, f, n, s, nil)
			d := writeOut(f, n, s)
			x := make([]prime.Element, p.Size())
			for i := range x {
				x[i] = f.FromUint64(source.Uint64())
			}
			z := make([]prime.Element, p.Size())
			p.Multiply(z, x)
			for i := range d.rows {
				require.Zero(t, f.Add(f.Dot(d.t0[i], x), f.Dot(d.t1[i], z)))
			}
			p.Multiply(x, x)
			require.Equal(t, z, x)
		}
	}
}

// det T1 = sign prod s_{13V}^{|V|!(k-|V|)!}, det T0 the same with s_{12V} and the
// same sign.
func TestDeterminantsOfThePencil(t *testing.T) {
	f := prime.TableField(2)
	factorial := []uint64{1, 1, 2, 6}
	for n := 5; n <= 7; n++ {
		s := randomInvariants(f, n, prime.NewSource("determinant", fmt.Sprint(n)))
		d := writeOut(f, n, s)
		lead, constant := f.One(), f.One()
		for v := range 1 << d.k {
			var legs []int
			for j := range d.k {
				if v>>j&1 == 1 {
					legs = append(legs, j+4)
				}
			}
			e := factorial[len(legs)] * factorial[d.k-len(legs)]
			lead = f.Mul(lead, f.Exp(channelSum(f, n, s, append([]int{1, 3}, legs...)...), e))
			constant = f.Mul(constant, f.Exp(channelSum(f, n, s, append([]int{1, 2}, legs...)...), e))
		}
		det0, det1 := gauss(f, copyMatrix(d.t0)), gauss(f, copyMatrix(d.t1))
		require.Contains(t, []prime.Element{lead, f.Neg(lead)}, det1)
		require.Equal(t, f.Mul(lead, det0), f.Mul(constant, det1))
	}
}

// Every nonempty set of roles 3..n-1 whose s_{1R} vanishes is named.
func TestDegenerateDataAreNamed(t *testing.T) {
	f := prime.TableField(0)
	n := 6
	source := prime.NewSource("degenerate")
	for _, legs := range [][]int{{1, 3}, {1, 5}, {1, 3, 4}, {1, 4, 5}, {1, 3, 4, 5}} {
		s := randomInvariants(f, n, source)
		// move s_I to zero along s_ab += x, s_bc -= x, s_cd += x, s_da -= x with only
		// a and b in I: row sums stay
		var in, out []int
		for a := 1; a <= n; a++ {
			if slices.Contains(legs, a) {
				in = append(in, a)
			} else {
				out = append(out, a)
			}
		}
		x := f.Neg(channelSum(f, n, s, legs...))
		cycle := []int{in[0], in[1], out[0], out[1]}
		for i, a := range cycle {
			b := cycle[(i+1)%4]
			y := x
			if i%2 == 1 {
				y = f.Neg(x)
			}
			s[(a-1)*n+b-1] = f.Add(s[(a-1)*n+b-1], y)
			s[(b-1)*n+a-1] = s[(a-1)*n+b-1]
		}
		require.Zero(t, channelSum(f, n, s, legs...))
		_, err := NewPencil(f, n, s, nil)
		var e *DegenerateError
		require.ErrorAs(t, err, &e)
		require.Equal(t, scattering.NewChannel(n, legs...), e.Channel)
		require.Contains(t, err.Error(), e.Channel.String()+" = 0")
		// with other roles leg 1 is no longer special
		_, err = NewPencil(f, n, s, []int{2, 1, 3, 4, 5, 6})
		if !slices.Contains(legs, 2) && len(legs) < 5 {
			require.NoError(t, err)
		}
	}
}

func TestRoles(t *testing.T) {
	f := prime.TableField(0)
	s := randomInvariants(f, 5, prime.NewSource("roles"))
	for _, order := range [][]int{{1, 2, 3, 4}, {1, 2, 3, 4, 4}, {0, 1, 2, 3, 4}, {1, 2, 3, 4, 6}} {
		_, err := NewPencil(f, 5, s, order)
		var e *RoleError
		require.ErrorAs(t, err, &e)
	}
	_, err := NewPencil(f, 13, nil, nil)
	var e *RangeError
	require.ErrorAs(t, err, &e)
	require.Equal(t, 12, e.Maximum)

	// relabelling the legs and the roles together changes nothing
	rapid.Check(t, func(r *rapid.T) {
		n := rapid.IntRange(4, 7).Draw(r, "n")
		legs := make([]int, n)
		for i := range legs {
			legs[i] = i + 1
		}
		order := rapid.Permutation(legs).Draw(r, "order")
		s := reduce(r, generic(r, n), f)
		relabelled := make([]prime.Element, n*n)
		for i, a := range order {
			for j, b := range order {
				relabelled[i*n+j] = s[(a-1)*n+b-1]
			}
		}
		p, q := newPencil(r, f, n, s, order), newPencil(r, f, n, relabelled, nil)
		require.Equal(r, q.c0, p.c0)
		require.Equal(r, order[2], p.Hidden())
		x := make([]prime.Element, p.Size())
		y := make([]prime.Element, p.Size())
		for i := range x {
			x[i] = f.FromInt64(int64(i * i))
		}
		q.Multiply(y, x)
		p.Multiply(x, x)
		require.Equal(r, y, x)
	})
}

func BenchmarkMultiply(b *testing.B) {
	for n := 7; n <= 11; n++ {
		b.Run(fmt.Sprintf("n=%d", n), func(b *testing.B) {
			f := prime.TableField(0)
			p := newPencil(b, f, n, randomInvariants(f, n, prime.NewSource("benchmark")), nil)
			x := make([]prime.Element, p.Size())
			x[p.plan.top] = f.One()
			b.ReportAllocs()
			for b.Loop() {
				p.Multiply(x, x)
			}
		})
	}
}
