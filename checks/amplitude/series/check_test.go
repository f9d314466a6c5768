package series

import (
	"context"
	"errors"
	"fmt"
	"testing"

	"eliminant/checks/amplitude/integrand"
	"eliminant/rational/prime"
	"eliminant/rational/scattering"

	"github.com/stretchr/testify/require"
)

// compute returns only the error.
func compute(f *prime.Field, s []prime.Element, q Problem, o Options) error {
	_, err := ComputeSum(context.Background(), f, s, &q, o)
	return err
}

// samples returns one problem of every kind for n legs, with its invariants.
func samples(t testing.TB, f *prime.Field, n int) (map[string]*Problem, *particles) {
	p := gram(f, n, prime.NewSource("samples", fmt.Sprint(n)))
	products := p.products()
	z := map[string]*Problem{}
	var err error
	z["BS"], err = BiAdjoint(identity(n), identity(n))
	require.NoError(t, err)
	z["YM"], err = YangMills(identity(n), products)
	require.NoError(t, err)
	z["GR"], err = Gravity(n, products)
	require.NoError(t, err)
	full, psi, a := integrand.ParkeTaylor{Ordering: identity(n)}, integrand.ReducedPfaffian{Products: products}, integrand.ReducedPfaffianA{}
	more := map[string]integrand.Factor{}
	for h := 1; h <= n-3; h++ {
		trace := integrand.ParkeTaylor{Ordering: identity(n - h)}
		subset := integrand.SubsetPfaffian{Products: products.Second(), Legs: identity(n)[n-h:]}
		more[fmt.Sprint("EYM", h)] = integrand.Product{trace, subset, psi}
		more[fmt.Sprint("YMS", h)] = integrand.Product{full, trace, subset}
	}
	if n%2 == 0 {
		more["NLSM"] = integrand.Product{full, integrand.Power{Base: a, Exponent: 2}}
		more["BI"] = integrand.Product{psi, integrand.Power{Base: a, Exponent: 2}}
		more["sGal"] = integrand.Power{Base: a, Exponent: 4}
	}
	for name, x := range more {
		z[name], err = NewProblem(n, x, 1)
		require.NoError(t, err)
	}
	return z, p
}

// More coefficients than asked for vanish too, for every theory, and on random
// lines the degree of the numerator is the proved one.
func TestCoefficientsBeyondTheDegreeVanish(t *testing.T) {
	f := prime.TableField(0)
	for n := 4; n <= 7; n++ {
		problems, p := samples(t, f, n)
		s := p.invariants()
		for name, q := range problems {
			require.NoError(t, compute(f, s, *q, Options{Extra: 8}), "%s, %d legs", name, n)
			low := *q
			low.NumeratorDegree--
			var e *SelfCheckError
			require.ErrorAs(t, compute(f, s, low, Options{}), &e, "%s, %d legs", name, n)
			require.Equal(t, q.NumeratorDegree, e.Order)
		}
	}
}

func TestMistakesAreSeen(t *testing.T) {
	f := prime.TableField(0)
	var selfCheck *SelfCheckError
	for n := 5; n <= 6; n++ {
		problems, p := samples(t, f, n)
		s := p.invariants()
		for _, name := range []string{"BS", "YM", "GR"} {
			q := *problems[name]
			require.NoError(t, compute(f, s, q, Options{}))
			for i := range q.Poles {
				missing := q
				missing.Poles = append(append([]Pole{}, q.Poles[:i]...), q.Poles[i+1:]...)
				require.ErrorAs(t, compute(f, s, missing, Options{}), &selfCheck, "%v, %s", q.Poles[i].Channel, name)
				missing.NumeratorDegree--
				require.ErrorAs(t, compute(f, s, missing, Options{}), &selfCheck, "%v, %s", q.Poles[i].Channel, name)
			}
			for k := 1; k <= []int{2, 6}[n-5]; k++ {
				require.ErrorAs(t, compute(f, s, q, Options{skip: k, Workers: 2}), &selfCheck, "permutation %d, %s", k, name)
			}
			require.NotEmpty(t, selfCheck.Error())
		}
	}
}

func TestWorkersDoNotMatter(t *testing.T) {
	f := prime.TableField(0)
	problems, p := samples(t, f, 7)
	s := p.invariants()
	for name, q := range problems {
		if name == "GR" {
			continue
		}
		one, err := ComputeSum(context.Background(), f, s, q, Options{})
		require.NoError(t, err)
		for _, workers := range []int{2, 3, 7, 100} {
			x, err := ComputeSum(context.Background(), f, s, q, Options{Workers: workers, Extra: -1})
			require.NoError(t, err)
			require.Equal(t, one, x, "%s, %d workers", name, workers)
		}
	}
}

func TestCancellation(t *testing.T) {
	f := prime.TableField(0)
	problems, p := samples(t, f, 6)
	reason := errors.New("enough")
	ctx, cancel := context.WithCancelCause(context.Background())
	cancel(reason)
	_, err := ComputeSum(ctx, f, p.invariants(), problems["YM"], Options{Workers: 2})
	require.ErrorIs(t, err, reason)
}

// A prime without the nodes is refused; a small prime gives the right value or
// says that it is a bad one.
func TestPrimes(t *testing.T) {
	var e *PrimeError
	for n := 4; n <= 7; n++ {
		step := uint64(4 * (n - 3))
		worked, refused := 0, 0
		q, err := BiAdjoint(identity(n), identity(n))
		require.NoError(t, err)
		source := prime.NewSource("primes", fmt.Sprint(n))
		for p := uint64(5); p < 4000; p += 2 {
			if !prime.IsPrime(p) {
				continue
			}
			f, err := prime.NewField(p)
			require.NoError(t, err)
			s := randomInvariants(f, n, source)
			if _, vanishing := scattering.ReducedVanishing(f, n, s); vanishing {
				continue
			}
			x, err := ComputeSum(context.Background(), f, s, q, Options{})
			switch {
			case p%step != 1:
				require.ErrorAs(t, err, &e)
				require.NotErrorIs(t, err, prime.ErrBadPrime)
				require.Contains(t, e.Error(), fmt.Sprint(step))
			case err != nil:
				require.ErrorIs(t, err, prime.ErrBadPrime, "p = %d", p)
				require.NotEmpty(t, err.Error())
				refused++
			default:
				require.Equal(t, doubleCurrent(t, f, s, identity(n), identity(n)), x, "n = %d, p = %d", n, p)
				worked++
			}
		}
		require.NotZero(t, worked)
		t.Logf("n = %d: %d small primes worked, %d were refused", n, worked, refused)
	}
}

func TestPoleAtTheEnd(t *testing.T) {
	f := prime.TableField(0)
	n := 6
	problems, p := samples(t, f, n)
	s := p.invariants()
	// make s_123 vanish by moving s_12 and its neighbours in rows 1, 2
	move := sumOver(f, n, s, []int{1, 2, 3})
	add := func(a, b int, x prime.Element) {
		s[(a-1)*n+b-1], s[(b-1)*n+a-1] = f.Add(s[(a-1)*n+b-1], x), f.Add(s[(b-1)*n+a-1], x)
	}
	add(1, 2, f.Neg(move))
	add(2, 5, move)
	add(5, 4, f.Neg(move))
	add(4, 1, move)
	require.Zero(t, sumOver(f, n, s, []int{1, 2, 3}))
	var e *PoleError
	require.ErrorAs(t, compute(f, s, *problems["BS"], Options{}), &e)
	require.Equal(t, "s123", e.Channel.String())
	require.Contains(t, e.Error(), "s123")
	require.ErrorIs(t, e, prime.ErrBadPrime)
	// orderings without that pole go on
	alpha := []int{1, 2, 4, 3, 5, 6}
	q, err := BiAdjoint(alpha, alpha)
	require.Equal(t, doubleCurrent(t, f, s, alpha, alpha), value(t, f, s, q, err))
}

func TestBadInput(t *testing.T) {
	f := prime.TableField(0)
	problems, p := samples(t, f, 5)
	s := p.invariants()
	var legs *LegsError
	_, err := BiAdjoint(identity(3), identity(3))
	require.ErrorAs(t, err, &legs)
	_, err = YangMills(identity(14), nil)
	require.ErrorAs(t, err, &legs)
	_, err = Gravity(2, p.products())
	require.ErrorAs(t, err, &legs)
	require.Contains(t, legs.Error(), "13")
	_, err = NewProblem(20, integrand.Product{}, 1)
	require.ErrorAs(t, err, &legs)
	require.ErrorAs(t, compute(f, s, Problem{Legs: 2}, Options{}), &legs)

	var leg *integrand.LegError
	_, err = BiAdjoint([]int{1, 2, 3, 3, 5}, identity(5))
	require.ErrorAs(t, err, &leg)
	require.Equal(t, 3, leg.Leg)
	_, err = YangMills([]int{1, 2, 3, 4, 6}, p.products())
	require.ErrorAs(t, err, &leg)
	_, err = BiAdjoint(identity(5), identity(6))
	require.Error(t, err)
	var weight *integrand.WeightError
	_, err = NewProblem(5, integrand.ParkeTaylor{Ordering: identity(5)}, 1)
	require.ErrorAs(t, err, &weight)

	var products *integrand.ProductsError
	_, err = Gravity(5, nil)
	require.ErrorAs(t, err, &products)
	q, err := YangMills(identity(5), nil)
	require.NoError(t, err)
	require.ErrorAs(t, compute(f, s, *q, Options{}), &products)
	other := gram(f, 5, prime.NewSource("another point"))
	require.ErrorAs(t, compute(f, other.invariants(), *problems["YM"], Options{}), &products)

	var invariants *InvariantsError
	bad := func(set func(s []prime.Element)) {
		t.Helper()
		z := append([]prime.Element{}, s...)
		set(z)
		require.ErrorAs(t, compute(f, z, *problems["BS"], Options{}), &invariants)
		require.NotEmpty(t, invariants.Error())
	}
	bad(func(s []prime.Element) { s[1] = f.Add(s[1], f.One()) })
	bad(func(s []prime.Element) { s[1], s[5] = f.Add(s[1], f.One()), f.Add(s[5], f.One()) })
	bad(func(s []prime.Element) { s[0], s[1], s[5] = f.One(), f.Sub(s[1], f.One()), f.Sub(s[5], f.One()) })
	require.ErrorAs(t, compute(f, s[1:], *problems["BS"], Options{}), &invariants)

	wrong := *problems["BS"]
	wrong.Poles = append([]Pole{{Channel: 1, Order: 1}}, wrong.Poles...)
	require.Error(t, compute(f, s, wrong, Options{}))
}
