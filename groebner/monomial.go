package groebner

// Monomial is a power product of the variables of a Ring, packed into two words.
// It has a meaning only together with its ring. The zero value is 1. Equal
// monomials are equal with ==, so a Monomial can be a map key.
type Monomial struct{ high, low uint64 }

// layout says how a ring packs monomials: variables+1 fields of equal width, one
// of them the total degree, in the order in which the monomial order looks at
// them, the first in the top bits of high. The top bit of a field (its guard) is
// zero in every monomial, so fields never borrow from or carry into each other.
type layout struct {
	width     uint
	places    []place // of the exponents, by variable
	total     place   // of the total degree
	guards    Monomial
	exponents Monomial // all bits of the exponent fields
	// flip has the bits of the fields that the order compares backwards: m ^ flip
	// is larger as an unsigned 128-bit integer exactly if m is larger
	flip Monomial
}

// place is the position of a field.
type place struct {
	shift  uint
	inHigh bool
}

func newLayout(variables int, order Order) layout {
	perWord := (variables + 2) / 2
	l := layout{width: min(uint(64/perWord), 32), places: make([]place, variables)}
	at := func(field int) place {
		return place{64 - l.width*uint(field%perWord+1), field < perWord}
	}
	switch order {
	case Lex:
		for i := range l.places {
			l.places[i] = at(i)
		}
		l.total = at(variables)
	case GrLex:
		l.total = at(0)
		for i := range l.places {
			l.places[i] = at(i + 1)
		}
	default:
		l.total = at(0)
		for i := range l.places {
			l.places[i] = at(variables - i)
		}
	}
	for _, p := range l.places {
		l.exponents = l.exponents.or(p.put(l.mask()))
		l.guards = l.guards.or(p.put(1 << (l.width - 1)))
	}
	l.guards = l.guards.or(l.total.put(1 << (l.width - 1)))
	if order == GrevLex {
		l.flip = l.exponents
	}
	return l
}

// mask has the bits of a field at shift 0.
func (l *layout) mask() uint64 { return 1<<l.width - 1 }

// maxDegree is the largest value of a field.
func (l *layout) maxDegree() int { return int(l.mask() >> 1) }

func (p place) put(v uint64) Monomial {
	if p.inHigh {
		return Monomial{high: v << p.shift}
	}
	return Monomial{low: v << p.shift}
}

func (l *layout) get(m Monomial, p place) int {
	w := m.low
	if p.inHigh {
		w = m.high
	}
	return int(w >> p.shift & l.mask())
}

func (m Monomial) or(o Monomial) Monomial { return Monomial{m.high | o.high, m.low | o.low} }

// plus multiplies monomials. The result is one only if overflows says no.
func (m Monomial) plus(o Monomial) Monomial { return Monomial{m.high + o.high, m.low + o.low} }

// minus divides m by a divisor of it.
func (m Monomial) minus(o Monomial) Monomial { return Monomial{m.high - o.high, m.low - o.low} }

// overflows reports whether the result of plus is too large. No exponent exceeds
// the total degree, so a field has overflowed only if that one has.
func (l *layout) overflows(m Monomial) bool {
	return m.high&l.guards.high|m.low&l.guards.low != 0
}

// less reports a < b.
func (l *layout) less(a, b Monomial) bool {
	if a.high != b.high {
		return a.high^l.flip.high < b.high^l.flip.high
	}
	return a.low^l.flip.low < b.low^l.flip.low
}

// compare returns -1, 0 or 1.
func (l *layout) compare(a, b Monomial) int {
	switch {
	case a == b:
		return 0
	case l.less(a, b):
		return -1
	}
	return 1
}

// divides reports whether a divides b: with the guards of b set, subtracting a
// leaves a guard standing exactly where the field of b is not smaller.
func (l *layout) divides(a, b Monomial) bool {
	g := l.guards
	return ((b.high|g.high)-a.high)&g.high == g.high && ((b.low|g.low)-a.low)&g.low == g.low
}

// coprime reports whether no variable divides both: adding 2^(width-1) - 1 to a
// field sets its guard exactly if the field is not zero.
func (l *layout) coprime(a, b Monomial) bool {
	g, e := l.guards, l.exponents
	unit := Monomial{g.high - g.high>>(l.width-1), g.low - g.low>>(l.width-1)}
	high := (a.high + unit.high) & (b.high + unit.high) & g.high & e.high
	low := (a.low + unit.low) & (b.low + unit.low) & g.low & e.low
	return high|low == 0
}

// lcm returns the least common multiple, to be tested with overflows.
func (l *layout) lcm(a, b Monomial) Monomial {
	m := Monomial{
		l.larger(a.high, b.high, l.guards.high) & l.exponents.high,
		l.larger(a.low, b.low, l.guards.low) & l.exponents.low,
	}
	var sum uint64
	for _, p := range l.places {
		sum += uint64(l.get(m, p))
	}
	return m.or(l.total.put(sum))
}

// larger returns the fieldwise maximum of two words.
func (l *layout) larger(a, b, guards uint64) uint64 {
	stands := ((a | guards) - b) & guards // the guards of the fields with a >= b
	keep := stands - stands>>(l.width-1)  // their other bits
	return a&keep | b&^keep
}

// variablePower returns the variable that m is a power of, and true; or false if
// m is 1 or has several variables.
func (l *layout) variablePower(m Monomial) (int, bool) {
	found := -1
	for i, p := range l.places {
		if l.get(m, p) != 0 {
			if found >= 0 {
				return 0, false
			}
			found = i
		}
	}
	return found, found >= 0
}

// Monomial returns the power product with the given exponents, one for each
// variable. It fails, wrapping ErrExponent, if their number is wrong, one is
// negative, or the total degree is above MaxDegree.
func (r *Ring) Monomial(exponents ...int) (Monomial, error) {
	if len(exponents) != len(r.names) {
		return Monomial{}, exponentError("%d exponents for %d variables", len(exponents), len(r.names))
	}
	var m Monomial
	var total, limit uint64 = 0, uint64(r.MaxDegree())
	for i, e := range exponents {
		if e < 0 || uint64(e) > limit {
			return Monomial{}, exponentError("%s^%d", r.names[i], e)
		}
		total += uint64(e)
		m = m.or(r.layout.places[i].put(uint64(e)))
	}
	if total > limit {
		return Monomial{}, exponentError("total degree %d above %d", total, limit)
	}
	return m.or(r.layout.total.put(total)), nil
}

// Exponents returns the exponents of m.
func (r *Ring) Exponents(m Monomial) []int {
	e := make([]int, len(r.names))
	for i, p := range r.layout.places {
		e[i] = r.layout.get(m, p)
	}
	return e
}

// Degree returns the total degree of m.
func (r *Ring) Degree(m Monomial) int { return r.layout.get(m, r.layout.total) }

// Compare returns -1, 0 or 1 as a is smaller than, equal to or larger than b in
// the order of the ring.
func (r *Ring) Compare(a, b Monomial) int { return r.layout.compare(a, b) }

// Divides reports whether a divides b.
func (r *Ring) Divides(a, b Monomial) bool { return r.layout.divides(a, b) }

// Product returns a b and true, or false if its degree is above MaxDegree.
func (r *Ring) Product(a, b Monomial) (Monomial, bool) {
	m := a.plus(b)
	if r.layout.overflows(m) {
		return Monomial{}, false
	}
	return m, true
}

// Quotient returns b/a and true, or false if a does not divide b.
func (r *Ring) Quotient(b, a Monomial) (Monomial, bool) {
	if !r.layout.divides(a, b) {
		return Monomial{}, false
	}
	return b.minus(a), true
}

// LCM returns the least common multiple and true, or false if its degree is above
// MaxDegree.
func (r *Ring) LCM(a, b Monomial) (Monomial, bool) {
	m := r.layout.lcm(a, b)
	if r.layout.overflows(m) {
		return Monomial{}, false
	}
	return m, true
}

// MonomialString returns m like "x^2*y", or "1".
func (r *Ring) MonomialString(m Monomial) string {
	return string(r.appendMonomial(nil, m))
}
