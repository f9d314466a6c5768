package residue

import (
	"context"
	"fmt"
	"math/big"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// Residue sums are linear.
func TestLinearity(t *testing.T) {
	v := random(t, 6, nil)
	rapid.Check(t, func(t *rapid.T) {
		monomial := func(label string) string {
			text := "1"
			for l := 3; l <= 5; l++ {
				text += fmt.Sprintf(" z%d^%d", l, rapid.IntRange(-1, 2).Draw(t, label))
			}
			return text
		}
		x, y := monomial("x"), monomial("y")
		a, b := rapid.Int64Range(1, 9).Draw(t, "a"), rapid.Int64Range(1, 9).Draw(t, "b")
		both := sum(t, fmt.Sprintf("(%d %s + %d %s)/J", a, x, b, y), v)
		one := new(big.Rat).Mul(big.NewRat(a, 1), sum(t, "("+x+")/J", v))
		two := new(big.Rat).Mul(big.NewRat(b, 1), sum(t, "("+y+")/J", v))
		require.Zero(t, both.Cmp(one.Add(one, two)), "%s, %s", x, y)
		_, err := ComputeResidue(context.Background(), parse(t, "z3 + "+x+" z(1,2)"), v, Options{})
		require.Error(t, err, "z(1,2) has no value in the fixed gauge")
	})
}
