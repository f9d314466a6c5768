package groebner

import (
	"context"
	"slices"
)

// interreduce returns the active elements in reduced form, ascending. None of
// their leading monomials divides another, so going up it is enough to reduce
// the tail of each element by the finished ones: a divisor of a monomial is
// never larger than it.
func (e *engine) interreduce(ctx context.Context) (*Basis, error) {
	labels := slices.Clone(e.active.labels)
	slices.SortFunc(labels, func(a, b int) int {
		return e.ring.layout.compare(e.elements[a].lead(), e.elements[b].lead())
	})
	out := &Basis{}
	done := &divisors{ring: e.ring}
	for _, k := range labels {
		x := &e.elements[k]
		e.bucket.reset()
		e.bucket.addMultiple(e.ring.field.One(), Monomial{}, x.terms[1:])
		tail, err := done.reduce(ctx, e.bucket, 0, e.options.Cofactors)
		if err != nil {
			return nil, err
		}
		if e.options.Cofactors {
			sum := []summand{{step{k, e.ring.field.One(), Monomial{}}, false}}
			for _, s := range tail.steps {
				sum = append(sum, summand{step{s.label, e.ring.field.Neg(s.c), s.m}, false})
			}
			// the elements below have been replaced by their reduced forms
			if x.cofactors, err = e.combine(ctx, sum, e.ring.field.One()); err != nil {
				return nil, err
			}
			row := make([]*Polynomial, len(e.generators))
			for j, c := range x.cofactors {
				row[j] = &Polynomial{ring: e.ring, terms: c}
			}
			out.Cofactors = append(out.Cofactors, row)
		}
		x.terms = append([]term{x.terms[0]}, tail.terms...)
		done.add(x.terms, k, 0)
		out.Elements = append(out.Elements, &Polynomial{ring: e.ring, terms: x.terms})
	}
	out.Statistics = e.statistics
	return out, nil
}
