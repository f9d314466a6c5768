package groebner

import "slices"

// Strategy is the rule by which the next critical pair is chosen. The result
// does not depend on it, the cost does. The zero value is Sugar.
type Strategy int

const (
	// Sugar takes the pair of least sugar degree, the degree its S-polynomial
	// would have if the computation had been homogenised (A. Giovini, T. Mora,
	// G. Niesi, L. Robbiano, C. Traverso, "One sugar cube, please", ISSAC 1991),
	// and the least common multiple among equals.
	Sugar Strategy = iota
	// Normal takes the pair with the least common multiple (B. Buchberger, 1985).
	Normal
)

// pair is something to reduce: the S-polynomial of two elements, or, if second is
// negative, generator number first.
type pair struct {
	lcm           Monomial
	sugar         int
	first, second int
	coprime       bool
}

// before orders pairs by the strategy; it is total, so the choice is determined.
func (s Strategy) before(l *layout, a, b *pair) bool {
	if s == Sugar && a.sugar != b.sugar {
		return a.sugar < b.sugar
	}
	if a.lcm != b.lcm {
		return l.less(a.lcm, b.lcm)
	}
	if a.second != b.second {
		return a.second < b.second
	}
	return a.first < b.first
}

// choose removes and returns the best pair whose degree is at most maxDegree
// (0: no bound), or false if there is none.
func (e *engine) choose() (pair, bool) {
	best := -1
	for i := range e.pairs {
		p := &e.pairs[i]
		if e.options.MaxDegree > 0 && e.ring.Degree(p.lcm) > e.options.MaxDegree {
			continue
		}
		if best < 0 || e.options.Strategy.before(&e.ring.layout, p, &e.pairs[best]) {
			best = i
		}
	}
	if best < 0 {
		return pair{}, false
	}
	p := e.pairs[best]
	last := len(e.pairs) - 1
	e.pairs[best] = e.pairs[last]
	e.pairs = e.pairs[:last]
	return p, true
}

// update puts a new element, number k, among the others: it adds the critical
// pairs with it that are needed and removes old ones that no longer are. R.
// Gebauer, H. M. Moeller, On an installation of Buchberger's algorithm, J.
// Symbolic Comput. 6 (1988) 275; in the form of T. Becker, V. Weispfenning,
// Groebner Bases, 1993, table 5.6 ("Update"). It fails with a LimitError if a
// least common multiple is too large for the ring.
func (e *engine) update(k int) error {
	l := &e.ring.layout
	lead := e.elements[k].lead()
	// old pairs: (i, j) follows from (i, k) and (j, k) if the lead divides its lcm
	// strictly in both
	e.pairs = slices.DeleteFunc(e.pairs, func(p pair) bool {
		drop := p.second >= 0 && l.divides(lead, p.lcm) &&
			l.lcm(e.elements[p.first].lead(), lead) != p.lcm &&
			l.lcm(e.elements[p.second].lead(), lead) != p.lcm
		if drop {
			e.statistics.ChainCriterion++
		}
		return drop
	})
	fresh := make([]pair, len(e.active.labels))
	for at, i := range e.active.labels {
		other := e.elements[i].lead()
		m := l.lcm(other, lead)
		if l.overflows(m) {
			return &LimitError{What: "exponent", Limit: e.ring.MaxDegree()}
		}
		sugar := max(e.elements[i].sugar-e.ring.Degree(other), e.elements[k].sugar-e.ring.Degree(lead)) + e.ring.Degree(m)
		fresh[at] = pair{m, sugar, i, k, l.coprime(other, lead)}
	}
	// new pairs: keep those whose lcm no other divides, one of each lcm, and none
	// of an lcm that a pair of coprime leads has
	for i := range fresh {
		p := &fresh[i]
		if p.coprime {
			e.statistics.ProductCriterion++
			continue
		}
		needed := true
		for j := range fresh {
			q := &fresh[j]
			if i != j && l.divides(q.lcm, p.lcm) && (q.lcm != p.lcm || q.coprime || j < i) {
				needed = false
				break
			}
		}
		if needed {
			e.pairs = append(e.pairs, *p)
		} else {
			e.statistics.ChainCriterion++
		}
	}
	e.active.removeMultiples(lead)
	e.active.add(e.elements[k].terms, k, e.elements[k].sugar)
	return nil
}
