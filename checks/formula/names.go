package formula

import (
	"fmt"
	"maps"
	"slices"
	"strconv"
	"strings"
)

// laterNames are words of the language whose meaning is not present yet.
var laterNames = []string{"YM", "GR", "NLSM", "EYM", "YMS", "BI", "sGal", "abs2", "gluons2", "tr5"}

// minLegs is the least number of legs of an amplitude.
const minLegs = 4

// indexed splits a name like s123 or msq3 into its word and its digits; ok is
// false if there is anything else.
func indexed(name, word string) (digits string, ok bool) {
	digits, ok = strings.CutPrefix(name, word)
	if !ok || digits == "" {
		return "", false
	}
	for _, c := range digits {
		if !isDigit(c) {
			return "", false
		}
	}
	return digits, true
}

// Reserved tells whether a name belongs to the language, so that no definition
// may take it.
func Reserved(name string) bool {
	if slices.Contains(laterNames, name) || slices.Contains([]string{"s", "z", "i", "msq", "cyclic", "perms", "BS", "phi3", "PT", "Pf", "detPhi", "J", "Nc"}, name) {
		return true
	}
	for _, w := range []string{"s", "z", "k", "e", "f", "msq"} {
		if _, ok := indexed(name, w); ok {
			return true
		}
	}
	return false
}

// name reads what begins with a name. Only a name directly followed by ( or {
// is a call.
func (p *parser) name(t token) Node {
	call := p.touches("(") || p.touches("{")
	if p.o.Integrand {
		if n, ok := p.integrandName(t, call); ok {
			return n
		}
	}
	switch {
	case t.text == "s" && p.touches("("):
		return p.invariant(t)
	case t.text == "msq":
		return &MassSquared{p.from(t), 0}
	case t.text == "cyclic" && p.touches("{"):
		open := p.next()
		body := p.sum()
		p.close(open, "}")
		return &Cyclic{p.from(t), body}
	case t.text == "perms" && p.touches("("):
		return p.perms(t)
	case (t.text == "BS" || t.text == "phi3") && call && !p.o.Integrand:
		return p.amplitude(t)
	}
	if d, ok := indexed(t.text, "s"); ok {
		return p.singleDigits(t, d)
	}
	if d, ok := indexed(t.text, "msq"); ok {
		leg, err := strconv.Atoi(d)
		if err != nil || leg < 1 || leg > MaxLegs {
			p.fail(t, "leg", fmt.Sprintf("legs are numbered from 1, at most %d", MaxLegs), "leg %s out of range", shorten(d))
			return zero()
		}
		return &MassSquared{p.from(t), leg}
	}
	if text, ok := p.o.Defines[t.text]; ok {
		return p.definition(t, text)
	}
	return p.unknown(t, call)
}

// unknown reports a name that has no meaning here.
func (p *parser) unknown(t token, call bool) Node {
	later := slices.Contains(laterNames, t.text) || t.text == "i"
	for _, w := range []string{"k", "e", "f"} {
		if _, ok := indexed(t.text, w); ok {
			later = true
		}
	}
	switch {
	case later:
		p.fail(t, "not-available", "formulas of invariants, BS and phi3 are available", "%s is not available yet", t.text)
		if p.is(".") {
			p.next()
			p.next()
		}
	case p.o.Integrand && (t.text == "BS" || t.text == "phi3"):
		p.fail(t, "integrand", "write PT(1,2,3,4) PT(1,2,3,4)/detPhi for BS(1,2,3,4|1,2,3,4)", "integrands have no amplitudes")
	case !p.o.Integrand && call && (t.text == "PT" || t.text == "z" || t.text == "Pf"):
		p.fail(t, "integrand", "the command residues takes integrands", "%s belongs to integrands", t.text)
	case slices.Contains([]string{"s", "BS", "phi3", "cyclic", "perms", "PT", "z"}, t.text):
		p.fail(t, "call", "for instance s(1,2), BS(1,2,3,4|1,3,2,4), cyclic{s12}", "%s must be followed directly by its bracket", t.text)
	case Reserved(t.text):
		p.fail(t, "integrand", "the command residues takes integrands", "%s belongs to integrands", t.text)
	default:
		hint := "names: s12, s(1,2,3), msq, cyclic{}, perms(){}, BS(), phi3()"
		if p.o.Integrand {
			hint = "names: z3, z(3,4), PT(), detPhi, J, s12"
		}
		if len(p.o.Defines) > 0 {
			hint += "; defined: " + strings.Join(slices.Sorted(maps.Keys(p.o.Defines)), ", ")
		}
		p.fail(t, "unknown-name", hint, "unknown name %q", shorten(t.text))
	}
	if call {
		p.next()
		p.skipGroup()
	}
	return zero()
}

// invariant reads s(a,b,...).
func (p *parser) invariant(t token) Node {
	open := p.next()
	legs, tokens, end := p.list(open, ")")
	return p.newInvariant(t, legs, tokens, end != "")
}

func (p *parser) newInvariant(t token, legs []int, tokens []token, complete bool) Node {
	if !complete || !p.distinct(legs, tokens, "the invariant") {
		return zero()
	}
	if len(legs) < 2 {
		p.fail(t, "leg", "for instance s(1,2)", "an invariant needs at least two legs")
		return zero()
	}
	return &Invariant{p.from(t), legs}
}

// singleDigits reads s12, s123, z34: legs of one digit each.
func (p *parser) singleDigits(t token, digits string) Node {
	legs := make([]int, len(digits))
	tokens := make([]token, len(digits))
	for i, c := range digits {
		legs[i], tokens[i] = int(c-'0'), t
		if legs[i] == 0 {
			p.fail(t, "leg", "legs of two digits: s(1,10)", "leg 0 in %s", shorten(t.text))
			return zero()
		}
	}
	return p.newInvariant(t, legs, tokens, true)
}

// perms reads perms(a,b,...){body}.
func (p *parser) perms(t token) Node {
	open := p.next()
	legs, tokens, end := p.list(open, ")")
	ok := end != "" && p.distinct(legs, tokens, "perms")
	if len(legs) > MaxPerms {
		p.fail(t, "too-large", "", "perms over %d legs, at most %d are expanded", len(legs), MaxPerms)
		ok = false
	}
	if !p.is("{") {
		p.fail(p.peek(), "syntax", "for instance perms(2,3){s12}", "perms(...) needs its body in braces")
		return zero()
	}
	brace := p.next()
	body := p.sum()
	p.close(brace, "}")
	if !ok {
		return zero()
	}
	return &Perms{p.from(t), legs, body}
}

// amplitude reads BS(..|..), phi3(..) and phi3{..}.
func (p *parser) amplitude(t token) Node {
	open := p.next()
	closing := ")"
	if open.text == "{" {
		closing = "}"
	}
	var orderings [][]Leg
	var first []int
	ok := true
	for {
		legs, tokens, end := p.list(open, "|", closing)
		if end == "" {
			return zero()
		}
		ok = p.ordering(t, legs, tokens) && ok
		if first == nil {
			first = legs
		} else if ok && len(legs) != len(first) {
			p.fail(t, "orderings", "both orderings name the same legs", "orderings of %d and %d legs", len(first), len(legs))
			ok = false
		}
		o := make([]Leg, len(legs))
		for i, l := range legs {
			o[i].Label = l
		}
		orderings = append(orderings, o)
		if end == closing {
			break
		}
	}
	switch {
	case t.text == "BS" && closing == "}":
		p.fail(t, "amplitude", "write BS(1,2,3,4|1,3,2,4)", "BS takes parentheses")
	case t.text == "BS" && len(orderings) != 2:
		p.fail(t, "amplitude", "write BS(1,2,3,4|1,3,2,4)", "BS takes two orderings, found %d", len(orderings))
	case t.text == "phi3" && len(orderings) != 1:
		p.fail(t, "amplitude", "write phi3(1,2,3,4)", "phi3 takes one ordering, found %d", len(orderings))
	case ok:
		return &Amplitude{p.from(t), t.text, orderings, closing == "}"}
	}
	return zero()
}

// ordering checks that an ordering names the legs 1..n once each.
func (p *parser) ordering(t token, legs []int, tokens []token) bool {
	if !p.distinct(legs, tokens, "the ordering") {
		return false
	}
	if len(legs) < minLegs {
		p.fail(t, "legs", "", "an ordering of %d legs, at least %d are needed", len(legs), minLegs)
		return false
	}
	for i, l := range legs {
		if l > len(legs) {
			p.fail(tokens[i], "leg", fmt.Sprintf("an amplitude names its legs 1..%d each once", len(legs)), "leg %d out of range in an ordering of %d legs", l, len(legs))
			return false
		}
	}
	return true
}

// definition puts the tree of a defined name in place.
func (p *parser) definition(t token, text string) Node {
	if slices.Contains(p.defining, t.text) {
		p.fail(t, "define", "definitions must not lead back to themselves", "the definition of %s uses itself: %s", t.text, strings.Join(append(slices.Clone(p.defining), t.text), " -> "))
		p.stopped = true
		return zero()
	}
	if !p.deeper(t) {
		return zero()
	}
	inner := &parser{o: ParseOptions{File: p.o.File, Line: 1, Column: 1, Defines: p.o.Defines, Integrand: p.o.Integrand},
		lines: strings.Split(text, "\n"), depth: p.depth, defining: append(slices.Clone(p.defining), t.text), expansion: p.expansion}
	n := inner.whole(text)
	p.depth--
	if len(inner.errs) > 0 {
		e := inner.errs[0]
		if e.Code == "define" {
			p.fail(t, e.Code, e.Hint, "%s", e.Message)
			p.stopped = true
			return zero()
		}
		p.fail(t, e.Code, e.Hint, "in the definition of %s, column %d: %s", t.text, e.Column, e.Message)
		return zero()
	}
	p.expansion = inner.expansion + 1
	walk(n, func(Node) { p.expansion++ })
	if p.expansion > MaxTerms {
		p.fail(t, "too-large", "", "definitions expand to more than %d terms", MaxTerms)
		p.stopped = true
		return zero()
	}
	return n
}

// integrandName reads the names that only integrands have.
func (p *parser) integrandName(t token, call bool) (Node, bool) {
	switch {
	case t.text == "z" && p.touches("("):
		open := p.next()
		legs, tokens, end := p.list(open, ")")
		if end == "" || !p.distinct(legs, tokens, "the difference") {
			return zero(), true
		}
		if len(legs) != 2 {
			p.fail(t, "leg", "z(3,4) is z3 - z4", "z(...) takes two legs, found %d", len(legs))
			return zero(), true
		}
		return &Difference{p.from(t), legs[0], legs[1]}, true
	case t.text == "PT" && p.touches("("):
		open := p.next()
		legs, tokens, end := p.list(open, ")")
		if end == "" || !p.distinct(legs, tokens, "the Parke-Taylor factor") {
			return zero(), true
		}
		if len(legs) < 2 {
			p.fail(t, "legs", "", "a Parke-Taylor factor needs at least two legs")
			return zero(), true
		}
		return &ParkeTaylor{p.from(t), legs}, true
	case t.text == "detPhi":
		return &ReducedDeterminant{p.from(t)}, true
	case t.text == "J":
		return &Jacobian{p.from(t)}, true
	case t.text == "Pf" && call:
		p.fail(t, "not-available", "", "Pf(...) is not available yet")
		p.next()
		p.skipGroup()
		return zero(), true
	}
	if d, ok := indexed(t.text, "z"); ok {
		leg, err := strconv.Atoi(d)
		if err != nil || leg < 1 || leg > MaxLegs {
			p.fail(t, "leg", fmt.Sprintf("legs are numbered from 1, at most %d", MaxLegs), "leg %s out of range", shorten(d))
			return zero(), true
		}
		return &Puncture{p.from(t), leg}, true
	}
	return nil, false
}
