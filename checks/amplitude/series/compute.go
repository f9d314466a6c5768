package series

import (
	"context"
	"fmt"

	"eliminant/checks/amplitude/integrand"
	"eliminant/rational/prime"

	"golang.org/x/sync/errgroup"
)

// Options are the knobs of ComputeSum; the zero value works.
type Options struct {
	// Workers is how many goroutines share the permutations; 0 means 1. The
	// result does not depend on it.
	Workers int
	// Extra is how many coefficients beyond the numerator's degree are computed
	// and checked to vanish; 0 means 2, negative none.
	Extra int

	// skip leaves out one permutation, counted from 1; for tests of the checks.
	skip int
}

// ComputeSum returns Scale <I> at the invariants s, n x n by leg with zero row
// sums, in GF(p).
//
// Errors: *PrimeError if p is not 1 mod 4(n-3); *PoleError and *StartError, which
// wrap prime.ErrBadPrime; *SelfCheckError if the extra coefficients do not vanish;
// *InvariantsError, *LegsError and those of the integrand for bad input;
// cancellation wraps context.Cause. Cost: (n-3)! solutions to depth
// NumeratorDegree + 1 + Extra.
func ComputeSum(ctx context.Context, f *prime.Field, s []prime.Element, q *Problem, o Options) (prime.Element, error) {
	if err := q.check(f, s); err != nil {
		return 0, err
	}
	start, err := newStart(f, q.Legs)
	if err != nil {
		return 0, err
	}
	poles, err := newLine(f, q, start.s, s)
	if err != nil {
		return 0, err
	}
	extra := o.Extra
	switch {
	case extra == 0:
		extra = 2
	case extra < 0:
		extra = 0
	}
	depth := max(q.NumeratorDegree, -1) + 1 + extra
	if depth == 0 { // the sum is 0 and nothing is to be checked
		return 0, nil
	}
	direction := make([]prime.Element, len(s))
	f.SubRow(direction, s, start.s)
	sum, err := sumSolutions(ctx, f, start, direction, q.Integrand, depth, o)
	if err != nil {
		return 0, err
	}
	return poles.value(sum, q)
}

// sumSolutions returns the sum of I/det Phi over all solutions on start.s + e s1
// as a row of depth coefficients. Every worker takes a range of permutations in
// lexicographic order; sums in GF(p) do not depend on how they are bracketed.
func sumSolutions(ctx context.Context, f *prime.Field, p *start, s1 []prime.Element, x integrand.Integrand, depth int, o Options) ([]prime.Element, error) {
	total := 1
	for k := 2; k <= p.free; k++ {
		total *= k
	}
	workers := min(max(o.Workers, 1), total)
	sums := make([][]prime.Element, workers)
	group, ctx := errgroup.WithContext(ctx)
	for w := range workers {
		from, to := w*total/workers, (w+1)*total/workers
		group.Go(func() (err error) {
			sums[w], err = sumRange(ctx, f, p, s1, x, depth, from, to, o.skip-1)
			return err
		})
	}
	if err := group.Wait(); err != nil {
		return nil, err
	}
	sum := sums[0]
	for _, y := range sums[1:] {
		f.AddRow(sum, sum, y)
	}
	return sum, nil
}

// sumRange sums the permutations with ranks from..to-1, but skip.
func sumRange(ctx context.Context, f *prime.Field, p *start, s1 []prime.Element, x integrand.Integrand, depth, from, to, skip int) ([]prime.Element, error) {
	r := integrand.NewRing(f, depth)
	l := newLifter(r, p, s1)
	v := l.newSolution(s1)
	e := x.Evaluator(r, p.legs)
	order := permutation(p.free, from)
	sum, value := make([]prime.Element, depth), make([]prime.Element, depth)
	determinant, inverse := make([]prime.Element, depth), make([]prime.Element, depth)
	for k := from; k < to; k++ {
		if ctx.Err() != nil {
			return nil, fmt.Errorf("sum over solutions: %w", context.Cause(ctx))
		}
		if k != skip {
			l.lift(order, v)
			e.Evaluate(value, v)
			v.ReducedDeterminant(determinant)
			if !r.Invert(inverse, determinant) {
				return nil, &StartError{f.Modulus(), "the Jacobian"}
			}
			r.MulAdd(sum, value, inverse)
		}
		next(order)
	}
	return sum, nil
}

// permutation returns the permutation of 0..m-1 of the given lexicographic rank.
func permutation(m, rank int) []int {
	digits := make([]int, m)
	for k := 1; k <= m; k++ {
		digits[m-k] = rank % k
		rank /= k
	}
	rest := make([]int, m)
	for i := range rest {
		rest[i] = i
	}
	order := make([]int, 0, m)
	for _, k := range digits {
		order = append(order, rest[k])
		rest = append(rest[:k], rest[k+1:]...)
	}
	return order
}

// next replaces x by its successor in lexicographic order; the last permutation
// is left as it is.
func next(x []int) {
	i := len(x) - 2
	for i >= 0 && x[i] > x[i+1] {
		i--
	}
	if i < 0 {
		return
	}
	j := len(x) - 1
	for x[j] < x[i] {
		j--
	}
	x[i], x[j] = x[j], x[i]
	for a, b := i+1, len(x)-1; a < b; a, b = a+1, b-1 {
		x[a], x[b] = x[b], x[a]
	}
}

// line is the invariants on the poles along s(e): s_I(0) + e (s_I(1) - s_I(0)).
type line struct {
	field     *prime.Field
	from, end []prime.Element // at e = 0 and e = 1, once per order
}

// newLine fails with a *PoleError if one of them vanishes at e = 1.
func newLine(f *prime.Field, q *Problem, s0, s []prime.Element) (*line, error) {
	l := &line{field: f}
	for _, p := range q.Poles {
		var x, y prime.Element
		legs := p.Channel.Legs()
		for i, a := range legs {
			for _, b := range legs[i+1:] {
				k := (a-1)*q.Legs + b - 1
				x, y = f.Add(x, s0[k]), f.Add(y, s[k])
			}
		}
		if y == 0 {
			return nil, &PoleError{p.Channel}
		}
		for range p.Order {
			l.from, l.end = append(l.from, x), append(l.end, y)
		}
	}
	return l, nil
}

// value multiplies the series by the poles, checks that no coefficient beyond the
// degree is left, and returns the value at e = 1.
func (l *line) value(sum []prime.Element, q *Problem) (prime.Element, error) {
	f := l.field
	denominator := f.One()
	for i, x := range l.from {
		slope := f.Sub(l.end[i], x)
		for t := len(sum) - 1; t > 0; t-- {
			sum[t] = f.Add(f.Mul(x, sum[t]), f.Mul(slope, sum[t-1]))
		}
		sum[0] = f.Mul(x, sum[0])
		denominator = f.Mul(denominator, l.end[i])
	}
	var numerator prime.Element
	for t, x := range sum {
		if t <= q.NumeratorDegree {
			numerator = f.Add(numerator, x)
		} else if x != 0 {
			return 0, &SelfCheckError{Order: t, Degree: q.NumeratorDegree}
		}
	}
	if q.Scale != 0 {
		numerator = f.Mul(numerator, f.FromInt64(q.Scale))
	}
	value, _ := f.Div(numerator, denominator)
	return value, nil
}
