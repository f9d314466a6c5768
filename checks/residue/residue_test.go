package residue

import (
	"bytes"
	"context"
	"fmt"
	"math/big"
	"strings"
	"testing"

	"eliminant/checks/amplitude"
	"eliminant/checks/diag"
	"eliminant/checks/formula"
	"eliminant/fixtures"
	"eliminant/rational/kinematics"
	"eliminant/rational/kinematics/generate"
	"eliminant/rational/lift"

	"github.com/stretchr/testify/require"
)

func point(t require.TestingT, name string) *kinematics.Invariants {
	b, err := fixtures.Points(name)
	require.NoError(t, err)
	p, err := kinematics.ReadPoints(bytes.NewReader(b), name)
	require.NoError(t, err)
	v, err := p[0].Invariants()
	require.NoError(t, err)
	return v
}

func random(t require.TestingT, n int, mass *big.Rat) *kinematics.Invariants {
	p, err := generate.ComputePoints(context.Background(), n, 1, generate.Options{Kind: "invariants", Seed: "residue", MassesSquared: mass})
	require.NoError(t, err)
	v, err := p[0].Invariants()
	require.NoError(t, err)
	return v
}

func parse(t require.TestingT, text string) *formula.Formula {
	f, errs := formula.Parse(text, formula.ParseOptions{Integrand: true})
	require.Empty(t, errs, text)
	return f
}

func sum(t require.TestingT, text string, v *kinematics.Invariants) *big.Rat {
	r, err := ComputeResidue(context.Background(), parse(t, text), v, Options{})
	require.NoError(t, err, text)
	require.Equal(t, lift.Bound, r.Proof)
	return r.Value
}

func Example() {
	f, _ := formula.Parse("PT(1,2,3,4) PT(1,3,2,4)/detPhi", formula.ParseOptions{Integrand: true})
	row := func(v ...int64) []*big.Rat {
		r := make([]*big.Rat, len(v))
		for i := range v {
			r[i] = big.NewRat(v[i], 1)
		}
		return r
	}
	v, _ := kinematics.NewInvariants([][]*big.Rat{row(0, 2, -5, 3), row(2, 0, 3, -5), row(-5, 3, 0, 2), row(3, -5, 2, 0)}, nil)
	r, _ := ComputeResidue(context.Background(), f, v, Options{})
	fmt.Println(r.Value.RatString(), r.Proof)
	// Output: 1/3 bound
}

func commas(o []int) string {
	return strings.Trim(strings.ReplaceAll(fmt.Sprint(o), " ", ","), "[]")
}

// The sum of PT(a) PT(b)/detPhi is BS(a|b): published values, by the bound of
// the amplitude and, written so that it is not recognised, by heights.
func TestPublishedValues(t *testing.T) {
	general := 0
	for _, c := range fixtures.BiAdjoint() {
		if c.Point[0] == 'C' && len(c.Alpha) > 5 {
			continue // degenerate, see TestDegeneratePoints
		}
		v := point(t, c.Point)
		text := fmt.Sprintf("PT(%s) PT(%s)/detPhi", commas(c.Alpha), commas(c.Beta))
		require.Zero(t, c.Value.Cmp(sum(t, text, v)), text)
		if len(c.Alpha) > 6 {
			continue
		}
		_, _, known := biAdjoint(parse(t, text), len(c.Alpha))
		require.True(t, known)
		text = "z(1,2)*" + text + "/z(1,2)"
		_, _, known = biAdjoint(parse(t, text), len(c.Alpha))
		require.False(t, known)
		require.Zero(t, c.Value.Cmp(sum(t, text, v)), text)
		general++
	}
	require.Greater(t, general, 15)
}

func TestRandomPointsAgainstRecursion(t *testing.T) {
	for n := 4; n <= 7; n++ {
		v := random(t, n, nil)
		o, b := make([]int, n), make([]int, n)
		for i := range o {
			o[i], b[i] = i+1, i+1
		}
		b[1], b[2] = b[2], b[1]
		want, err := amplitude.ComputeValue(context.Background(), amplitude.Request{Theory: amplitude.BiAdjoint, Orderings: [][]int{o, b}}, v, amplitude.Recursion, amplitude.Options{})
		require.NoError(t, err)
		got := sum(t, fmt.Sprintf("z(1,3) PT(%s) PT(%s)/(detPhi z(1,3))", commas(o), commas(b)), v)
		require.Zero(t, want.Value.Cmp(got), "n = %d", n)
		require.Zero(t, new(big.Rat).Mul(want.Value, big.NewRat(-3, 7)).Cmp(sum(t, fmt.Sprintf("-3 PT(%s) PT(%s)/(7 detPhi)", commas(o), commas(b)), v)))
	}
}

// Sums of monomials over J: Euler-Jacobi (P. Griffiths, J. Harris, Principles of
// Algebraic Geometry, 1978, chapter 5): zero below the socle degree (n-3)(n-4)/2,
// 1/c0 for the top monomial, c0 = (-1)^{(n-3)(n-4)/2} prod_m s_{1,n-1,..,n-m}.
func TestSocle(t *testing.T) {
	for n := 5; n <= 7; n++ {
		v := random(t, n, nil)
		require.Zero(t, sum(t, "1/J", v).Sign(), "n = %d", n)
		socle := (n - 3) * (n - 4) / 2
		for d := 1; d < socle; d++ {
			require.Zero(t, sum(t, fmt.Sprintf("z3^%d/J", d), v).Sign(), "n = %d, degree %d", n, d)
			require.Zero(t, sum(t, fmt.Sprintf("z%d z3^%d/J", n-1, d-1), v).Sign(), "n = %d, degree %d", n, d)
		}
		require.NotZero(t, sum(t, fmt.Sprintf("z3^%d/J", socle), v).Sign(), "at the socle degree the sum need not vanish")
		top, c0 := "1", big.NewRat(1, 1)
		for j := 1; j <= n-4; j++ {
			top += fmt.Sprintf(" z%d^%d", 3+j, j)
		}
		legs := []int{1}
		for m := 1; m <= n-3; m++ {
			legs = append(legs, n-m)
			c0.Mul(c0, v.Lorentz(legs...))
		}
		if socle%2 == 1 {
			c0.Neg(c0)
		}
		require.Zero(t, new(big.Rat).Inv(c0).Cmp(sum(t, "("+top+")/J", v)), "n = %d", n)
	}
	// four legs: one solution z3 = -s12/s13 of s12 + s13 z3, J = s13
	v := random(t, 4, nil)
	require.Zero(t, new(big.Rat).Inv(v.S(1, 3)).Cmp(sum(t, "1/J", v)))
}

// The number of solutions, and power sums against the published eliminants.
func TestPowerSums(t *testing.T) {
	for n, count := range map[int]int64{4: 1, 5: 2, 6: 6, 7: 24} {
		require.Equal(t, count, sum(t, "z3/z3", random(t, n, nil)).Num().Int64())
	}
	tested := 0
	for _, e := range fixtures.PublishedEquations() {
		for _, x := range e.Eliminants {
			if !x.Complete || e.Point[0] == 'K' && e.Point[1] == '7' {
				continue
			}
			c := x.Product()
			n := len(c) - 1
			want := new(big.Rat).Quo(c[n-1], c[n])
			want.Neg(want)
			v := point(t, e.Point)
			require.Zero(t, want.Cmp(sum(t, fmt.Sprintf("z%d", x.Leg), v)), "%s, z%d", e.Point, x.Leg)
			tested++
		}
	}
	require.Greater(t, tested, 5)
}

// J = detPhi prod_{2<=a<b<n} (z_a - z_b) prod_{2<a<n} z_a on the solutions.
func TestJacobianIdentity(t *testing.T) {
	for n := 4; n <= 6; n++ {
		v := random(t, n, nil)
		measure := "1"
		for a := 2; a < n; a++ {
			for b := a + 1; b < n; b++ {
				measure += fmt.Sprintf(" z(%d,%d)", a, b)
			}
			if a > 2 {
				measure += fmt.Sprintf(" z%d", a)
			}
		}
		left, right := sum(t, "z3^2/J", v), sum(t, "z3^2/(detPhi ("+measure+"))", v)
		require.Zero(t, left.Cmp(right), "n = %d", n)
	}
}

// Cross ratios are the same whatever legs are fixed: relabelled data give the
// relabelled sum.
func TestCrossRatios(t *testing.T) {
	// four legs: z(1,2) z(3,4)/(z(1,3) z(2,4)) = z34/z24 with z3 = -s12/s13, z4 = 0
	v := random(t, 4, nil)
	want := new(big.Rat).Quo(v.S(1, 2), v.S(1, 3))
	require.Zero(t, want.Neg(want).Cmp(sum(t, "z(1,2) z(3,4)/(z(1,3) z(2,4))", v)))
	// five legs: a sum over three ways of pairing 1 2 3 4 with the identity
	// z12 z34 - z13 z24 + z14 z23 = 0
	v = random(t, 5, nil)
	require.Zero(t, sum(t, "(z(1,2) z(3,4) - z(1,3) z(2,4) + z(1,4) z(2,3))/(z(1,2) z(3,4))", v).Sign())
	x := sum(t, "z(1,2) z(3,4)/(z(1,3) z(2,4))", v)
	y := sum(t, "z(1,4) z(3,2)/(z(1,3) z(4,2))", v)
	require.Zero(t, new(big.Rat).Add(x, y).Cmp(big.NewRat(2, 1)), "cross ratios c and 1-c over two solutions")
}

func TestMassivePoints(t *testing.T) {
	v := random(t, 5, big.NewRat(7, 2))
	alpha := []int{1, 3, 2, 4, 5}
	want, err := amplitude.ComputeValue(context.Background(), amplitude.Request{Theory: amplitude.BiAdjoint, Orderings: [][]int{alpha, alpha}}, v, amplitude.Recursion, amplitude.Options{})
	require.NoError(t, err)
	f := parse(t, "PT(1,3,2,4,5)^2/detPhi")
	r, err := ComputeResidue(context.Background(), f, v, Options{Ordering: alpha})
	require.NoError(t, err)
	require.Zero(t, want.Value.Cmp(r.Value))
	other, err := ComputeResidue(context.Background(), f, v, Options{})
	require.NoError(t, err)
	require.NotZero(t, want.Value.Cmp(other.Value), "shifted along another ordering")
}

func TestRefusals(t *testing.T) {
	v := random(t, 5, nil)
	for text, c := range map[string]struct{ code, says string }{
		"PT(1,2,3,4,5)/detPhi":           {"weight", "weight -2 in leg 1"},
		"z(3,4)":                         {"weight", "weight -1 in leg 3"},
		"PT(1,2)+PT(1,3)":                {"weight", "weights 2 and 0 in leg 2"},
		"z1/J":                           {"gauge", "z1"},
		"z3 z(1,4)":                      {"gauge", "z(1,4)"},
		"z6/J":                           {"legs", "leg 6"},
		"1/(z3-z3)":                      {"division-by-zero", "z3-z3"},
		"1/(s12-s12)":                    {"division-by-zero", "s(1,2)-s(1,2)"},
		"1/(s12+s13+s14+s15)":            {"division-by-zero", "identically"},
		"J/0":                            {"division-by-zero", "0"},
		"1/(z(3,4)+z(4,3))":              {"division-by-zero", "z(3,4)+z(4,3)"},
		"z(1,2)/z(1,3) + PT(1,2) z(1,2)": {"weight", "leg"},
	} {
		_, err := ComputeResidue(context.Background(), parse(t, text), v, Options{})
		var list diag.List
		require.ErrorAs(t, err, &list, text)
		require.Equal(t, c.code, list[0].Code, "%s: %v", text, err)
		require.Contains(t, list[0].Message, c.says, text)
	}
}

// Degenerate data, and integrands with a pole on a solution: undecided, naming
// what vanishes.
func TestDegeneratePoints(t *testing.T) {
	for name, vanishing := range map[string]string{"D6a": "s25", "D6b": "s136", "C6": "s14"} {
		for _, text := range []string{"1/J", "PT(1,2,3,4,5,6)^2/detPhi"} {
			_, err := ComputeResidue(context.Background(), parse(t, text), point(t, name), Options{})
			var stuck *diag.Undecided
			require.ErrorAs(t, err, &stuck, "%s at %s", text, name)
			require.Equal(t, vanishing, stuck.Invariant)
		}
	}
	// K5: z3 = 2 is a solution
	_, err := ComputeResidue(context.Background(), parse(t, "1/(z3-2)"), point(t, "K5"), Options{})
	var stuck *diag.Undecided
	require.ErrorAs(t, err, &stuck)
	require.Equal(t, "z3-2", stuck.Invariant)
}

// Beyond the budget of a proof the answer is undecided; agreement gives a
// value and says what it is.
func TestBudget(t *testing.T) {
	v := random(t, 9, nil)
	f := parse(t, "z(1,2) PT(1,2,3,4,5,6,7,8,9)^2/(detPhi z(1,2))")
	_, err := ComputeResidue(context.Background(), f, v, Options{})
	var stuck *diag.Undecided
	require.ErrorAs(t, err, &stuck)
	require.Contains(t, stuck.Reason, "agreement")
	v = random(t, 8, nil)
	f = parse(t, "z(1,2) PT(1,2,3,4,5,6,7,8)^2/(detPhi z(1,2))")
	r, err := ComputeResidue(context.Background(), f, v, Options{Proof: lift.Agreement, Workers: 2})
	require.NoError(t, err)
	require.Equal(t, lift.Agreement, r.Proof)
	require.Zero(t, r.Value.Cmp(sum(t, "PT(1,2,3,4,5,6,7,8)^2/detPhi", v)))
}

// The proven bounds hold with room, for values and for denominators.
func TestBoundsHold(t *testing.T) {
	for n := 4; n <= 6; n++ {
		v := random(t, n, nil)
		for _, text := range []string{"z3^2/J", "1/(z3+2)", "J", "z3 z3/(z3-1)", "(z3^2+z3+5)^-2"} {
			f := parse(t, text)
			data, err := matrix(v, nil)
			require.NoError(t, err)
			tr := &trace{f: f, n: n, data: data, point: v}
			require.NoError(t, tr.choose(context.Background()))
			num, den, err := tr.bounds(context.Background())
			require.NoError(t, err)
			x := sum(t, text, v)
			require.LessOrEqual(t, x.Num().CmpAbs(num), 0)
			require.LessOrEqual(t, x.Denom().Cmp(den), 0)
			agreed, err := ComputeResidue(context.Background(), f, v, Options{Proof: lift.Agreement})
			require.NoError(t, err)
			require.Zero(t, x.Cmp(agreed.Value), "%s at n = %d", text, n)
		}
	}
}

func TestWorkers(t *testing.T) {
	v := random(t, 6, nil)
	f := parse(t, "z3^7 z4/J")
	one, err := ComputeResidue(context.Background(), f, v, Options{Workers: 1})
	require.NoError(t, err)
	two, err := ComputeResidue(context.Background(), f, v, Options{Workers: 2})
	require.NoError(t, err)
	require.Equal(t, one, two)
}
