package amplitude

import (
	"context"
	"math/big"
	"math/rand/v2"
	"slices"
	"testing"

	"eliminant/rational/kinematics"
	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// randomReduced draws the planar invariants X_ij freely modulo p, with a common
// mass if asked: s_ab = X_{a,b+1} + X_{a+1,b} - X_ab - X_{a+1,b+1} + 2 m^2.
func randomReduced(f *prime.Field, n int, massive bool, src *prime.Source) *kinematics.Reduced {
	draw := func() prime.Element { return f.FromUint64(src.Uint64()) }
	var mass prime.Element
	if massive {
		mass = draw()
	}
	x := make([][]prime.Element, n)
	for i := range x {
		x[i] = make([]prime.Element, n)
	}
	for i := range n {
		for j := i + 1; j < n; j++ {
			v := mass
			if j-i > 1 && j-i < n-1 {
				v = draw()
			}
			x[i][j], x[j][i] = v, v
		}
	}
	r := &kinematics.Reduced{Field: f, N: n, S: make([]prime.Element, n*n)}
	for a := range n {
		for b := range n {
			if a != b {
				p, q := (a+1)%n, (b+1)%n
				v := f.Sub(f.Add(x[a][q], x[p][b]), f.Add(x[a][b], x[p][q]))
				r.S[a*n+b] = f.Add(v, f.Add(mass, mass))
			}
		}
	}
	if massive {
		r.M = make([]prime.Element, n)
		for a := range r.M {
			r.M[a] = mass
		}
	}
	return r
}

func identityOrder(n int) []int {
	o := make([]int, n)
	for i := range o {
		o[i] = i + 1
	}
	return o
}

func drawOrder(t *rapid.T, n int, label string) []int {
	return rapid.Permutation(identityOrder(n)).Draw(t, label)
}

// Planar cubic trees: Catalan numbers, OEIS A000108; all cubic trees: (2n-5)!!,
// OEIS A001147; dissections of a polygon by k diagonals: OEIS A033282.
func TestDiagramCounts(t *testing.T) {
	catalan := map[int]int{4: 2, 5: 5, 6: 14, 7: 42, 8: 132, 9: 429, 10: 1430}
	for n, want := range catalan {
		o := identityOrder(n)
		require.Len(t, newCommonDiagrams(o, o).diagrams, want)
		require.Equal(t, float64(want), newWordPlan(o, o).diagrams)
		require.Len(t, newCommonDiagrams(o, o).channels, n*(n-3)/2)
		require.Len(t, newWordPlan(o, o).poles, n*(n-3)/2)
	}
	all := map[int]int{4: 3, 5: 15, 6: 105, 7: 945, 8: 10395}
	for n, want := range all {
		p := newAllDiagrams(n)
		require.Len(t, p.diagrams, want)
		require.Len(t, p.channels, 1<<(n-1)-n-1)
		seen := map[string]bool{}
		for _, d := range p.diagrams {
			require.Len(t, d.poles, n-3)
			masks := make([]int, 0, n-3)
			for i, a := range d.poles {
				masks = append(masks, int(p.channels[a]))
				for _, b := range d.poles[:i] {
					require.True(t, compatible(p.channels[a], p.channels[b]))
				}
			}
			slices.Sort(masks)
			key := ""
			for _, m := range masks {
				key += string(rune(m)) + ","
			}
			require.False(t, seen[key], "a diagram stands twice")
			seen[key] = true
		}
	}
	// compatible sets of k planar poles, n = 6: 1, 9, 21, 14; n = 7: 1, 14, 56, 84, 42
	for n, want := range map[int][]int{6: {1, 9, 21, 14}, 7: {1, 14, 56, 84, 42}} {
		channels := planar(identityOrder(n), n)
		got := make([]int, n-2)
		var count func(from int, chosen []uint32)
		count = func(from int, chosen []uint32) {
			got[len(chosen)]++
			for i := from; i < len(channels); i++ {
				if !slices.ContainsFunc(chosen, func(c uint32) bool { return !compatible(c, channels[i]) }) {
					count(i+1, append(slices.Clone(chosen), channels[i]))
				}
			}
		}
		count(0, nil)
		require.Equal(t, want, got)
	}
}

// Recursion and diagrams share no code: currents against compatible poles.
func TestRecursionAgreesWithDiagrams(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(4, 8).Draw(t, "n")
		massive := rapid.Bool().Draw(t, "massive")
		src := prime.NewSource("amplitude test", rapid.String().Draw(t, "seed"))
		p := randomReduced(src.Field(), n, massive, src)
		r := Request{Theory: BiAdjoint, Orderings: [][]int{drawOrder(t, n, "alpha"), drawOrder(t, n, "beta")}}
		compareRoutes(t, r, p, Recursion, Diagrams)
		r = Request{Theory: Cubic, Orderings: r.Orderings[:1]}
		compareRoutes(t, r, p, Recursion, Diagrams)
		if n <= 7 {
			r.Braces = true
			compareRoutes(t, r, p, Recursion, Diagrams)
		}
	})
}

type failer interface {
	require.TestingT
	Helper()
}

func compareRoutes(t failer, r Request, p *kinematics.Reduced, a, b Route) {
	t.Helper()
	values := make([]prime.Element, 2)
	for i, route := range []Route{a, b} {
		k, err := NewKernel(r, route)
		require.NoError(t, err)
		values[i], err = k(context.Background(), p)
		require.NoError(t, err, "%s by %s", r, route)
	}
	require.Equal(t, values[0], values[1], "%s: %s against %s", r, a, b)
}

// wordByWord is the double recursion as published, without any plan: currents
// of all pairs of words, over Q.
func wordByWord(s func(a, b int) *big.Rat, p, q []int, memo map[string]*big.Rat) *big.Rat {
	if len(p) != len(q) {
		return new(big.Rat)
	}
	if len(p) == 1 {
		if p[0] == q[0] {
			return big.NewRat(1, 1)
		}
		return new(big.Rat)
	}
	key := ""
	for i := range p {
		key += string(rune('a'+p[i])) + string(rune('A'+q[i]))
	}
	if v, ok := memo[key]; ok {
		return v
	}
	inner := wordSum(s, p, q, memo)
	memo[key] = inner
	if inner.Sign() == 0 {
		return inner
	}
	pole := new(big.Rat)
	for i, a := range p {
		for _, b := range p[i+1:] {
			pole.Add(pole, s(a, b))
		}
	}
	v := new(big.Rat).Quo(inner, pole)
	memo[key] = v.Neg(v)
	return memo[key]
}

func wordSum(s func(a, b int) *big.Rat, p, q []int, memo map[string]*big.Rat) *big.Rat {
	v := new(big.Rat)
	for i := 1; i < len(p); i++ {
		for j := 1; j < len(q); j++ {
			x := new(big.Rat).Mul(wordByWord(s, p[:i], q[:j], memo), wordByWord(s, p[i:], q[j:], memo))
			y := new(big.Rat).Mul(wordByWord(s, p[i:], q[:j], memo), wordByWord(s, p[:i], q[j:], memo))
			v.Add(v, x.Sub(x, y))
		}
	}
	return v
}

// The planned recursion against the published one, Mafra 1603.09731.
func TestRecursionAgreesWithWords(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for range 60 {
		n := 4 + rng.IntN(4)
		// any symmetric matrix does for the recursion: the last row never enters
		matrix := make([][]*big.Rat, n+1)
		for i := range matrix {
			matrix[i] = make([]*big.Rat, n+1)
		}
		for a := 1; a <= n; a++ {
			for b := a + 1; b <= n; b++ {
				matrix[a][b] = big.NewRat(1+rng.Int64N(50), 1+rng.Int64N(5))
				matrix[b][a] = matrix[a][b]
			}
		}
		s := func(a, b int) *big.Rat { return matrix[a][b] }
		beta := identityOrder(n)
		rng.Shuffle(n-1, func(i, j int) { beta[i], beta[j] = beta[j], beta[i] })
		alpha := identityOrder(n)
		want := wordSum(s, alpha[:n-1], beta[:n-1], map[string]*big.Rat{})
		plan := newWordPlan(alpha, beta)
		poles := make([]*big.Rat, len(plan.poles))
		for i, legs := range plan.poles {
			poles[i] = new(big.Rat)
			for j, a := range legs {
				for _, b := range legs[j+1:] {
					poles[i].Add(poles[i], matrix[a+1][b+1])
				}
			}
		}
		got, zero := plan.exact(poles)
		require.Equal(t, -1, zero)
		require.Zero(t, want.Cmp(got), "beta = %v: %s, published recursion %s", beta, got, want)
		if len(poles) > 0 {
			poles[0] = new(big.Rat)
			_, zero = plan.exact(poles)
			require.Zero(t, zero)
		}
	}
}

// A missing diagram, a wrong sign and a wrong mass change the value: the
// comparison of routes sees each of them.
func TestComparisonSeesFaults(t *testing.T) {
	src := prime.NewSource("faults")
	for n := 4; n <= 7; n++ {
		f := src.Field()
		p := randomReduced(f, n, true, src)
		o := identityOrder(n)
		good := newCommonDiagrams(o, o)
		want, err := newWordPlan(o, o).evaluate(f, shifted(p, o))
		require.NoError(t, err)
		v, err := good.evaluate(f, propagators(p))
		require.NoError(t, err)
		require.Equal(t, want, v)

		missing := *good
		missing.diagrams = good.diagrams[1:]
		v, err = missing.evaluate(f, propagators(p))
		require.NoError(t, err)
		require.NotEqual(t, want, v)

		sign := *good
		sign.diagrams = slices.Clone(good.diagrams)
		sign.diagrams[0].negative = !sign.diagrams[0].negative
		v, err = sign.evaluate(f, propagators(p))
		require.NoError(t, err)
		require.NotEqual(t, want, v)

		heavier := *p
		heavier.M = slices.Clone(p.M)
		for i := range heavier.M {
			heavier.M[i] = f.Add(heavier.M[i], f.One())
		}
		v, err = good.evaluate(f, propagators(&heavier))
		require.NoError(t, err)
		require.NotEqual(t, want, v)
	}
}

// The absolute-value recursions never fall below the value.
func TestAbsoluteBounds(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	for range 50 {
		n := 4 + rng.IntN(4)
		alpha, beta := identityOrder(n), identityOrder(n)
		rng.Shuffle(n, func(i, j int) { beta[i], beta[j] = beta[j], beta[i] })
		plan := newWordPlan(alpha, beta)
		poles := make([]*big.Rat, len(plan.poles))
		lower := make([]*big.Float, len(plan.poles))
		for i := range poles {
			poles[i] = big.NewRat(rng.Int64N(2000)-1000, 1+rng.Int64N(30))
			if poles[i].Sign() == 0 {
				poles[i].SetInt64(1)
			}
			lower[i] = new(big.Float).SetPrec(64).SetMode(big.ToZero).SetRat(new(big.Rat).Abs(poles[i]))
		}
		value, zero := plan.exact(poles)
		require.Equal(t, -1, zero)
		bound, _ := plan.absolute(lower).Rat(nil)
		require.True(t, value.Abs(value).Cmp(bound) <= 0, "|%s| exceeds %s", value, bound)
	}
}
