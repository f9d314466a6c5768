package formula

import (
	"fmt"
	"slices"
)

// relabelling takes leg l to r[l]; r[0] is not used, and legs behind the end keep
// their labels. nil is the identity.
type relabelling []int

func (r relabelling) leg(l int) int {
	if l >= len(r) {
		return l
	}
	return r[l]
}

func (r relabelling) all(legs []int) []int {
	out := make([]int, len(legs))
	for i, l := range legs {
		out[i] = r.leg(l)
	}
	return out
}

// after returns the relabelling "first s, then r".
func (r relabelling) after(s relabelling) relabelling {
	out := make(relabelling, len(s))
	for l := range s {
		out[l] = r.leg(s[l])
	}
	return out
}

// rotation takes leg l of n to l+k.
func rotation(n, k int) relabelling {
	r := make(relabelling, n+1)
	for l := 1; l <= n; l++ {
		r[l] = (l-1+k)%n + 1
	}
	return r
}

// keepsCycle tells whether the relabelling takes every rotation of its legs to a
// rotation: r(l+1) - r(l) is the same everywhere.
func (r relabelling) keepsCycle() bool {
	n := len(r) - 1
	for l := 2; l <= n; l++ {
		if (r[l%n+1]-r[l]-r[2]+r[1])%n != 0 {
			return false
		}
	}
	return true
}

// Relabel returns a node with the legs renamed, leg a to permutation[a-1], for
// a formula of len(permutation) legs: its value with the legs renamed. A sum over
// cyclic relabellings stays one if the permutation keeps the cyclic order (or
// turns it round) and is written out otherwise. Spans are kept.
//
// An error if permutation is no permutation of 1..n.
func Relabel(n Node, permutation []int) (Node, error) {
	sorted := slices.Sorted(slices.Values(permutation))
	for i, l := range sorted {
		if l != i+1 {
			return nil, fmt.Errorf("%v is no permutation of the legs 1..%d", permutation, len(permutation))
		}
	}
	return n.relabel(append(relabelling{0}, permutation...)), nil
}

func (n *Number) relabel(relabelling) Node             { return n }
func (n *ReducedDeterminant) relabel(relabelling) Node { return n }
func (n *Jacobian) relabel(relabelling) Node           { return n }
func (n *Invariant) relabel(r relabelling) Node        { return &Invariant{n.span, r.all(n.Legs)} }
func (n *Minus) relabel(r relabelling) Node            { return &Minus{n.span, n.X.relabel(r)} }
func (n *Puncture) relabel(r relabelling) Node         { return &Puncture{n.span, r.leg(n.Leg)} }
func (n *ParkeTaylor) relabel(r relabelling) Node      { return &ParkeTaylor{n.span, r.all(n.Ordering)} }

func (n *MassSquared) relabel(r relabelling) Node {
	if n.Leg == 0 {
		return n
	}
	return &MassSquared{n.span, r.leg(n.Leg)}
}

func (n *Difference) relabel(r relabelling) Node {
	return &Difference{n.span, r.leg(n.A), r.leg(n.B)}
}

func (n *Amplitude) relabel(r relabelling) Node {
	z := &Amplitude{n.span, n.Theory, make([][]Leg, len(n.Orderings)), n.Braces}
	for i, o := range n.Orderings {
		z.Orderings[i] = slices.Clone(o)
		for j := range o {
			z.Orderings[i][j].Label = r.leg(o[j].Label)
		}
	}
	return z
}

func (n *Binary) relabel(r relabelling) Node {
	s := spine(n)
	l := s[len(s)-1].L.relabel(r)
	for _, b := range slices.Backward(s) {
		l = &Binary{b.span, b.Op, l, b.R.relabel(r)}
	}
	return l
}

func (n *Power) relabel(r relabelling) Node {
	return &Power{n.span, n.Base.relabel(r), n.Exponent}
}

// relabel: the terms are r after every rotation, which are the rotations after r
// if r keeps the cycle.
func (n *Cyclic) relabel(r relabelling) Node {
	if r.keepsCycle() {
		return &Cyclic{n.span, n.Body.relabel(r)}
	}
	legs := len(r) - 1
	sum := n.Body.relabel(r)
	for k := 1; k < legs; k++ {
		sum = &Binary{n.span, '+', sum, n.Body.relabel(r.after(rotation(legs, k)))}
	}
	return sum
}

// relabel: r after the permutations of some legs are the permutations of their
// images after r.
func (n *Perms) relabel(r relabelling) Node {
	return &Perms{n.span, r.all(n.Legs), n.Body.relabel(r)}
}
