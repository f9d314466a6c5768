package formula

import (
	"fmt"
	"slices"

	"eliminant/checks/diag"
)

// MaxPower bounds the size of a power: the exponents that apply to a leaf of
// the formula multiplied together, summed over the leaves under the power. Its
// exact value has some hundred bits for each unit.
const MaxPower = 1 << 16

// checkPowers refuses powers whose exact value would take too long, such as
// ((2^1000)^1000)^1000. legs stands for the number of legs, as far as it is
// known.
func checkPowers(root Node, legs int) diag.List {
	var errs diag.List
	powerSize(root, float64(max(legs, 1)), func(n *Power, s float64) {
		if len(errs) == 0 {
			at := n.Span()
			errs = append(errs, diag.Diagnostic{Code: "too-large", File: at.File, Line: at.Line, Column: at.Column,
				Message: fmt.Sprintf("the power multiplies out to a product of %.3g factors, at most %d are evaluated", s, MaxPower),
				Hint:    "use smaller exponents"})
		}
	})
	return errs
}

// powerSize counts the leaves of a node, each as often as its exponents say.
// refuse is told of powers beyond MaxPower, innermost first.
func powerSize(n Node, legs float64, refuse func(*Power, float64)) float64 {
	switch n := n.(type) {
	case *Number:
		return 1 + float64(n.Value.Num().BitLen()+n.Value.Denom().BitLen())/64
	case *Minus:
		return powerSize(n.X, legs, refuse)
	case *Binary:
		s := spine(n)
		size := powerSize(s[len(s)-1].L, legs, refuse)
		for _, b := range slices.Backward(s) {
			size += powerSize(b.R, legs, refuse)
		}
		return size
	case *Power:
		s := powerSize(n.Base, legs, refuse) * float64(max(n.Exponent, -n.Exponent))
		if s > MaxPower {
			refuse(n, s)
		}
		return s
	case *Cyclic:
		return legs * powerSize(n.Body, legs, refuse)
	case *Perms:
		s := powerSize(n.Body, legs, refuse)
		for k := 2; k <= len(n.Legs); k++ {
			s *= float64(k)
		}
		return s
	}
	return 1
}

// checkAmplitudes refuses amplitudes of different numbers of legs, and legs that
// the amplitudes do not have.
func checkAmplitudes(root Node, legs int) diag.List {
	var errs diag.List
	fail := func(n Node, code, hint, format string, a ...any) {
		at := n.Span()
		if len(errs) < maxErrors {
			errs = append(errs, diag.Diagnostic{Code: code, File: at.File, Line: at.Line, Column: at.Column, Message: fmt.Sprintf(format, a...), Hint: hint})
		}
	}
	walk(root, func(n Node) {
		if a, ok := n.(*Amplitude); ok {
			if l := len(a.Orderings[0]); l != legs {
				fail(n, "legs", "the amplitudes of a formula have the same legs", "an amplitude of %d legs beside one of %d", l, legs)
			}
			return
		}
		most := 0
		n.legs(func(l int) { most = max(most, l) })
		if most > legs {
			fail(n, "leg", "", "leg %d out of range: the amplitudes of the formula have %d legs", most, legs)
		}
	})
	return errs
}
