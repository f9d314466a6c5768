package scattering

import (
	"math/big"
	"testing"

	"eliminant/rational/kinematics"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// massive turns massless-looking data t into invariants of mass squared m whose
// shift along the ordering is t: s_ab = t_ab + 2m - m [neighbours].
func massive(t testing.TB, d *Data, ordering []int, m *big.Rat) *kinematics.Invariants {
	n := d.Legs()
	s := make([][]*big.Rat, n)
	masses := make([]*big.Rat, n)
	for a := range s {
		masses[a] = m
		s[a] = make([]*big.Rat, n)
		for b := range s[a] {
			s[a][b] = new(big.Rat)
			if a != b {
				s[a][b].Add(d.At(a+1, b+1), new(big.Rat).Add(m, m))
			}
		}
	}
	for i, a := range ordering {
		b := ordering[(i+1)%n]
		s[a-1][b-1].Sub(s[a-1][b-1], m)
		s[b-1][a-1].Sub(s[b-1][a-1], m)
	}
	v, err := kinematics.NewInvariants(s, masses)
	require.NoError(t, err)
	return v
}

// For every consecutive part U of the ordering the shifted s_U is k_U^2 - m^2, and
// the shift of the shifted is undone.
func TestShiftedPropagators(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		n := rapid.IntRange(4, 8).Draw(r, "n")
		d := random(r, n)
		legs := make([]int, n)
		for i := range legs {
			legs[i] = i + 1
		}
		ordering := rapid.Permutation(legs).Draw(r, "ordering")
		m := big.NewRat(rapid.Int64Range(1, 9).Draw(r, "m"), 4)
		v := massive(t, d, ordering, m)
		back, err := Shifted(v, ordering)
		require.NoError(r, err)
		for a := 1; a <= n; a++ {
			for b := 1; b <= n; b++ {
				require.Zero(r, d.At(a, b).Cmp(back.At(a, b)))
			}
		}
		from := rapid.IntRange(0, n-1).Draw(r, "from")
		size := rapid.IntRange(2, n-2).Draw(r, "size")
		var part []int
		for i := range size {
			part = append(part, ordering[(from+i)%n])
		}
		want := v.Lorentz(part...)
		want.Sub(want, m)
		require.Equal(r, want.RatString(), back.Sum(NewChannel(n, part...)).RatString())

		_, err = FromInvariants(v)
		require.ErrorIs(r, err, ErrMassive)
	})
}

func TestShiftedRefusals(t *testing.T) {
	rat := big.NewRat
	s := [][]*big.Rat{
		{rat(0, 1), rat(1, 1), rat(2, 1), rat(-3, 1)},
		{rat(1, 1), rat(0, 1), rat(-3, 1), rat(2, 1)},
		{rat(2, 1), rat(-3, 1), rat(0, 1), rat(1, 1)},
		{rat(-3, 1), rat(2, 1), rat(1, 1), rat(0, 1)},
	}
	v, err := kinematics.NewInvariants(s, nil)
	require.NoError(t, err)
	d, err := FromInvariants(v)
	require.NoError(t, err)
	for _, ordering := range [][]int{{1, 2, 3, 4}, {2, 1, 4, 3}} { // no masses, no dependence
		e, err := Shifted(v, ordering)
		require.NoError(t, err)
		require.Equal(t, d, e)
	}
	for _, ordering := range [][]int{nil, {1, 2, 3}, {1, 2, 3, 3}, {1, 2, 3, 5}, {1, 2, 3, 4, 1}} {
		_, err = Shifted(v, ordering)
		require.ErrorIs(t, err, ErrOrdering)
	}
	// row a sums to (n-4) m_a^2 + sum of m_b^2 = 1 for one massive leg of four
	s[0][1], s[1][0] = rat(2, 1), rat(2, 1)
	s[2][3], s[3][2] = rat(2, 1), rat(2, 1)
	v, err = kinematics.NewInvariants(s, []*big.Rat{rat(1, 1), rat(0, 1), rat(0, 1), rat(0, 1)})
	require.NoError(t, err)
	_, err = Shifted(v, []int{1, 2, 3, 4})
	require.ErrorIs(t, err, ErrMasses)
}
