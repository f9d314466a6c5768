package formula

import (
	"context"
	"fmt"
	"math/big"
	"slices"
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
		s := spine(n)
		count := leaves(s[len(s)-1].L, legs)
		for _, b := range s {
			count += leaves(b.R, legs)
		}
		return count
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

// node evaluates a node with its legs relabelled; to is nil or has all legs.
func (e *evaluator[T]) node(n Node, to relabelling) (T, error) {
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
		return e.sum(e.legs, n.Body, func(k int) relabelling { return to.after(rotation(e.legs, k)) })
	case *Perms:
		return e.perms(n, to)
	}
	if e.ctx.Err() != nil {
		var none T
		return none, context.Cause(e.ctx)
	}
	if to != nil {
		n = n.relabel(to)
	}
	return e.d.Leaf(n)
}

func (e *evaluator[T]) perms(n *Perms, to relabelling) (T, error) {
	if err := checkLegs(n, e.legs); err != nil {
		var none T
		return none, err
	}
	all := permutations(n.Legs)
	return e.sum(len(all), n.Body, func(k int) relabelling {
		m := rotation(e.legs, 0)
		for i, l := range n.Legs {
			m[l] = all[k][i]
		}
		return to.after(m)
	})
}

// sum adds the body under count relabellings.
func (e *evaluator[T]) sum(count int, body Node, terms func(k int) relabelling) (T, error) {
	var total T
	for k := range count {
		x, err := e.node(body, terms(k))
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

func (e *evaluator[T]) binary(n *Binary, to relabelling) (T, error) {
	s := spine(n)
	l, err := e.node(s[len(s)-1].L, to)
	if err != nil {
		return l, err
	}
	for _, b := range slices.Backward(s) {
		r, err := e.node(b.R, to)
		if err != nil {
			return r, err
		}
		switch b.Op {
		case '+':
			l = e.d.Add(l, r)
		case '-':
			l = e.d.Sub(l, r)
		case '*':
			l = e.d.Mul(l, r)
		default:
			if r, err = e.inverse(b.R, r, to); err != nil {
				return r, err
			}
			l = e.d.Mul(l, r)
		}
	}
	return l, nil
}

func (e *evaluator[T]) inverse(n Node, x T, to relabelling) (T, error) {
	inv, ok := e.d.Inverse(x)
	if !ok {
		if to != nil {
			n = n.relabel(to)
		}
		return inv, &DivisionByZero{At: n.Span(), Text: n.String()}
	}
	return inv, nil
}

// power multiplies by squaring; a negative exponent inverts the base first.
func (e *evaluator[T]) power(n *Power, to relabelling) (T, error) {
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
