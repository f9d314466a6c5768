package amplitude

import (
	"context"

	"eliminant/checks/amplitude/series"
	"eliminant/rational/kinematics"
	"eliminant/rational/prime"
)

// seriesKernel continues all solutions from the solved start point (package
// series). It needs p = 1 mod 4(n-3), as every table prime is for n to 10; it
// does not mind vanishing invariants that are no poles of the amplitude.
func seriesKernel(r Request) (Kernel, error) {
	if r.Braces {
		return nil, &RequestError{Request: r, Reason: "the series route has no sum over all orderings", Hint: "name one ordering"}
	}
	n := r.Legs()
	alpha := r.Orderings[0]
	first := make([]int, n)
	second := relative(alpha, r.Orderings[len(r.Orderings)-1])
	for i := range first {
		first[i] = i + 1
		second[i]++
	}
	problem, err := series.BiAdjoint(first, second)
	if err != nil {
		return nil, err
	}
	return func(ctx context.Context, p *kinematics.Reduced) (prime.Element, error) {
		if err := checkLegs(r, p.N); err != nil {
			return 0, err
		}
		v, err := series.ComputeSum(ctx, p.Field, shifted(p, alpha), problem, series.Options{})
		if r.Theory == Cubic {
			v = cubicSign(p.Field, n, v)
		}
		return v, err
	}, nil
}
