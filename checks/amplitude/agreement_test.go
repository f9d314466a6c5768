package amplitude

import (
	"bytes"
	"context"
	"flag"
	"fmt"
	"math/big"
	"testing"

	"eliminant/fixtures"
	"eliminant/rational/kinematics"
	"eliminant/rational/kinematics/generate"
	"eliminant/rational/poly"
	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
)

var campaign = flag.Bool("campaign", false, "run the long campaign: many more points and pairs of orderings")

func Example() {
	s := func(v ...int64) []*big.Rat {
		row := make([]*big.Rat, len(v))
		for i := range v {
			row[i] = big.NewRat(v[i], 1)
		}
		return row
	}
	point, _ := kinematics.NewInvariants([][]*big.Rat{s(0, 2, -5, 3), s(2, 0, 3, -5), s(-5, 3, 0, 2), s(3, -5, 2, 0)}, nil)
	request := Request{Theory: BiAdjoint, Orderings: [][]int{{1, 2, 3, 4}, {1, 3, 2, 4}}}
	for _, route := range Routes() {
		v, _ := ComputeValue(context.Background(), request, point, route, Options{})
		fmt.Println(route, v.Value.RatString(), v.Proof)
	}
	// Output:
	// recursion 1/3 bound
	// diagrams 1/3 bound
	// elimination 1/3 bound
	// series 1/3 bound
	// groebner 1/3 bound
}

// published returns the invariants of a point of the fixtures.
func published(t *testing.T, name string) *kinematics.Invariants {
	b, err := fixtures.Points(name)
	require.NoError(t, err)
	p, err := kinematics.ReadPoints(bytes.NewReader(b), name)
	require.NoError(t, err)
	v, err := p[0].Invariants()
	require.NoError(t, err)
	return v
}

// The published bi-adjoint values (sources and marks in fixtures/published) by
// every route that reaches them.
func TestPublishedFixtures(t *testing.T) {
	for _, c := range fixtures.BiAdjoint() {
		v := published(t, c.Point)
		r := Request{Theory: BiAdjoint, Orderings: [][]int{c.Alpha, c.Beta}}
		routes, _ := Applicable(r, false)
		for _, route := range routes {
			x, err := ComputeValue(context.Background(), r, v, route, Options{})
			var stuck *DegenerateError
			if (route == Elimination || route == Groebner) && c.Point[0] == 'C' && len(c.Alpha) >= 6 {
				require.ErrorAs(t, err, &stuck)
				continue
			}
			require.NoError(t, err)
			require.Zero(t, c.Value.Cmp(x.Value), "%s at %s by %s: %s, published %s (%s)", r, c.Point, route, x.Value.RatString(), c.Value.RatString(), c.Source)
		}
	}
}

// All routes give the same rational number, n = 4..9, at points of every kind,
// with masses n = 4..7.
func TestRoutesAgreeAtPointsOfEveryKind(t *testing.T) {
	const most = 9
	pairs := 2
	if *campaign {
		pairs = 20
	}
	compared := 0
	for n := 4; n <= most; n++ {
		for _, kind := range []string{"twistors", "spinors", "momenta", "physical", "invariants", "products"} {
			for _, mass := range []int64{0, 4} {
				spinor := kind == "twistors" || kind == "spinors"
				if mass != 0 && (spinor || n > 7) {
					continue
				}
				if n == 9 && !*campaign && kind != "physical" && kind != "invariants" {
					continue
				}
				o := generate.Options{Kind: kind, Seed: fmt.Sprint("agreement ", n)}
				if mass != 0 {
					o.MassesSquared = big.NewRat(mass, 1)
				}
				points, err := generate.ComputePoints(context.Background(), n, 1, o)
				require.NoError(t, err)
				v, err := points[0].Invariants()
				require.NoError(t, err)
				src := prime.NewSource("pairs", kind, fmt.Sprint(n, mass))
				count := pairs
				if n >= 8 && !*campaign {
					count = 1
				}
				for i := range count {
					alpha, beta := identityOrder(n), identityOrder(n)
					shuffle(src, beta)
					if i > 0 {
						shuffle(src, alpha)
					}
					if i%2 == 1 { // neighbours exchanged: seldom zero
						beta = append([]int{}, alpha...)
						j := int(src.Below(uint64(n - 1)))
						beta[j], beta[j+1] = beta[j+1], beta[j]
					}
					compared += allRoutesAgree(t, Request{Theory: BiAdjoint, Orderings: [][]int{alpha, beta}}, v)
				}
			}
		}
	}
	t.Logf("%d values compared", compared)
}

func shuffle(src *prime.Source, w []int) {
	for i := len(w) - 1; i > 0; i-- {
		j := int(src.Below(uint64(i + 1)))
		w[i], w[j] = w[j], w[i]
	}
}

// allRoutesAgree compares every route in range and returns how many there were.
// At massive points some shifted channel may vanish for an ordering; elimination
// then says so.
func allRoutesAgree(t *testing.T, r Request, v *kinematics.Invariants) int {
	routes, _ := Applicable(r, !v.Massless())
	var first *Value
	count := 0
	for _, route := range routes {
		x, err := ComputeValue(context.Background(), r, v, route, Options{Workers: 2})
		if err != nil {
			var stuck *DegenerateError
			require.ErrorAs(t, err, &stuck, "%s by %s", r, route)
			require.False(t, v.Massless(), "%s by %s: %v", r, route, err)
			continue
		}
		if first == nil {
			first = x
		}
		require.Zero(t, first.Value.Cmp(x.Value), "%s: %s by %s, %s by %s", r, first.Value.RatString(), first.Route, x.Value.RatString(), route)
		count++
	}
	require.GreaterOrEqual(t, count, 2)
	return count
}

// The numerator of an amplitude along a line in the space of invariants has the
// degree that the bounds allow, and not always less.
func TestGrowthBoundsMeasuredDegrees(t *testing.T) {
	for n := 4; n <= 7; n++ {
		r := Request{Theory: BiAdjoint, Orderings: [][]int{identityOrder(n), identityOrder(n)}}
		g := NewGrowth(r)
		require.Equal(t, n*(n-3)/2, g.DenominatorDegree)
		src := prime.NewSource("growth", fmt.Sprint(n))
		f := src.Field()
		a, b := randomReduced(f, n, false, src), randomReduced(f, n, false, src)
		plan := newWordPlan(r.Orderings[0], r.Orderings[1])
		nodes := make([]prime.Element, g.NumeratorDegree+5)
		values := make([]prime.Element, len(nodes))
		for i := range nodes {
			nodes[i] = f.FromUint64(uint64(i + 1))
			p := &kinematics.Reduced{Field: f, N: n, S: make([]prime.Element, n*n)}
			copy(p.S, a.S)
			f.AddScaledRow(p.S, nodes[i], b.S)
			s := intervalSums(f, n, shifted(p, r.Orderings[0]))
			v, err := plan.evaluate(f, shifted(p, r.Orderings[0]))
			require.NoError(t, err)
			for _, legs := range plan.poles {
				v = f.Mul(v, s[legs[0]*n+legs[len(legs)-1]])
			}
			values[i] = v
		}
		numerator, err := poly.Interpolate(f, nodes, values)
		require.NoError(t, err)
		require.Equal(t, g.NumeratorDegree, numerator.Degree(), "n = %d", n)
		require.Greater(t, NewResidueGrowth(n).NumeratorDegree, g.NumeratorDegree)
	}
	require.Equal(t, Growth{}, NewGrowth(bs("12345", "13524")), "no common diagram: zero")
}

// One worker, two workers: the same value from the same primes.
func TestWorkersGiveTheSameRecord(t *testing.T) {
	p := smallPoint(t, 8)
	r := Request{Theory: BiAdjoint, Orderings: [][]int{identityOrder(8), identityOrder(8)}}
	one, err := ComputeValue(context.Background(), r, p, Elimination, Options{Workers: 1})
	require.NoError(t, err)
	two, err := ComputeValue(context.Background(), r, p, Elimination, Options{Workers: 2})
	require.NoError(t, err)
	require.Equal(t, one, two)
}
