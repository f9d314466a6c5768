package formula

import (
	"slices"
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

// text prints a node. Nodes write into one builder: sums of many terms are deep
// trees, and joining the strings of their parts would take quadratic time.
func text(n Node) string {
	var b strings.Builder
	n.write(&b)
	return b.String()
}

// writeGroup prints a node, in parentheses if it binds less than asked for.
func writeGroup(b *strings.Builder, n Node, least int) {
	if level(n) < least {
		b.WriteByte('(')
		n.write(b)
		b.WriteByte(')')
		return
	}
	n.write(b)
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

func (n *Minus) write(b *strings.Builder) {
	b.WriteByte('-')
	writeGroup(b, n.X, levelProduct)
}

// binds returns the levels that the sides of an operator need.
func (n *Binary) binds() (left, right int) {
	if n.Op == '*' || n.Op == '/' {
		return levelProduct, levelPower
	}
	return levelSum, levelProduct
}

func (n *Binary) write(b *strings.Builder) {
	s := spine(n)
	for _, x := range s {
		if left, _ := x.binds(); level(x.L) < left {
			b.WriteByte('(')
		}
	}
	s[len(s)-1].L.write(b)
	for _, x := range slices.Backward(s) {
		left, right := x.binds()
		if level(x.L) < left {
			b.WriteByte(')')
		}
		b.WriteByte(x.Op)
		writeGroup(b, x.R, right)
	}
}

func (n *Power) write(b *strings.Builder) {
	writeGroup(b, n.Base, levelPower+1)
	b.WriteByte('^')
	b.WriteString(strconv.Itoa(n.Exponent))
}

func (n *Cyclic) write(b *strings.Builder) {
	b.WriteString("cyclic{")
	n.Body.write(b)
	b.WriteByte('}')
}

func (n *Perms) write(b *strings.Builder) {
	b.WriteString("perms(" + commas(n.Legs) + "){")
	n.Body.write(b)
	b.WriteByte('}')
}

func (n *Minus) String() string              { return text(n) }
func (n *Binary) String() string             { return text(n) }
func (n *Power) String() string              { return text(n) }
func (n *Cyclic) String() string             { return text(n) }
func (n *Perms) String() string              { return text(n) }
func (n *Puncture) String() string           { return "z" + strconv.Itoa(n.Leg) }
func (n *Difference) String() string         { return "z(" + commas([]int{n.A, n.B}) + ")" }
func (n *ParkeTaylor) String() string        { return "PT(" + commas(n.Ordering) + ")" }
func (n *ReducedDeterminant) String() string { return "detPhi" }
func (n *Jacobian) String() string           { return "J" }

func (n *Number) write(b *strings.Builder)             { b.WriteString(n.String()) }
func (n *Invariant) write(b *strings.Builder)          { b.WriteString(n.String()) }
func (n *MassSquared) write(b *strings.Builder)        { b.WriteString(n.String()) }
func (n *Amplitude) write(b *strings.Builder)          { b.WriteString(n.String()) }
func (n *Puncture) write(b *strings.Builder)           { b.WriteString(n.String()) }
func (n *Difference) write(b *strings.Builder)         { b.WriteString(n.String()) }
func (n *ParkeTaylor) write(b *strings.Builder)        { b.WriteString(n.String()) }
func (n *ReducedDeterminant) write(b *strings.Builder) { b.WriteString(n.String()) }
func (n *Jacobian) write(b *strings.Builder)           { b.WriteString(n.String()) }
