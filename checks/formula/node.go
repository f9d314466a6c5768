// Package formula is the language formulas are written in: parsing with
// positions and recovery, printing, relabelling, and evaluation over any
// domain, from rational numbers to bounds on degrees and heights.
//
// Present: numbers, s(1,2,3) and s12, msq, + - * / ^, parentheses, cyclic{},
// perms(){}, the amplitudes BS and phi3, and integrands in the punctures. What
// is part of the language but not present yet is recognised and named.
package formula

import (
	"math/big"
	"slices"
	"strings"
)

// Span is where a node stands: line and column of its first character, in the
// file or text it was read from, and its length in bytes.
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
	legs(visit func(leg int))
	relabel(to func(leg int) int) Node
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

func mapAll(legs []int, to func(int) int) []int {
	out := make([]int, len(legs))
	for i, l := range legs {
		out[i] = to(l)
	}
	return out
}

func (n *Number) legs(func(int))             {}
func (n *Invariant) legs(v func(int))        { visitAll(n.Legs, v) }
func (n *Minus) legs(v func(int))            { n.X.legs(v) }
func (n *Binary) legs(v func(int))           { n.L.legs(v); n.R.legs(v) }
func (n *Power) legs(v func(int))            { n.Base.legs(v) }
func (n *Cyclic) legs(v func(int))           { n.Body.legs(v) }
func (n *Perms) legs(v func(int))            { visitAll(n.Legs, v); n.Body.legs(v) }
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

func (n *Number) relabel(func(int) int) Node { return n }

func (n *Invariant) relabel(to func(int) int) Node {
	return &Invariant{n.span, mapAll(n.Legs, to)}
}

func (n *MassSquared) relabel(to func(int) int) Node {
	if n.Leg == 0 {
		return n
	}
	return &MassSquared{n.span, to(n.Leg)}
}

func (n *Amplitude) relabel(to func(int) int) Node {
	z := &Amplitude{n.span, n.Theory, make([][]Leg, len(n.Orderings)), n.Braces}
	for i, o := range n.Orderings {
		z.Orderings[i] = slices.Clone(o)
		for j := range z.Orderings[i] {
			z.Orderings[i][j].Label = to(o[j].Label)
		}
	}
	return z
}

func (n *Minus) relabel(to func(int) int) Node { return &Minus{n.span, n.X.relabel(to)} }

func (n *Binary) relabel(to func(int) int) Node {
	return &Binary{n.span, n.Op, n.L.relabel(to), n.R.relabel(to)}
}

func (n *Power) relabel(to func(int) int) Node {
	return &Power{n.span, n.Base.relabel(to), n.Exponent}
}

// relabel names a divisor that vanishes; Evaluate expands cyclic sums before it
// relabels their leaves.
func (n *Cyclic) relabel(to func(int) int) Node { return &Cyclic{n.span, n.Body.relabel(to)} }

func (n *Perms) relabel(to func(int) int) Node {
	return &Perms{n.span, mapAll(n.Legs, to), n.Body.relabel(to)}
}

func (n *Puncture) relabel(to func(int) int) Node   { return &Puncture{n.span, to(n.Leg)} }
func (n *Difference) relabel(to func(int) int) Node { return &Difference{n.span, to(n.A), to(n.B)} }

func (n *ParkeTaylor) relabel(to func(int) int) Node {
	return &ParkeTaylor{n.span, mapAll(n.Ordering, to)}
}

func (n *ReducedDeterminant) relabel(func(int) int) Node { return n }
func (n *Jacobian) relabel(func(int) int) Node           { return n }

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
	f.Root.legs(func(l int) { n = max(n, l) })
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

// walk visits every node, parents first.
func walk(n Node, visit func(Node)) {
	visit(n)
	switch n := n.(type) {
	case *Minus:
		walk(n.X, visit)
	case *Binary:
		walk(n.L, visit)
		walk(n.R, visit)
	case *Power:
		walk(n.Base, visit)
	case *Cyclic:
		walk(n.Body, visit)
	case *Perms:
		walk(n.Body, visit)
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
