package series

import (
	"fmt"

	"eliminant/rational/prime"
	"eliminant/rational/scattering"
)

// PrimeError says that a prime does not have the start solutions: it is not 1
// modulo 4(n-3).
type PrimeError struct {
	Modulus uint64
	Legs    int
}

func (e *PrimeError) Error() string {
	return fmt.Sprintf("the start solutions for %d legs need a prime = 1 mod %d, %d is not", e.Legs, 4*(e.Legs-3), e.Modulus)
}

// StartError says that a prime divides a quantity of the start point that is not
// zero over Q (a difference of nodes, the Jacobian or one of its minors). It
// wraps prime.ErrBadPrime. Only small primes are affected.
type StartError struct {
	Modulus uint64
	What    string
}

func (e *StartError) Error() string {
	return fmt.Sprintf("%s of the start point vanishes modulo %d", e.What, e.Modulus)
}

func (e *StartError) Unwrap() error { return prime.ErrBadPrime }

// PoleError says that an invariant on a pole of the sum vanishes modulo p at the
// point: the sum is undefined there, or the prime is unlucky. It wraps
// prime.ErrBadPrime.
type PoleError struct{ Channel scattering.Channel }

func (e *PoleError) Error() string {
	return fmt.Sprintf("the sum has a pole at %s = 0, which vanishes at the point", e.Channel)
}

func (e *PoleError) Unwrap() error { return prime.ErrBadPrime }

// SelfCheckError says that a coefficient of the numerator beyond its degree does
// not vanish: poles, degree or integrand are not what they are said to be.
type SelfCheckError struct {
	Order  int // of the first coefficient that should vanish
	Degree int // of the numerator, as stated
}

func (e *SelfCheckError) Error() string {
	return fmt.Sprintf("series self-check failed: the numerator has degree %d, but its coefficient of order %d is not 0", e.Degree, e.Order)
}

// InvariantsError says that the matrix of invariants is not symmetric with zero
// diagonal and zero row sums.
type InvariantsError struct {
	Leg    int // 0: the matrix has the wrong size
	Reason string
}

func (e *InvariantsError) Error() string {
	if e.Leg == 0 {
		return "invariants: " + e.Reason
	}
	return fmt.Sprintf("invariants: leg %d: %s", e.Leg, e.Reason)
}
