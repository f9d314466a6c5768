package kinematics_test

import (
	"encoding/json"
	"math/big"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"eliminant/rational/kinematics"
)

func TestNewInvariantsRefusals(t *testing.T) {
	for _, c := range []struct{ s, masses, code, message string }{
		{"0 1 -1,1 0 0,-1 0 0", "", kinematics.CodeLegs, "3 legs"},
		{"0 2 -5 3,2 0 3 -5,-5 3 0,3 -5 2 0", "", kinematics.CodeShape, "leg 3: 3 components"},
		{"0 2 -5 3,2 0 3 -5,-5 3 0 2,3 -4 1 0", "", kinematics.CodeSymmetry, "entry (4,2) is -4, entry (2,4) is -5"},
		{"1 2 -6 3,2 0 3 -5,-6 3 1 2,3 -5 2 0", "", kinematics.CodeDiagonal, "(1,1) is 1"},
		{"0 2 -5 3,2 0 3 -5,-5 3 0 2,3 -5 2 0", "1 0 0 0", kinematics.CodeRowSum, "row 1 sums to 0, not 1 (off by -1)"},
		{"0 2 -5 3,2 0 3 -5,-5 3 0 2,3 -5 2 0", "1 0 0", kinematics.CodeMass, "3 squared masses for 4 legs"},
	} {
		var masses []*big.Rat
		if c.masses != "" {
			masses = rows(c.masses)[0]
		}
		_, err := kinematics.NewInvariants(rows(c.s), masses)
		var list kinematics.InputErrors
		require.ErrorAs(t, err, &list, c.message)
		require.Equal(t, c.code, list[0].Code)
		require.Contains(t, list[0].Message, c.message)
	}
	v, err := kinematics.NewInvariants(rows("0 2 -5 3,2 0 3 -5,-5 3 0 2,3 -5 2 0"), rows("0 0 0 0")[0])
	require.NoError(t, err)
	require.True(t, v.Massless())
}

// One massive leg decaying to three massless ones: M^2 = s_12 + s_13 + s_23.
func TestUnequalMasses(t *testing.T) {
	p := &kinematics.Point{Kind: kinematics.KindMomenta, Metric: "+---",
		Momenta:       kinematics.NewMatrix(rows("3 1 2 2,3 -2 1 2,3 1 -2 2,-9 0 -1 -6")),
		MassesSquared: rows("0 0 0 44")[0]}
	require.NoError(t, p.Validate())
	v, err := p.Invariants()
	require.NoError(t, err)
	_, common := v.CommonMassSquared()
	require.False(t, common)
	require.False(t, v.Massless())
	require.Equal(t, "44", v.MassSquared(4).RatString())
	require.Equal(t, "44", v.Lorentz(1, 2, 3).RatString())
	require.Equal(t, "0", v.Lorentz(1, 2, 3, 4).RatString())
	sum := new(big.Rat).Add(v.S(1, 2), v.S(1, 3))
	require.Equal(t, "44", sum.Add(sum, v.S(2, 3)).RatString())
	q := kinematics.FromInvariants("decay", v)
	require.NoError(t, q.Validate())
	requireRoundTrip(t, []*kinematics.Point{q, {Label: "k", Kind: p.Kind, Metric: p.Metric, Momenta: p.Momenta, MassesSquared: p.MassesSquared}})
	scale, s, m := v.Scaled()
	require.Equal(t, "1", scale.String())
	require.Len(t, s, 16)
	require.Equal(t, "44", m[3].String())
}

func TestPanicsOnLegsThatDoNotExist(t *testing.T) {
	v, err := splitPoints[0].point.Invariants()
	require.NoError(t, err)
	require.Panics(t, func() { v.S(0, 1) })
	require.Panics(t, func() { v.S(1, 5) })
	require.Panics(t, func() { v.MassSquared(5) })
	require.Panics(t, func() { v.Lorentz(1, 2, 1) })
	require.Panics(t, func() { v.Lorentz(5) })
}

func TestImpossibleConversions(t *testing.T) {
	momenta := func(metric, k string, masses []*big.Rat) *kinematics.Point {
		return &kinematics.Point{Label: "x", Kind: kinematics.KindMomenta, Metric: metric, Momenta: kinematics.NewMatrix(rows(k)), MassesSquared: masses}
	}
	v, err := splitPoints[0].point.Invariants()
	require.NoError(t, err)
	for _, c := range []struct {
		p      *kinematics.Point
		kind   kinematics.Kind
		reason string
	}{
		{momenta("+---", "3 1 2 2,3 -1 -2 -2,-3 2 1 2,-3 -2 -1 -2", nil), kinematics.KindSpinors, `rational in the metric "+-+-" only`},
		{momenta("+---", "3 1 2 2,3 -1 -2 -2,-3 2 1 2,-3 -2 -1 -2", nil), kinematics.KindSpinors, "possible: invariants, products"},
		{momenta("+-+-", "2 1 0 0,2 -1 0 0,-2 0 0 1,-2 0 0 -1", rows("3 3 3 3")[0]), kinematics.KindTwistors, "massive legs have no spinors"},
		{kinematics.FromInvariants("x", v), kinematics.KindMomenta, "possible: products"},
		{kinematics.FromInvariants("x", v), "helicities", `unknown kind "helicities"`},
		{spinorPoint("x", "1 0,2 0,0 1,0 1", "1 0,-1/2 0,0 1,0 -1"), kinematics.KindTwistors, "<1 2> = 0: the point has no momentum twistors"},
	} {
		_, err := c.p.Convert(c.kind)
		require.ErrorContains(t, err, c.reason)
		require.ErrorContains(t, err, "point x: ")
	}
}

// Spinors where p0 + p3 = 0: both special cases give back the momenta.
func TestSpinorsOfMomentaOnTheLightConeEdge(t *testing.T) {
	p := &kinematics.Point{Kind: kinematics.KindMomenta, Metric: "+-+-", Momenta: kinematics.NewMatrix(rows(
		"1 2 2 -1,1 2 -2 -1,-1 -2 2 1,-1 -2 -2 1"))}
	require.NoError(t, p.Validate())
	q, err := p.Convert(kinematics.KindSpinors)
	require.NoError(t, err)
	text, err := json.Marshal(q)
	require.NoError(t, err)
	require.JSONEq(t, `{"spinors": {"angle": [[0,1],[4,2],[-4,-2],[0,1]], "square": [[4,2],[0,1],[0,1],[-4,-2]]}}`, string(text))
	back, err := q.Convert(kinematics.KindMomenta)
	require.NoError(t, err)
	require.True(t, p.Equal(back))
}

func TestInvalidPointsDoNotConvert(t *testing.T) {
	p := spinorPoint("bad", "1 0,0 1,1 1,1 3", "1 2,3 -1,0 -7/2,-1 2")
	_, err := p.Convert(kinematics.KindMomenta)
	require.ErrorContains(t, err, "momentum is not conserved")
	_, err = p.Invariants()
	require.ErrorContains(t, err, "momentum is not conserved")
	_, err = p.Brackets()
	require.ErrorContains(t, err, "momentum is not conserved")
	require.ErrorContains(t, (&kinematics.Point{Kind: "colours"}).Validate(), "unknown kind")
}

func TestMarshalledPointIsAPointOfAFile(t *testing.T) {
	text, err := json.Marshal(splitPoints[1].point)
	require.NoError(t, err)
	points, err := kinematics.ReadPoints(strings.NewReader(in(string(text))), "")
	require.NoError(t, err)
	require.True(t, points[0].Equal(splitPoints[1].point))
}

func TestSpinorComponents(t *testing.T) {
	b, err := splitPoints[0].point.Brackets()
	require.NoError(t, err)
	require.Equal(t, 4, b.Legs())
	l, m := b.Lambda(4), b.LambdaTilde(3)
	require.Equal(t, []string{"1", "3", "0", "-7/2"}, []string{l[0].RatString(), l[1].RatString(), m[0].RatString(), m[1].RatString()})
	l[0].SetInt64(5) // a copy
	require.Equal(t, "3", b.Angle(1, 4).RatString())
	require.Equal(t, "7", b.Square(1, 2).RatString())
}

func TestEqual(t *testing.T) {
	p := splitPoints[1].point
	label, kind, value := *p, *p, *p
	label.Label = "other"
	kind.Kind = kinematics.KindTwistors
	value.Square = append(kinematics.Matrix{p.Square[1]}, p.Square[1:]...)
	momenta, err := p.Convert(kinematics.KindMomenta)
	require.NoError(t, err)
	metric, massive := *momenta, *momenta
	metric.Metric = "+---"
	massive.MassesSquared = rows("0 0 0 0 1")[0]
	require.True(t, p.Equal(p))
	for _, q := range []*kinematics.Point{&label, &kind, &value, momenta} {
		require.False(t, p.Equal(q))
	}
	require.False(t, momenta.Equal(&metric))
	require.False(t, momenta.Equal(&massive))
	massless := *momenta
	massless.MassesSquared = rows("0 0 0 0 0")[0]
	require.True(t, momenta.Equal(&massless))
}

// Integers are JSON numbers as long as binary64 holds them.
func TestLargeIntegersAreStrings(t *testing.T) {
	p := spinorPoint("large", "9007199254740991 0,0 1,9007199254740993 1,1 -1/9007199254740993", "1 0,0 1,0 0,0 0")
	text, err := json.Marshal(p)
	require.NoError(t, err)
	require.Contains(t, string(text), `[[9007199254740991,0],[0,1],["9007199254740993",1],[1,"-1/9007199254740993"]]`)
}

func TestParseRational(t *testing.T) {
	for text, want := range map[string]string{"12": "12", "-3/7": "-3/7", "6/4": "3/2", "-0": "0", "007": "7", "0/5": "0",
		strings.Repeat("9", kinematics.MaxDigits): strings.Repeat("9", kinematics.MaxDigits)} {
		r, err := kinematics.ParseRational(text)
		require.NoError(t, err)
		require.Equal(t, want, r.RatString())
	}
	for _, text := range []string{"", "-", "/", "1/", "/2", "1/-2", "+1", "1 ", " 1", "0x10", "1_000", "1.5", "1e3", "--1", "1/2/3", "i", "nan", "inf", "١", "1/0"} {
		_, err := kinematics.ParseRational(text)
		var e *kinematics.NumberError
		require.ErrorAs(t, err, &e, "%q", text)
	}
}
