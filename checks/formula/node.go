// Package formula is the language formulas are written in: parsing with
// positions and recovery, printing, relabelling, and evaluation over any
// domain, from rational numbers to bounds on degrees and heights.
//
// Present: numbers, s(1,2,3) and s12, msq, + - * / ^, parentheses, cyclic{},
// perms(){}, the amplitudes BS and phi3, and integrands in the punctures. What
// is part of the language but not present yet is recognised and named.
//
// From the tightest on: ^, factors side by side, * and / from left to right, + and
// -. So a b/c is (a b)/c; a/b c would be read in two ways and is refused; a sign
// after a complete factor is binary. A function name is a call only if its bracket
// follows directly: s34 (x) is a product, and s (1,2), where s alone means nothing,
// is refused.
package formula

import (
	"math/big"
	"slices"
	"strings"
)

// Span is where a node stands: line and column of its first character, in the
// file or text it was read from, and its length in bytes. What comes from a
// definition has its span there.
type Span struct {
	File         string
	Line, Column int
	Length       int
}

// Node is a node of the syntax tree.
type Node interface {
	Span() Span
	// String prints the node; parsing it gives the same tree.
	String() string
	write(b *strings.Builder)
	legs(visit func(leg int)) // its own, not those of nodes below
	relabel(r relabelling) Node
}

type span struct{ at Span }

// Span returns where the node stands.
func (s span) Span() Span { return s.at }

// Number is a non-negative integer, or any rational number made by a program.
type Number struct {
	span
	Value *big.Rat
}

// Invariant is s(a,b,...), the Lorentz square (k_a + k_b + ...)^2.
type Invariant struct {
	span
	Legs []int
}

// MassSquared is msq (Leg 0), the common mass squared, or that of one leg.
type MassSquared struct {
	span
	Leg int
}

// Leg is a leg in an ordering; Helicity is 0 where none is given.
type Leg struct{ Label, Helicity int }

// Amplitude is a tree amplitude: BS(1,2,3,4|1,3,2,4), phi3(1,2,3,4),
// phi3{1,2,3,4} (Braces).
type Amplitude struct {
	span
	Theory    string
	Orderings [][]Leg
	Braces    bool
}

// Minus is -X.
type Minus struct {
	span
	X Node
}

// Binary is L op R, op one of + - * /. Juxtaposition is a product.
type Binary struct {
	span
	Op   byte
	L, R Node
}

// Power is Base^Exponent.
type Power struct {
	span
	Base     Node
	Exponent int
}

// Cyclic is the sum of Body over the n cyclic relabellings of all legs.
type Cyclic struct {
	span
	Body Node
}

// Perms is the sum of Body over all permutations of the listed legs.
type Perms struct {
	span
	Legs []int
	Body Node
}

// Puncture is z3, in the gauge z_1 = infinity, z_2 = 1, z_n = 0 (integrands).
type Puncture struct {
	span
	Leg int
}

// Difference is z(a,b) = z_a - z_b (integrands).
type Difference struct {
	span
	A, B int
}

// ParkeTaylor is PT(1,2,3,4), 1 over the product of z_a - z_b along the
// ordering (integrands).
type ParkeTaylor struct {
	span
	Ordering []int
}

// ReducedDeterminant is detPhi, the reduced determinant of the derivatives of
// the scattering equations (integrands).
type ReducedDeterminant struct{ span }

// Jacobian is J = det(dh_m/dz_a) (integrands).
type Jacobian struct{ span }

func visitAll(legs []int, visit func(int)) {
	for _, l := range legs {
		visit(l)
	}
}

func (n *Number) legs(func(int))             {}
func (n *Invariant) legs(v func(int))        { visitAll(n.Legs, v) }
func (n *Minus) legs(func(int))              {}
func (n *Binary) legs(func(int))             {}
func (n *Power) legs(func(int))              {}
func (n *Cyclic) legs(func(int))             {}
func (n *Perms) legs(v func(int))            { visitAll(n.Legs, v) }
func (n *Puncture) legs(v func(int))         { v(n.Leg) }
func (n *Difference) legs(v func(int))       { v(n.A); v(n.B) }
func (n *ParkeTaylor) legs(v func(int))      { visitAll(n.Ordering, v) }
func (n *ReducedDeterminant) legs(func(int)) {}
func (n *Jacobian) legs(func(int))           {}

func (n *MassSquared) legs(v func(int)) {
	if n.Leg > 0 {
		v(n.Leg)
	}
}

func (n *Amplitude) legs(v func(int)) {
	for _, o := range n.Orderings {
		for _, l := range o {
			v(l.Label)
		}
	}
}

// Formula is a parsed formula.
type Formula struct {
	Root Node
	Text string // as written
}

// String prints the formula; parsing it gives the same tree.
func (f *Formula) String() string { return f.Root.String() }

// Legs returns the number of legs of the amplitudes in the formula and true; if
// it has none, the largest leg it names and false.
func (f *Formula) Legs() (n int, tells bool) {
	if a := f.Amplitudes(); len(a) > 0 {
		return len(a[0].Orderings[0]), true
	}
	walk(f.Root, func(node Node) {
		node.legs(func(l int) { n = max(n, l) })
	})
	return n, false
}

// Amplitudes returns the amplitudes of the formula as written, in order.
func (f *Formula) Amplitudes() []*Amplitude {
	var out []*Amplitude
	walk(f.Root, func(n Node) {
		if a, ok := n.(*Amplitude); ok {
			out = append(out, a)
		}
	})
	return out
}

// spine returns n, n.L, n.L.L, ... as far as they are binary. A sum of many terms
// is a deep tree to the left; going down it in a loop keeps the stack small.
func spine(n *Binary) []*Binary {
	s := make([]*Binary, 0, 8)
	for ok := true; ok; n, ok = n.L.(*Binary) {
		s = append(s, n)
	}
	return s
}

// walk visits every node, parents first.
func walk(n Node, visit func(Node)) {
	switch n := n.(type) {
	case *Minus:
		visit(n)
		walk(n.X, visit)
	case *Binary:
		s := spine(n)
		for _, b := range s {
			visit(b)
		}
		walk(s[len(s)-1].L, visit)
		for _, b := range slices.Backward(s) {
			walk(b.R, visit)
		}
	case *Power:
		visit(n)
		walk(n.Base, visit)
	case *Cyclic:
		visit(n)
		walk(n.Body, visit)
	case *Perms:
		visit(n)
		walk(n.Body, visit)
	default:
		visit(n)
	}
}

// Bare tells whether an integrand names a puncture or the Jacobian by itself,
// which fixes the gauge.
func (f *Formula) Bare() bool {
	bare := false
	walk(f.Root, func(n Node) {
		switch n.(type) {
		case *Puncture, *Jacobian:
			bare = true
		}
	})
	return bare
}

// Walk visits every node of the formula, parents first.
func (f *Formula) Walk(visit func(Node)) { walk(f.Root, visit) }
