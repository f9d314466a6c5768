package formula

import "slices"

// laterNames are words of the language whose meaning is not present yet.
var laterNames = []string{"YM", "GR", "NLSM", "EYM", "YMS", "BI", "sGal", "abs2", "gluons2", "tr5", "Pf", "Nc", "i"}

// laterHint says what is present.
const laterHint = "formulas of invariants, BS and phi3 are available"

// later reports a word of the language that is not present yet, with its
// argument; false if the name is no such word.
func (p *parser) later(t token, name string) bool {
	if p.isVector(t) {
		for p.is('.') { // k1.k2, e1.f2: one report
			p.advance()
			if p.tok.kind != tokenName && !p.is('(') {
				break
			}
			p.skipFactor()
		}
		p.failAt(t, p.last, "not-available", laterHint, "%s is not available yet", p.text[t.start:p.last])
		return true
	}
	if !slices.Contains(laterNames, name) {
		return false
	}
	// no product with what follows can be meant where the word takes an argument
	takes := name != "i" && name != "Nc"
	if takes && (p.is('(') || p.is('{')) {
		p.advance()
		p.skipGroup()
	}
	hint := laterHint
	if name == "Pf" {
		hint = "integrands of PT(...), z(3,4), z3, detPhi and J are available"
	}
	p.failAt(t, p.last, "not-available", hint, "%s is not available yet", name)
	return true
}

// isVector tells whether a name is that of a momentum or a polarisation.
func (p *parser) isVector(t token) bool {
	return p.isIndexed(t, "k") || p.isIndexed(t, "e") || p.isIndexed(t, "f")
}

// spinorBracket reports <1 2>, [1|2+3|4> and their like, whose opening sign has
// been taken, and passes them.
func (p *parser) spinorBracket(t token) {
	const far = 200 // tokens; a sign that opens nothing is passed alone
	ahead, depth := *p, 0
	for range far {
		x := ahead.advance()
		switch {
		case x.symbol == '(':
			depth++
		case x.symbol == ')' && depth > 0:
			depth--
		case depth == 0 && (x.symbol == '>' || x.symbol == ']'):
			p.lex, p.tok, p.last = ahead.lex, ahead.tok, ahead.last
			p.failAt(t, p.last, "not-available", laterHint, "spinor brackets are not available yet")
			return
		case x.kind == tokenNumber || depth > 0 && x.kind != tokenEnd || x.symbol == '|' || x.symbol == '+' || x.symbol == '-' || x.symbol == ',':
		default:
			p.fail(t, "not-available", laterHint, "spinor brackets are not available yet")
			return
		}
	}
	p.fail(t, "not-available", laterHint, "spinor brackets are not available yet")
}
