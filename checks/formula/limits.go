package formula

import (
	"fmt"

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
		return powerSize(n.L, legs, refuse) + powerSize(n.R, legs, refuse)
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
