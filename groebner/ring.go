package groebner

import (
	"fmt"
	"slices"
	"strconv"

	"eliminant/rational/prime"
)

// MaxVariables bounds the number of variables of a ring.
const MaxVariables = 15

// Ring is GF(p)[x_1, ..., x_n] with a monomial order, x_1 > ... > x_n. It is
// immutable and safe for concurrent use. Polynomials belong to the very Ring
// that made them: two rings with equal parts are different.
type Ring struct {
	field  *prime.Field
	order  Order
	names  []string
	layout layout
}

// NewRing returns the ring over f with the named variables, 1 to MaxVariables of
// them. A name is a letter followed by letters, digits and underscores. It fails,
// wrapping ErrRing, for other or repeated names and for unknown orders.
func NewRing(f *prime.Field, order Order, names ...string) (*Ring, error) {
	switch {
	case f == nil:
		return nil, fmt.Errorf("%w: no field", ErrRing)
	case !order.valid():
		return nil, fmt.Errorf("%w: %v", ErrRing, order)
	case len(names) == 0 || len(names) > MaxVariables:
		return nil, fmt.Errorf("%w: %d variables, 1 to %d are possible", ErrRing, len(names), MaxVariables)
	}
	for i, s := range names {
		if !isName(s) {
			return nil, fmt.Errorf("%w: %q is not a variable name", ErrRing, s)
		}
		if slices.Contains(names[:i], s) {
			return nil, fmt.Errorf("%w: variable %q twice", ErrRing, s)
		}
	}
	return &Ring{f, order, slices.Clone(names), newLayout(len(names), order)}, nil
}

func isName(s string) bool {
	for i, c := range []byte(s) {
		letter := 'a' <= c && c <= 'z' || 'A' <= c && c <= 'Z'
		if !letter && (i == 0 || c != '_' && (c < '0' || c > '9')) {
			return false
		}
	}
	return s != ""
}

// Field returns GF(p).
func (r *Ring) Field() *prime.Field { return r.field }

// Order returns the monomial order.
func (r *Ring) Order() Order { return r.order }

// Variables returns the number of variables.
func (r *Ring) Variables() int { return len(r.names) }

// Name returns the name of variable i, 0 <= i < Variables.
func (r *Ring) Name(i int) string { return r.names[i] }

// Index returns the number of the variable called name, and whether there is one.
func (r *Ring) Index(name string) (int, bool) {
	i := slices.Index(r.names, name)
	return i, i >= 0
}

// MaxDegree returns the largest total degree of a monomial: 2^31-1 for up to 3
// variables, 32767 for up to 7, 127 for 15.
func (r *Ring) MaxDegree() int { return r.layout.maxDegree() }

// String returns a description like "GF(101)[x, y] grevlex".
func (r *Ring) String() string {
	b := append([]byte(r.field.String()), '[')
	for i, s := range r.names {
		if i > 0 {
			b = append(b, ", "...)
		}
		b = append(b, s...)
	}
	return string(b) + "] " + r.order.String()
}

// Zero returns a new polynomial 0.
func (r *Ring) Zero() *Polynomial { return &Polynomial{ring: r} }

// One returns a new polynomial 1.
func (r *Ring) One() *Polynomial { return r.Constant(r.field.One()) }

// Constant returns a new constant polynomial.
func (r *Ring) Constant(c prime.Element) *Polynomial { return r.Term(c, Monomial{}) }

// Term returns the new polynomial c m.
func (r *Ring) Term(c prime.Element, m Monomial) *Polynomial {
	z := r.Zero()
	if c != 0 {
		z.terms = []term{{m, c}}
	}
	return z
}

// Variable returns the new polynomial x_i, 0 <= i < Variables.
func (r *Ring) Variable(i int) *Polynomial { return r.Term(r.field.One(), r.variable(i)) }

func (r *Ring) variable(i int) Monomial {
	return r.layout.places[i].put(1).or(r.layout.total.put(1))
}

// FromTerms returns the sum of c_i m_i; the lists must have equal lengths, and
// monomials may be repeated in any order. Panics if the lengths differ.
func (r *Ring) FromTerms(coefficients []prime.Element, monomials []Monomial) *Polynomial {
	if len(coefficients) != len(monomials) {
		panic(fmt.Sprintf("groebner: %d coefficients for %d monomials", len(coefficients), len(monomials)))
	}
	terms := make([]term, len(monomials))
	for i, m := range monomials {
		terms[i] = term{m, coefficients[i]}
	}
	return &Polynomial{ring: r, terms: r.collect(terms)}
}

// collect sorts terms by descending monomial and adds equal ones, in place.
func (r *Ring) collect(terms []term) []term {
	slices.SortFunc(terms, func(a, b term) int { return r.layout.compare(b.m, a.m) })
	out := terms[:0]
	for _, t := range terms {
		if k := len(out); k > 0 && out[k-1].m == t.m {
			out[k-1].c = r.field.Add(out[k-1].c, t.c)
			continue
		}
		if k := len(out); k > 0 && out[k-1].c == 0 {
			out = out[:k-1]
		}
		out = append(out, t)
	}
	if k := len(out); k > 0 && out[k-1].c == 0 {
		out = out[:k-1]
	}
	return out
}

func (r *Ring) appendMonomial(b []byte, m Monomial) []byte {
	first := true
	for i, p := range r.layout.places {
		e := r.layout.get(m, p)
		if e == 0 {
			continue
		}
		if !first {
			b = append(b, '*')
		}
		first = false
		b = append(b, r.names[i]...)
		if e > 1 {
			b = strconv.AppendInt(append(b, '^'), int64(e), 10)
		}
	}
	if first {
		b = append(b, '1')
	}
	return b
}

func exponentError(format string, args ...any) error {
	return fmt.Errorf("%w: %s", ErrExponent, fmt.Sprintf(format, args...))
}
