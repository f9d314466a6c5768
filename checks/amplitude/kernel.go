package amplitude

import (
	"context"
	"fmt"

	"eliminant/rational/kinematics"
	"eliminant/rational/prime"
)

// Kernel evaluates one amplitude at a point modulo a prime. It returns an error
// wrapping prime.ErrBadPrime where the amplitude is not defined modulo this
// prime; callers go on with another prime, or another point.
type Kernel func(ctx context.Context, r *kinematics.Reduced) (prime.Element, error)

// NewKernel works out everything of an amplitude that does not depend on the
// point and returns its evaluation by the given route. The kernel may be
// called concurrently. Massive points need one mass common to all legs.
func NewKernel(r Request, route Route) (Kernel, error) {
	if err := r.Validate(); err != nil {
		return nil, err
	}
	switch route {
	case Recursion:
		return recursionKernel(r), nil
	case Diagrams:
		return diagramKernel(r), nil
	case Elimination:
		return eliminationKernel(r), nil
	case Series:
		return seriesKernel(r)
	case Groebner:
		return groebnerKernel(r), nil
	}
	return nil, fmt.Errorf("unknown route %q", string(route))
}

// shifted returns the matrix of the scattering equations in the labels of
// alpha: 2 k_a.k_b, plus m^2 between neighbours of alpha (L. Dolan, P. Goddard,
// Proof of the formula of Cachazo, He and Yuan for Yang-Mills tree amplitudes
// in arbitrary dimension, JHEP 05 (2014) 010, arXiv:1311.5200, for the massive
// cubic scalar). Its rows sum to zero, and over legs I that are neighbours in
// alpha it sums to P_I^2 - m^2.
func shifted(r *kinematics.Reduced, alpha []int) []prime.Element {
	f, n := r.Field, r.N
	t := make([]prime.Element, n*n)
	for i, a := range alpha {
		for j, b := range alpha {
			if i == j {
				continue
			}
			v := r.S[(a-1)*n+b-1]
			if r.M != nil {
				v = f.Sub(v, f.Add(r.M[a-1], r.M[b-1]))
				if d := i - j; d == 1 || d == -1 || d == n-1 || d == 1-n {
					v = f.Add(v, r.M[a-1])
				}
			}
			t[i*n+j] = v
		}
	}
	return t
}

// checkLegs refuses a point of another number of legs.
func checkLegs(r Request, n int) error {
	if r.Legs() != n {
		return &RequestError{Request: r, Reason: fmt.Sprintf("%d legs, the point has %d", r.Legs(), n),
			Hint: "an amplitude names every leg of the point once"}
	}
	return nil
}

// cubicSign is (-1)^(n-3), between phi3(a) and BS(a|a).
func cubicSign(f *prime.Field, n int, v prime.Element) prime.Element {
	if n%2 == 0 {
		return f.Neg(v)
	}
	return v
}

func recursionKernel(r Request) Kernel {
	n := r.Legs()
	if r.Braces {
		plan := newSubsetPlan(n)
		return func(_ context.Context, p *kinematics.Reduced) (prime.Element, error) {
			if err := checkLegs(r, p.N); err != nil {
				return 0, err
			}
			return plan.evaluate(p.Field, propagators(p))
		}
	}
	alpha := r.Orderings[0]
	plan := newWordPlan(alpha, r.Orderings[len(r.Orderings)-1])
	return func(_ context.Context, p *kinematics.Reduced) (prime.Element, error) {
		if err := checkLegs(r, p.N); err != nil {
			return 0, err
		}
		v, err := plan.evaluate(p.Field, shifted(p, alpha))
		if r.Theory == Cubic {
			v = cubicSign(p.Field, n, v)
		}
		return v, err
	}
}

// propagators returns P^2 - m^2 as a function of the mask of legs, from the
// Lorentz squares of the point: the denominators of Feynman diagrams.
func propagators(p *kinematics.Reduced) func(mask uint32) prime.Element {
	f, n := p.Field, p.N
	// P^2 = sum of s_ab - (|P|-2) sum of m_a^2
	sums := make(map[uint32]prime.Element)
	return func(mask uint32) prime.Element {
		if v, ok := sums[mask]; ok {
			return v
		}
		var v, m prime.Element
		legs := uint64(0)
		for a := range n {
			if mask>>a&1 == 0 {
				continue
			}
			legs++
			if p.M != nil {
				m = f.Add(m, p.M[a])
			}
			for b := a + 1; b < n; b++ {
				if mask>>b&1 == 1 {
					v = f.Add(v, p.S[a*n+b])
				}
			}
		}
		if p.M != nil {
			v = f.Sub(v, f.Mul(f.FromUint64(legs-2), m))
			v = f.Sub(v, p.M[0])
		}
		sums[mask] = v
		return v
	}
}

func diagramKernel(r Request) Kernel {
	var plan *diagramPlan
	if r.Braces {
		plan = newAllDiagrams(r.Legs())
	} else {
		plan = newCommonDiagrams(r.Orderings[0], r.Orderings[len(r.Orderings)-1])
	}
	return func(_ context.Context, p *kinematics.Reduced) (prime.Element, error) {
		if err := checkLegs(r, p.N); err != nil {
			return 0, err
		}
		v, err := plan.evaluate(p.Field, propagators(p))
		if r.Theory == Cubic && !r.Braces {
			v = cubicSign(p.Field, p.N, v)
		}
		return v, err
	}
}
