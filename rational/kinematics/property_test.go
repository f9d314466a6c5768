package kinematics_test

import (
	"bytes"
	"context"
	"math/big"
	"strconv"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"

	"eliminant/rational/kinematics"
	"eliminant/rational/kinematics/generate"
	"eliminant/rational/prime"
)

// drawPoint draws a point of any kind with 4 to 7 legs.
func drawPoint(t *rapid.T) *kinematics.Point {
	o := generate.Options{
		Kind: rapid.SampledFrom(generate.Kinds).Draw(t, "kind"),
		Seed: strconv.Itoa(rapid.IntRange(0, 1000).Draw(t, "seed")),
	}
	if o.Kind == generate.Momenta {
		o.Metric = rapid.SampledFrom([]string{"", "+-+-", "-+++", "+--", "+-----", "++--+", "+-+-+--"}).Draw(t, "metric")
	}
	if o.Kind != generate.Twistors && o.Kind != generate.Spinors {
		masses := []*big.Rat{nil, nil, big.NewRat(2, 1)}
		if o.Kind != generate.Physical {
			masses = append(masses, big.NewRat(-7, 3))
		}
		o.MassesSquared = rapid.SampledFrom(masses).Draw(t, "mass")
		o.Polarisations = o.Kind != generate.Invariants && rapid.Bool().Draw(t, "polarisations")
	}
	points, err := generate.ComputePoints(context.Background(), rapid.IntRange(4, 7).Draw(t, "legs"), 1, o)
	require.NoError(t, err)
	return points[0]
}

func TestGenerateValidateWriteRead(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := drawPoint(t)
		require.NoError(t, p.Validate())
		requireRoundTrip(t, []*kinematics.Point{p})
	})
}

func requireRoundTrip(t require.TestingT, points []*kinematics.Point) {
	var first, second bytes.Buffer
	require.NoError(t, kinematics.WritePoints(&first, points))
	back, err := kinematics.ReadPoints(bytes.NewReader(first.Bytes()), "round trip")
	require.NoError(t, err)
	require.Len(t, back, len(points))
	for i := range points {
		require.True(t, points[i].Equal(back[i]), "point %d of %s", i+1, first.String())
	}
	require.NoError(t, kinematics.WritePoints(&second, back))
	require.Equal(t, first.String(), second.String())
}

// requireSameInvariants compares all s_ab and masses.
func requireSameInvariants(t require.TestingT, x, y *kinematics.Invariants) {
	require.Equal(t, x.Legs(), y.Legs())
	for a := 1; a <= x.Legs(); a++ {
		require.Zero(t, x.MassSquared(a).Cmp(y.MassSquared(a)))
		for b := 1; b <= x.Legs(); b++ {
			require.Zero(t, x.S(a, b).Cmp(y.S(a, b)), "s%d%d: %v and %v", a, b, x.S(a, b), y.S(a, b))
		}
	}
}

func TestConversionsKeepInvariants(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := drawPoint(t)
		v, err := p.Invariants()
		require.NoError(t, err)
		reached := 0
		for _, kind := range kinematics.Kinds {
			q, err := p.Convert(kind)
			if err != nil {
				var list kinematics.InputErrors
				require.ErrorAs(t, err, &list)
				require.Equal(t, kinematics.CodeConversion, list[0].Code)
				require.NotEmpty(t, list[0].Hint)
				continue
			}
			reached++
			require.NoError(t, q.Validate())
			require.Equal(t, kind, q.Kind)
			require.Equal(t, p.Label, q.Label)
			w, err := q.Invariants()
			require.NoError(t, err)
			requireSameInvariants(t, v, w)
		}
		require.GreaterOrEqual(t, reached, 2) // itself, and at least one more
	})
}

// Twistors and spinors determine each other up to translations of the twistors,
// spinors and momenta up to the little group: what comes back has the same
// brackets, or the same momenta.
func TestConversionsThereAndBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		kind := rapid.SampledFrom([]string{generate.Twistors, generate.Spinors}).Draw(t, "kind")
		seed := strconv.Itoa(rapid.IntRange(0, 1000).Draw(t, "seed"))
		points, err := generate.ComputePoints(context.Background(), rapid.IntRange(4, 8).Draw(t, "legs"), 1, generate.Options{Kind: kind, Seed: seed})
		require.NoError(t, err)
		spinors, err := points[0].Convert(kinematics.KindSpinors)
		require.NoError(t, err)
		twistors, err := spinors.Convert(kinematics.KindTwistors)
		require.NoError(t, err)
		back, err := twistors.Convert(kinematics.KindSpinors)
		require.NoError(t, err)
		require.True(t, spinors.Equal(back))

		momenta, err := spinors.Convert(kinematics.KindMomenta)
		require.NoError(t, err)
		again, err := momenta.Convert(kinematics.KindSpinors)
		require.NoError(t, err)
		require.NoError(t, again.Validate())
		same, err := again.Convert(kinematics.KindMomenta)
		require.NoError(t, err)
		require.True(t, momenta.Equal(same))
	})
}

// det4 is the four-bracket <ijkl> by the Leibniz formula.
func det4(rows [4][]*big.Rat) *big.Rat {
	z := new(big.Rat)
	var permute func(row int, used [4]bool, sign int64, product *big.Rat)
	permute = func(row int, used [4]bool, sign int64, product *big.Rat) {
		if row == 4 {
			z.Add(z, new(big.Rat).Mul(product, big.NewRat(sign, 1)))
			return
		}
		for c := range 4 {
			if used[c] {
				continue
			}
			s := sign
			for d := range c {
				if !used[d] {
					s = -s
				}
			}
			next := used
			next[c] = true
			permute(row+1, next, s, new(big.Rat).Mul(product, rows[row][c]))
		}
	}
	permute(0, [4]bool{}, 1, big.NewRat(1, 1))
	return z
}

// In momentum twistors s_{i..j-1} = <i-1,i,j-1,j>/(<i-1,i><j-1,j>) and
// [i,i+1] = -<i-1,i,i+1,i+2>/(<i-1,i><i,i+1><i+1,i+2>): A. Hodges, Eliminating
// spurious poles from gauge-theoretic amplitudes, JHEP 05 (2013) 135,
// arXiv:0905.1473 (reference from memory).
func TestTwistorBrackets(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(5, 8).Draw(t, "legs")
		seed := strconv.Itoa(rapid.IntRange(0, 1000).Draw(t, "seed"))
		points, err := generate.ComputePoints(context.Background(), n, 1, generate.Options{Kind: generate.Twistors, Seed: seed})
		require.NoError(t, err)
		p := points[0]
		v, err := p.Invariants()
		require.NoError(t, err)
		b, err := p.Brackets()
		require.NoError(t, err)
		wrap := func(i int) int { return (i-1+n)%n + 1 }
		z := func(i int) []*big.Rat {
			out := make([]*big.Rat, 4)
			for c := range out {
				out[c] = p.Twistors[wrap(i)-1][c].Coefficient(0)
			}
			return out
		}
		angle := func(i, j int) *big.Rat { return b.Angle(wrap(i), wrap(j)) }
		for i := 1; i <= n; i++ {
			var legs []int
			for j := i + 1; j <= i+n-2; j++ {
				if legs = append(legs, wrap(j-1)); len(legs) < 2 {
					continue
				}
				want := det4([4][]*big.Rat{z(i - 1), z(i), z(j - 1), z(j)})
				want.Quo(want, new(big.Rat).Mul(angle(i-1, i), angle(j-1, j)))
				require.Zero(t, want.Cmp(v.Lorentz(legs...)), "s of legs %v", legs)
			}
			want := det4([4][]*big.Rat{z(i - 1), z(i), z(i + 1), z(i + 2)})
			want.Quo(want.Neg(want), angle(i-1, i))
			want.Quo(want, angle(i, i+1))
			want.Quo(want, angle(i+1, i+2))
			require.Zero(t, want.Cmp(b.Square(i, wrap(i+1))), "[%d %d]", i, i+1)
		}
	})
}

// Lorentz squares of momenta, computed from the components of the sum.
func TestLorentzSquaresOfMomenta(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := drawPoint(t)
		v, err := p.Invariants()
		require.NoError(t, err)
		q, err := p.Convert(kinematics.KindMomenta)
		if err != nil {
			return
		}
		set := rapid.Uint64Range(1, 1<<p.Legs()-1).Draw(t, "set")
		var legs []int
		sum := make([]*big.Rat, len(q.Metric))
		for i := range sum {
			sum[i] = new(big.Rat)
		}
		for a := range p.Legs() {
			if set>>a&1 == 1 {
				legs = append(legs, a+1)
				for i := range sum {
					sum[i].Add(sum[i], q.Momenta[a][i].Coefficient(0))
				}
			}
		}
		want := new(big.Rat)
		for i, sign := range q.Metric {
			x := new(big.Rat).Mul(sum[i], sum[i])
			if sign == '-' {
				x.Neg(x)
			}
			want.Add(want, x)
		}
		require.Zero(t, want.Cmp(v.Lorentz(legs...)), "legs %v", legs)
	})
}

func TestReduceCommutesWithRationals(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := drawPoint(t)
		v, err := p.Invariants()
		require.NoError(t, err)
		f := prime.TableField(rapid.IntRange(0, 3).Draw(t, "prime"))
		r, err := v.Reduce(f)
		require.NoError(t, err)
		require.Equal(t, v.Massless(), r.M == nil)
		residue := func(x *big.Rat) prime.Element {
			e, ok := f.FromRat(x)
			require.True(t, ok)
			return e
		}
		var legs []int
		for a := 1; a <= r.N; a++ {
			require.Equal(t, residue(v.MassSquared(a)), r.MassSquared(a))
			for b := 1; b <= r.N; b++ {
				require.Equal(t, residue(v.S(a, b)), r.At(a, b))
			}
			if rapid.Bool().Draw(t, "in") {
				legs = append(legs, a)
			}
		}
		require.Equal(t, residue(v.Lorentz(legs...)), r.Lorentz(legs))
	})
}

func TestReduceModuloDivisorOfDenominator(t *testing.T) {
	p := prime.TableField(0).Modulus()
	x := new(big.Rat).SetFrac(big.NewInt(1), new(big.Int).SetUint64(p))
	y := new(big.Rat).Neg(x)
	o := new(big.Rat)
	v, err := kinematics.NewInvariants([][]*big.Rat{{o, x, y, o}, {x, o, o, y}, {y, o, o, x}, {o, y, x, o}}, nil)
	require.NoError(t, err)
	_, err = v.Reduce(prime.TableField(0))
	require.ErrorIs(t, err, prime.ErrBadPrime)
	_, err = v.Reduce(prime.TableField(1))
	require.NoError(t, err)
}

// A point given by products of drawn momenta and polarisations: e.k = 0 and gauge
// shifts e -> e + k change e.e as the products say.
func TestProductsOfMomenta(t *testing.T) {
	points, err := generate.ComputePoints(context.Background(), 5, 3, generate.Options{Kind: generate.Momenta, Dimension: 6, Polarisations: true, Seed: "products"})
	require.NoError(t, err)
	for _, p := range points {
		p.Polarisations2 = append(kinematics.Matrix{nil}, p.Polarisations[1:]...)
		require.NoError(t, p.Validate())
		q, err := p.Convert(kinematics.KindProducts)
		require.NoError(t, err)
		require.NoError(t, q.Validate())
		requireRoundTrip(t, []*kinematics.Point{q})
		for a := range 5 {
			for b := range 5 {
				want := p.Dot(p.Polarisations[a], p.Momenta[b])
				require.True(t, want.Equal(q.Products.EK[a][b]))
				require.True(t, p.Dot(p.Polarisations[a], p.Polarisations[b]).Equal(q.Products.EE[a][b]))
				if a > 0 {
					require.True(t, want.Equal(q.Products.FK[a][b]))
				}
			}
		}
		require.Nil(t, q.Products.FK[0])
		require.Nil(t, q.Products.FE[0])
	}
}
