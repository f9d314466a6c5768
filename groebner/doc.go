// Package groebner is commutative algebra over GF(p): polynomial rings with the
// usual monomial orders, reduced Groebner bases by Buchberger's algorithm, an
// independent checker of them, normal forms, and the quotient algebra of a
// zero-dimensional ideal with its multiplication matrices, characteristic
// polynomials and traces
//
//	Tr(M_N M_D^{-1}) = sum over the zeros of N/D   (zeros counted with multiplicity).
//
// The phases are in files of their own: orders and packed monomials (order.go,
// monomial.go), polynomials (polynomial.go), critical pairs (pairs.go),
// reduction (bucket.go, reduce.go), the main loop (buchberger.go), bookkeeping of
// cofactors (cofactor.go), reduced form (interreduce.go), verification
// (check.go), quotient algebra (quotient.go, algebra.go), dense matrices
// (matrix.go, hessenberg.go).
//
// Elements follow math/big: the receiver is the destination and may be an
// operand. A Ring is immutable and safe for concurrent use; so are polynomials,
// bases and quotients as long as nobody writes to them.
package groebner
