package series

import (
	"context"
	"fmt"
	"testing"

	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
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
	for n := 4; n <= 6; n++ {
		source := prime.NewSource("gravity", fmt.Sprint(n))
		for i, d := range []int{4, 6, 0} {
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
