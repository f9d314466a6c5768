// Package amplitude holds the theories and the routes by which their tree
// amplitudes are computed.
//
// A route is one function, (point mod p) -> vector over GF(p): a Kernel.
// Everything else (exact values, bounds, identity rounds, comparisons) is built
// on kernels and works for every theory and route alike. Present theories:
//
//   - BS(a|b), the bi-adjoint scalar with two orderings, massless or with one
//     common mass, propagators 1/(P^2 - m^2), invariants shifted along a;
//   - phi3(a), the planar cubic diagrams of one ordering, sign +, equal to
//     (-1)^(n-3) BS(a|a);
//   - phi3{1,...,n}, all (2n-5)!! cubic diagrams.
//
// Routes: recursion (off-shell currents), diagrams (enumeration from compatible
// poles), elimination (trace in companion form through the resultant pencil),
// series (continuation of all solutions from a solved start point), groebner
// (trace in companion form through a Groebner basis). Recursion and diagrams
// share no code, nor do the other three beyond the scattering data they are
// handed.
package amplitude

import (
	"fmt"
	"strconv"
	"strings"
)

// Theory names a theory as formulas write it.
type Theory string

// The theories present.
const (
	BiAdjoint Theory = "BS"
	Cubic     Theory = "phi3"
)

// Route names a way of computing amplitudes.
type Route string

// The routes present.
const (
	Elimination Route = "elimination"
	Series      Route = "series"
	Groebner    Route = "groebner"
	Recursion   Route = "recursion"
	Diagrams    Route = "diagrams"
)

// Routes lists every route, the fastest first.
func Routes() []Route { return []Route{Recursion, Diagrams, Elimination, Series, Groebner} }

// Request names one amplitude: a theory and its orderings, legs 1-based.
// Braces marks the sum over all orderings, phi3{1,...,n}.
type Request struct {
	Theory    Theory
	Orderings [][]int
	Braces    bool
}

// Legs returns the number of legs.
func (r Request) Legs() int {
	if len(r.Orderings) == 0 {
		return 0
	}
	return len(r.Orderings[0])
}

// String writes the request as formulas do: BS(1,2,3,4|1,3,2,4), phi3{1,2,3,4}.
func (r Request) String() string {
	var b strings.Builder
	b.WriteString(string(r.Theory))
	open, end := "(", ")"
	if r.Braces {
		open, end = "{", "}"
	}
	b.WriteString(open)
	for i, o := range r.Orderings {
		if i > 0 {
			b.WriteByte('|')
		}
		for j, l := range o {
			if j > 0 {
				b.WriteByte(',')
			}
			b.WriteString(strconv.Itoa(l))
		}
	}
	b.WriteString(end)
	return b.String()
}

// MinLegs and MaxLegs bound the number of legs of an amplitude.
const (
	MinLegs = 4
	MaxLegs = 24
)

// RequestError says why a request names no amplitude.
type RequestError struct {
	Request Request
	Reason  string
	Hint    string
}

func (e *RequestError) Error() string { return e.Request.String() + ": " + e.Reason }

// Validate checks that the orderings are permutations of 1..n and fit the
// theory. The error is a *RequestError.
func (r Request) Validate() error {
	fail := func(hint, format string, a ...any) error {
		return &RequestError{Request: r, Reason: fmt.Sprintf(format, a...), Hint: hint}
	}
	want := 0
	switch r.Theory {
	case BiAdjoint:
		want = 2
		if r.Braces {
			return fail("write BS(1,2,3,4|1,3,2,4)", "BS takes two orderings in parentheses")
		}
	case Cubic:
		want = 1
	default:
		return fail("theories present: BS, phi3", "unknown theory %q", string(r.Theory))
	}
	if len(r.Orderings) != want {
		return fail("write BS(1,2,3,4|1,3,2,4) or phi3(1,2,3,4)",
			"%d orderings given, %d expected", len(r.Orderings), want)
	}
	n := r.Legs()
	if n < MinLegs || n > MaxLegs {
		return fail("", "%d legs: between %d and %d are expected", n, MinLegs, MaxLegs)
	}
	for _, o := range r.Orderings {
		if len(o) != n {
			return fail("both orderings name the same legs", "orderings of %d and %d legs", n, len(o))
		}
		seen := make([]bool, n+1)
		for _, l := range o {
			if l < 1 || l > n {
				return fail("legs are numbered 1.."+strconv.Itoa(n), "leg %d out of range", l)
			}
			if seen[l] {
				return fail("every leg stands once in an ordering", "leg %d stands twice", l)
			}
			seen[l] = true
		}
	}
	return nil
}

// Skip says why a route is not used.
type Skip struct {
	Route  Route
	Reason string
}

// limit is the documented range of a route: up to this many legs, massless and
// massive. Beyond it the route is correct but takes longer than a user waits.
type limit struct{ massless, massive int }

// limits holds, per route, the range for single orderings and for the sum over
// all orderings.
var limits = map[Route]struct{ ordered, unordered limit }{
	Recursion:   {limit{MaxLegs, MaxLegs}, limit{14, 14}},
	Diagrams:    {limit{12, 12}, limit{9, 9}},
	Elimination: {limit{10, 10}, limit{8, 6}},
	Series:      {limit{10, 10}, limit{}},
	Groebner:    {limit{7, 7}, limit{6, 5}},
}

// Applicable splits the routes into those within their documented range for
// the request and those outside it, with the reason.
func Applicable(r Request, massive bool) (routes []Route, skipped []Skip) {
	for _, route := range Routes() {
		l := limits[route].ordered
		if r.Braces {
			l = limits[route].unordered
		}
		n := l.massless
		if massive {
			n = l.massive
		}
		if n == 0 {
			skipped = append(skipped, Skip{route, fmt.Sprintf("%s sums over all orderings, which this route does not", r)})
			continue
		}
		if r.Legs() > n {
			skipped = append(skipped, Skip{route, fmt.Sprintf("%s has %d legs, beyond the range of this route (n <= %d)", r, r.Legs(), n)})
			continue
		}
		routes = append(routes, route)
	}
	return routes, skipped
}
