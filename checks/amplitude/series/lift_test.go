package series

import (
	"fmt"
	"testing"

	"eliminant/checks/amplitude/integrand"
	"eliminant/rational/prime"
	"eliminant/rational/scattering"

	"github.com/stretchr/testify/require"
)

// The start point by its definition: row sums vanish, no channel does, the nodes
// are the zeros of T_m(2z - 1) and solve the equations in any order.
func TestStartPoint(t *testing.T) {
	f := prime.TableField(3)
	for n := MinLegs; n <= MaxLegs; n++ {
		s := startInvariants(n)
		for a := range n {
			var sum int64
			for b := range n {
				sum += s[a*n+b]
				require.Equal(t, s[a*n+b], s[b*n+a])
			}
			require.Zero(t, sum)
			require.Zero(t, s[a*n+a])
		}
		p, err := newStart(f, n)
		require.NoError(t, err)
		_, vanishing := scattering.ReducedVanishing(f, n, p.s)
		require.False(t, vanishing)
		m := n - 3
		for _, z := range p.z[:m] {
			x := f.Sub(f.Add(z, z), f.One())
			previous, current := f.One(), x // T_0, T_1
			for range m - 1 {
				previous, current = current, f.Sub(f.Mul(f.Add(x, x), current), previous)
			}
			require.Zero(t, current)
		}
		order := permutation(m, 0)
		next(order)
		z := make([]prime.Element, n)
		z[1] = f.One()
		for i, k := range order {
			z[2+i] = p.z[k]
		}
		v := integrand.NewSolution(integrand.NewRing(f, 1), n, p.s, nil)
		require.True(t, v.Place(z))
		for a := 2; a <= n; a++ {
			residual := make([]prime.Element, 1)
			v.Residual(residual, a)
			require.Zero(t, residual[0], "%d legs, leg %d", n, a)
		}
	}
}

// Every continued solution solves the equations to every order, and its inverse
// differences are inverse differences.
func TestContinuedSolutions(t *testing.T) {
	const depth = 12
	for n := 4; n <= 7; n++ {
		source := prime.NewSource("continued", fmt.Sprint(n))
		f := prime.TableField(n)
		p, err := newStart(f, n)
		require.NoError(t, err)
		direction := randomInvariants(f, n, source)
		f.SubRow(direction, direction, p.s)
		r := integrand.NewRing(f, depth)
		l := newLifter(r, p, direction)
		v := l.newSolution(direction)
		row, zero, one := make([]prime.Element, depth), make([]prime.Element, depth), make([]prime.Element, depth)
		r.SetOne(one)
		order := permutation(p.free, 0)
		seen := map[string]bool{}
		for !seen[fmt.Sprint(order)] {
			seen[fmt.Sprint(order)] = true
			l.lift(order, v)
			for a := 2; a <= n; a++ {
				v.Residual(row, a)
				require.Equal(t, zero, row)
				for b := 2; b <= n; b++ {
					if a != b {
						r.Sub(row, v.Coordinate(a), v.Coordinate(b))
						r.Mul(row, row, v.Inverse(a, b))
						require.Equal(t, one, row, "legs %d and %d", a, b)
					}
				}
			}
			for i, k := range order {
				require.Equal(t, p.z[k], v.Coordinate(3 + i)[0])
			}
			next(order)
		}
		require.Len(t, seen, []int{1, 2, 6, 24}[n-4])
	}
}

func TestRanksOfPermutations(t *testing.T) {
	for m := 1; m <= 6; m++ {
		order := permutation(m, 0)
		total := 1
		for k := 2; k <= m; k++ {
			total *= k
		}
		for rank := range total {
			require.Equal(t, order, permutation(m, rank))
			next(order)
		}
	}
}
