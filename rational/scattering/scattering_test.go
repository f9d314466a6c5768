package scattering

import (
	"math/big"
	"math/bits"
	"testing"

	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// planar returns the data whose planar invariants X_ij = s_{i..j-1} are the
// given ones, in the order X13, X14, .., X24, ..:
// s_ab = X_{a,b+1} + X_{a+1,b} - X_ab - X_{a+1,b+1}.
func planar(t testing.TB, n int, poles ...int64) *Data {
	x := make([][]int64, n+2)
	for i := range x {
		x[i] = make([]int64, n+2)
	}
	k := 0
	for i := 1; i <= n; i++ {
		for j := i + 2; j <= n; j++ {
			if i == 1 && j == n {
				continue
			}
			x[i][j], x[j][i] = poles[k], poles[k]
			k++
		}
	}
	require.Len(t, poles, k)
	at := func(i, j int) int64 { return x[(i-1)%n+1][(j-1)%n+1] }
	s := make([][]*big.Rat, n)
	for a := range s {
		s[a] = make([]*big.Rat, n)
		for b := range s[a] {
			s[a][b] = new(big.Rat)
			if a != b {
				s[a][b].SetInt64(at(a+1, b+2) + at(a+2, b+1) - at(a+1, b+1) - at(a+2, b+2))
			}
		}
	}
	d, err := New(s)
	require.NoError(t, err)
	return d
}

// fromPairs completes s_ab, given for pairs in the order 12, 13, .., 23, ...
func fromPairs(t testing.TB, n int, pairs ...string) *Data {
	s := make([][]*big.Rat, n)
	for a := range s {
		s[a] = make([]*big.Rat, n)
		s[a][a] = new(big.Rat)
	}
	k := 0
	for a := range n {
		for b := a + 1; b < n; b++ {
			x, ok := new(big.Rat).SetString(pairs[k])
			require.True(t, ok)
			s[a][b], s[b][a] = x, x
			k++
		}
	}
	d, err := New(s)
	require.NoError(t, err)
	return d
}

// random draws data with small entries: all s_ab but those of the last leg and
// one more are free.
func random(r *rapid.T, n int) *Data {
	entry := rapid.Int64Range(-9, 9)
	s := make([][]*big.Rat, n)
	for a := range s {
		s[a] = make([]*big.Rat, n)
		for b := range s[a] {
			s[a][b] = new(big.Rat)
		}
	}
	set := func(a, b int, x *big.Rat) { s[a][b], s[b][a] = x, new(big.Rat).Set(x) }
	total := new(big.Rat)
	for a := range n - 1 {
		for b := a + 1; b < n-1; b++ {
			if a == n-3 && b == n-2 {
				continue
			}
			x := big.NewRat(entry.Draw(r, "s"), rapid.Int64Range(1, 3).Draw(r, "den"))
			set(a, b, x)
			total.Add(total, x)
		}
	}
	set(n-3, n-2, total.Neg(total)) // the sum over all pairs without leg n is zero
	for a := range n - 1 {
		sum := new(big.Rat)
		for b := range n - 1 {
			sum.Add(sum, s[a][b])
		}
		set(a, n-1, sum.Neg(sum))
	}
	d, err := New(s)
	if err != nil {
		r.Fatal(err)
	}
	return d
}

// The points K5 and K6 (four-dimensional) and X5, X6 (any dimension); values
// recomputed by an independent program.
func k5(t testing.TB) *Data {
	return fromPairs(t, 5, "-7", "1", "10/3", "8/3", "-17", "41/3", "31/3", "6", "10", "-23")
}

func k6(t testing.TB) *Data {
	return fromPairs(t, 6, "-7", "1", "12", "-5/3", "-13/3", "-17", "-11", "-43/3", "148/3",
		"13", "-4", "7", "29", "-43", "-9")
}

func TestKnownConstraints(t *testing.T) {
	// printed polynomials of an independent program
	h := k5(t).Constraints(Gauge{})
	require.Equal(t, "z3+10/3*z4-7", h[0].String())
	require.Equal(t, "31/3*z3*z4-23*z3+10*z4", h[1].String())
	h = planar(t, 5, 2, 3, 5, 7, 11).Constraints(Gauge{})
	require.Equal(t, "-4*z3-5*z4+2", h[0].String())
	require.Equal(t, "2*z3*z4+3*z3-12*z4", h[1].String())
	h = planar(t, 6, 2, 3, 5, 7, 11, 13, 17, 31, 23).Constraints(Gauge{})
	require.Equal(t, "-6*z3-2*z4-7*z5+2", h[0].String())
	require.Equal(t, "9*z3*z4-22*z3*z5+14*z4*z5+3*z3-13*z4-17*z5", h[1].String())
	require.Equal(t, "16*z3*z4*z5+5*z3*z4-25*z3*z5-9*z4*z5", h[2].String())
	require.Equal(t, 3, h[2].Degree)
}

func TestSumsOfKnownPoint(t *testing.T) {
	d := k6(t)
	for name, want := range map[Channel]string{
		NewChannel(6, 1, 2, 3): "-23", NewChannel(6, 2, 3, 4): "-15", NewChannel(6, 3, 4, 5): "38",
		NewChannel(6, 2, 6): "148/3",
	} {
		require.Equal(t, want, d.Sum(name).RatString(), name.String())
	}
	scale, whole := d.Scaled()
	require.Equal(t, "3", scale.String())
	require.Equal(t, "148", whole[1][5].String())
	require.Equal(t, "148/3", d.At(6, 2).RatString())
}

func TestTrapsAreNamed(t *testing.T) {
	// all planar poles differ from zero, but a non-planar channel vanishes
	names := func(d *Data) (out []string) {
		for _, c := range d.Vanishing() {
			out = append(out, c.String())
		}
		return out
	}
	require.Empty(t, names(planar(t, 6, 2, 3, 5, 7, 11, 13, 17, 31, 23)))
	require.Equal(t, []string{"s25"}, names(planar(t, 6, 2, 3, 5, 7, 11, 13, 17, 19, 23)))
	require.Equal(t, []string{"s136"}, names(planar(t, 6, 2, 3, 5, 7, 11, 13, 17, 29, 23)))
	// every planar pole 1
	catalan := names(planar(t, 6, 1, 1, 1, 1, 1, 1, 1, 1, 1))
	require.Contains(t, catalan, "s14")
	require.Contains(t, catalan, "s124")
	require.Equal(t, "s14", catalan[0])
	require.Empty(t, names(planar(t, 5, 1, 1, 1, 1, 1)))
}

func TestChannelNames(t *testing.T) {
	require.Equal(t, "s136", NewChannel(6, 2, 4, 5).String())
	require.Equal(t, "s25", NewChannel(6, 1, 3, 4, 6).String())
	require.Equal(t, "s(1,12)", NewChannel(12, 1, 12).String())
	require.Equal(t, []int{1, 3, 6}, NewChannel(6, 1, 3, 6).Legs())
	require.True(t, NewChannel(6, 2, 5).Has(5))
	require.False(t, NewChannel(6, 2, 5).Has(1))
}

func TestRefusals(t *testing.T) {
	rat := func(x int64) *big.Rat { return big.NewRat(x, 1) }
	rows := func(x ...int64) [][]*big.Rat {
		s := make([][]*big.Rat, 4)
		for a := range s {
			for b := range 4 {
				s[a] = append(s[a], rat(x[4*a+b]))
			}
		}
		return s
	}
	for _, c := range []struct {
		s       [][]*big.Rat
		row     int
		message string
	}{
		{rows(0, 1, 2, -3, 1, 0, -3, 2, 2, -3, 0, 1, -3, 2, 1, 1), 4, "invariants, entry (4,4): the diagonal is 1, not 0"},
		{rows(0, 1, 2, -3, 1, 0, -3, 2, 5, -3, 0, 1, -3, 2, 1, 0), 3, "invariants, entry (3,1): not symmetric: 5 and 2"},
		{rows(0, 1, 2, -2, 1, 0, -3, 2, 2, -3, 0, 1, -2, 2, 1, 0), 1, "invariants, row 1: the sum is 1, not 0"},
		{[][]*big.Rat{{rat(0)}}, 0, "invariants: 1 legs; from 4 to 24 are possible"},
		{[][]*big.Rat{{}, {}, {}, {}}, 1, "invariants, row 1: 0 entries, not 4"},
		{[][]*big.Rat{{nil, nil, nil, nil}, {}, {}, {}}, 1, "invariants, entry (1,1): missing"},
	} {
		_, err := New(c.s)
		var e *MatrixError
		require.ErrorAs(t, err, &e)
		require.EqualError(t, err, c.message)
		require.Equal(t, c.row, e.Row)
	}
	_, err := New(rows(0, 1, 2, -3, 1, 0, -3, 2, 2, -3, 0, 1, -3, 2, 1, 0))
	require.NoError(t, err)
	require.Panics(t, func() { k5(t).Constraints(Gauge{1, 1, 5}) })
	require.Panics(t, func() { k5(t).Constraints(Gauge{1, 2, 6}) })
}

// Identically in z (rigorous form of the equivalence with the rational
// equations f_a = sum_b s_ab/(z_a - z_b)):
// h_m = sum_{b=3}^{n-1} f_b z_b (z_2 - z_b) e_{m-1}(z_c : c != b, 3 <= c <= n-1).
func TestConstraintsFollowFromRationalEquations(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		n := rapid.IntRange(4, 7).Draw(r, "n")
		d := random(r, n)
		z := make([]*big.Rat, n)
		used := map[int64]bool{0: true, 7: true}
		for a := 2; a < n-1; a++ {
			v := rapid.Int64Range(-30, 30).Filter(func(v int64) bool { return !used[v] }).Draw(r, "z")
			used[v] = true
			z[a] = big.NewRat(v, 7)
		}
		z[1], z[n-1] = big.NewRat(1, 1), new(big.Rat)
		for m, h := range d.Constraints(Gauge{}) {
			want := new(big.Rat)
			for b := 2; b < n-1; b++ {
				f := new(big.Rat)
				for c := 1; c < n; c++ {
					if c == b {
						continue
					}
					x := new(big.Rat).Sub(z[b], z[c])
					f.Add(f, x.Quo(d.At(b+1, c+1), x))
				}
				e := symmetric(z, b, n, m)
				f.Mul(f, z[b]).Mul(f, new(big.Rat).Sub(z[1], z[b])).Mul(f, e)
				want.Add(want, f)
			}
			if want.Cmp(h.Eval(z)) != 0 {
				r.Fatalf("h_%d = %s, expected %s", m+1, h.Eval(z), want)
			}
		}
	})
}

// symmetric returns e_k of the free punctures but that of index skip.
func symmetric(z []*big.Rat, skip, n, k int) *big.Rat {
	e := make([]*big.Rat, k+1)
	for i := range e {
		e[i] = new(big.Rat)
	}
	e[0].SetInt64(1)
	for c := 2; c < n-1; c++ {
		if c == skip {
			continue
		}
		for i := k; i > 0; i-- {
			e[i].Add(e[i], new(big.Rat).Mul(z[c], e[i-1]))
		}
	}
	return e[k]
}

// The Moebius map z -> 1-z exchanges the legs at one and zero; with leg 1 kept
// at infinity it maps common zeros to common zeros, so modulo the lower ones
// h_m of one gauge at 1-z is a combination of h_1..h_m of the other. For n = 4
// both are the same up to a constant.
func TestGaugesAgreeForFourLegs(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		d := random(r, 4)
		if len(d.Vanishing()) > 0 {
			return
		}
		solve := func(g Gauge, free int) *big.Rat {
			c := d.Constraints(g)[0]
			zero := []*big.Rat{new(big.Rat), new(big.Rat), new(big.Rat), new(big.Rat)}
			at0 := c.Eval(zero)
			zero[free-1].SetInt64(1)
			slope := new(big.Rat).Sub(c.Eval(zero), at0)
			return at0.Neg(at0.Quo(at0, slope))
		}
		one := big.NewRat(1, 1)
		z := solve(Gauge{}, 3)
		require.Equal(r, new(big.Rat).Sub(one, z).RatString(), solve(Gauge{1, 4, 2}, 3).RatString())
		require.Equal(r, new(big.Rat).Inv(z).RatString(), solve(Gauge{4, 2, 1}, 3).RatString())
	})
}

func TestReductionAgrees(t *testing.T) {
	f := prime.TableField(0)
	rapid.Check(t, func(r *rapid.T) {
		n := rapid.IntRange(4, 8).Draw(r, "n")
		d := random(r, n)
		s, err := d.Reduce(f)
		require.NoError(r, err)
		perm := rapid.Permutation([]int{1, 2, 3, 4}).Draw(r, "gauge")
		g := Gauge{perm[0], perm[1], perm[2]}
		exact := d.Constraints(g)
		for m, c := range ConstraintsMod(f, n, s, g) {
			require.Equal(r, exact[m].Degree, c.Degree)
			require.Len(r, c.Terms, len(exact[m].Terms))
			for i, term := range c.Terms {
				require.Equal(r, exact[m].Terms[i].Legs, term.Legs)
				x, _ := f.FromRat(exact[m].Terms[i].Coefficient)
				require.Equal(r, x, term.Coefficient)
			}
		}
		c, found := ReducedVanishing(f, n, s)
		all := d.Vanishing()
		require.Equal(r, len(all) > 0, found)
		if found {
			require.Equal(r, all[0], c)
		}
	})
}

// Vanishing by definition: every canonical channel, summed pair by pair.
func TestVanishingByDefinition(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		n := rapid.IntRange(4, 8).Draw(r, "n")
		d := random(r, n)
		var want []Channel
		count := 0
		for c := Channel(0); c < 1<<n; c++ {
			if k := bits.OnesCount32(uint32(c)); k < 2 || k > n-2 || c.Canonical(n) != c {
				continue
			}
			count++
			sum := new(big.Rat)
			for _, a := range c.Legs() {
				for _, b := range c.Legs() {
					if a < b {
						sum.Add(sum, d.At(a, b))
					}
				}
			}
			require.Equal(r, sum.RatString(), d.Sum(c).RatString())
			require.Equal(r, sum.RatString(), d.Sum((1<<n-1)&^c).RatString()) // s_I = s_{I^c}
			if sum.Sign() == 0 {
				want = append(want, c)
			}
		}
		require.Equal(r, 1<<(n-1)-n-1, count)
		require.ElementsMatch(r, want, d.Vanishing())
	})
}

func TestBadPrime(t *testing.T) {
	f, err := prime.NewField(3)
	require.NoError(t, err)
	_, err = k5(t).Reduce(f)
	require.ErrorIs(t, err, prime.ErrBadPrime)
}
