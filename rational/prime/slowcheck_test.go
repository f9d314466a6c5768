//go:build slowcheck

package prime

import (
	"slices"
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

// One word that is not canonical, p or more, in each operand of each kernel.
func TestSlowcheckPanicsOnNoncanonicalOperands(t *testing.T) {
	f := newField(12289)
	tr, err := NewTransform(f, 4)
	require.NoError(t, err)
	good := slices.Repeat([]Element{Element(f.p - 1)}, 4)
	at := []int32{3, 2, 1, 0}
	for _, word := range []Element{Element(f.p), Element(f.p + 1), 1<<64 - 1} {
		kernels := map[string]func(x, y []Element, c Element){
			"Mul":          func(x, y []Element, c Element) { f.Mul(f.Mul(x[2], y[2]), c) },
			"AddRow":       func(x, y []Element, _ Element) { f.AddRow(make([]Element, 4), x, y) },
			"SubRow":       func(x, y []Element, _ Element) { f.SubRow(make([]Element, 4), x, y) },
			"MulRow":       func(x, y []Element, _ Element) { f.MulRow(make([]Element, 4), x, y) },
			"ScaleRow":     func(x, _ []Element, c Element) { f.ScaleRow(make([]Element, 4), c, x) },
			"AddScaledRow": func(x, y []Element, c Element) { f.AddScaledRow(x, c, y) },
			"SubScaledRow": func(x, y []Element, c Element) { f.SubScaledRow(x, c, y) },
			"Dot":          func(x, y []Element, _ Element) { f.Dot(x, y) },
			"InvertRow":    func(x, _ []Element, _ Element) { f.InvertRow(make([]Element, 4), x) },
			"DotWide":      func(x, y []Element, _ Element) { f.DotWide(Wide{}, x, y) },
			"Gather":       func(x, y []Element, _ Element) { f.GatherDotWide(Wide{}, x, at, y) },
			"Forward":      func(x, _ []Element, _ Element) { tr.Forward(x) },
			"Inverse":      func(x, _ []Element, _ Element) { tr.Inverse(x) },
		}
		noY := []string{"ScaleRow", "InvertRow", "Forward", "Inverse"}
		withC := []string{"Mul", "ScaleRow", "AddScaledRow", "SubScaledRow"}
		for name, kernel := range kernels {
			bad := slices.Clone(good)
			bad[2] = word
			require.NotPanics(t, func() { kernel(slices.Clone(good), good, good[0]) }, name)
			require.Panics(t, func() { kernel(slices.Clone(bad), good, good[0]) }, name)
			if !slices.Contains(noY, name) {
				require.Panics(t, func() { kernel(slices.Clone(good), bad, good[0]) }, name)
			}
			if slices.Contains(withC, name) {
				require.Panics(t, func() { kernel(slices.Clone(good), good, word) }, name)
			}
		}
	}
	require.PanicsWithValue(t, "prime: entry 1 is 9, not in [0, 7): an element of another field, or not reduced",
		func() { newField(7).Mul(1, 9) })
}
