package groebner

import "fmt"

// Order is an admissible monomial order; the first variable of a ring is the
// largest. The zero value is GrevLex. Definitions: D. Cox, J. Little, D. O'Shea,
// Ideals, Varieties, and Algorithms, section 2.2.
type Order int

const (
	// GrevLex compares total degrees, then the exponents from the last variable
	// back: the monomial with the smaller one is larger.
	GrevLex Order = iota
	// GrLex compares total degrees, then the exponents from the first variable on.
	GrLex
	// Lex compares the exponents from the first variable on.
	Lex
)

// String returns "grevlex", "grlex" or "lex".
func (o Order) String() string {
	switch o {
	case GrevLex:
		return "grevlex"
	case GrLex:
		return "grlex"
	case Lex:
		return "lex"
	}
	return fmt.Sprintf("Order(%d)", int(o))
}

// Graded reports whether the order compares total degrees first.
func (o Order) Graded() bool { return o == GrevLex || o == GrLex }

func (o Order) valid() bool { return o >= GrevLex && o <= Lex }
