package groebner

import "eliminant/rational/prime"

// addMultiple appends x + c m y to dst, which must not overlap them, c != 0. The
// products m y are not tested for overflow.
func (r *Ring) addMultiple(dst, x, y []term, c prime.Element, m Monomial) []term {
	f, l := r.field, &r.layout
	i := 0
	for _, t := range y {
		ym := t.m.plus(m)
		yc := f.Mul(c, t.c)
		for i < len(x) && l.less(ym, x[i].m) {
			dst = append(dst, x[i])
			i++
		}
		if i < len(x) && x[i].m == ym {
			yc = f.Add(yc, x[i].c)
			i++
			if yc == 0 {
				continue
			}
		}
		dst = append(dst, term{ym, yc})
	}
	return append(dst, x[i:]...)
}

// bucket is a polynomial kept as a sum of pieces of geometrically growing
// length, so that adding a short multiple does not touch the long pieces:
// geometric buckets, T. Yan, The geobucket data structure for polynomials,
// J. Symbolic Comput. 25 (1998) 285.
type bucket struct {
	ring     *Ring
	levels   []level
	spare    []term
	overflow bool // some product had a degree above Ring.MaxDegree
}

// level is a piece: the terms from head on. Level i holds at most bucketBase << (bucketShift i) of
// them.
type level struct {
	terms []term
	head  int
}

const (
	bucketBase  = 8
	bucketShift = 2
)

func newBucket(r *Ring) *bucket { return &bucket{ring: r} }

// reset makes the bucket 0 and keeps its memory.
func (b *bucket) reset() {
	for i := range b.levels {
		b.levels[i].terms, b.levels[i].head = b.levels[i].terms[:0], 0
	}
	b.overflow = false
}

// addMultiple adds c m y, c != 0. It copies y.
func (b *bucket) addMultiple(c prime.Element, m Monomial, y []term) {
	if len(y) == 0 {
		return
	}
	if l := &b.ring.layout; b.ring.order.Graded() {
		b.overflow = b.overflow || l.overflows(y[0].m.plus(m))
	} else {
		var all Monomial
		for _, t := range y {
			all = all.or(t.m.plus(m))
		}
		b.overflow = b.overflow || l.overflows(all)
	}
	i := 0
	for len(y) > bucketBase<<(bucketShift*i) {
		i++
	}
	b.merge(i, y, c, m)
}

// merge adds c m y to level i and moves upwards what has become too long.
func (b *bucket) merge(i int, y []term, c prime.Element, m Monomial) {
	v := b.level(i)
	sum := b.ring.addMultiple(b.spare[:0], v.terms[v.head:], y, c, m)
	b.spare, v.terms, v.head = v.terms[:0], sum, 0
	for ; len(b.levels[i].terms) > bucketBase<<(bucketShift*i); i++ {
		upper := b.level(i + 1)
		lower := &b.levels[i]
		sum := b.ring.addMultiple(b.spare[:0], upper.terms[upper.head:], lower.terms, b.ring.field.One(), Monomial{})
		b.spare, upper.terms, upper.head = upper.terms[:0], sum, 0
		lower.terms = lower.terms[:0]
	}
}

// level returns level i, which it creates where needed.
func (b *bucket) level(i int) *level {
	for len(b.levels) <= i {
		b.levels = append(b.levels, level{})
	}
	return &b.levels[i]
}

// pop removes the leading term and returns it, or false if the bucket is 0.
func (b *bucket) pop() (term, bool) {
	l := &b.ring.layout
	for {
		best := -1
		var lead Monomial
		for i := range b.levels {
			v := &b.levels[i]
			if v.head == len(v.terms) {
				continue
			}
			if m := v.terms[v.head].m; best < 0 || l.less(lead, m) {
				best, lead = i, m
			}
		}
		if best < 0 {
			return term{}, false
		}
		var c prime.Element
		for i := best; i < len(b.levels); i++ {
			v := &b.levels[i]
			if v.head < len(v.terms) && v.terms[v.head].m == lead {
				c = b.ring.field.Add(c, v.terms[v.head].c)
				v.head++
			}
		}
		if c != 0 {
			return term{lead, c}, true
		}
	}
}

// drain appends all terms to dst and leaves the bucket 0.
func (b *bucket) drain(dst []term) []term {
	var sum []term
	for i := range b.levels {
		v := &b.levels[i]
		if v.head < len(v.terms) {
			sum = b.ring.addMultiple(nil, v.terms[v.head:], sum, b.ring.field.One(), Monomial{})
		}
		v.terms, v.head = v.terms[:0], 0
	}
	return append(dst, sum...)
}
