package formula

import (
	"context"
	"fmt"
	"math/big"
	"testing"

	"eliminant/rational/kinematics"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

func ExampleRelabel() {
	f, _ := Parse("s12/s(1,2,3)+BS(1,2,3,4,5|1,3,2,4,5)", ParseOptions{})
	n, _ := Relabel(f.Root, []int{2, 1, 3, 4, 5})
	fmt.Println(n)
	// Output: s(2,1)/s(2,1,3)+BS(2,1,3,4,5|2,3,1,4,5)
}

// relabelled moves the legs of a point, so that a formula has there the value of
// the relabelled formula at the point.
func relabelled(t require.TestingT, v *kinematics.Invariants, permutation []int) *kinematics.Invariants {
	n := v.Legs()
	s := make([][]*big.Rat, n)
	for a := range s {
		s[a] = make([]*big.Rat, n)
		for b := range s[a] {
			s[a][b] = v.S(permutation[a], permutation[b])
		}
	}
	w, err := kinematics.NewInvariants(s, nil)
	require.NoError(t, err)
	return w
}

func TestRelabelledFormulasHaveTheValueAtRelabelledPoints(t *testing.T) {
	p := point5(t)
	ordering := func(to []int) func(*Amplitude) (*big.Rat, error) {
		return func(a *Amplitude) (*big.Rat, error) {
			v := big.NewRat(int64(len(a.Theory)), 1)
			for _, o := range a.Orderings {
				for _, l := range o {
					v.Add(v.Mul(v, big.NewRat(7, 1)), big.NewRat(int64(to[l.Label-1]), 1))
				}
			}
			return v, nil
		}
	}
	identity := []int{1, 2, 3, 4, 5}
	rapid.Check(t, func(t *rapid.T) {
		f := &Formula{Root: drawNode(t, 3)}
		permutation := rapid.Permutation(identity).Draw(t, "permutation")
		n, err := Relabel(f.Root, permutation)
		require.NoError(t, err)
		var zero *DivisionByZero
		want, err := Evaluate(context.Background(), f, 5, NewRationalDomain(relabelled(t, p, permutation), ordering(permutation)))
		got, errGot := Evaluate(context.Background(), &Formula{Root: n}, 5, NewRationalDomain(p, ordering(identity)))
		if err != nil {
			require.ErrorAs(t, err, &zero)
			require.ErrorAs(t, errGot, &zero)
			return
		}
		require.NoError(t, errGot)
		require.Equal(t, want.RatString(), got.RatString(), "%s, %v, %s", f, permutation, n)
	})
}

func TestRelabelCyclicSums(t *testing.T) {
	f, _ := Parse("cyclic{s12 s24}", ParseOptions{})
	for _, c := range []struct {
		permutation []int
		want        string
	}{
		{[]int{2, 3, 4, 5, 1}, "cyclic{s(2,3)*s(3,5)}"},
		{[]int{5, 4, 3, 2, 1}, "cyclic{s(5,4)*s(4,2)}"},
		{[]int{1, 3, 5, 2, 4}, "cyclic{s(1,3)*s(3,2)}"},
		{[]int{2, 1, 3, 4, 5}, "s(2,1)*s(1,4)+s(1,3)*s(3,5)+s(3,4)*s(4,2)+s(4,5)*s(5,1)+s(5,2)*s(2,3)"},
	} {
		n, err := Relabel(f.Root, c.permutation)
		require.NoError(t, err)
		require.Equal(t, c.want, n.String())
	}
	for _, bad := range [][]int{{1, 1, 2}, {0, 1, 2}, {1, 2, 4}} {
		_, err := Relabel(f.Root, bad)
		require.Error(t, err)
	}
}

// The name of a divisor that vanishes in a term of perms(){}, with a cyclic sum
// in it: the very terms that were added.
func TestDivisorsWithCyclicSums(t *testing.T) {
	_, err := evaluate(t, "perms(1,2){1/(cyclic{s12}-cyclic{s12})}", ParseOptions{})
	var zero *DivisionByZero
	require.ErrorAs(t, err, &zero)
	require.Equal(t, "cyclic{s(1,2)}-cyclic{s(1,2)}", zero.Text)
	// sum of s_{a,a+1} is 28 in the order 1..5; exchanging 1 and 2 makes it
	// s12 + s13 + s34 + s45 + s25
	f, errs := Parse("s12+s13+s34+s45+s25", ParseOptions{})
	require.Empty(t, errs)
	other, err := Evaluate(context.Background(), f, 5, NewRationalDomain(point5(t), nil))
	require.NoError(t, err)
	_, err = evaluate(t, "perms(1,2){1/(cyclic{s12}-"+"("+other.RatString()+"))}", ParseOptions{})
	require.ErrorAs(t, err, &zero)
	require.Contains(t, zero.Text, "s(2,1)+s(1,3)+s(3,4)+s(4,5)+s(5,2)")
}
