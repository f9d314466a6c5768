//go:build slowcheck

package integrand

import (
	"testing"

	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
)

func TestSlowcheckSeesForeignElements(t *testing.T) {
	f, err := prime.NewField(10007)
	require.NoError(t, err)
	r := NewRing(f, 2)
	good, bad, z := []prime.Element{1, 2}, []prime.Element{1, 10007}, make([]prime.Element, 2)
	require.Panics(t, func() { r.Mul(z, good, bad) })
	require.Panics(t, func() { r.Square(z, bad) })
	require.Panics(t, func() { r.Dot(bad, good) })
	require.Panics(t, func() { r.addTwoScaled(z, 1, bad, 1, good) })
	require.NotPanics(t, func() { r.Mul(z, good, good) })
}
