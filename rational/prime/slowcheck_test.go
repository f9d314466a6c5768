//go:build slowcheck

package prime

import (
	"testing"

	"github.com/stretchr/testify/require"
)

func TestSlowcheckSeesForeignElements(t *testing.T) {
	f := newField(10007)
	bad := []Element{10007}
	good := []Element{1}
	z := make([]Element, 1)
	require.Panics(t, func() { f.AddRow(z, bad, good) })
	require.Panics(t, func() { f.ScaleRow(z, bad[0], good) })
	require.Panics(t, func() { f.Dot(good, bad) })
	require.NotPanics(t, func() { f.AddRow(z, good, good) })
}
