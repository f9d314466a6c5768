package formula

import (
	"context"
	"fmt"
	"math/big"
)

// Domain is what a formula can be evaluated in: numbers, residues, bounds,
// weights. Leaf is given invariants, masses, amplitudes and the atoms of
// integrands, with the relabellings of cyclic{} and perms(){} already applied.
type Domain[T any] interface {
	Rational(*big.Rat) (T, error)
	Add(x, y T) T
	Sub(x, y T) T
	Mul(x, y T) T
	Neg(x T) T
	Inverse(x T) (inverse T, ok bool) // false: x vanishes
	Leaf(n Node) (T, error)
}

// DivisionByZero says that a divisor vanishes.
type DivisionByZero struct {
	At   Span
	Text string // the divisor, relabelled
}

func (e *DivisionByZero) Error() string { return "division by zero: " + e.Text + " vanishes" }

// SizeError says that a formula expands to more leaves than MaxTerms.
type SizeError struct{ Terms float64 }

func (e *SizeError) Error() string {
	return fmt.Sprintf("the formula expands to %.0f terms, at most %d are evaluated", e.Terms, MaxTerms)
}

// Evaluate computes the value of a formula of n legs in a domain. Errors:
// *DivisionByZero, *SizeError, those of the domain's Leaf and Rational, a
// cancelled context.
func Evaluate[T any](ctx context.Context, f *Formula, legs int, d Domain[T]) (T, error) {
	e := evaluator[T]{ctx: ctx, legs: legs, d: d}
	var none T
	if n := leaves(f.Root, legs); n > MaxTerms {
		return none, &SizeError{n}
	}
	return e.node(f.Root, nil)
}

// leaves counts the leaves after expansion.
func leaves(n Node, legs int) float64 {
	switch n := n.(type) {
	case *Minus:
		return leaves(n.X, legs)
	case *Binary:
		return leaves(n.L, legs) + leaves(n.R, legs)
	case *Power:
		return leaves(n.Base, legs)
	case *Cyclic:
		return float64(legs) * leaves(n.Body, legs)
	case *Perms:
		c := leaves(n.Body, legs)
		for k := 2; k <= len(n.Legs); k++ {
			c *= float64(k)
		}
		return c
	}
	return 1
}

type evaluator[T any] struct {
	ctx  context.Context
	legs int
	d    Domain[T]
}

// apply returns the leg that a relabelling sends a leg to; nil is the identity.
func apply(to []int, leg int) int {
	if to == nil || leg >= len(to) {
		return leg
	}
	return to[leg]
}

func (e *evaluator[T]) node(n Node, to []int) (T, error) {
	switch n := n.(type) {
	case *Number:
		return e.d.Rational(n.Value)
	case *Minus:
		x, err := e.node(n.X, to)
		if err != nil {
			return x, err
		}
		return e.d.Neg(x), nil
	case *Binary:
		return e.binary(n, to)
	case *Power:
		return e.power(n, to)
	case *Cyclic:
		return e.sum(e.legs, n.Body, func(k int) []int {
			shift := make([]int, e.legs+1)
			for l := 1; l <= e.legs; l++ {
				shift[l] = apply(to, (l-1+k)%e.legs+1)
			}
			return shift
		})
	case *Perms:
		all := permutations(n.Legs)
		return e.sum(len(all), n.Body, func(k int) []int {
			m := make([]int, MaxLegs+1)
			for l := range m {
				m[l] = apply(to, l)
			}
			for i, l := range n.Legs {
				m[l] = apply(to, all[k][i])
			}
			return m
		})
	}
	if err := e.ctx.Err(); err != nil {
		var none T
		return none, context.Cause(e.ctx)
	}
	if to != nil {
		n = n.relabel(func(l int) int { return apply(to, l) })
	}
	return e.d.Leaf(n)
}

// sum adds the body under count relabellings.
func (e *evaluator[T]) sum(count int, body Node, relabelling func(k int) []int) (T, error) {
	var total T
	for k := range count {
		x, err := e.node(body, relabelling(k))
		if err != nil {
			return x, err
		}
		if k == 0 {
			total = x
		} else {
			total = e.d.Add(total, x)
		}
	}
	return total, nil
}

func (e *evaluator[T]) binary(n *Binary, to []int) (T, error) {
	l, err := e.node(n.L, to)
	if err != nil {
		return l, err
	}
	r, err := e.node(n.R, to)
	if err != nil {
		return r, err
	}
	switch n.Op {
	case '+':
		return e.d.Add(l, r), nil
	case '-':
		return e.d.Sub(l, r), nil
	case '*':
		return e.d.Mul(l, r), nil
	}
	if r, err = e.inverse(n.R, r, to); err != nil {
		return r, err
	}
	return e.d.Mul(l, r), nil
}

func (e *evaluator[T]) inverse(n Node, x T, to []int) (T, error) {
	inv, ok := e.d.Inverse(x)
	if !ok {
		if to != nil {
			n = n.relabel(func(l int) int { return apply(to, l) })
		}
		return inv, &DivisionByZero{At: n.Span(), Text: n.String()}
	}
	return inv, nil
}

// power multiplies by squaring; a negative exponent inverts the base first.
func (e *evaluator[T]) power(n *Power, to []int) (T, error) {
	x, err := e.node(n.Base, to)
	if err != nil {
		return x, err
	}
	k := n.Exponent
	if k < 0 {
		if x, err = e.inverse(n.Base, x, to); err != nil {
			return x, err
		}
		k = -k
	}
	if k == 0 {
		return e.d.Rational(big.NewRat(1, 1))
	}
	var z T
	started := false
	for ; k > 0; k >>= 1 {
		if k&1 == 1 {
			if started {
				z = e.d.Mul(z, x)
			} else {
				z, started = x, true
			}
		}
		if k > 1 {
			x = e.d.Mul(x, x)
		}
	}
	return z, nil
}

// permutations lists the arrangements of legs in lexicographic order of places.
func permutations(legs []int) [][]int {
	if len(legs) == 0 {
		return [][]int{{}}
	}
	var out [][]int
	for i := range legs {
		rest := make([]int, 0, len(legs)-1)
		rest = append(append(rest, legs[:i]...), legs[i+1:]...)
		for _, p := range permutations(rest) {
			out = append(out, append([]int{legs[i]}, p...))
		}
	}
	return out
}
