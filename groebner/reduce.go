package groebner

import (
	"context"
	"fmt"

	"eliminant/rational/prime"
)

// divisors are the monic polynomials by which a reduction divides. Element i is
// leads[i] + tails[i]; labels[i] is the caller's number of it.
type divisors struct {
	ring   *Ring
	leads  []Monomial
	tails  [][]term
	labels []int
	sugars []int // of elements; used by the main loop only
}

// newDivisors returns the nonzero polynomials as divisors, made monic, labelled
// by their position.
func newDivisors(r *Ring, ps []*Polynomial) *divisors {
	d := &divisors{ring: r}
	for i, p := range ps {
		if p.IsZero() {
			continue
		}
		if p.terms[0].c != r.field.One() {
			p = new(Polynomial).Monic(p)
		}
		d.add(p.terms, i, 0)
	}
	return d
}

// add appends a monic polynomial.
func (d *divisors) add(terms []term, label, sugar int) {
	d.leads = append(d.leads, terms[0].m)
	d.tails = append(d.tails, terms[1:])
	d.labels = append(d.labels, label)
	d.sugars = append(d.sugars, sugar)
}

// removeMultiples drops the divisors whose leading monomial is a multiple of m.
func (d *divisors) removeMultiples(m Monomial) {
	k := 0
	for i, lead := range d.leads {
		if d.ring.layout.divides(m, lead) {
			continue
		}
		d.leads[k], d.tails[k], d.labels[k], d.sugars[k] = lead, d.tails[i], d.labels[i], d.sugars[i]
		k++
	}
	d.leads, d.tails, d.labels, d.sugars = d.leads[:k], d.tails[:k], d.labels[:k], d.sugars[:k]
}

// find returns the first divisor whose leading monomial divides m, or -1.
func (d *divisors) find(m Monomial) int {
	l := &d.ring.layout
	for i, lead := range d.leads {
		if l.divides(lead, m) {
			return i
		}
	}
	return -1
}

// step is one subtraction of a reduction: c m times the divisor called label.
type step struct {
	label int
	c     prime.Element
	m     Monomial
}

// reduction is the outcome of divisors.reduce.
type reduction struct {
	terms []term
	sugar int
	count int    // of steps
	steps []step // only if recorded
}

// reduce empties b and returns the normal form of its content by multivariate
// division (D. Cox, J. Little, D. O'Shea, Ideals, Varieties, and Algorithms,
// section 2.3): no term of it is a multiple of a leading monomial of d. sugar is
// that of the content. If record is set, content = terms + sum of the steps. It
// fails with a LimitError on overflow and on cancellation.
func (d *divisors) reduce(ctx context.Context, b *bucket, sugar int, record bool) (reduction, error) {
	out := reduction{sugar: sugar}
	f := d.ring.field
	for {
		if b.overflow {
			return out, &LimitError{What: "exponent", Limit: d.ring.MaxDegree()}
		}
		t, ok := b.pop()
		if !ok {
			return out, nil
		}
		i := d.find(t.m)
		if i < 0 {
			out.terms = append(out.terms, t)
			continue
		}
		if err := poll(ctx, "reduction"); err != nil {
			return out, err
		}
		out.count++
		m := t.m.minus(d.leads[i])
		out.sugar = max(out.sugar, d.sugars[i]+d.ring.Degree(m))
		if record {
			out.steps = append(out.steps, step{d.labels[i], t.c, m})
		}
		b.addMultiple(f.Neg(t.c), m, d.tails[i])
	}
}

// NormalForm returns the remainder of p on division by the elements of b: p
// minus it lies in their ideal, and none of its terms is a multiple of a leading
// monomial. It depends on p modulo the ideal only if b is a Groebner basis. It
// fails, wrapping ErrMixedRings, if p is of another ring; with a LimitError if a
// degree exceeds Ring.MaxDegree; and on cancellation.
func (b *Basis) NormalForm(ctx context.Context, p *Polynomial) (*Polynomial, error) {
	r, err := sameRing(append([]*Polynomial{p}, b.Elements...))
	if err != nil {
		return nil, err
	}
	content := newBucket(r)
	content.addMultiple(r.field.One(), Monomial{}, p.terms)
	out, err := newDivisors(r, b.Elements).reduce(ctx, content, 0, false)
	if err != nil {
		return nil, fmt.Errorf("groebner: normal form: %w", err)
	}
	return &Polynomial{ring: r, terms: out.terms}, nil
}
