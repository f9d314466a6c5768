package formula

import (
	"fmt"
	"slices"
	"strconv"
	"strings"
)

// list reads "a,b,...", the legs between an opening sign and one of ends, which
// is taken and returned. A list that cannot be read is reported and passed up to
// its closing sign, and end is 0. The results are valid until the next list.
func (p *parser) list(open token, ends ...byte) (legs []int, places []token, end byte) {
	legs, places = p.legs[:0], p.places[:0]
	defer func() { p.legs, p.places = legs, places }()
	good, helicity := true, false
	for {
		t := p.tok
		switch {
		case t.kind == tokenNumber:
			p.advance()
			legs, places = append(legs, p.leg(t, p.of(t))), append(places, t)
		case t.kind == tokenEnd:
			p.open(open, ends)
			return legs, places, 0
		case slices.Contains(ends, t.symbol) || t.symbol == ',':
			p.fail(t, "leg", "legs are positive integers separated by commas", "expected a leg number, found %s", p.describe(t))
			good = false
		default:
			p.fail(t, "leg", "legs are positive integers separated by commas", "expected a leg number, found %s", p.describe(t))
			p.skipGroup()
			return legs, places, 0
		}
		if p.is('+') || p.is('-') {
			if !helicity {
				p.fail(p.tok, "not-available", "BS and phi3 are scalars: their legs have no helicity", "helicities are not available yet")
			}
			p.advance()
			good, helicity = false, true
		}
		t = p.tok
		switch {
		case t.symbol == ',':
			p.advance()
		case slices.Contains(ends, t.symbol):
			p.advance()
			if !good {
				return p.rest(legs, places, open, t.symbol, ends)
			}
			return legs, places, t.symbol
		case t.kind == tokenEnd:
			p.open(open, ends)
			return legs, places, 0
		default:
			p.fail(t, "leg", "separate legs by commas", "expected \",\" or %s, found %s", quoteAll(ends), p.describe(t))
			p.skipGroup()
			return legs, places, 0
		}
	}
}

// rest passes what follows a bad list that ended with one of several signs.
func (p *parser) rest(legs []int, places []token, open token, end byte, ends []byte) ([]int, []token, byte) {
	for end == '|' {
		_, _, end = p.list(open, ends...)
	}
	return legs, places, 0
}

// open reports that the text ends inside a bracket.
func (p *parser) open(open token, ends []byte) {
	line, column := p.place(open)
	p.fail(p.tok, "unbalanced", fmt.Sprintf("the %q at line %d, column %d is open", p.of(open), line, column),
		"expected %s, found end of the formula", quoteAll(ends))
}

func quoteAll(s []byte) string {
	q := make([]string, len(s))
	for i := range s {
		q[i] = strconv.Quote(string(rune(s[i])))
	}
	return strings.Join(q, " or ")
}

// leg reads the number of a leg; 0 if it is out of range.
func (p *parser) leg(t token, digits string) int {
	n, err := strconv.Atoi(digits)
	if err != nil || n < 1 || n > MaxLegs {
		p.fail(t, "leg", fmt.Sprintf("legs are numbered from 1, at most %d", MaxLegs), "leg %s out of range", shorten(digits))
		return 0
	}
	return n
}

// distinct reports legs that stand twice; false if there are any, or legs out
// of range.
func (p *parser) distinct(legs []int, places []token, where string) bool {
	var seen uint64 // MaxLegs bits
	ok := true
	for i, l := range legs {
		if l == 0 {
			ok = false
			continue
		}
		bit := uint64(1) << (l - 1)
		if seen&bit != 0 {
			p.fail(places[i], "repeated-leg", "every leg stands once", "leg %d stands twice in %s", l, where)
			ok = false
		}
		seen |= bit
	}
	return ok
}
