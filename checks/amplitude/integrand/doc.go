// Package integrand holds the building blocks whose sums over the solutions of
// the scattering equations are tree amplitudes: Parke-Taylor factors, the reduced
// determinant, reduced Pfaffians of Psi and A and Pfaffians over subsets of legs,
// at one solution, over GF(p)[e]/e^D.
//
// Everything is gauge-fixed: z_1 = infinity, z_2 = 1, z_n = 0, and a block of
// Moebius weight w in leg 1 stands for its limit times z_1^w. Legs are numbered
// from 1. With z_ab = z_a - z_b (Cachazo, He, Yuan, arXiv:1307.2199, 1309.0885,
// 1412.3479; here without factors 2 and sqrt 2 in Psi):
//
//	PT(a_1..a_r) = 1/(z_{a_1 a_2} ... z_{a_r a_1})
//	Psi = [[A, -C^T], [C, B]], A_ab = k_a.k_b/z_ab, B_ab = e_a.e_b/z_ab,
//	      C_ab = e_a.k_b/z_ab, C_aa = - sum over c != a of e_a.k_c/z_ac
//	Pf'Psi = (-1)^(i+j)/z_ij Pf(Psi without rows and columns i, j of the k block)
//
// Each block also states its Moebius weights, how fast it can grow where legs
// approach each other, and its degree in the invariants. From these follow the
// poles of a sum over solutions and the degree of its numerator along a line of
// invariants (Poles, NumeratorDegree).
package integrand
