package formula

import (
	"fmt"
	"maps"
	"slices"
	"strings"
)

// minLegs is the least number of legs of an amplitude.
const minLegs = 4

// words are the names of the language as present, without those that end in
// leg numbers.
var words = []string{"s", "z", "msq", "cyclic", "perms", "BS", "phi3", "PT", "detPhi", "J"}

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

// Reserved tells whether a name belongs to the language, present or to come, so
// that no definition may take it.
func Reserved(name string) bool {
	if slices.Contains(words, name) || slices.Contains(laterNames, name) {
		return true
	}
	for _, w := range []string{"s", "z", "msq", "k", "e", "f"} {
		if _, ok := indexed(name, w); ok {
			return true
		}
	}
	return false
}

// name reads what begins with a name, which has been taken. Only a name directly
// followed by ( or { is a call.
func (p *parser) name(t token) Node {
	name := p.of(t)
	if len(p.o.Defines) > 0 {
		if text, ok := p.o.Defines[name]; ok {
			return p.definition(t, name, text)
		}
	}
	if d, ok := indexed(name, "s"); ok {
		return p.singleDigits(t, d)
	}
	switch name {
	case "s":
		if p.touches('(') {
			return p.invariant(t)
		}
	case "msq":
		return &MassSquared{p.from(t), 0}
	case "cyclic":
		if p.touches('{') {
			return p.cyclic(t)
		}
	case "perms":
		if p.touches('(') {
			return p.perms(t)
		}
	case "BS", "phi3":
		if (p.touches('(') || p.touches('{')) && !p.o.Integrand {
			return p.amplitude(t, name)
		}
	default:
		if d, ok := indexed(name, "msq"); ok {
			leg := p.leg(t, d)
			if leg == 0 {
				return zero()
			}
			return &MassSquared{p.from(t), leg}
		}
	}
	if p.o.Integrand {
		if n, ok := p.integrandName(t, name); ok {
			return n
		}
	}
	p.unknown(t, name)
	return zero()
}

// unknown reports a name that has no meaning here and passes its argument.
func (p *parser) unknown(t token, name string) {
	if p.later(t, name) {
		return
	}
	_, puncture := indexed(name, "z")
	word := slices.Contains(words, name)
	switch {
	case p.o.Integrand && (name == "BS" || name == "phi3"):
		p.fail(t, "integrand", "write PT(1,2,3,4) PT(1,2,3,4)/detPhi for BS(1,2,3,4|1,2,3,4)", "integrands have no amplitudes")
	case !p.o.Integrand && (puncture || slices.Contains([]string{"z", "PT", "detPhi", "J"}, name)):
		p.fail(t, "integrand", "the command residues takes integrands", "%s belongs to integrands", name)
	case word:
		p.fail(t, "call", "for instance "+examples[name], "%s must be followed directly by its bracket", name)
	case p.plain || p.stopped:
		p.fail(t, "unknown-name", "", "unknown name")
	default:
		p.fail(t, "unknown-name", p.suggest(name), "unknown name %q", shorten(name))
	}
	// what was meant as the argument of the name
	for p.touches('(') || p.touches('{') || word && name != "detPhi" && name != "J" && (p.is('(') || p.is('{') || p.touches('[')) {
		p.advance()
		p.skipGroup()
	}
}

var examples = map[string]string{
	"s": "s(1,2)", "z": "z(3,4)", "cyclic": "cyclic{s12}", "perms": "perms(2,3){s12}", "PT": "PT(1,2,3,4)",
	"BS": "BS(1,2,3,4|1,3,2,4)", "phi3": "phi3(1,2,3,4)",
}

// suggest says what names there are, the likeliest first.
func (p *parser) suggest(name string) string {
	defined := slices.Sorted(maps.Keys(p.o.Defines))
	hint := ""
	for _, w := range slices.Concat(defined, words, laterNames) {
		if len(w) > 1 && (strings.EqualFold(w, name) || near(w, name)) {
			hint = "did you mean " + w + "? "
			break
		}
	}
	if p.o.Integrand {
		hint += "names: z3, z(3,4), PT(), detPhi, J, s12"
	} else {
		hint += "names: s12, s(1,2,3), msq, cyclic{}, perms(){}, BS(), phi3()"
	}
	if len(defined) > 10 {
		defined = append(defined[:10:10], "...")
	}
	if len(defined) > 0 {
		hint += "; defined: " + strings.Join(defined, ", ")
	}
	return hint
}

// near tells whether names differ by one letter: changed, missing or added.
func near(a, b string) bool {
	if len(a) > len(b) {
		a, b = b, a
	}
	if len(b) < 3 || len(b)-len(a) > 1 {
		return false
	}
	i := 0
	for i < len(a) && a[i] == b[i] {
		i++
	}
	if len(a) == len(b) {
		return i < len(a) && a[i+1:] == b[i+1:]
	}
	return a[i:] == b[i+1:]
}

// invariant reads s(a,b,...).
func (p *parser) invariant(t token) Node {
	legs, places, end := p.list(p.advance(), ')')
	if end == 0 {
		return zero()
	}
	return p.newInvariant(t, legs, places)
}

func (p *parser) newInvariant(t token, legs []int, places []token) Node {
	if !p.distinct(legs, places, "the invariant") {
		return zero()
	}
	if len(legs) < 2 {
		p.fail(t, "leg", "for instance s(1,2)", "an invariant needs at least two legs")
		return zero()
	}
	return &Invariant{p.from(t), slices.Clone(legs)}
}

// singleDigits reads s12, s123: legs of one digit each.
func (p *parser) singleDigits(t token, digits string) Node {
	p.legs, p.places = p.legs[:0], p.places[:0]
	for _, c := range digits {
		if c == '0' {
			p.fail(t, "leg", "legs of two digits: s(1,10)", "leg 0 in %s", shorten(p.of(t)))
			return zero()
		}
		p.legs, p.places = append(p.legs, int(c-'0')), append(p.places, t)
	}
	return p.newInvariant(t, p.legs, p.places)
}

// body reads {sum}.
func (p *parser) body() Node {
	open := p.advance()
	n := p.sum()
	p.close(open, '}')
	return n
}

// cyclic reads cyclic{body}.
func (p *parser) cyclic(t token) Node {
	body := p.body()
	return &Cyclic{p.from(t), body}
}

// perms reads perms(a,b,...){body}.
func (p *parser) perms(t token) Node {
	list, places, end := p.list(p.advance(), ')')
	legs := slices.Clone(list)
	ok := end != 0 && p.distinct(legs, places, "perms")
	if len(legs) > MaxPerms {
		p.fail(t, "too-large", "", "perms over %d legs, at most %d are expanded", len(legs), MaxPerms)
		ok = false
	}
	if !p.is('{') {
		p.fail(p.tok, "syntax", "for instance perms(2,3){s12}", "perms(...) needs its body in braces, found %s", p.describe(p.tok))
		return zero()
	}
	body := p.body()
	if !ok {
		return zero()
	}
	return &Perms{p.from(t), legs, body}
}

// amplitude reads BS(..|..), phi3(..) and phi3{..}.
func (p *parser) amplitude(t token, name string) Node {
	open := p.advance()
	closing := byte(')')
	if open.symbol == '{' {
		closing = '}'
	}
	var orderings [][]Leg
	ok := true
	for end := byte('|'); end == '|'; {
		var legs []int
		var places []token
		legs, places, end = p.list(open, '|', closing)
		if end == 0 {
			return zero()
		}
		ok = p.ordering(t, legs, places) && ok
		if len(orderings) > 0 && ok && len(legs) != len(orderings[0]) {
			p.fail(t, "orderings", "both orderings name the same legs", "orderings of %d and %d legs", len(orderings[0]), len(legs))
			ok = false
		}
		o := make([]Leg, len(legs))
		for i, l := range legs {
			o[i].Label = l
		}
		orderings = append(orderings, o)
	}
	switch {
	case name == "BS" && closing == '}':
		p.failAt(t, p.last, "amplitude", "write BS(1,2,3,4|1,3,2,4)", "BS takes parentheses")
	case name == "BS" && len(orderings) != 2:
		p.failAt(t, p.last, "amplitude", "write BS(1,2,3,4|1,3,2,4)", "BS takes two orderings, found %d", len(orderings))
	case name == "phi3" && len(orderings) != 1:
		p.failAt(t, p.last, "amplitude", "write phi3(1,2,3,4)", "phi3 takes one ordering, found %d", len(orderings))
	case ok:
		return &Amplitude{p.from(t), name, orderings, closing == '}'}
	}
	return zero()
}

// ordering checks that an ordering names the legs 1..n once each.
func (p *parser) ordering(t token, legs []int, places []token) bool {
	if !p.distinct(legs, places, "the ordering") {
		return false
	}
	if len(legs) < minLegs {
		p.fail(t, "legs", "", "an ordering of %d legs, at least %d are needed", len(legs), minLegs)
		return false
	}
	for i, l := range legs {
		if l > len(legs) {
			p.fail(places[i], "leg", fmt.Sprintf("an amplitude names its legs 1..%d each once", len(legs)), "leg %d out of range in an ordering of %d legs", l, len(legs))
			return false
		}
	}
	return true
}

// integrandName reads the names that only integrands have.
func (p *parser) integrandName(t token, name string) (Node, bool) {
	switch {
	case name == "z" && p.touches('('):
		legs, places, end := p.list(p.advance(), ')')
		if end == 0 || !p.distinct(legs, places, "the difference") {
			return zero(), true
		}
		if len(legs) != 2 {
			p.failAt(t, p.last, "leg", "z(3,4) is z3 - z4", "z(...) takes two legs, found %d", len(legs))
			return zero(), true
		}
		return &Difference{p.from(t), legs[0], legs[1]}, true
	case name == "PT" && p.touches('('):
		legs, places, end := p.list(p.advance(), ')')
		if end == 0 || !p.distinct(legs, places, "the Parke-Taylor factor") {
			return zero(), true
		}
		if len(legs) < 2 {
			p.failAt(t, p.last, "legs", "", "a Parke-Taylor factor needs at least two legs")
			return zero(), true
		}
		return &ParkeTaylor{p.from(t), slices.Clone(legs)}, true
	case name == "detPhi":
		return &ReducedDeterminant{p.from(t)}, true
	case name == "J":
		return &Jacobian{p.from(t)}, true
	}
	if d, ok := indexed(name, "z"); ok {
		leg := p.leg(t, d)
		if leg == 0 {
			return zero(), true
		}
		return &Puncture{p.from(t), leg}, true
	}
	return nil, false
}
