package formula

import (
	"strconv"
	"strings"
)

// Precedence levels of the printer.
const (
	levelSum = iota
	levelProduct
	levelPower
)

func level(n Node) int {
	switch n := n.(type) {
	case *Minus:
		return levelSum
	case *Binary:
		if n.Op == '+' || n.Op == '-' {
			return levelSum
		}
		return levelProduct
	case *Number:
		if n.Value.Sign() < 0 {
			return levelSum
		}
		if !n.Value.IsInt() {
			return levelProduct
		}
	case *Power:
		return levelPower
	}
	return levelPower + 1
}

// group prints a node, in parentheses if it binds less than asked for.
func group(n Node, least int) string {
	if level(n) < least {
		return "(" + n.String() + ")"
	}
	return n.String()
}

func commas(legs []int) string {
	s := make([]string, len(legs))
	for i, l := range legs {
		s[i] = strconv.Itoa(l)
	}
	return strings.Join(s, ",")
}

func (n *Number) String() string    { return n.Value.RatString() }
func (n *Invariant) String() string { return "s(" + commas(n.Legs) + ")" }

func (n *MassSquared) String() string {
	if n.Leg == 0 {
		return "msq"
	}
	return "msq" + strconv.Itoa(n.Leg)
}

// String writes the sign of a helicity behind its leg.
func (l Leg) String() string {
	s := strconv.Itoa(l.Label)
	switch {
	case l.Helicity > 0:
		s += "+"
	case l.Helicity < 0:
		s += "-"
	}
	return s
}

func (n *Amplitude) String() string {
	parts := make([]string, len(n.Orderings))
	for i, o := range n.Orderings {
		legs := make([]string, len(o))
		for j, l := range o {
			legs[j] = l.String()
		}
		parts[i] = strings.Join(legs, ",")
	}
	if n.Braces {
		return n.Theory + "{" + strings.Join(parts, "|") + "}"
	}
	return n.Theory + "(" + strings.Join(parts, "|") + ")"
}

func (n *Minus) String() string { return "-" + group(n.X, levelProduct) }

func (n *Binary) String() string {
	left, right := levelSum, levelProduct
	if n.Op == '*' || n.Op == '/' {
		left, right = levelProduct, levelPower
	}
	return group(n.L, left) + string(n.Op) + group(n.R, right)
}

func (n *Power) String() string {
	return group(n.Base, levelPower+1) + "^" + strconv.Itoa(n.Exponent)
}

func (n *Cyclic) String() string { return "cyclic{" + n.Body.String() + "}" }
func (n *Perms) String() string {
	return "perms(" + commas(n.Legs) + "){" + n.Body.String() + "}"
}
func (n *Puncture) String() string           { return "z" + strconv.Itoa(n.Leg) }
func (n *Difference) String() string         { return "z(" + commas([]int{n.A, n.B}) + ")" }
func (n *ParkeTaylor) String() string        { return "PT(" + commas(n.Ordering) + ")" }
func (n *ReducedDeterminant) String() string { return "detPhi" }
func (n *Jacobian) String() string           { return "J" }
