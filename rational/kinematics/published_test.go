package kinematics_test

import (
	"fmt"
	"math/big"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"eliminant/rational/kinematics"
)

// The points below are rational points in split signature (K4..K7) and points in
// any dimension whose planar invariants are primes (X4..X6). The listed s_ij were
// computed by an independent program; it used the sign s_ij = <ij>[ij], which
// changes neither lambda, lambda-tilde nor s_ij.

func rat(s string) *big.Rat {
	r, err := kinematics.ParseRational(s)
	if err != nil {
		panic(err)
	}
	return r
}

// rows reads "a b, c d" as rows of numbers.
func rows(text string) [][]*big.Rat {
	var out [][]*big.Rat
	for _, line := range strings.Split(text, ",") {
		var row []*big.Rat
		for _, x := range strings.Fields(line) {
			row = append(row, rat(x))
		}
		out = append(out, row)
	}
	return out
}

func spinorPoint(label, angle, square string) *kinematics.Point {
	return &kinematics.Point{Label: label, Kind: kinematics.KindSpinors,
		Angle: kinematics.NewMatrix(rows(angle)), Square: kinematics.NewMatrix(rows(square))}
}

var splitPoints = []struct {
	point *kinematics.Point
	s     string // "12=-7 ..."; longer labels are Lorentz squares
}{
	{spinorPoint("K4", "1 0,0 1,1 1,1 3", "1 2,3 -1,0 -7/2,-1 3/2"),
		"12=-7 23=21/2 13=-7/2"},
	{spinorPoint("K5", "1 0,0 1,1 1,1 2,1 -1", "1 2,3 -1,2 5,-8/3 -11/3,-1/3 -10/3"),
		"12=-7 13=1 14=10/3 15=8/3 23=-17 24=41/3 25=31/3 34=6 35=10 45=-23"},
	{spinorPoint("K6", "1 0,0 1,1 1,1 2,1 -1,2 1", "1 2,3 -1,2 5,-1 4,4/3 13/3,-5/3 -23/3"),
		"12=-7 13=1 14=12 15=-5/3 16=-13/3 23=-17 24=-11 25=-43/3 26=148/3 34=13 35=-4 36=7 45=29 46=-43 56=-9 123=-23 234=-15 345=38"},
	{spinorPoint("K7", "1 0,0 1,1 1,1 2,1 -1,2 1,1 3", "1 2,3 -1,2 5,-1 4,2 -3,-11/5 -9/5,2/5 -22/5"),
		"12=-7 13=1 23=-17 34=13"},
}

func TestSplitSignaturePoints(t *testing.T) {
	for _, c := range splitPoints {
		t.Run(c.point.Label, func(t *testing.T) {
			require.NoError(t, c.point.Validate())
			v, err := c.point.Invariants()
			require.NoError(t, err)
			b, err := c.point.Brackets()
			require.NoError(t, err)
			require.True(t, v.Massless())
			for _, entry := range strings.Fields(c.s) {
				name, want, _ := strings.Cut(entry, "=")
				var legs []int
				for _, d := range name {
					legs = append(legs, int(d-'0'))
				}
				require.Equal(t, want, v.Lorentz(legs...).RatString(), "s%s", name)
			}
			n := v.Legs()
			for i := 1; i <= n; i++ {
				for j := 1; j <= n; j++ {
					// s_ij = <ij>[ji]
					want := new(big.Rat).Mul(b.Angle(i, j), b.Square(j, i))
					require.Equal(t, want.RatString(), v.S(i, j).RatString(), "s%d%d", i, j)
				}
			}
		})
	}
}

// planarPoint sets s_ij = X_{i,j+1} + X_{i+1,j} - X_ij - X_{i+1,j+1}.
func planarPoint(n int, planar map[string]int64) [][]*big.Rat {
	x := func(i, j int) int64 {
		i, j = (i-1)%n+1, (j-1)%n+1
		if i > j {
			i, j = j, i
		}
		return planar[fmt.Sprint(i, j)]
	}
	s := make([][]*big.Rat, n)
	for i := range n {
		for j := range n {
			v := int64(0)
			if i != j {
				v = x(i+1, j+2) + x(i+2, j+1) - x(i+1, j+1) - x(i+2, j+2)
			}
			s[i] = append(s[i], new(big.Rat).SetInt64(v))
		}
	}
	return s
}

func TestPlanarPoints(t *testing.T) {
	points := map[int]map[string]int64{
		4: {"1 3": 2, "2 4": 3},
		5: {"1 3": 2, "1 4": 3, "2 4": 5, "2 5": 7, "3 5": 11},
		6: {"1 3": 2, "1 4": 3, "1 5": 5, "2 4": 7, "2 5": 11, "2 6": 13, "3 5": 17, "3 6": 31, "4 6": 23},
	}
	for n, planar := range points {
		v, err := kinematics.NewInvariants(planarPoint(n, planar), nil)
		require.NoError(t, err)
		for name, want := range planar {
			var i, j int
			_, err := fmt.Sscan(name, &i, &j)
			require.NoError(t, err)
			var legs []int
			for a := i; a < j; a++ {
				legs = append(legs, a)
			}
			require.Equal(t, new(big.Rat).SetInt64(want), v.Lorentz(legs...), "n=%d X_%s", n, name)
		}
	}
	// the traps listed beside X6: other values of X36 make invariants vanish
	// that are no planar poles
	for x36, legs := range map[int64][]int{19: {2, 5}, 29: {1, 3, 6}} {
		planar := points[6]
		planar["3 6"] = x36
		v, err := kinematics.NewInvariants(planarPoint(6, planar), nil)
		require.NoError(t, err)
		require.Zero(t, v.Lorentz(legs...).Sign(), "X36=%d", x36)
	}
	planar := points[6]
	planar["3 6"] = 31
	v, err := kinematics.NewInvariants(planarPoint(6, planar), nil)
	require.NoError(t, err)
	require.NotZero(t, v.Lorentz(2, 5).Sign())
	require.NotZero(t, v.Lorentz(1, 3, 6).Sign())
}

// The point P5 of a handbook check (values from memory): three integer massless
// momenta and the two rational incoming ones. The invariants beside it were
// computed by hand from the energies and angles.
func TestRationalPhysicalPoint(t *testing.T) {
	p := &kinematics.Point{Label: "P5", Kind: kinematics.KindMomenta, Metric: "+---", Momenta: kinematics.NewMatrix(rows(
		"-875/86 -525/86 -700/86 0, -759/86 611/86 442/86 -86/86, 3 1 2 2, 7 2 -3 6, 9 -4 4 -7"))}
	require.NoError(t, p.Validate())
	v, err := p.Invariants()
	require.NoError(t, err)
	for _, c := range []struct {
		a, b int
		want string
	}{{1, 2, "350"}, {3, 4, "26"}, {3, 5, "74"}, {4, 5, "250"}} {
		require.Equal(t, c.want, v.S(c.a, c.b).RatString(), "s%d%d", c.a, c.b)
	}
}
