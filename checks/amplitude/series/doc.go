// Package series sums an integrand over all solutions of the scattering equations
// by exact continuation from a start point whose solutions are known.
//
// On the line s(e) = s0 + e (s - s0) the (n-3)! solutions are power series over
// GF(p), found order by order from permutations of Chebyshev nodes. The sum of
// I/det Phi over them is a rational function of e whose poles are simple zeros of
// known invariants s_I(e) and whose numerator has a known degree, so finitely
// many coefficients determine its value at e = 1. Further coefficients must
// vanish, and are checked.
//
// The value in GF(p) is exact, not an approximation, for every prime
// p = 1 mod 4(n-3) for which ComputeSum returns no error. Only the invariants on
// the poles used must not vanish at the end point: there the sum may have
// coincident solutions, or solutions at infinity, on other channels.
package series
