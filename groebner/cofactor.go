package groebner

import (
	"context"

	"eliminant/rational/prime"
)

// summand is c m times element number label, or generator number label if
// generator is set.
type summand struct {
	step
	generator bool
}

// combine returns the cofactors, scaled, of the sum of the summands.
func (e *engine) combine(ctx context.Context, sum []summand, scale prime.Element) ([][]term, error) {
	f := e.ring.field
	out := make([][]term, len(e.generators))
	b := newBucket(e.ring)
	for j := range out {
		if err := poll(ctx, "cofactors"); err != nil {
			return nil, err
		}
		b.reset()
		for _, s := range sum {
			switch {
			case !s.generator:
				b.addMultiple(f.Mul(scale, s.c), s.m, e.elements[s.label].cofactors[j])
			case s.label == j:
				b.addMultiple(f.Mul(scale, s.c), s.m, []term{{Monomial{}, f.One()}})
			}
			if b.overflow {
				return nil, &LimitError{What: "exponent", Limit: e.ring.MaxDegree()}
			}
		}
		out[j] = b.drain(nil)
	}
	return out, nil
}

// pairCofactors returns the cofactors of scale times what the reduction of p by
// the steps left.
func (e *engine) pairCofactors(ctx context.Context, p pair, steps []step, scale prime.Element) ([][]term, error) {
	f := e.ring.field
	minus := f.Neg(f.One())
	var sum []summand
	if p.second < 0 {
		sum = append(sum, summand{step{p.first, f.One(), Monomial{}}, true})
	} else {
		sum = append(sum,
			summand{step{p.first, f.One(), p.lcm.minus(e.elements[p.first].lead())}, false},
			summand{step{p.second, minus, p.lcm.minus(e.elements[p.second].lead())}, false})
	}
	for _, s := range steps {
		sum = append(sum, summand{step{s.label, f.Neg(s.c), s.m}, false})
	}
	return e.combine(ctx, sum, scale)
}
