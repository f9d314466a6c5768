package formula

import (
	"fmt"
	"math/big"
	"strconv"
	"strings"
)

// zero stands for what could not be read.
func zero() Node { return &Number{Value: new(big.Rat)} }

// sum = ["+"|"-"] product {("+"|"-") product}
func (p *parser) sum() Node {
	t := p.tok
	if !p.deeper(t) {
		return zero()
	}
	var n Node
	switch t.symbol {
	case '-':
		p.advance()
		x := p.product()
		n = &Minus{p.from(t), x}
	case '+':
		p.advance()
		n = p.product()
	default:
		n = p.product()
	}
	for {
		switch {
		case p.is('+') || p.is('-'):
			op := p.advance().symbol
			r := p.product()
			n = &Binary{p.from(t), op, n, r}
			continue
		case p.tok.kind == tokenBad:
			p.character(p.advance())
			if p.is('*') || p.is('/') {
				p.advance()
			}
			if p.beginsFactor() {
				p.product()
			}
			continue
		}
		p.depth--
		return n
	}
}

// product = juxtaposed {("*"|"/") juxtaposed}
func (p *parser) product() Node {
	t := p.tok
	n, _ := p.juxtaposed()
	for p.is('*') || p.is('/') {
		left := p.text[min(t.start, p.last):p.last] // empty if the left side is missing
		op := p.advance()
		if p.is('*') && op.symbol == '*' {
			p.fail(p.tok, "syntax", "a power is written with ^", "unexpected %s", p.describe(p.tok))
			p.advance()
		}
		divisor := p.tok
		r, second := p.juxtaposed()
		if op.symbol == '/' && second > 0 {
			x, a, b := piece(left), piece(p.text[divisor.start:second]), piece(p.text[second:p.last])
			p.failAt(op, p.last, "ambiguous", p.readings(x, a, b),
				"a divisor is followed by another factor: this could mean %s/(%s %s) or (%s/%s) %s", x, a, b, x, a, b)
		}
		n = &Binary{p.from(t), op.symbol, n, r}
	}
	return n
}

// piece prints a piece of the source on one line.
func piece(s string) string {
	s = strings.Join(strings.Fields(s), " ")
	if r := []rune(s); len(r) > 60 {
		return string(r[:28]) + "..." + string(r[len(r)-28:])
	}
	return s
}

// readings words x/a b in two ways that can be read in one way only.
func (p *parser) readings(x, a, b string) string {
	if p.plain {
		return ""
	}
	for _, s := range []*string{&x, &a, &b} {
		c := &common{o: ParseOptions{Integrand: p.o.Integrand}, plain: true}
		n := newParser(*s, Origin{}, c).whole()
		if len(c.errs) > 0 || level(n) < levelProduct {
			return fmt.Sprintf("write %s/(%s %s) or (%s/%s) %s", x, a, b, x, a, b)
		}
		*s = n.String()
	}
	return fmt.Sprintf("write %s/(%s*%s) or (%s/%s)*%s", x, a, b, x, a, b)
}

// juxtaposed = {"-"|"+"} power {power}: factors side by side are multiplied.
// second is where the second factor begins, 0 if there is none.
func (p *parser) juxtaposed() (n Node, second int) {
	t := p.tok
	if p.is('-') || p.is('+') {
		if !p.deeper(t) {
			return zero(), 0
		}
		p.advance()
		n, second = p.juxtaposed()
		if t.symbol == '-' {
			n = &Minus{p.from(t), n}
		}
		p.depth--
		return n, second
	}
	n = p.power()
	for p.beginsFactor() {
		if second == 0 {
			second = p.tok.start
		}
		f := p.power()
		n = &Binary{p.from(t), '*', n, f}
	}
	return n, second
}

// beginsFactor tells whether the next token can start another factor.
func (p *parser) beginsFactor() bool {
	switch p.tok.kind {
	case tokenNumber, tokenName:
		return true
	case tokenSymbol:
		s := p.tok.symbol
		return s == '(' || s == '<' || s == '['
	}
	return false
}

// power = primary ["^" integer]
func (p *parser) power() Node {
	t := p.tok
	n := p.primary()
	if p.is('.') {
		if t.symbol == '(' {
			p.fail(p.tok, "not-available", laterHint, "dot products of sums are not available yet")
		} else {
			p.fail(p.tok, "syntax", "a product is written with * or a space", "unexpected %s", p.describe(p.tok))
		}
		p.advance()
		if p.tok.kind == tokenName || p.is('(') {
			p.skipFactor()
		}
	}
	if !p.is('^') {
		return n
	}
	p.advance()
	e, ok := p.exponent()
	if p.is('^') {
		p.fail(p.tok, "ambiguous", "write parentheses, (a^2)^3 or a^6", "a power of a power needs parentheses")
		p.advance()
		p.exponent()
	}
	if !ok {
		return n
	}
	return &Power{p.from(t), n, e}
}

// exponent reads an integer with an optional sign, or one in parentheses.
func (p *parser) exponent() (e int, ok bool) {
	const hint = "for instance s12^2, s12^-1 or s12^(-1)"
	start := p.tok
	open := p.is('(')
	if open {
		p.advance()
	}
	negative := p.is('-')
	if negative || p.is('+') {
		p.advance()
	}
	t := p.tok
	if t.kind != tokenNumber {
		p.fail(start, "exponent", hint, "exponents are integers, found %s", p.describe(start))
		switch {
		case open:
			p.skipGroup()
		case t.kind == tokenName || t.symbol == '(':
			p.skipFactor()
		}
		return 0, false
	}
	p.advance()
	if p.touches('.') || open && !p.is(')') {
		if open {
			p.skipGroup()
		} else if p.advance(); p.tok.kind == tokenNumber && !p.tok.spaced {
			p.advance()
		}
		p.failAt(start, p.last, "exponent", hint, "exponents are integers, found %q", shorten(p.text[start.start:p.last]))
		return 0, false
	}
	if open {
		p.advance()
	}
	e, err := strconv.Atoi(p.of(t))
	if err != nil || e > MaxExponent {
		p.fail(t, "exponent", fmt.Sprintf("at most %d", MaxExponent), "the exponent %s is too large", shorten(p.of(t)))
		return 0, false
	}
	if negative {
		e = -e
	}
	return e, true
}

// skipFactor passes a name with its argument, or a group.
func (p *parser) skipFactor() {
	if p.tok.kind == tokenName {
		p.advance()
		if !p.touches('(') && !p.touches('{') {
			return
		}
	}
	p.advance()
	p.skipGroup()
}

// skipGroup passes everything up to the bracket that closes the open one, of
// whatever kind, and that too.
func (p *parser) skipGroup() {
	for open := 1; open > 0 && p.tok.kind != tokenEnd; {
		switch p.advance().symbol {
		case '(', '{', '[':
			open++
		case ')', '}', ']':
			open--
		}
	}
}

// primary = number | name | call | "(" sum ")"
func (p *parser) primary() Node {
	t := p.tok
	switch t.kind {
	case tokenNumber:
		p.advance()
		return p.number(t)
	case tokenName:
		p.advance()
		return p.name(t)
	case tokenBad:
		p.advance()
		p.character(t)
		return zero()
	}
	switch t.symbol {
	case '(':
		p.advance()
		n := p.sum()
		p.close(t, ')')
		return n
	case '<', '[':
		p.advance()
		p.spinorBracket(t)
		return zero()
	case '.':
		p.advance()
		if p.tok.kind == tokenNumber && !p.tok.spaced {
			p.advance()
			return p.decimal(t)
		}
	case '{':
		p.fail(t, "syntax", "group with parentheses", "expected a number, an invariant, an amplitude or \"(\", found %s", p.describe(t))
		p.advance()
		p.skipGroup()
	}
	// an operator, a separator or a closing bracket is left to the caller
	p.fail(t, "syntax", "", "expected a number, an invariant, an amplitude or \"(\", found %s", p.describe(t))
	return zero()
}

// close expects the bracket that closes an open one. Whatever stands before it
// is passed.
func (p *parser) close(open token, want byte) {
	if p.is(want) {
		p.advance()
		return
	}
	if p.stopped {
		return
	}
	line, column := p.place(open)
	hint := fmt.Sprintf("the %q at line %d, column %d is open", p.of(open), line, column)
	p.fail(p.tok, "unbalanced", hint, "expected %q, found %s", string(rune(want)), p.describe(p.tok))
	p.skipGroup()
}

// lookalikes are characters that papers and word processors have in place of
// those of the language.
var lookalikes = map[rune]string{
	'−': "-", '–': "-", '—': "-", '·': "*", '×': "*", '⋅': "*", '∗': "*", '÷': "/", '⁄': "/", '²': "^2", '³': "^3", '⁴': "^4", '⁻': "^-",
	'=': "an equality as a claim, equal = [\"LEFT\", \"RIGHT\"]", '’': "'", '√': "powers with integer exponents",
}

// character reports a character that is not in the language.
func (p *parser) character(t token) {
	hint := "formulas are written in ASCII: letters, digits, + - * / ^ ( ) { } , |"
	r := []rune(p.of(t))[0]
	if s, ok := lookalikes[r]; ok {
		hint = "write " + s
	} else if '₀' <= r && r <= '₉' {
		hint = "write the legs as digits: s12"
	}
	p.fail(t, "character", hint, "unexpected character %s", p.describe(t))
	for p.tok.kind == tokenBad && !p.tok.spaced {
		p.advance() // one report for all that hang together
	}
}

// number reads a non-negative integer.
func (p *parser) number(t token) Node {
	if p.touches('.') {
		p.advance()
		if p.tok.kind == tokenNumber && !p.tok.spaced {
			p.advance()
		}
		return p.decimal(t)
	}
	if p.powerOfTen() {
		return p.decimal(t)
	}
	if t.end-t.start > MaxDigits {
		p.fail(t, "number", "", "a number of %d digits, at most %d are read", t.end-t.start, MaxDigits)
		return zero()
	}
	v := new(big.Rat)
	if s := p.of(t); len(s) < 18 {
		n, _ := strconv.ParseInt(s, 10, 64)
		v.SetInt64(n)
	} else {
		n, _ := new(big.Int).SetString(s, 10)
		v.SetInt(n)
	}
	return &Number{p.from(t), v}
}

// powerOfTen tells whether the exponent of a decimal, e3 or E3, follows a number
// directly. 2e3.k1 is a product.
func (p *parser) powerOfTen() bool {
	if p.tok.kind != tokenName || p.tok.spaced || !p.isIndexed(p.tok, "e") && !p.isIndexed(p.tok, "E") {
		return false
	}
	after := p.lex
	return after.next().symbol != '.'
}

// isIndexed tells whether a name is a word followed by digits.
func (p *parser) isIndexed(t token, word string) bool {
	_, ok := indexed(p.of(t), word)
	return ok
}

// decimal reports a decimal number that begins at a token and has been taken,
// but for a power of ten.
func (p *parser) decimal(t token) Node {
	if p.powerOfTen() {
		p.advance()
	}
	hint := "write a fraction, for instance 1/4"
	s := p.text[t.start:p.last]
	if len(s) <= 40 && !strings.ContainsAny(s, "eE") {
		if r, ok := new(big.Rat).SetString(s); ok {
			hint = "write " + r.RatString()
		}
	}
	p.failAt(t, p.last, "decimal", hint, "numbers are exact: no decimals, found %s", strconv.Quote(shorten(s)))
	return zero()
}
