package main

import (
	"fmt"

	"eliminant/checks/diag"
	"eliminant/checks/formula"
)

// maxPower bounds the size of a power: the exponents that apply to a leaf of the
// formula multiplied together, summed over the leaves under the power. Its exact
// value has some hundred bits for each unit.
const maxPower = 1 << 16

// powers refuses powers whose exact value would take too long, such as
// ((2^1000)^1000)^1000.
func powers(f *formula.Formula) diag.List {
	var errs diag.List
	legs, _ := f.Legs()
	size(f.Root, float64(max(legs, 1)), func(n *formula.Power, s float64) {
		if len(errs) == 0 {
			at := n.Span()
			errs = append(errs, diag.Diagnostic{Code: "too-large", File: at.File, Line: at.Line, Column: at.Column,
				Message: fmt.Sprintf("the power multiplies out to a product of %.3g factors, at most %d are evaluated", s, maxPower),
				Hint:    "use smaller exponents"})
		}
	})
	return errs
}

// size counts the leaves of a node, each as often as its exponents say. refuse
// is told of powers beyond maxPower, innermost first.
func size(n formula.Node, legs float64, refuse func(*formula.Power, float64)) float64 {
	switch n := n.(type) {
	case *formula.Number:
		return 1 + float64(n.Value.Num().BitLen()+n.Value.Denom().BitLen())/64
	case *formula.Minus:
		return size(n.X, legs, refuse)
	case *formula.Binary:
		return size(n.L, legs, refuse) + size(n.R, legs, refuse)
	case *formula.Power:
		s := size(n.Base, legs, refuse) * float64(max(n.Exponent, -n.Exponent))
		if s > maxPower {
			refuse(n, s)
		}
		return s
	case *formula.Cyclic:
		return legs * size(n.Body, legs, refuse)
	case *formula.Perms:
		s := size(n.Body, legs, refuse)
		for k := 2; k <= len(n.Legs); k++ {
			s *= float64(k)
		}
		return s
	}
	return 1
}
