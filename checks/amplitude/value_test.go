package amplitude

import (
	"context"
	"errors"
	"math/big"
	"testing"

	"eliminant/rational/kinematics"
	"eliminant/rational/lift"
	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// planarPoint builds the massless point with the given planar poles X_ij, in the
// order X13, X14, .., X1(n-1), X24, ...
func planarPoint(t require.TestingT, n int, poles ...int64) *kinematics.Invariants {
	x := make([][]*big.Rat, n)
	for i := range x {
		x[i] = make([]*big.Rat, n)
		for j := range x[i] {
			x[i][j] = new(big.Rat)
		}
	}
	k := 0
	for i := range n {
		for j := i + 2; j < n; j++ {
			if j-i < n-1 {
				x[i][j].SetInt64(poles[k])
				x[j][i] = x[i][j]
				k++
			}
		}
	}
	require.Len(t, poles, k)
	s := make([][]*big.Rat, n)
	for a := range n {
		s[a] = make([]*big.Rat, n)
		for b := range n {
			s[a][b] = new(big.Rat)
			if a != b {
				p, q := (a+1)%n, (b+1)%n
				s[a][b].Add(x[a][q], x[p][b])
				s[a][b].Sub(s[a][b], x[a][b])
				s[a][b].Sub(s[a][b], x[p][q])
			}
		}
	}
	v, err := kinematics.NewInvariants(s, nil)
	require.NoError(t, err)
	return v
}

func digits(text string) []int {
	var o []int
	for _, c := range text {
		o = append(o, int(c-'0'))
	}
	return o
}

func bs(alpha, beta string) Request {
	return Request{Theory: BiAdjoint, Orderings: [][]int{digits(alpha), digits(beta)}}
}

// Values of m(alpha|beta) at points with prime planar poles; F. Cachazo, S. He,
// E. Y. Yuan, arXiv:1309.0885, section 3 for the sign (source from memory),
// values recomputed by an independent program and here by every route.
func TestPublishedValues(t *testing.T) {
	x4 := planarPoint(t, 4, 2, 3)
	x5 := planarPoint(t, 5, 2, 3, 5, 7, 11)
	x6 := planarPoint(t, 6, 2, 3, 5, 7, 11, 13, 17, 31, 23)
	for _, c := range []struct {
		point       *kinematics.Invariants
		alpha, beta string
		want        string
	}{
		{x4, "1234", "1234", "-5/6"},
		{x4, "1234", "1324", "1/3"},
		{x5, "12345", "12345", "74/231"},
		{x5, "12345", "13245", "-2/21"},
		{x5, "12345", "14325", "16/385"},
		{x6, "123456", "123456", "-1135577/17333030"},
		{x6, "123456", "132456", "773/49335"},
	} {
		r := bs(c.alpha, c.beta)
		routes, skipped := Applicable(r, false)
		require.Empty(t, skipped)
		for _, route := range routes {
			v, err := ComputeValue(context.Background(), r, c.point, route, Options{})
			require.NoError(t, err, "%s by %s", r, route)
			require.Equal(t, c.want, v.Value.RatString(), "%s by %s", r, route)
			require.Equal(t, lift.Bound, v.Proof)
			require.NotEmpty(t, v.Record.Primes)
		}
	}
}

// Degenerate points: a non-planar invariant vanishes although no planar pole
// does. Elimination names it, recursion and diagrams do not mind.
func TestTraps(t *testing.T) {
	for _, c := range []struct {
		x36  int64
		name string
	}{{19, "s25"}, {29, "s136"}} {
		p := planarPoint(t, 6, 2, 3, 5, 7, 11, 13, 17, c.x36, 23)
		r := bs("123456", "123456")
		first, err := ComputeValue(context.Background(), r, p, Recursion, Options{})
		require.NoError(t, err)
		second, err := ComputeValue(context.Background(), r, p, Diagrams, Options{})
		require.NoError(t, err)
		require.Equal(t, first.Value, second.Value)
		for _, route := range []Route{Elimination, Groebner} {
			_, err = ComputeValue(context.Background(), r, p, route, Options{})
			var d *DegenerateError
			require.ErrorAs(t, err, &d)
			require.Equal(t, c.name, d.Invariant)
		}
	}
}

// All planar poles 1: |m(id|id)| is a Catalan number (CHY 1309.0885, abstract;
// OEIS A000108).
func TestCatalanPoints(t *testing.T) {
	want := map[int]int64{4: 2, 5: 5, 6: 14, 7: 42, 8: 132, 9: 429}
	for n := 4; n <= 9; n++ {
		ones := make([]int64, n*(n-3)/2)
		for i := range ones {
			ones[i] = 1
		}
		p := planarPoint(t, n, ones...)
		o := identityOrder(n)
		r := Request{Theory: Cubic, Orderings: [][]int{o}}
		for _, route := range []Route{Recursion, Diagrams, Elimination} {
			v, err := ComputeValue(context.Background(), r, p, route, Options{})
			if route == Elimination && n >= 6 {
				var d *DegenerateError
				require.ErrorAs(t, err, &d, "n = %d", n)
				require.NotEmpty(t, d.Invariant)
				continue
			}
			require.NoError(t, err)
			require.Equal(t, want[n], v.Value.Num().Int64(), "n = %d by %s", n, route)
			require.True(t, v.Value.IsInt())
		}
	}
}

// All routes modulo random primes, massless and massive.
func TestRoutesAgree(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(4, 7).Draw(t, "n")
		massive := rapid.Bool().Draw(t, "massive")
		src := prime.NewSource("routes", rapid.String().Draw(t, "seed"))
		p := randomReduced(src.Field(), n, massive, src)
		r := Request{Theory: BiAdjoint, Orderings: [][]int{drawOrder(t, n, "alpha"), drawOrder(t, n, "beta")}}
		compareRoutes(t, r, p, Recursion, Elimination)
		if n <= 6 {
			compareRoutes(t, r, p, Recursion, Groebner)
		}
		order := drawOrder(t, n, "roles")
		v, err := ResidueInGauge(context.Background(), r, p, order)
		require.NoError(t, err)
		k, err := NewKernel(r, Recursion)
		require.NoError(t, err)
		w, err := k(context.Background(), p)
		require.NoError(t, err)
		require.Equal(t, w, v, "roles %v", order)
	})
}

// The sum over all diagrams by elimination: over orderings.
func TestUnorderedRoutesAgree(t *testing.T) {
	src := prime.NewSource("unordered")
	for n := 4; n <= 6; n++ {
		for _, massive := range []bool{false, true} {
			p := randomReduced(src.Field(), n, massive, src)
			r := Request{Theory: Cubic, Orderings: [][]int{identityOrder(n)}, Braces: true}
			compareRoutes(t, r, p, Recursion, Elimination)
			if n <= 5 {
				compareRoutes(t, r, p, Recursion, Groebner)
			}
		}
	}
}

// At a pole of the amplitude no route gives a number.
func TestPole(t *testing.T) {
	p := planarPoint(t, 5, 2, 3, 5, 7, 0)
	for _, route := range Routes() {
		_, err := ComputeValue(context.Background(), bs("12345", "12345"), p, route, Options{})
		var pole *PoleError
		require.ErrorAs(t, err, &pole)
		require.Equal(t, "s34", pole.Invariant)
	}
	// s34 is no pole of m(12345|13254), whose one diagram is 1/(s23 s45)
	v, err := ComputeValue(context.Background(), bs("12345", "13254"), p, Recursion, Options{})
	require.NoError(t, err)
	require.Equal(t, "1/15", v.Value.RatString())
}

// Wrong input: each with a typed error.
func TestRefusals(t *testing.T) {
	for _, r := range []Request{
		{Theory: BiAdjoint, Orderings: [][]int{{1, 2, 3, 4}}},
		{Theory: BiAdjoint, Orderings: [][]int{{1, 2, 3, 4}, {1, 2, 3}}},
		{Theory: BiAdjoint, Orderings: [][]int{{1, 2, 3, 4}, {1, 2, 3, 3}}},
		{Theory: BiAdjoint, Orderings: [][]int{{1, 2, 3, 4}, {1, 2, 3, 5}}},
		{Theory: BiAdjoint, Orderings: [][]int{{1, 2, 3, 4}, {1, 2, 3, 4}}, Braces: true},
		{Theory: Cubic, Orderings: [][]int{{1, 2, 3}}},
		{Theory: "scalar", Orderings: [][]int{{1, 2, 3, 4}}},
	} {
		var e *RequestError
		require.ErrorAs(t, r.Validate(), &e, "%s", r)
		_, err := NewKernel(r, Recursion)
		require.ErrorAs(t, err, &e)
	}
	good := bs("1234", "1234")
	_, err := NewKernel(good, "guess")
	require.Error(t, err)
	_, err = ComputeValue(context.Background(), good, planarPoint(t, 5, 2, 3, 5, 7, 11), Recursion, Options{})
	var e *RequestError
	require.ErrorAs(t, err, &e)
	stop, cancel := context.WithCancelCause(context.Background())
	why := errors.New("stop")
	cancel(why)
	_, err = ComputeValue(stop, good, planarPoint(t, 4, 2, 3), Recursion, Options{})
	require.ErrorIs(t, err, why)
}
