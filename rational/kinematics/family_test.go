package kinematics_test

import (
	"context"
	"errors"
	"math/big"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"

	"eliminant/rational/kinematics"
	"eliminant/rational/kinematics/generate"
)

// shifted is the two-line shift of a spinor point:
// lambda_a -> lambda_a + e lambda_b, lambda-tilde_b -> lambda-tilde_b - e lambda-tilde_a.
func shifted(p *kinematics.Point, a, b int) *kinematics.Point {
	q := &kinematics.Point{Label: p.Label, Kind: p.Kind}
	q.Angle = append(q.Angle, p.Angle...)
	q.Square = append(q.Square, p.Square...)
	linear := func(x, y kinematics.Component, sign int64) kinematics.Component {
		slope := y.Coefficient(0)
		return kinematics.NewComponent(x.Coefficient(0), slope.Mul(slope, big.NewRat(sign, 1)))
	}
	row := func(x, y []kinematics.Component, sign int64) []kinematics.Component {
		return []kinematics.Component{linear(x[0], y[0], sign), linear(x[1], y[1], sign)}
	}
	q.Angle[a-1] = row(p.Angle[a-1], p.Angle[b-1], 1)
	q.Square[b-1] = row(p.Square[b-1], p.Square[a-1], -1)
	return q
}

func TestShiftedFamily(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		points, err := generate.ComputePoints(context.Background(), rapid.IntRange(4, 7).Draw(t, "legs"), 1, generate.Options{Seed: "family"})
		require.NoError(t, err)
		p := points[0]
		a := rapid.IntRange(1, p.Legs()-1).Draw(t, "a")
		b := rapid.IntRange(a+1, p.Legs()).Draw(t, "b")
		family := shifted(p, a, b)
		require.True(t, family.IsFamily())
		require.False(t, p.IsFamily())
		require.NoError(t, family.Validate())
		requireRoundTrip(t, []*kinematics.Point{family})
		_, err = family.Invariants()
		require.ErrorContains(t, err, "family")
		_, err = family.Brackets()
		require.ErrorContains(t, err, "family")

		e := big.NewRat(rapid.Int64Range(-9, 9).Draw(t, "numerator"), rapid.Int64Range(1, 9).Draw(t, "denominator"))
		here, err := family.At(e)
		require.NoError(t, err)
		require.False(t, here.IsFamily())
		want, err := here.Invariants()
		require.NoError(t, err)
		origin, err := family.At(new(big.Rat))
		require.NoError(t, err)
		require.True(t, origin.Equal(p))
		for _, kind := range kinematics.Kinds {
			q, err := family.Convert(kind)
			if kind == kinematics.KindTwistors && err != nil {
				continue
			}
			require.NoError(t, err)
			require.NoError(t, q.Validate())
			value, err := q.At(e)
			var domain *kinematics.DomainError
			if kind == kinematics.KindTwistors && errors.As(err, &domain) {
				continue
			}
			require.NoError(t, err)
			got, err := value.Invariants()
			require.NoError(t, err)
			requireSameInvariants(t, want, got)
		}
	})
}

// A residual that vanishes at many values of the parameter but not identically
// is found, and it vanishes exactly where the point is on shell.
func TestFamilyOnShellAtSomeValuesOnly(t *testing.T) {
	// (e-1)(e-2)(e-3) added to one spatial component of legs 1 and 2
	bump := func(base, sign int64) kinematics.Component {
		return kinematics.NewComponent(big.NewRat(base-6*sign, 1), big.NewRat(11*sign, 1), big.NewRat(-6*sign, 1), big.NewRat(sign, 1))
	}
	p := &kinematics.Point{Label: "bump", Kind: kinematics.KindMomenta, Metric: "+---", Momenta: kinematics.NewMatrix(rows("3 1 2 2,3 -1 -2 -2,-3 2 1 2,-3 -2 -1 -2"))}
	require.NoError(t, p.Validate())
	p.Momenta[0][1], p.Momenta[1][1] = bump(1, 1), bump(-1, -1)
	var list kinematics.InputErrors
	require.ErrorAs(t, p.Validate(), &list)
	require.Len(t, list, 2)
	require.Equal(t, kinematics.CodeOnShell, list[0].Code)
	require.Equal(t, []int{1, 2}, []int{list[0].Leg, list[1].Leg})
	for e := int64(0); e < 6; e++ {
		q, err := p.At(big.NewRat(e, 1))
		require.NoError(t, err)
		if e >= 1 && e <= 3 {
			require.NoError(t, q.Validate())
		} else {
			require.Error(t, q.Validate())
		}
	}
}

func TestTwistorFamily(t *testing.T) {
	p := &kinematics.Point{Kind: kinematics.KindTwistors, Twistors: kinematics.NewMatrix(rows("1 0 0 1,0 1 2 0,1 1 1 1,2 1 3 1,1 -2 1 0"))}
	p.Twistors[1][1] = kinematics.NewComponent(big.NewRat(-2, 1), big.NewRat(1, 1)) // e - 2
	require.NoError(t, p.Validate())
	_, err := p.Convert(kinematics.KindSpinors)
	require.ErrorContains(t, err, "would not be polynomials")
	q, err := p.At(big.NewRat(3, 1))
	require.NoError(t, err)
	_, err = q.Invariants()
	require.NoError(t, err)
	_, err = p.At(big.NewRat(2, 1))
	var domain *kinematics.DomainError
	require.ErrorAs(t, err, &domain)
	require.Equal(t, "<1 2>", domain.What)
	require.EqualError(t, err, "undefined at this point: <1 2> vanishes")
}

func TestComponentArithmetic(t *testing.T) {
	c := kinematics.NewComponent(rat("1/2"), rat("-1"), rat("0"), rat("3"), rat("0"))
	require.Equal(t, "1/2-e+3*e^3", c.String())
	require.Equal(t, 3, c.Degree())
	require.Equal(t, "45/2", c.At(big.NewRat(2, 1)).RatString())
	require.Equal(t, "0", c.Coefficient(7).RatString())
	require.True(t, kinematics.NewComponent(rat("0"), rat("0")).IsZero())
	require.Equal(t, "0", kinematics.Int(0).String())
	require.Equal(t, "e", kinematics.NewComponent(rat("0"), rat("1")).String())
	require.True(t, c.Equal(kinematics.NewComponent(rat("2/4"), rat("-1"), rat("0"), rat("3"))))
	require.False(t, c.Equal(kinematics.NewComponent(rat("2/4"), rat("-1"), rat("1"), rat("3"))))
}
