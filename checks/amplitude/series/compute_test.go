package series

import (
	"context"
	"flag"
	"fmt"
	"math/big"
	"math/bits"
	"testing"

	"eliminant/checks/amplitude/integrand"
	"eliminant/rational/prime"
	"eliminant/rational/scattering"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// value is ComputeSum for a problem that must work.
func value(t testing.TB, f *prime.Field, s []prime.Element, q *Problem, err error) prime.Element {
	t.Helper()
	require.NoError(t, err)
	x, err := ComputeSum(context.Background(), f, s, q, Options{Workers: 2})
	require.NoError(t, err)
	return x
}

func TestScalarsAgainstRecursion(t *testing.T) {
	for n := 4; n <= 8; n++ {
		source := prime.NewSource("scalars", fmt.Sprint(n))
		for i := range 6 {
			f := prime.TableField(i)
			s := randomInvariants(f, n, source)
			alpha := shuffled(n, source)
			beta := shuffled(n, source)
			if i%3 == 0 {
				beta = concat(alpha[1:], alpha[:1])
			}
			q, err := BiAdjoint(alpha, beta)
			require.Equal(t, doubleCurrent(t, f, s, alpha, beta), value(t, f, s, q, err), "m(%v|%v)", alpha, beta)
		}
	}
}

func TestGluonsAgainstRecursion(t *testing.T) {
	for n := 4; n <= 8; n++ {
		source := prime.NewSource("gluons", fmt.Sprint(n))
		for i, d := range []int{4, 6, 10, 0} {
			if n == 8 && d != 4 {
				continue
			}
			f := prime.TableField(i)
			p := gram(f, n, source)
			if d > 0 {
				p = vectors(f, n, d, source)
			}
			order := shuffled(n, source)
			q, err := YangMills(order, p.products())
			require.Equal(t, p.gluons(t, p.e, order), value(t, f, p.invariants(), q, err), "%d legs, %d dimensions", n, d)
		}
	}
}

func TestGravityAgainstDoubleCopy(t *testing.T) {
	for n := 4; n <= 7; n++ {
		source := prime.NewSource("gravity", fmt.Sprint(n))
		for i, d := range []int{4, 6, 0} {
			if n == 7 && d != 0 {
				continue
			}
			f := prime.TableField(i)
			p := gram(f, n, source)
			if d > 0 {
				p = vectors(f, n, d, source)
			}
			q, err := Gravity(n, p.products())
			require.Equal(t, p.doubleCopy(t), value(t, f, p.invariants(), q, err), "%d legs, %d dimensions", n, d)
			p.f = p.e
			same := p.products()
			same.FK, same.FF = nil, nil
			q, err = Gravity(n, same)
			require.Equal(t, p.doubleCopy(t), value(t, f, p.invariants(), q, err), "%d legs, %d dimensions", n, d)
		}
	}
}

// replace sets polarisation a to momentum b by all its products; a == b is a gauge
// transformation.
func replace(f *prime.Field, n int, ek, ee, s []prime.Element, a, b int) {
	half, _ := f.Inv(f.FromInt64(2))
	for c := range n {
		ek[a*n+c] = f.Mul(half, s[b*n+c])
	}
	for c := range n {
		x := ek[c*n+b]
		ee[a*n+c], ee[c*n+a] = x, x
	}
}

func TestGaugeInvariance(t *testing.T) {
	f := prime.TableField(0)
	for n := 4; n <= 7; n++ {
		p := gram(f, n, prime.NewSource("gauge", fmt.Sprint(n)))
		s := p.invariants()
		for a := range n {
			products := p.products()
			replace(f, n, products.EK, products.EE, s, a, a)
			q, err := YangMills(identity(n), products)
			require.Zero(t, value(t, f, s, q, err), "gluon %d of %d", a+1, n)
			if n < 7 {
				q, err = Gravity(n, products)
				require.Zero(t, value(t, f, s, q, err), "graviton %d of %d", a+1, n)
				products = p.products()
				replace(f, n, products.FK, products.FF, s, a, a)
				q, err = Gravity(n, products)
				require.Zero(t, value(t, f, s, q, err), "second set, graviton %d of %d", a+1, n)
			}
		}
	}
}

// Polarisations that are pure gauge at the start point: Pf'Psi vanishes to a high
// order on every solution there, so the elimination meets blocks without units,
// yet the value at the end is an ordinary one.
func TestPfaffiansThatVanishAtTheStart(t *testing.T) {
	f := prime.TableField(0)
	for n := 4; n <= 7; n++ {
		p := gram(f, n, prime.NewSource("start", fmt.Sprint(n)))
		begin, err := newStart(f, n)
		require.NoError(t, err)
		d := 3 * n
		half, _ := f.Inv(f.FromInt64(2))
		set := func(i, j int, x prime.Element) { p.metric[i*d+j], p.metric[j*d+i] = x, x }
		for a := range n - 1 { // e_a.k_b = s0_ab/2
			for b := range n {
				set(n+a, b, f.Mul(half, begin.s[a*n+b]))
			}
		}
		for a := range n - 1 { // e_a.e_b = e_b.k_a
			for b := range n {
				set(n+a, n+b, p.metric[(n+b)*d+a])
			}
		}
		q, err := YangMills(identity(n), p.products())
		s := p.invariants()
		require.Equal(t, p.gluons(t, p.e, identity(n)), value(t, f, s, q, err))

		r := integrand.NewRing(f, n)
		direction := make([]prime.Element, n*n)
		f.SubRow(direction, s, begin.s)
		l := newLifter(r, begin, direction)
		v := l.newSolution(direction)
		l.lift(permutation(n-3, 0), v)
		z := make([]prime.Element, n)
		integrand.ReducedPfaffian{Products: p.products()}.Evaluator(r, n).Evaluate(z, v)
		order := 0
		for order < n && z[order] == 0 {
			order++
		}
		t.Logf("%d legs: Pf'Psi = O(e^%d)", n, order)
		require.Positive(t, order)
	}
}

// Gluons with helicities in four dimensions, A = 2 A_YM: one or no leg of negative
// helicity gives zero, two give <ij>^4/(<12><23>..<n1>) (S. Parke, T. Taylor, Phys.
// Rev. Lett. 56 (1986) 2459), the others agree with the recursion.
func TestHelicities(t *testing.T) {
	for n := 4; n <= 7; n++ {
		source := prime.NewSource("helicities", fmt.Sprint(n))
		f := prime.TableField(n)
		spin := newSpinors(f, n, source)
		for negative := range 1 << n {
			if n == 7 && negative%5 != 3 {
				continue
			}
			p := spin.particles(negative)
			q, err := YangMills(identity(n), p.products())
			x := value(t, f, p.invariants(), q, err)
			x = f.Add(x, x)
			switch k := bits.OnesCount(uint(negative)); k {
			case 0, 1, n - 1, n:
				require.Zero(t, x, "%b", negative)
			case 2:
				i, j := bits.TrailingZeros(uint(negative)), bits.Len(uint(negative))-1
				y := f.Square(f.Square(spin.angle(spin.lambda[i], spin.lambda[j])))
				for a := range n {
					y, _ = f.Div(y, spin.angle(spin.lambda[a], spin.lambda[(a+1)%n]))
				}
				require.Equal(t, y, x, "%b", negative)
			default:
				y := p.gluons(t, p.e, identity(n))
				require.Equal(t, f.Add(y, y), x, "%b", negative)
			}
		}
	}
}

// Points at which channels vanish that are no poles of the amplitude: solutions
// coincide or are at infinity there.
func TestDegeneratePoints(t *testing.T) {
	f := prime.TableField(0)
	// all planar invariants 1: s_{i,i+1} = 1, s_{i,i+2} = -1, |m| a Catalan number
	for n, catalan := range map[int]int64{4: 2, 5: 5, 6: 14, 7: 42, 8: 132} {
		s := make([]prime.Element, n*n)
		for a := range n {
			for _, b := range []int{(a + 2) % n, (a + n - 2) % n} {
				s[a*n+b] = f.FromInt64(-1)
				if n == 4 { // both neighbours at distance 2 are the same leg
					s[a*n+b] = f.FromInt64(-2)
				}
			}
			for _, b := range []int{(a + 1) % n, (a + n - 1) % n} {
				s[a*n+b] = f.One()
			}
		}
		if n >= 6 {
			_, vanishing := scattering.ReducedVanishing(f, n, s)
			require.True(t, vanishing)
		}
		q, err := BiAdjoint(identity(n), identity(n))
		if n%2 == 0 {
			catalan = -catalan
		}
		require.Equal(t, f.FromInt64(catalan), value(t, f, s, q, err))
	}
	// planar poles X13, X14, X15, X24, .. = 2, 3, 5, ..; with X36 = 19 s_25 vanishes
	for _, x36 := range []int64{19, 29} {
		s := planarPoint(f, 6, 2, 3, 5, 7, 11, 13, 17, x36, 23)
		c, vanishing := scattering.ReducedVanishing(f, 6, s)
		require.True(t, vanishing)
		require.Contains(t, []string{"s25", "s136"}, c.String())
		for _, beta := range [][]int{identity(6), {1, 3, 2, 4, 5, 6}, {1, 2, 4, 3, 6, 5}} {
			q, err := BiAdjoint(identity(6), beta)
			require.Equal(t, doubleCurrent(t, f, s, identity(6), beta), value(t, f, s, q, err))
		}
	}
}

// planarPoint returns s_ab = X_{a,b+1} + X_{a+1,b} - X_ab - X_{a+1,b+1}.
func planarPoint(f *prime.Field, n int, poles ...int64) []prime.Element {
	X := make([]int64, n*n)
	k := 0
	for i := range n {
		for j := i + 2; j < n; j++ {
			if i != 0 || j != n-1 {
				X[i*n+j], X[j*n+i] = poles[k], poles[k]
				k++
			}
		}
	}
	s := make([]prime.Element, n*n)
	for a := range n {
		for b := range n {
			if a != b {
				c, d := (a+1)%n, (b+1)%n
				s[a*n+b] = f.FromInt64(X[a*n+d] + X[c*n+b] - X[a*n+b] - X[c*n+d])
			}
		}
	}
	return s
}

// Values of m(123456|beta) from F. Cachazo, S. He, E. Yuan, JHEP 07 (2014) 033,
// section 3 (method; source from memory) at planar poles 2, 3, 5, 7, 11, 13, 17, 31,
// 23 and of five legs at 2, 3, 5, 7, 11, recomputed by a program that shares
// nothing with this one.
func TestKnownValues(t *testing.T) {
	f := prime.TableField(0)
	five := planarPoint(f, 5, 2, 3, 5, 7, 11)
	six := planarPoint(f, 6, 2, 3, 5, 7, 11, 13, 17, 31, 23)
	for _, x := range []struct {
		s     []prime.Element
		beta  []int
		value *big.Rat
	}{
		{five, []int{1, 2, 3, 4, 5}, big.NewRat(74, 231)},
		{five, []int{1, 3, 2, 4, 5}, big.NewRat(-2, 21)},
		{five, []int{1, 4, 3, 2, 5}, big.NewRat(16, 385)},
		{five, []int{1, 3, 5, 2, 4}, new(big.Rat)}, // no common diagram
		{six, []int{1, 2, 3, 4, 5, 6}, big.NewRat(-1135577, 17333030)},
		{six, []int{1, 3, 2, 4, 5, 6}, big.NewRat(773, 49335)},
		{six, []int{1, 3, 5, 2, 4, 6}, new(big.Rat)},
	} {
		y, ok := f.FromRat(x.value)
		require.True(t, ok)
		q, err := BiAdjoint(identity(len(x.beta)), x.beta)
		require.Equal(t, y, value(t, f, x.s, q, err), "%v", x.beta)
	}
	// with nothing to sum up to and no coefficient to check the sum is 0
	q, err := BiAdjoint(identity(5), []int{1, 3, 5, 2, 4})
	require.NoError(t, err)
	require.Negative(t, q.NumeratorDegree)
	y, err := ComputeSum(t.Context(), f, five, q, Options{Extra: -1})
	require.NoError(t, err)
	require.Zero(t, y)
}

// Further integrands with their published signs: pions <PT (Pf'A)^2> = -s_13 and the
// special Galileon <(Pf'A)^4> = s_12 s_13 s_14 for four legs; one graviton among
// gluons, -sigma_n 2^-(n-2) times the sum over i of (f_q.x_i) A_YM(1..i,q,i+1..r).
func TestOtherIntegrands(t *testing.T) {
	f := prime.TableField(0)
	s := randomInvariants(f, 4, prime.NewSource("pions"))
	a := integrand.ReducedPfaffianA{}
	q, err := NewProblem(4, integrand.Product{integrand.ParkeTaylor{Ordering: identity(4)}, integrand.Power{Base: a, Exponent: 2}}, -1)
	require.Equal(t, s[2], value(t, f, s, q, err))
	q, err = NewProblem(4, integrand.Power{Base: a, Exponent: 4}, 0)
	require.Equal(t, f.Mul(s[1], f.Mul(s[2], s[3])), value(t, f, s, q, err))

	for n := 4; n <= 6; n++ {
		p := gram(f, n, prime.NewSource("graviton", fmt.Sprint(n)))
		products := p.products()
		var sum, x prime.Element
		for i := 1; i < n-1; i++ {
			x = f.Add(x, products.FK[(n-1)*n+i-1])
			order := concat(identity(n - 1)[:i], []int{n}, identity(n - 1)[i:])
			sum = f.Add(sum, f.Mul(x, p.gluons(t, p.e, order)))
		}
		trace := integrand.ParkeTaylor{Ordering: identity(n - 1)}
		graviton := integrand.SubsetPfaffian{Products: products.Second(), Legs: []int{n}}
		scale := int64(-1) << (n - 2)
		if n*(n+1)/2%2 == 1 {
			scale = -scale
		}
		q, err := NewProblem(n, integrand.Product{trace, graviton, integrand.ReducedPfaffian{Products: products}}, scale)
		require.Equal(t, sum, value(t, f, p.invariants(), q, err), "%d legs", n)
	}
}

var campaign = flag.Bool("campaign", false, "run the long campaign")

// Larger n: scalars and gluons against the recursions, n = 9, and in the campaign
// n = 10 and 11 (40320 solutions), gravity n = 8 by double copy.
func TestMoreLegs(t *testing.T) {
	last := 9
	if *campaign {
		last = 11
	}
	for n := 9; n <= last; n++ {
		f := prime.TableField(n)
		p := vectors(f, n, 4+n%3, prime.NewSource("more", fmt.Sprint(n)))
		q, err := BiAdjoint(identity(n), identity(n))
		require.Equal(t, doubleCurrent(t, f, p.invariants(), identity(n), identity(n)), value(t, f, p.invariants(), q, err))
		if n <= 10 {
			q, err = YangMills(identity(n), p.products())
			require.Equal(t, p.gluons(t, p.e, identity(n)), value(t, f, p.invariants(), q, err))
		}
	}
	if *campaign {
		f := prime.TableField(1)
		p := gram(f, 8, prime.NewSource("more gravity"))
		q, err := Gravity(8, p.products())
		require.Equal(t, p.doubleCopy(t), value(t, f, p.invariants(), q, err))
	}
}

// Any two orderings of up to six legs against the recursion.
func TestScalarsOfAnyOrderings(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(4, 6).Draw(t, "legs")
		f := prime.TableField(rapid.IntRange(0, 5).Draw(t, "prime"))
		alpha := rapid.Permutation(identity(n)).Draw(t, "alpha")
		beta := rapid.Permutation(identity(n)).Draw(t, "beta")
		s := randomInvariants(f, n, prime.NewSource(fmt.Sprint(rapid.Uint64().Draw(t, "seed"))))
		q, err := BiAdjoint(alpha, beta)
		require.NoError(t, err)
		x, err := ComputeSum(context.Background(), f, s, q, Options{})
		require.NoError(t, err)
		require.Equal(t, doubleCurrent(t, f, s, alpha, beta), x)
	})
}
