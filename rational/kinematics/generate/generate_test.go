package generate_test

import (
	"bytes"
	"context"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"math/big"
	"strconv"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"

	"eliminant/rational/kinematics"
	"eliminant/rational/kinematics/generate"
)

func compute(t require.TestingT, legs, count int, o generate.Options) []*kinematics.Point {
	points, err := generate.ComputePoints(context.Background(), legs, count, o)
	require.NoError(t, err)
	require.Len(t, points, count)
	return points
}

func document(t require.TestingT, points ...*kinematics.Point) string {
	var b bytes.Buffer
	require.NoError(t, kinematics.WritePoints(&b, points))
	return b.String()
}

// options draws options that fit together.
func options(t *rapid.T) (legs int, o generate.Options) {
	o.Kind = rapid.SampledFrom(generate.Kinds).Draw(t, "kind")
	o.Seed = strconv.Itoa(rapid.IntRange(0, 1_000_000).Draw(t, "seed"))
	legs = rapid.IntRange(4, 9).Draw(t, "legs")
	masses := []*big.Rat{nil}
	switch o.Kind {
	case generate.Momenta:
		o.Metric = rapid.SampledFrom([]string{"", "+-+-", "-+++", "+--", "--+", "+-----", "++--+"}).Draw(t, "metric")
		masses = append(masses, big.NewRat(2, 1), big.NewRat(-5, 3))
	case generate.Physical:
		o.Dimension = rapid.SampledFrom([]int{0, 4, 5, 6, 10}).Draw(t, "dimension")
		masses = append(masses, big.NewRat(2, 1), big.NewRat(4, 1))
	case generate.Invariants, generate.Products:
		masses = append(masses, big.NewRat(1, 1), big.NewRat(-5, 3))
	}
	o.MassesSquared = rapid.SampledFrom(masses).Draw(t, "mass")
	o.Polarisations = o.Kind != generate.Invariants && len(masses) > 1 && rapid.Bool().Draw(t, "polarisations")
	return legs, o
}

// Every channel over the rationals, by adding up pairs: no s_I vanishes, and with
// a mass no s_I - m^2 and no shifted sum.
func TestNoChannelVanishes(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n, o := options(t)
		p := compute(t, n, 1, o)[0]
		require.NoError(t, p.Validate())
		require.Equal(t, n, p.Legs())
		v, err := p.Invariants()
		require.NoError(t, err)
		mass, common := v.CommonMassSquared()
		require.True(t, common)
		require.Equal(t, o.MassesSquared == nil, v.Massless())
		for set := 1; set < 1<<n; set++ {
			square, shifted := new(big.Rat), new(big.Rat)
			size := 0
			for a := range n {
				if set>>a&1 == 0 {
					continue
				}
				size++
				square.Add(square, mass)
				for b := range a {
					if set>>b&1 == 0 {
						continue
					}
					twice := v.S(a+1, b+1) // 2 k_a.k_b
					twice.Sub(twice, mass).Sub(twice, mass)
					square.Add(square, twice)
					shifted.Add(shifted, twice)
					if a-b == 1 || a-b == n-1 {
						shifted.Add(shifted, mass)
					}
				}
			}
			if size < 2 || size > n-2 {
				continue
			}
			require.NotZero(t, square.Sign(), "%b of %s", set, document(t, p))
			require.NotZero(t, shifted.Sign(), "%b of %s", set, document(t, p))
			if !v.Massless() {
				require.NotZero(t, square.Cmp(mass), "%b of %s", set, document(t, p))
			}
		}
	})
}

func TestPhysicalPoints(t *testing.T) {
	limit := new(big.Int).Lsh(big.NewInt(1), 53)
	for _, dimension := range []int{3, 4, 5, 6, 10} {
		for _, mass := range []int64{0, 2, 4, 100} {
			for n := 4; n <= 12; n++ {
				if dimension == 3 && mass != 0 && (n%2 == 1 || n > 8) {
					continue // there may be none
				}
				o := generate.Options{Kind: generate.Physical, Dimension: dimension, MassesSquared: big.NewRat(mass, 1), Seed: "physical"}
				for _, p := range compute(t, n, 2, o) {
					name := fmt.Sprintf("D=%d m^2=%d n=%d", dimension, mass, n)
					require.NoError(t, p.Validate())
					require.Len(t, p.Metric, dimension)
					most := 0
					for a, k := range p.Momenta {
						for _, c := range k {
							x := c.Coefficient(0)
							require.True(t, x.IsInt(), name)
							require.Negative(t, x.Num().CmpAbs(limit), name)
							most = max(most, x.Num().BitLen())
						}
						sign := 1
						if a < 2 {
							sign = -1 // incoming
						}
						require.Equal(t, sign, k[0].Coefficient(0).Sign(), name)
					}
					if dimension == 4 {
						require.LessOrEqual(t, most, 9, name) // small numbers
					}
				}
			}
		}
	}
}

func TestNumbersAreSmall(t *testing.T) {
	for _, kind := range generate.Kinds {
		for n := 4; n <= 9; n++ {
			for _, p := range compute(t, n, 3, generate.Options{Kind: kind, Seed: "small"}) {
				limit := 150 * n // characters of the document, 1 to 5 digits a number
				if kind == generate.Invariants || kind == generate.Products {
					limit = 100 + 40*n + 10*n*n
				}
				require.Less(t, len(document(t, p)), limit, document(t, p))
			}
		}
	}
}

func TestDeterministicAndIndependentOfCount(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n, o := options(t)
		many := compute(t, n, 3, o)
		few := compute(t, n, 2, o)
		require.Equal(t, document(t, many[:2]...), document(t, few...))
		require.Equal(t, "p3", many[2].Label)
		other := o
		other.Seed += "x"
		require.NotEqual(t, document(t, many[0]), document(t, compute(t, n, 1, other)...))
		many[1].Label = "p1"
		require.NotEqual(t, document(t, many[0]), document(t, many[1]))
	})
}

// The points of a seed are part of what users write down: they must not change
// from machine to machine. The digests are of this program's own output, which
// other tests validate.
func TestPointsOfASeed(t *testing.T) {
	for kind, want := range map[string]string{
		generate.Twistors:   "7cd6fe83a2c361bd",
		generate.Spinors:    "b6074c8e2eb56687",
		generate.Momenta:    "e5ffd146769eea5e",
		generate.Physical:   "ea61cc20bc06939b",
		generate.Invariants: "2526182493cae174",
		generate.Products:   "293a83a07eaa9994",
	} {
		h := sha256.New()
		for n := 4; n <= 9; n++ {
			h.Write([]byte(document(t, compute(t, n, 2, generate.Options{Kind: kind, Seed: "1"})...)))
		}
		require.Equal(t, want, hex.EncodeToString(h.Sum(nil)[:8]), kind)
	}
}

// Polarisations are transverse, not longitudinal, and leave the momenta alone.
func TestPolarisations(t *testing.T) {
	for _, metric := range []string{"+---", "+--", "-+++", "+-+-", "+---------"} {
		for _, mass := range []*big.Rat{nil, big.NewRat(3, 2)} {
			o := generate.Options{Kind: generate.Momenta, Metric: metric, MassesSquared: mass, Seed: "e"}
			plain := compute(t, 6, 2, o)
			o.Polarisations = true
			for i, p := range compute(t, 6, 2, o) {
				require.NoError(t, p.Validate())
				for a, e := range p.Polarisations {
					k := p.Momenta[a]
					independent := false
					for x := range k {
						for y := range x {
							l := new(big.Rat).Mul(e[x].Coefficient(0), k[y].Coefficient(0))
							r := new(big.Rat).Mul(e[y].Coefficient(0), k[x].Coefficient(0))
							independent = independent || l.Cmp(r) != 0
						}
					}
					require.True(t, independent)
				}
				p.Polarisations = nil
				require.True(t, p.Equal(plain[i]))
			}
		}
	}
	p := compute(t, 5, 1, generate.Options{Kind: generate.Products, Polarisations: true})[0]
	require.NotNil(t, p.Products.FE)
	require.False(t, p.Products.EK[0][1].Equal(p.Products.FK[0][1]) && p.Products.EK[0][2].Equal(p.Products.FK[0][2]))
}

func TestDefaultKinds(t *testing.T) {
	for _, c := range []struct {
		o    generate.Options
		want kinematics.Kind
	}{
		{generate.Options{}, kinematics.KindSpinors},
		{generate.Options{Dimension: 4}, kinematics.KindSpinors},
		{generate.Options{Dimension: 6}, kinematics.KindMomenta},
		{generate.Options{Metric: "+-+-"}, kinematics.KindMomenta},
		{generate.Options{Polarisations: true}, kinematics.KindMomenta},
		{generate.Options{MassesSquared: big.NewRat(1, 1)}, kinematics.KindMomenta},
		{generate.Options{MassesSquared: new(big.Rat)}, kinematics.KindSpinors},
	} {
		require.Equal(t, c.want, compute(t, 5, 1, c.o)[0].Kind)
	}
}

func TestRefusedOptions(t *testing.T) {
	half := big.NewRat(1, 2)
	for _, c := range []struct {
		legs int
		o    generate.Options
		want string
	}{
		{3, generate.Options{}, "3 legs; from 4 to 64"},
		{65, generate.Options{}, "65 legs; from 4 to 64"},
		{5, generate.Options{Kind: "helicities"}, `unknown kind "helicities" (kinds: twistors, spinors`},
		{5, generate.Options{Kind: generate.Twistors, MassesSquared: half}, "twistors are massless"},
		{5, generate.Options{Kind: generate.Spinors, Dimension: 6}, "spinors exist in 4 dimensions only"},
		{5, generate.Options{Kind: generate.Invariants, Dimension: 6}, "invariants belong to no dimension"},
		{5, generate.Options{Kind: generate.Invariants, Polarisations: true}, "invariants carry no polarisations"},
		{5, generate.Options{Kind: generate.Products, Metric: "+---"}, "products have no metric"},
		{5, generate.Options{Kind: generate.Momenta, Dimension: 2}, "2 dimensions; from 3 to 64"},
		{5, generate.Options{Kind: generate.Momenta, Dimension: 65}, "65 dimensions; from 3 to 64"},
		{5, generate.Options{Kind: generate.Momenta, Metric: "+-x-"}, `"+-x-" is not a string of 4 signs (for instance "+---")`},
		{5, generate.Options{Kind: generate.Momenta, Metric: "+---", Dimension: 5}, `"+---" is not a string of 5 signs`},
		{5, generate.Options{Kind: generate.Momenta, Metric: "----"}, "has no null vectors"},
		{5, generate.Options{Kind: generate.Physical, Metric: "-+++"}, `physical points are in the metric "+---"`},
		{6, generate.Options{Kind: generate.Physical, MassesSquared: half}, "not 1/2 (try 2, which is the same in other units"},
		{5, generate.Options{Kind: generate.Physical, MassesSquared: big.NewRat(3, 1)}, "their sum is odd (try 12"},
		{6, generate.Options{Kind: generate.Physical, MassesSquared: big.NewRat(-3, 1)}, "no negative squared mass -3"},
		{6, generate.Options{Kind: generate.Physical, MassesSquared: big.NewRat(1<<14, 1)}, "past the limit"},
	} {
		_, err := generate.ComputePoints(context.Background(), c.legs, 1, c.o)
		var list kinematics.InputErrors
		require.ErrorAs(t, err, &list, c.want)
		require.ErrorContains(t, err, c.want)
	}
}

// In 3 dimensions E^2-x^2-y^2 = 2 mod 4 forces x and y odd, and five odd numbers
// do not add up to zero: the search ends.
func TestExhaustedSearch(t *testing.T) {
	_, err := generate.ComputePoints(context.Background(), 5, 1, generate.Options{Kind: generate.Physical, Dimension: 3, MassesSquared: big.NewRat(2, 1)})
	var exhausted *generate.ExhaustedError
	require.ErrorAs(t, err, &exhausted)
	require.Equal(t, 5, exhausted.Legs)
	require.ErrorContains(t, err, "no physical point of 5 legs without a vanishing invariant")
	require.Equal(t, generate.Physical, exhausted.Kind)
}

func TestCancellation(t *testing.T) {
	reason := errors.New("interrupted by the user")
	ctx, cancel := context.WithCancelCause(context.Background())
	cancel(reason)
	_, err := generate.ComputePoints(ctx, 5, 1, generate.Options{})
	require.ErrorIs(t, err, reason)
}

func TestManyLegs(t *testing.T) {
	for _, kind := range generate.Kinds {
		for _, n := range []int{12, 16, 20} {
			p := compute(t, n, 1, generate.Options{Kind: kind, Seed: "many"})[0]
			require.Equal(t, n, p.Legs())
		}
	}
}
