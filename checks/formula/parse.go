package formula

import (
	"fmt"
	"math/big"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"

	"eliminant/checks/diag"
)

// Limits of the language. What exceeds them is refused with a message that
// names the limit.
const (
	MaxText     = 4 << 20 // bytes of one formula
	MaxDepth    = 400     // nested parentheses, braces and definitions
	MaxExponent = 1000    // of ^, in absolute value
	MaxDigits   = 4096    // of a number
	MaxLegs     = 64      // largest leg
	MaxPerms    = 8       // legs of one perms(){}
	MaxTerms    = 1 << 20 // leaves after expanding cyclic{} and perms(){}
	maxErrors   = 50      // reported per formula
)

// ParseOptions says where a text stands and what names it may use; the zero
// value works.
type ParseOptions struct {
	File         string
	Line, Column int               // of the first character; 0 means 1
	Defines      map[string]string // names usable in the formula, with their texts
	Integrand    bool              // punctures, PT, detPhi and J in place of amplitudes
}

// Parse reads a formula. All errors are returned together, each with line and
// column, what was expected and what to try. Cost: linear in the text.
func Parse(text string, o ParseOptions) (*Formula, diag.List) {
	if o.Line == 0 {
		o.Line = 1
	}
	if o.Column == 0 {
		o.Column = 1
	}
	p := &parser{o: o, lines: strings.Split(text, "\n")}
	root := p.whole(text)
	if len(p.errs) > 0 {
		return nil, p.errs
	}
	f := &Formula{Root: root, Text: strings.TrimSpace(text)}
	legs, _ := f.Legs()
	if errs := checkPowers(root, legs); len(errs) > 0 {
		return nil, errs
	}
	return f, nil
}

// parser holds the state of one text, with those of the definitions it uses.
type parser struct {
	o         ParseOptions
	lines     []string
	tokens    []token
	pos       int
	errs      diag.List
	depth     int
	defining  []string // definitions being expanded
	stopped   bool     // too deep or too many errors: unwind quietly
	perFault  int      // offset of the last fault, to report one per place
	expansion int      // nodes taken over from definitions
}

func (p *parser) whole(text string) Node {
	if len(text) > MaxText {
		p.errs = append(p.errs, diag.Diagnostic{Code: "too-large", File: p.o.File, Line: p.o.Line, Column: p.o.Column,
			Message: fmt.Sprintf("the formula has %d bytes, at most %d are read", len(text), MaxText)})
		return nil
	}
	if !utf8.ValidString(text) {
		p.errs = append(p.errs, diag.Diagnostic{Code: "encoding", File: p.o.File, Line: p.o.Line, Column: p.o.Column,
			Message: "the formula is not valid UTF-8"})
		return nil
	}
	p.tokens, p.pos, p.perFault = lex(text), 0, -1
	if p.peek().kind == tokenEnd {
		p.fail(p.peek(), "empty", "write a formula, for instance s12 or BS(1,2,3,4|1,3,2,4)", "the formula is empty")
		return nil
	}
	n := p.sum()
	for p.peek().kind != tokenEnd && !p.stopped {
		t := p.next()
		if t.text == ")" || t.text == "}" || t.text == "]" || t.text == ">" {
			p.fail(t, "unbalanced", "delete it or open it before", "%q closes nothing", t.text)
		} else {
			p.fail(t, "syntax", "", "unexpected %s", describe(t))
		}
		if p.peek().kind != tokenEnd {
			p.sum()
		}
	}
	return n
}

func (p *parser) peek() token { return p.tokens[p.pos] }

func (p *parser) next() token {
	t := p.tokens[p.pos]
	if t.kind != tokenEnd {
		p.pos++
	}
	return t
}

// is tells whether the next token is the symbol.
func (p *parser) is(symbol string) bool {
	t := p.peek()
	return t.kind == tokenSymbol && t.text == symbol
}

// touches tells whether the next token is the symbol, with no space before it.
func (p *parser) touches(symbol string) bool { return p.is(symbol) && !p.peek().spaced }

func (p *parser) place(t token) (line, column int) {
	if t.line == 1 {
		return p.o.Line, p.o.Column + t.column - 1
	}
	return p.o.Line + t.line - 1, t.column
}

// from returns the span from a token to the last one taken.
func (p *parser) from(t token) span {
	line, column := p.place(t)
	end := t.offset
	if p.pos > 0 {
		last := p.tokens[p.pos-1]
		end = last.offset + len(last.text)
	}
	return span{Span{p.o.File, line, column, max(end-t.offset, 0)}}
}

func (p *parser) fail(t token, code, hint, format string, a ...any) {
	if p.stopped || t.offset == p.perFault && len(p.errs) > 0 {
		return
	}
	p.perFault = t.offset
	line, column := p.place(t)
	d := diag.Diagnostic{Code: code, File: p.o.File, Line: line, Column: column, Message: fmt.Sprintf(format, a...), Hint: hint}
	if t.line-1 < len(p.lines) {
		d.Source = p.lines[t.line-1]
		if t.line == 1 {
			d.Source = strings.Repeat(" ", p.o.Column-1) + d.Source
		}
	}
	p.errs = append(p.errs, d)
	if len(p.errs) >= maxErrors {
		p.stopped = true
	}
}

func describe(t token) string {
	if t.kind == tokenEnd {
		return "end of the formula"
	}
	return strconv.Quote(t.text)
}

// zero stands for what could not be read.
func zero() Node { return &Number{Value: new(big.Rat)} }

// deeper guards every recursion of the grammar.
func (p *parser) deeper(t token) bool {
	p.depth++
	if p.depth > MaxDepth {
		p.fail(t, "too-deep", "use [define] names or fewer parentheses", "nesting deeper than %d", MaxDepth)
		p.stopped = true
	}
	if p.stopped {
		p.depth--
		p.pos = len(p.tokens) - 1
		return false
	}
	return true
}

// sum = ["+"|"-"] product {("+"|"-") product}
func (p *parser) sum() Node {
	t := p.peek()
	if !p.deeper(t) {
		return zero()
	}
	defer func() { p.depth-- }()
	var n Node
	switch {
	case p.is("-"):
		p.next()
		x := p.product()
		n = &Minus{p.from(t), x}
	case p.is("+"):
		p.next()
		n = p.product()
	default:
		n = p.product()
	}
	for p.is("+") || p.is("-") {
		op := p.next().text[0]
		r := p.product()
		n = &Binary{p.from(t), op, n, r}
	}
	return n
}

// product = juxtaposed {("*"|"/") juxtaposed}
func (p *parser) product() Node {
	t := p.peek()
	n, _ := p.juxtaposed()
	for p.is("*") || p.is("/") {
		op := p.next()
		r, factors := p.juxtaposed()
		if op.text == "/" && len(factors) > 1 {
			rest := make([]string, len(factors)-1)
			for i, f := range factors[1:] {
				rest[i] = group(f, levelPower)
			}
			first, others := group(factors[0], levelPower), strings.Join(rest, "*")
			p.fail(op, "ambiguous", fmt.Sprintf("write %s/(%s*%s) or %s/%s*%s", group(n, levelProduct), first, others, group(n, levelProduct), first, others),
				"a divisor is followed by another factor: this could mean %s/(%s*%s) or (%s/%s)*%s",
				group(n, levelProduct), first, others, group(n, levelProduct), first, others)
		}
		n = &Binary{p.from(t), op.text[0], n, r}
	}
	return n
}

// juxtaposed = signed {factor}: factors side by side are multiplied.
func (p *parser) juxtaposed() (Node, []Node) {
	t := p.peek()
	if p.is("-") || p.is("+") {
		if !p.deeper(t) {
			return zero(), nil
		}
		defer func() { p.depth-- }()
		p.next()
		x, factors := p.juxtaposed()
		if t.text == "-" {
			x = &Minus{p.from(t), x}
		}
		return x, factors
	}
	n := p.power()
	factors := []Node{n}
	for p.beginsFactor() {
		f := p.power()
		factors = append(factors, f)
		n = &Binary{p.from(t), '*', n, f}
	}
	return n, factors
}

// beginsFactor tells whether the next token can start another factor.
func (p *parser) beginsFactor() bool {
	t := p.peek()
	switch t.kind {
	case tokenNumber, tokenName, tokenBad:
		return true
	case tokenSymbol:
		return t.text == "(" || t.text == "<" || t.text == "["
	}
	return false
}

// power = primary ["^" integer]
func (p *parser) power() Node {
	t := p.peek()
	n := p.primary()
	if !p.is("^") {
		return n
	}
	p.next()
	e, ok := p.exponent()
	if p.is("^") {
		p.fail(p.peek(), "ambiguous", "write parentheses", "a power of a power needs parentheses")
		p.next()
		p.exponent()
	}
	if !ok {
		return n
	}
	return &Power{p.from(t), n, e}
}

// exponent reads an integer with an optional sign, or one in parentheses.
func (p *parser) exponent() (int, bool) {
	start := p.peek()
	closing := false
	if p.is("(") {
		p.next()
		closing = true
	}
	negative := false
	if p.is("-") || p.is("+") {
		negative = p.next().text == "-"
	}
	t := p.peek()
	if t.kind != tokenNumber {
		p.fail(start, "exponent", "for instance s12^2 or s12^-1", "exponents are integers, found %s", describe(t))
		return 0, false
	}
	p.next()
	if closing {
		if !p.is(")") {
			p.fail(start, "exponent", "for instance s12^(-1)", "exponents are integers, found an expression")
			p.skipGroup()
			return 0, false
		}
		p.next()
	}
	e, err := strconv.Atoi(t.text)
	if err != nil || e > MaxExponent {
		p.fail(t, "exponent", fmt.Sprintf("at most %d", MaxExponent), "the exponent %s is too large", shorten(t.text))
		return 0, false
	}
	if negative {
		e = -e
	}
	return e, true
}

// skipGroup skips to behind the parenthesis that closes the open one.
func (p *parser) skipGroup() {
	for open := 1; open > 0; {
		t := p.next()
		switch {
		case t.kind == tokenEnd:
			return
		case t.text == "(" || t.text == "{" || t.text == "[":
			open++
		case t.text == ")" || t.text == "}" || t.text == "]":
			open--
		}
	}
}

func shorten(s string) string {
	if len(s) > 20 {
		return s[:17] + "..."
	}
	return s
}

// primary = number | name | call | "(" sum ")"
func (p *parser) primary() Node {
	t := p.next()
	switch t.kind {
	case tokenNumber:
		return p.number(t)
	case tokenName:
		return p.name(t)
	case tokenSymbol:
		switch t.text {
		case "(":
			n := p.sum()
			p.close(t, ")")
			return n
		case "<", "[":
			p.fail(t, "not-available", "formulas of invariants and scalar amplitudes are available", "spinor brackets are not available yet")
			p.skipBracket(t)
			return zero()
		}
		if t.text != "," && t.text != "|" && t.text != ";" && t.text != "." {
			p.pos-- // an operator or a closing bracket: leave it to the caller
		}
		p.fail(t, "syntax", "", "expected a number, an invariant, an amplitude or \"(\", found %s", describe(t))
		return zero()
	case tokenBad:
		p.fail(t, "character", "formulas are written in ASCII: letters, digits, + - * / ^ ( ) { } , |", "unexpected character %s", describe(t))
		return zero()
	}
	p.fail(t, "syntax", "", "expected a number, an invariant, an amplitude or \"(\", found %s", describe(t))
	return zero()
}

// close expects the bracket that closes an open one.
func (p *parser) close(open token, want string) bool {
	if p.is(want) {
		p.next()
		return true
	}
	if p.stopped {
		return false
	}
	line, column := p.place(open)
	p.fail(p.peek(), "unbalanced", fmt.Sprintf("the %q at line %d, column %d is open", open.text, line, column), "expected %q, found %s", want, describe(p.peek()))
	return false
}

// skipBracket skips a spinor bracket after its opening sign.
func (p *parser) skipBracket(open token) {
	for i := p.pos; i < len(p.tokens) && i < p.pos+40; i++ {
		if x := p.tokens[i].text; x == ">" || x == "]" {
			p.pos = i + 1
			return
		}
	}
}

// number reads a non-negative integer.
func (p *parser) number(t token) Node {
	if len(t.text) > MaxDigits {
		p.fail(t, "number", "", "a number of %d digits, at most %d are read", len(t.text), MaxDigits)
		return zero()
	}
	if p.touches(".") {
		dot := p.next()
		if p.peek().kind == tokenNumber && !p.peek().spaced {
			frac := p.next()
			p.fail(t, "decimal", fmt.Sprintf("write %s", decimalHint(t.text, frac.text)), "numbers are exact: no decimals")
			return zero()
		}
		p.fail(dot, "syntax", "", "unexpected \".\"")
		return zero()
	}
	v, _ := new(big.Int).SetString(t.text, 10)
	return &Number{p.from(t), new(big.Rat).SetInt(v)}
}

func decimalHint(whole, fraction string) string {
	if len(whole)+len(fraction) > 40 {
		return "a fraction"
	}
	r, ok := new(big.Rat).SetString(whole + "." + fraction)
	if !ok {
		return "a fraction"
	}
	return r.RatString()
}

// list reads "a,b,...": positive integers separated by commas, closed by one
// of the signs in ends, which is taken and returned.
func (p *parser) list(open token, ends ...string) (legs []int, tokens []token, end string) {
	for {
		t := p.next()
		switch {
		case t.kind == tokenNumber:
			n, err := strconv.Atoi(t.text)
			if err != nil || n < 1 || n > MaxLegs {
				p.fail(t, "leg", fmt.Sprintf("legs are numbered from 1, at most %d", MaxLegs), "leg %s out of range", shorten(t.text))
				n = 0
			}
			legs, tokens = append(legs, n), append(tokens, t)
		case t.kind == tokenEnd:
			p.fail(t, "unbalanced", "", "expected %s, found end of the formula", quoteAll(ends))
			return legs, tokens, ""
		default:
			p.fail(t, "leg", "", "expected a leg number, found %s", describe(t))
			if slices.Contains(ends, t.text) {
				return legs, tokens, t.text
			}
			if t.text == ")" || t.text == "}" {
				return legs, tokens, ""
			}
			continue
		}
		t = p.peek()
		switch {
		case t.kind == tokenSymbol && t.text == ",":
			p.next()
		case t.kind == tokenSymbol && slices.Contains(ends, t.text):
			p.next()
			return legs, tokens, t.text
		case t.kind == tokenSymbol && (t.text == "+" || t.text == "-"):
			p.fail(t, "not-available", "BS and phi3 are scalars: legs have no helicity", "helicities are not available yet")
			p.next()
			if p.is(",") {
				p.next()
			} else if p.peek().kind == tokenSymbol && slices.Contains(ends, p.peek().text) {
				return legs, tokens, p.next().text
			}
		default:
			p.fail(t, "leg", "separate legs by commas", "expected \",\" or %s, found %s", quoteAll(ends), describe(t))
			if t.kind == tokenEnd || t.text == ")" || t.text == "}" {
				if t.kind != tokenEnd {
					p.next()
				}
				return legs, tokens, ""
			}
			if t.kind != tokenNumber {
				p.next()
			}
		}
	}
}

func quoteAll(s []string) string {
	q := make([]string, len(s))
	for i := range s {
		q[i] = strconv.Quote(s[i])
	}
	return strings.Join(q, " or ")
}

// distinct reports legs that stand twice.
func (p *parser) distinct(legs []int, tokens []token, where string) bool {
	seen := map[int]bool{}
	ok := true
	for i, l := range legs {
		if l == 0 {
			ok = false
			continue
		}
		if seen[l] {
			p.fail(tokens[i], "repeated-leg", "every leg stands once", "leg %d stands twice in %s", l, where)
			ok = false
		}
		seen[l] = true
	}
	return ok
}
