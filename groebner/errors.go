package groebner

import (
	"context"
	"errors"
	"fmt"
)

// Sentinels wrapped by the errors of this package.
var (
	// ErrRing: a ring cannot be built from these names or this order.
	ErrRing = errors.New("not a polynomial ring of this package")
	// ErrMixedRings: polynomials that do not belong to one ring.
	ErrMixedRings = errors.New("polynomials of different rings")
	// ErrNoGenerators: no nonzero polynomial was given.
	ErrNoGenerators = errors.New("no nonzero generator")
	// ErrExponent: an exponent or a total degree is negative or above
	// Ring.MaxDegree.
	ErrExponent = errors.New("exponent out of range")
)

// LimitError says that a computation stopped at a limit of its Options, or at
// the largest degree the ring can represent.
type LimitError struct {
	What    string // "basis elements", "degree", "exponent", "dimension"
	Limit   int
	Pending int // critical pairs not treated
	// Partial holds what a basis computation found, reduced among itself. Every
	// element lies in the ideal, and where cofactors were asked for they prove it.
	// It need not be a Groebner basis; for homogeneous generators that stopped at
	// a degree it is one up to that degree. Nil for other computations, and where
	// even the final reduction left the exponent range.
	Partial *Basis
}

func (e *LimitError) Error() string {
	s := fmt.Sprintf("groebner: limit of %s reached (%d)", e.What, e.Limit)
	if e.Partial != nil {
		s += fmt.Sprintf(": %d elements so far, %d critical pairs left", len(e.Partial.Elements), e.Pending)
	}
	return s
}

// NotZeroDimensionalError says that the quotient by an ideal has infinite
// dimension.
type NotZeroDimensionalError struct {
	// Variable has no power among the leading monomials.
	Variable string
}

func (e *NotZeroDimensionalError) Error() string {
	return fmt.Sprintf("groebner: ideal is not zero-dimensional: no power of %s is a leading monomial", e.Variable)
}

// ZeroDivisorError says that a divisor vanishes at some zero of the ideal, so it
// is not invertible in the quotient algebra.
type ZeroDivisorError struct {
	Rank, Dimension int // of the matrix of multiplication by the divisor
}

func (e *ZeroDivisorError) Error() string {
	return fmt.Sprintf("groebner: divisor is a zero divisor of the quotient algebra (rank %d of %d)", e.Rank, e.Dimension)
}

// poll returns nil, or the cause of the cancellation with the stage it met.
func poll(ctx context.Context, stage string) error {
	if ctx.Err() != nil {
		return fmt.Errorf("groebner: %s: %w", stage, context.Cause(ctx))
	}
	return nil
}
